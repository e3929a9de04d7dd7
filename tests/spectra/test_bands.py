"""The log-normal band: the shape that its definition asks for, its limits, and how doubt adds up."""

import json
from importlib.util import module_from_spec, spec_from_file_location
from pathlib import Path
from types import SimpleNamespace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from formcheck.spectra import bands
from formcheck.spectra.bands import band_area, band_sum, default_half_heights, lognormal_band
from formcheck.spectra.grid import WAVELENGTH_NM

ROOT = Path(__file__).resolve().parents[2]

band_shapes = st.tuples(st.floats(300, 700), st.floats(1.0, 150.0), st.floats(1.0, 150.0))


def band(**given_fields):
    return SimpleNamespace(
        **(
            {
                "lambda_max_nm": 520.0,
                "epsilon_l_mol_cm": 4e4,
                "half_height_nm": [480.0, 550.0],
                "lambda_sd_nm": None,
                "epsilon_relative_sd": None,
            }
            | given_fields
        )
    )


@given(band_shapes)
@settings(max_examples=100, deadline=None)
def test_passes_through_maximum_and_both_half_heights_and_nowhere_higher(shape):
    at, short, long = shape
    half = [at - short, at + long]
    there = lognormal_band([at, *half], lambda_max_nm=at, epsilon=3.0, half_height_nm=half)
    assert there == pytest.approx([3, 1.5, 1.5], rel=1e-9)
    everywhere = lognormal_band(
        np.linspace(150, 2000, 600), lambda_max_nm=at, epsilon=3.0, half_height_nm=half
    )
    assert np.isfinite(everywhere).all() and (everywhere >= 0).all() and (everywhere <= 3 + 1e-12).all()


@given(band_shapes)
@settings(max_examples=60, deadline=None)
def test_falls_away_on_both_sides(shape):
    at, short, long = shape
    w = np.linspace(150, 2000, 800)
    y = lognormal_band(w, lambda_max_nm=at, epsilon=1.0, half_height_nm=[at - short, at + long])
    assert (np.diff(y[w <= at]) >= -1e-15).all() and (np.diff(y[w >= at]) <= 1e-15).all()


def test_is_continuous_through_the_symmetric_limit():
    nu, width = 1e7 / 500, 1500.0
    w = np.linspace(420, 600, 50)
    gauss = np.exp(-4 * np.log(2) * ((1e7 / w - nu) / (2 * width)) ** 2)
    for skew in (0.0, 1e-12, 1e-8, 3e-7, 1e-6, -1e-8, -1e-6):
        half = [1e7 / (nu + width * (1 + skew)), 1e7 / (nu - width)]
        y = lognormal_band(w, lambda_max_nm=500.0, epsilon=1.0, half_height_nm=half)
        assert y == pytest.approx(gauss, abs=5e-6)


@given(st.floats(300, 700), st.floats(5, 40), st.floats(0.6, 1.8))
@settings(max_examples=30, deadline=None)
def test_area_in_wavenumber_is_that_of_the_sum(at, short, skew):
    half = [at - short, at + short * skew]
    nu = np.linspace(10, 2e5, 100_001)
    sum_ = np.trapezoid(lognormal_band(1e7 / nu, lambda_max_nm=at, epsilon=1.0, half_height_nm=half), nu)
    assert band_area(lambda_max_nm=at, half_height_nm=half) == pytest.approx(sum_, rel=2e-3)


def test_broadcasts_over_bands():
    both = lognormal_band(
        WAVELENGTH_NM,
        lambda_max_nm=[450.0, 600.0],
        epsilon=[1.0, 2.0],
        half_height_nm=[[420.0, 470.0], [560.0, 620.0]],
    )
    assert both.shape == (2, 85)
    assert both[1] == pytest.approx(
        lognormal_band(WAVELENGTH_NM, lambda_max_nm=600.0, epsilon=2.0, half_height_nm=[560.0, 620.0])
    )


