"""Mie scattering: limits, conservation, agreement with a general-purpose library; the files made with it."""

from importlib.util import module_from_spec, spec_from_file_location
from pathlib import Path

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.special import hankel2, jv

from formcheck.spectra.files import read_k_and_s
from formcheck.spectra.grid import WAVELENGTH_NM
from formcheck.spectra.particles import (
    lognormal_by_volume,
    mie_efficiencies,
    mie_k_s,
    volume_median_from_number_median,
)
from formcheck.trouble import InputError

ROOT = Path(__file__).resolve().parents[2]
OPTICS = ROOT / "formcheck" / "materials" / "data" / "optics"


def test_agrees_with_miepython_over_sizes_and_indices():
    import miepython

    chance = np.random.default_rng(7)
    x = 10 ** chance.uniform(-1, 2.2, 150)
    m = chance.uniform(0.8, 3, 150) - 1j * 10 ** chance.uniform(-6, 0.3, 150)
    theirs = np.array([miepython.efficiencies_mx(one_m, one_x) for one_m, one_x in zip(m, x, strict=True)])
    q_ext, q_sca, g = mie_efficiencies(m, x)
    # theirs takes a series for x near 0.1, good to some 2e-6; the next test is the sharper one
    assert q_ext == pytest.approx(theirs[:, 0], rel=5e-6)
    assert q_sca == pytest.approx(theirs[:, 1], rel=5e-6)
    assert g == pytest.approx(theirs[:, 3], abs=5e-6)


def efficiencies_by_bessel_functions(m, x, terms):
    """Q_ext, Q_sca straight from Mie's coefficients with scipy's Bessel and Hankel functions."""
    n = np.arange(1, terms + 1)

    def psi_and_slope(z):
        root = np.sqrt(np.pi * z / 2)
        psi, before = root * jv(n + 0.5, z), root * jv(n - 0.5, z)
        return psi, before - n / z * psi

    (psi_m, slope_m), (psi, slope) = psi_and_slope(m * x), psi_and_slope(complex(x))
    root = np.sqrt(np.pi * x / 2)
    xi = root * hankel2(n + 0.5, x)
    xi_slope = root * hankel2(n - 0.5, x) - n / x * xi
    a = (m * psi_m * slope - psi * slope_m) / (m * psi_m * xi_slope - xi * slope_m)
    b = (psi_m * slope - m * psi * slope_m) / (psi_m * xi_slope - m * xi * slope_m)
    return (
        2 / x**2 * np.sum((2 * n + 1) * (a + b).real),
        2 / x**2 * np.sum((2 * n + 1) * (np.abs(a) ** 2 + np.abs(b) ** 2)),
    )


@pytest.mark.parametrize(
    "m, x", [(0.8445 - 2.7e-6j, 0.1028), (1.5 - 0.1j, 0.5), (2.7 - 1e-4j, 3.0), (1.3 - 1j, 12.0)]
)
def test_agrees_with_bessel_functions(m, x):
    found = [float(q) for q in mie_efficiencies(m, x)[:2]]
    assert found == pytest.approx(
        efficiencies_by_bessel_functions(m, x, int(x + 4 * x ** (1 / 3) + 6)), rel=1e-9
    )


def test_sphere_far_smaller_than_the_wavelength_scatters_as_rayleigh_said():
    """Rayleigh 1871: Q_sca = (8/3) x^4 |L|^2, Q_abs = -4 x Im L, L = (m^2-1)/(m^2+2)."""
    m, x = np.array([1.8 - 0.0j, 1.5 - 0.3j, 2.5 - 1.0j]), 0.003
    lorentz = (m**2 - 1) / (m**2 + 2)
    q_ext, q_sca, g = mie_efficiencies(m, x)
    assert q_sca == pytest.approx(8 / 3 * x**4 * np.abs(lorentz) ** 2, rel=1e-4)
    assert (q_ext - q_sca)[1:] == pytest.approx(-4 * x * lorentz.imag[1:], rel=1e-4)
    assert g == pytest.approx(0, abs=1e-4)


def test_huge_sphere_takes_twice_its_shadow():
    """Extinction paradox: Q_ext tends to 2 (van de Hulst)."""
    assert float(mie_efficiencies(1.5 - 0.1j, 3000.0)[0]) == pytest.approx(2.0, abs=0.02)


@given(st.floats(0.7, 3.5), st.floats(0, 2), st.floats(0.01, 200))
@settings(max_examples=60, deadline=None)
def test_never_scatters_more_than_it_takes_nor_turns_back_more_than_all(n, k, x):
    q_ext, q_sca, g = mie_efficiencies(complex(n, -k), x)
    assert q_sca <= q_ext * (1 + 1e-9) + 1e-15 and q_sca >= 0 and -1 <= g <= 1


