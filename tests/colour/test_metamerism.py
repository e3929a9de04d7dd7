"""Metamerism by metameric blacks, worked out apart from formcheck with colour-science."""

import colour
import numpy as np
import pytest

from formcheck.colour import metamerism, tristimulus
from formcheck.colour.cielab import lab_of_spectrum
from formcheck.colour.difference import delta_e_2000, delta_e_ab
from formcheck.colour.metamerism import ADDITIVE, CORRECTIONS, MULTIPLICATIVE, UNCORRECTED, metamerism_index
from formcheck.spectra.grid import WAVELENGTH_NM

pytestmark = pytest.mark.filterwarnings("ignore::colour.utilities.ColourRuntimeWarning")
OBSERVER = colour.MSDS_CMFS["CIE 1964 10 Degree Standard Observer"]


def grey_and_metamer():
    """A grey and one with a metameric black added: a curve that D65 and the 10 degree eye see as nothing.

    J. B. Cohen & W. E. Kappauf, Am. J. Psychol. 95 (1982) 537: what is left of a curve when its projection
    on the weights is taken off.
    """
    weights = tristimulus.weights("D65", 10)
    wave = 0.25 * np.sin(WAVELENGTH_NM / 25)
    black = wave - weights @ np.linalg.solve(weights.T @ weights, weights.T @ wave)
    return np.full(85, 0.4), 0.4 + black


def theirs(spectrum, light):
    sd = colour.SpectralDistribution(spectrum, WAVELENGTH_NM)
    return colour.sd_to_XYZ(sd, OBSERVER, colour.SDS_ILLUMINANTS[light], method="ASTM E308")


def their_lab(XYZ, light):
    return colour.XYZ_to_Lab(XYZ / 100, colour.XYZ_to_xy(theirs(np.ones(85), light)))


@pytest.mark.parametrize("correction", CORRECTIONS)
def test_a_pair_that_matches_needs_no_correction(correction):
    grey, metamer = grey_and_metamer()
    apart = delta_e_2000(lab_of_spectrum(grey, "A", 10), lab_of_spectrum(metamer, "A", 10))
    assert delta_e_2000(lab_of_spectrum(grey), lab_of_spectrum(metamer)) < 1e-6
    assert metamerism_index(grey, metamer, correction=correction) == pytest.approx(float(apart), abs=1e-6)
    assert apart > 2


def test_multiplicative_correction_as_cie_15_writes_it():
    """X' = X_2,A X_1,D65 / X_2,D65, and so Y and Z; DE*ab; every value from colour-science."""
    grey, metamer = grey_and_metamer()
    sample = metamer * np.linspace(0.96, 1.01, 85)
    corrected = theirs(sample, "FL11") * theirs(grey, "D65") / theirs(sample, "D65")
    expected = np.linalg.norm(their_lab(corrected, "FL11") - their_lab(theirs(grey, "FL11"), "FL11"))
    found = metamerism_index(grey, sample, test_light="F11", difference=delta_e_ab)
    assert found == pytest.approx(expected, abs=1e-3)


def test_additive_correction_takes_off_the_difference_under_the_reference_light():
    grey, metamer = grey_and_metamer()
    sample = metamer * np.linspace(0.96, 1.01, 85)
    labs = {(s, l): their_lab(theirs(spectrum, l), l)
            for s, spectrum in (("grey", grey), ("sample", sample)) for l in ("D65", "A")}
    change = [labs["sample", l] - labs["grey", l] for l in ("A", "D65")]
    found = metamerism_index(grey, sample, correction=ADDITIVE, difference=delta_e_ab)
    assert found == pytest.approx(np.linalg.norm(change[0] - change[1]), abs=1e-3)


def test_a_paler_copy_is_no_metamer():
    """The same curve a tenth lower differs alike under every light: wholly corrected, not so without."""
    grey, metamer = grey_and_metamer()
    assert metamerism_index(metamer, 0.9 * metamer, correction=MULTIPLICATIVE) == pytest.approx(0, abs=1e-9)
    assert metamerism_index(metamer, 0.9 * metamer, correction=UNCORRECTED) > 2
    assert metamerism_index(grey, 0.9 * grey, correction=ADDITIVE) == pytest.approx(0, abs=1e-9)


def test_many_pairs_at_once():
    grey, metamer = grey_and_metamer()
    samples = np.stack([metamer, grey, 0.9 * metamer])
    found = metamerism_index(grey, samples)
    assert found.shape == (3,) and found[1] < 1e-9
    assert found[2] == pytest.approx(float(metamerism_index(grey, samples[2])))


def test_what_cannot_be_corrected_is_refused():
    with pytest.raises(ValueError, match="did you mean 'additive'"):
        metamerism_index(np.ones(85), np.ones(85), correction="aditive")
    with pytest.raises(ValueError, match="a sample that reflects some light"):
        metamerism_index(np.ones(85), np.zeros(85))
    assert np.isfinite(metamerism.metamerism_index(np.ones(85), np.zeros(85), correction=ADDITIVE))