@pytest.mark.parametrize("half", [[530.0, 550.0], [480.0, 510.0], [550.0, 480.0]])
def test_refuses_half_heights_that_do_not_enclose_the_maximum(half):
    with pytest.raises(ValueError, match="enclose"):
        lognormal_band(WAVELENGTH_NM, lambda_max_nm=520.0, epsilon=1.0, half_height_nm=half)


@given(st.floats(200, 1200), st.floats(10, 1e6))
@settings(max_examples=60, deadline=None)
def test_default_half_heights_enclose_the_maximum_within_observed_widths(at, epsilon):
    low, high = default_half_heights(at, epsilon=epsilon)
    assert 0 < low < at < high
    law = bands.statistics()["default_width"]
    assert (
        law["above"]["observed_cm1"][0] * 0.999
        <= 1e7 / low - 1e7 / at
        <= law["above"]["observed_cm1"][1] * 1.001
    )


def test_strong_bands_are_expected_narrower():
    def width(epsilon):
        low, high = default_half_heights(550.0, epsilon=epsilon)
        return high - low

    assert width(2e5) < width(5e4) < width(1e4)


def test_no_bands_give_a_spectrum_of_nothing():
    epsilon, sd = band_sum(WAVELENGTH_NM, [])
    assert not epsilon.any() and not sd.any() and epsilon.shape == sd.shape == (85,)


def test_bands_add():
    one, two = band(), band(lambda_max_nm=420.0, half_height_nm=[400.0, 450.0], epsilon_l_mol_cm=1e4)
    assert band_sum(WAVELENGTH_NM, [one, two])[0] == pytest.approx(
        band_sum(WAVELENGTH_NM, [one])[0] + band_sum(WAVELENGTH_NM, [two])[0]
    )


@pytest.mark.parametrize(
    "less_known",
    [
        {"half_height_nm": None},
        {"epsilon_relative_sd": 0.5},
        {"lambda_sd_nm": 20.0},
        {"epsilon_relative_sd": None},
    ],
)
def test_what_is_not_published_widens_the_doubt(less_known):
    well_known = band(lambda_sd_nm=1.0, epsilon_relative_sd=0.05)
    vague = SimpleNamespace(**(vars(well_known) | less_known))
    (e_1, sd_1), (e_2, sd_2) = (band_sum(WAVELENGTH_NM, [b]) for b in (well_known, vague))
    assert np.sum(sd_2 * e_2) > 1.05 * np.sum(sd_1 * e_1)


def test_doubt_at_the_maximum_is_that_of_the_strength():
    _, sd = band_sum(np.array([520.0]), [band(epsilon_relative_sd=0.1, lambda_sd_nm=0.0)])
    assert sd == pytest.approx([0.1], abs=1e-6)


def test_doubt_is_finite_where_nothing_absorbs():
    epsilon, sd = band_sum(WAVELENGTH_NM, [band(half_height_nm=[515.0, 525.0])])
    assert np.isfinite(sd).all() and np.isfinite(sd * epsilon).all()


def test_stored_statistics_are_what_the_script_derives_from_the_published_rows():
    spec = spec_from_file_location("make_band_statistics", ROOT / "scripts" / "make_band_statistics.py")
    script = module_from_spec(spec)
    spec.loader.exec_module(script)
    for name, made in (
        ("band_widths.json", script.band_statistics()),
        ("box_errors.json", script.box_statistics()),
    ):
        stored = json.loads((ROOT / "formcheck" / "spectra" / "data" / name).read_text())
        assert _flat(stored) == pytest.approx(_flat(made), rel=0.02)


def _flat(tree, path=()):
    if isinstance(tree, dict):
        return {k: v for key, item in tree.items() for k, v in _flat(item, (*path, key)).items()}
    if isinstance(tree, list):
        return {k: v for i, item in enumerate(tree) for k, v in _flat(item, (*path, i)).items()}
    return {path: float(tree)} if isinstance(tree, int | float) else {}
