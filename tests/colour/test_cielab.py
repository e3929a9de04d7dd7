import colour
import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from formcheck.colour.cielab import lab, lab_of_spectrum, lch, xyz_from_lab
from formcheck.colour.lights import light_names
from formcheck.colour.tristimulus import white_point

WHITE = np.array([94.811, 100.0, 107.304])  # D65, 10 degrees, ASTM E308 (from memory)


def test_agrees_with_colour_science():
    XYZ = np.random.default_rng(2).random((500, 3)) ** 3 * 110
    theirs = colour.XYZ_to_Lab(XYZ / 100, colour.XYZ_to_xy(WHITE / 100))
    np.testing.assert_allclose(lab(XYZ, WHITE), theirs, atol=1e-9)
    np.testing.assert_allclose(lch(theirs), colour.models.Lab_to_LCHab(theirs), atol=1e-9)


@given(st.floats(0, 100), st.floats(-120, 120), st.floats(-120, 120))
def test_there_and_back(L, a, b):
    np.testing.assert_allclose(lab(xyz_from_lab([L, a, b], WHITE), WHITE), [L, a, b], atol=1e-9)


def test_black_white_and_the_join_of_the_two_curves():
    """ISO/CIE 11664-4: L* is 903.3 Y/Yn up to Y/Yn = 0.008856, 100 for the white."""
    np.testing.assert_allclose(lab(WHITE, WHITE), [100, 0, 0], atol=1e-12)
    np.testing.assert_allclose(lab([0, 0, 0], WHITE), [0, 0, 0], atol=1e-12)
    below, above = lab(np.array([[0.008855], [0.008857]]) * WHITE, WHITE)[:, 0]
    assert below == pytest.approx(903.3 * 0.008855, abs=1e-3) and 0 < above - below < 0.01


@pytest.mark.parametrize("light", light_names())
@pytest.mark.parametrize("observer_deg", [2, 10])
@pytest.mark.parametrize("step", [1, 5, 10, 20])
def test_a_grey_is_grey_under_every_light(light, observer_deg, step):
    wavelength_nm = np.arange(360, 781, step, dtype=float)
    grey = lab_of_spectrum(np.full(len(wavelength_nm), 0.2), light, observer_deg, wavelength_nm)
    np.testing.assert_allclose(grey, [51.8372, 0, 0], atol=1e-3)  # L* of Y = 20, ISO/CIE 11664-4


def test_hue_runs_from_red_to_blue():
    hues = lch([[50, 10, 0], [50, 0, 10], [50, -10, 0], [50, 0, -10]])[:, 2]
    np.testing.assert_allclose(hues, [0, 90, 180, 270])
    assert white_point("D65", 10)[1] == pytest.approx(100)
