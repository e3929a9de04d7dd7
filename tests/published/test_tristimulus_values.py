"""Tristimulus values against colour-science, and white points against ASTM E308 and CIE 015:2018."""

import colour
import numpy as np
import pytest

from formcheck.colour.cielab import lab_of_spectrum
from formcheck.colour.lights import light_names
from formcheck.colour.tristimulus import weights, white_point, xyz
from formcheck.spectra.grid import WAVELENGTH_NM
from tests.published.colorimetry_values import VALUES

OBSERVERS = {2: "CIE 1931 2 Degree Standard Observer", 10: "CIE 1964 10 Degree Standard Observer"}
# first, last, step: the steps ASTM E308 knows, over its whole range and over shorter ones
GRIDS = [
    (360, 780, 1),
    (360, 780, 5),
    (400, 700, 5),
    (360, 780, 10),
    (380, 730, 10),
    (400, 700, 10),
    (360, 780, 20),
    (400, 700, 20),
]


def theirs(spectra, light, observer_deg, wavelength_nm):
    sds = [colour.SpectralDistribution(row, wavelength_nm) for row in spectra]
    illuminant, cmfs = colour.SDS_ILLUMINANTS[light], colour.MSDS_CMFS[OBSERVERS[observer_deg]]
    return np.array([colour.sd_to_XYZ(sd, cmfs, illuminant, method="ASTM E308") for sd in sds])


@pytest.mark.parametrize("grid", GRIDS, ids=str)
@pytest.mark.parametrize("light", light_names())
@pytest.mark.filterwarnings("ignore::colour.utilities.ColourRuntimeWarning")
@pytest.mark.filterwarnings("ignore::colour.utilities.ColourUsageWarning")
def test_agrees_with_colour_science(grid, light):
    wavelength_nm = np.arange(grid[0], grid[1] + 1, grid[2], dtype=float)
    bumps = np.random.default_rng(1).random((1, 13))
    spectra = np.array([np.interp(wavelength_nm, np.linspace(350, 790, 13), row) for row in bumps])
    for observer_deg in OBSERVERS:
        np.testing.assert_allclose(
            xyz(spectra, light, observer_deg, wavelength_nm),
            theirs(spectra, light, observer_deg, wavelength_nm),
            atol=1e-3,
        )


def test_ten_nm_weights_are_those_of_astm_e2022():
    """Against the table colour-science works out by ASTM E2022 (its own tests hold printed ones)."""
    observer = colour.MSDS_CMFS[OBSERVERS[10]].copy().trim(colour.SpectralShape(360, 780, 1))
    light = colour.SDS_ILLUMINANTS["A"].copy().align(observer.shape)
    their_table = colour.colorimetry.tristimulus_weighting_factors_ASTME2022(
        observer, light, colour.SpectralShape(360, 780, 10)
    )
    np.testing.assert_allclose(weights("A", 10, np.arange(360, 781, 10.0)), their_table, atol=1e-6)


@pytest.mark.parametrize("row", VALUES["white_points"]["rows"], ids=lambda row: f"{row[0]} {row[1]}")
def test_white_points_of_astm_e308_and_cie_15(row):
    light, observer_deg, E308, xy = row[0], row[1], row[2:5], row[5:7]
    white = white_point(light, observer_deg)
    assert white[1] == pytest.approx(100, abs=1e-9)
    # ASTM E308 sums D65 at 1 nm, where its Z is 0.02 lower than at 5 nm.
    at = np.arange(360, 781, 1.0) if light == "D65" else WAVELENGTH_NM
    np.testing.assert_allclose(white_point(light, observer_deg, at), E308, atol=0.01)
    np.testing.assert_allclose(white[:2] / white.sum(), xy, atol=1.5e-4)


@pytest.mark.parametrize("row", VALUES["colorchecker"]["rows"], ids=lambda row: row[0])
def test_patches_of_a_measured_chart(row):
    """Mean measured spectra of a 24-patch chart, 380 to 730 nm at 10 nm; printed to 3 decimals.

    Lab there stands against a white from chromaticities of 5 decimals, hence the wider band.
    """
    patch, *expected = row
    sd = colour.SDS_COLOURCHECKERS["BabelColor Average"][patch]
    for light, XYZ, Lab in (("D65", expected[0], expected[1]), ("A", expected[2], expected[3])):
        np.testing.assert_allclose(xyz(sd.values, light, 10, sd.wavelengths), XYZ, atol=2e-3)
        np.testing.assert_allclose(lab_of_spectrum(sd.values, light, 10, sd.wavelengths), Lab, atol=0.02)
