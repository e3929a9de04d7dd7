"""Mie scattering against published cases, and stored K and S against published colours of paints."""

from pathlib import Path

import numpy as np
import pytest

from formcheck.colour.cielab import lab_of_spectrum, lch
from formcheck.colour.kubelka_munk import film, r_infinity
from formcheck.colour.saunderson import k1_from_index, k2_from_index, to_measured
from formcheck.spectra.files import read_k_and_s
from formcheck.spectra.grid import WAVELENGTH_NM
from formcheck.spectra.particles import mie_efficiencies, mie_k_s

OPTICS = Path(__file__).resolve().parents[2] / "formcheck" / "materials" / "data" / "optics"


# Cases as printed by Wiscombe (NCAR/TN-140+STR, 1979) and by Bohren & Huffman (1983, appendix A), which their
# codes are known by; the digits were recomputed with miepython 3.3.0, since the prints were not at hand.
@pytest.mark.parametrize(
    "m, x, q_ext, q_sca, g",
    [
        (1.55, 2 * np.pi * 0.525 / 0.6328, 3.105426, 3.105426, 0.633137),  # Bohren & Huffman's sample
        (1.5, 10, 2.881999, 2.881999, 0.742913),
        (1.33 - 1e-5j, 1, 0.093952, 0.093923, 0.184517),
        (1.33 - 1e-5j, 100, 2.101321, 2.096594, 0.868959),
        (1.5 - 1j, 1, 2.336321, 0.663454, 0.192136),
        (1.5 - 1j, 10, 2.417295, 1.346958, 0.834695),
        (1.5 - 1j, 100, 2.097502, 1.283697, 0.850252),
    ],
)
def test_published_cases(m, x, q_ext, q_sca, g):
    assert [float(q) for q in mie_efficiencies(m, x)] == pytest.approx([q_ext, q_sca, g], abs=1e-6)


def rutile_index(wavelength_nm):
    """Mean of two ordinary and one extraordinary ray. J. R. Devore, J. Opt. Soc. Am. 41 (1951) 416."""
    um2 = (np.asarray(wavelength_nm) / 1000) ** 2
    return (2 * np.sqrt(5.913 + 0.2441 / (um2 - 0.0803)) + np.sqrt(7.197 + 0.3322 / (um2 - 0.0843))) / 3


def test_rutile_scatters_best_near_a_fifth_of_a_um_at_550_nm():
    """Handbook rule: 0.2 um; by blue light smaller, by red larger (0.15 and 0.245 um for single spheres)."""
    diameters = np.linspace(0.1, 0.5, 161)
    best = {}
    for nm in (450.0, 550.0, 650.0):
        _, s = mie_k_s(
            wavelength_nm=np.array([nm]),
            index_n=rutile_index(nm),
            index_k=0.0,
            median_diameter_um=diameters,
            geometric_sd=1.0,
        )
        best[nm] = diameters[s[:, 0].argmax()]
    assert [best[nm] for nm in (450.0, 550.0, 650.0)] == pytest.approx([0.15, 0.20, 0.245], abs=0.006)


def test_whites_scatter_in_the_published_order():
    """Best scattering at 550 nm: rutile, anatase, ZnS, ZnO, BaSO4 (inorganic pigment handbook, figure)."""
    at_550 = [
        read_k_and_s(OPTICS / f"{name}.csv")[2][WAVELENGTH_NM == 550][0]
        for name in (
            "titanium_dioxide_rutile",
            "titanium_dioxide_anatase",
            "zinc_sulfide",
            "zinc_oxide",
            "barium_sulfate",
            "calcium_carbonate",
        )
    ]
    assert at_550 == sorted(at_550, reverse=True)


def masstone(name):
    _, k, s = read_k_and_s(OPTICS / f"{name}.csv")
    inside = r_infinity(k, s)
    return lab_of_spectrum(
        to_measured(inside, k1=k1_from_index(1.5), k2=k2_from_index(1.5), specular_included=True)
    )


# Geldof, Proano Gaibor, Kirchner & Ligterink, Heritage Science 6 (2018) 17, data file (CC0): oil paint.
def test_zinc_white_masstone():
    assert masstone("zinc_oxide") == pytest.approx([94.7, -1.1, 1.9], abs=1.5)


def test_extenders_hide_as_little_against_zinc_white_as_in_published_films():
    """S of barite and chalk over S of zinc white in oil films (same source): 0.058 and 0.010."""
    s_550 = {
        name: read_k_and_s(OPTICS / f"{name}.csv")[2][WAVELENGTH_NM == 550][0]
        for name in ("zinc_oxide", "barium_sulfate", "calcium_carbonate")
    }
    assert s_550["barium_sulfate"] / s_550["zinc_oxide"] == pytest.approx(0.058, rel=0.5)
    assert s_550["calcium_carbonate"] / s_550["zinc_oxide"] == pytest.approx(0.010, rel=0.5)


def test_zinc_white_film_over_black_turns_blue():
    """The same source: over black, b* falls from 1.9 to -2.4 and from 2.6 to -4.1 as the film thins."""
    _, k, s = read_k_and_s(OPTICS / "zinc_oxide.csv")
    thin = film(0.2 * k, 0.2 * s, thickness_um=30.0, ground=np.full(85, 0.01))
    shade = lab_of_spectrum(
        to_measured(thin, k1=k1_from_index(1.5), k2=k2_from_index(1.5), specular_included=True)
    )
    assert shade[2] < masstone("zinc_oxide")[2] - 3


def test_blacks_are_black_and_cadmium_yellow_is_yellow():
    """Published: blacks L* 21 to 30, C* below 3; cadmium yellow L* above 75, C* above 80.

    Cosentino, e-conservation Journal 2 (2014) 53 (hue only); K and S of artist paints, Berns 2016.
    """
    for name in ("carbon_black", "iron_oxide_black"):
        L, C, _ = lch(masstone(name))
        assert 20 < L < 32 and C < 3
    L, C, h = lch(masstone("cadmium_sulfide"))
    assert L > 75 and C > 80 and 65 < h < 105


def test_red_oxide_is_a_red_less_clean_than_published_ones_as_its_header_says():
    """Published reds a* 21 to 35; these constants give a* near 14, which the file's error must say."""
    L, a, b = masstone("iron_oxide_red")
    assert 30 < L < 45 and a > 10 and 0 < b < a
    assert "relative_sd 0.6" in (OPTICS / "iron_oxide_red.csv").read_text(encoding="utf-8")


def test_reduced_hematite_turns_bluer_as_it_coarsens():
    """Yellowish red when fine, bluish red when coarse (common practice)."""
    from importlib.util import module_from_spec, spec_from_file_location

    spec = spec_from_file_location("make_pigment_k_s", OPTICS.parents[3] / "scripts" / "make_pigment_k_s.py")
    script = module_from_spec(spec)
    spec.loader.exec_module(script)
    hematite, notes = script.settings()["pigments"]["iron_oxide_red"], []
    n, k = (script.index(which, hematite[which], notes) for which in "nk")
    _, k_white, s_white = read_k_and_s(OPTICS / "titanium_dioxide_rutile.csv")
    k_red, s_red = mie_k_s(
        wavelength_nm=WAVELENGTH_NM, index_n=n, index_k=k, median_diameter_um=[0.08, 0.15, 0.25, 0.4]
    )
    tint = r_infinity(0.1 * k_red + 0.9 * k_white, 0.1 * s_red + 0.9 * s_white)
    shades = lab_of_spectrum(tint)
    assert (np.diff(shades[:, 2]) < 0).all() and shades[0, 2] - shades[-1, 2] > 8
