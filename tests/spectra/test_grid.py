"""Resampling against general-purpose libraries; properties."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.interpolate import PchipInterpolator

from formcheck.spectra.grid import WAVELENGTH_NM, resample


def test_the_standard_grid_runs_from_360_to_780_by_5():
    assert WAVELENGTH_NM.size == 85 and WAVELENGTH_NM[0] == 360 and WAVELENGTH_NM[-1] == 780
    with pytest.raises(ValueError):
        WAVELENGTH_NM[0] = 0


def test_even_steps_agree_with_the_sprague_interpolator_of_colour_science():
    import colour

    x = np.arange(380.0, 741.0, 10)
    y = np.exp(-(((x - 540) / 60) ** 2)) + 0.1 * np.cos(x / 17)
    values, outside = resample(x, y)
    theirs = colour.SpragueInterpolator(x, y)(WAVELENGTH_NM[~outside])
    assert values[~outside] == pytest.approx(theirs, abs=1e-10)


@given(st.integers(3, 12), st.integers(0, 10_000))
@settings(max_examples=40, deadline=None)
def test_uneven_steps_agree_with_scipy_pchip(n, seed):
    chance = np.random.default_rng(seed)
    x = np.sort(chance.uniform(370, 770, n)) + np.arange(n)
    y = chance.normal(size=(2, n))
    values, outside = resample(x, y)
    inside = WAVELENGTH_NM[~outside]
    assert values[:, ~outside] == pytest.approx(PchipInterpolator(x, y, axis=1)(inside), abs=1e-9)


def test_end_values_are_held_and_said():
    values, outside = resample([400.0, 500.0, 620.0], [1.0, 2.0, 0.5])
    assert (values[WAVELENGTH_NM < 400] == 1).all() and (values[WAVELENGTH_NM > 620] == 0.5).all()
    assert outside.sum() == (WAVELENGTH_NM < 400).sum() + (WAVELENGTH_NM > 620).sum()


@given(st.integers(0, 10_000))
@settings(max_examples=25, deadline=None)
def test_points_that_lie_on_the_grid_keep_their_values(seed):
    y = np.random.default_rng(seed).normal(size=WAVELENGTH_NM.size)
    assert resample(WAVELENGTH_NM, y)[0] == pytest.approx(y, abs=1e-12)


def test_one_and_two_points():
    assert (resample([500.0], [3.0])[0] == 3).all()
    assert resample([400.0, 600.0], [0.0, 2.0], [500.0])[0] == pytest.approx([1.0])


@pytest.mark.parametrize("x, y", [([500, 400], [1, 2]), ([400, 400], [1, 2]), ([], []), ([400, 500], [1])])
def test_refuses_what_is_not_a_spectrum(x, y):
    with pytest.raises(ValueError, match="expected"):
        resample(x, y)