def test_arrays_give_what_single_spheres_give():
    m, x = np.array([[1.5 - 0.1j], [2.7 - 0.0j]]), np.array([0.05, 3.0, 40.0])
    together = np.array(mie_efficiencies(m, x))
    single = np.array([[mie_efficiencies(m[i, 0], x[j]) for j in range(3)] for i in range(2)])
    assert together == pytest.approx(np.moveaxis(single, -1, 0), rel=1e-12)


def test_clear_pigment_has_no_k_at_all():
    k, s = mie_k_s(wavelength_nm=WAVELENGTH_NM, index_n=2.7, index_k=0.0, median_diameter_um=0.25)
    assert (k == 0).all() and (s > 0).all() and k.shape == s.shape == (85,)


def test_pigment_with_the_binders_index_does_not_scatter():
    _, s = mie_k_s(wavelength_nm=WAVELENGTH_NM, index_n=1.5, index_k=0.0, median_diameter_um=0.25)
    assert np.abs(s).max() < 1e-12


def test_weakly_absorbing_pigment_absorbs_as_its_solid_does():
    """Matched in index and weak: C_abs / V = 4 pi k / wavelength, as for the solid."""
    k, _ = mie_k_s(wavelength_nm=[500.0], index_n=1.5, index_k=1e-4, median_diameter_um=0.5)
    assert k[0] == pytest.approx(2 * 4 * np.pi * 1e-4 / 0.5, rel=0.02)


def test_sizes_lead_and_wavelengths_end():
    k, s = mie_k_s(wavelength_nm=WAVELENGTH_NM, index_n=2.0, index_k=0.01, median_diameter_um=[0.1, 0.3])
    assert k.shape == s.shape == (2, 85)
    assert s[1] == pytest.approx(
        mie_k_s(wavelength_nm=WAVELENGTH_NM, index_n=2.0, index_k=0.01, median_diameter_um=0.3)[1]
    )


def test_population_counts_each_size_by_its_volume():
    """Hatch & Choate 1929: medians by number and by volume stand exp(3 ln^2 sigma) apart."""
    diameter, weight = lognormal_by_volume(volume_median_from_number_median(0.2, 1.5), 1.5)
    number = weight / diameter**3
    share = np.interp(0.2, diameter, (np.cumsum(number) - number / 2) / number.sum())
    assert share == pytest.approx(0.5, abs=0.01) and weight.sum() == pytest.approx(1)


@pytest.mark.parametrize(
    "change, found",
    [
        ({"median_diameter_um": 0.0}, "median diameter"),
        ({"median_diameter_um": 300.0}, "median diameter"),
        ({"median_diameter_um": np.nan}, "median diameter"),
        ({"geometric_sd": 0.5}, "geometric"),
        ({"geometric_sd": 9.0}, "geometric"),
        ({"index_n": 0.0}, "refractive index"),
        ({"index_k": -0.1}, "extinction"),
        ({"index_n": 0.2, "index_k": 3.0}, "a metal"),
    ],
)
def test_refuses_what_the_model_cannot_treat(change, found):
    given_ = {
        "wavelength_nm": WAVELENGTH_NM,
        "index_n": 2.0,
        "index_k": 0.0,
        "median_diameter_um": 0.2,
    } | change
    with pytest.raises(InputError) as refusal:
        mie_k_s(**given_)
    assert found in refusal.value.problems[0].found


@pytest.fixture(scope="module")
def maker():
    spec = spec_from_file_location("make_pigment_k_s", ROOT / "scripts" / "make_pigment_k_s.py")
    module = module_from_spec(spec)
    spec.loader.exec_module(module)
    return module


@pytest.mark.parametrize("material_id", ["iron_oxide_red", "zinc_oxide"])
def test_the_script_gives_what_the_stored_file_holds(maker, material_id):
    stored = (OPTICS / f"{material_id}.csv").read_text(encoding="utf-8")
    assert maker.csv_text(material_id, maker.settings()) == stored


def test_every_pigment_of_the_settings_has_its_file_and_the_other_way_about(maker):
    assert {path.stem for path in OPTICS.glob("*.csv")} >= set(maker.settings()["pigments"])


@pytest.mark.parametrize("path", sorted(OPTICS.glob("*.csv")), ids=lambda path: path.stem)
def test_every_stored_file_is_whole_and_says_where_it_came_from(path):
    wavelength, k, s = read_k_and_s(path)
    assert (
        (wavelength == WAVELENGTH_NM).all()
        and (k >= 0).all()
        and (s >= 0).all()
        and k.max() < 100
        and s.max() < 20
    )
    head = path.read_text(encoding="utf-8")
    assert "relative_sd" in head and "median diameter" in head and "binder index" in head


def test_constants_that_end_inside_the_grid_are_told_in_the_file():
    for name in ("titanium_dioxide_rutile", "zinc_oxide", "zinc_sulfide"):
        assert "OUTSIDE THE RANGE" in (OPTICS / f"{name}.csv").read_text(encoding="utf-8")
    assert "OUTSIDE" not in (OPTICS / "iron_oxide_red.csv").read_text(encoding="utf-8")
