"""A pair that matches under one light: how far it comes apart under another."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
from numpy.typing import ArrayLike

from formcheck.colour import tristimulus
from formcheck.colour.cielab import lab
from formcheck.colour.difference import delta_e_2000
from formcheck.colour.lights import Light
from formcheck.colour.refuse import refuse_where
from formcheck.spectra.grid import WAVELENGTH_NM
from formcheck.trouble import suggestion

MULTIPLICATIVE, ADDITIVE, UNCORRECTED = "multiplicative", "additive", "none"
CORRECTIONS = (MULTIPLICATIVE, ADDITIVE, UNCORRECTED)

Difference = Callable[[np.ndarray, np.ndarray], np.ndarray]


def metamerism_index(
    standard: ArrayLike,
    sample: ArrayLike,
    *,
    reference_light: Light = "D65",
    test_light: Light = "A",
    observer_deg: int = 10,
    wavelength_nm: ArrayLike = WAVELENGTH_NM,
    correction: str = MULTIPLICATIVE,
    difference: Difference = delta_e_2000,
) -> np.ndarray:
    """Special metamerism index, change of light, of two spectra.

    The difference under the test light once the one under the reference light is taken away:
    multiplicative, X, Y, Z of the sample under the test light times X_standard/X_sample of the reference
    light, each for itself; additive, L*, a*, b* of the sample less what they differ by under the reference
    light.

    Parameters
    ----------
    standard, sample : float arrays, shape (..., W), that broadcast
        Reflectance or transmittance. [1]
    reference_light, test_light, observer_deg, wavelength_nm
        As for `tristimulus.weights`.
    correction : str
        One of CORRECTIONS.
    difference : callable
        Of two Lab arrays (..., 3); difference.delta_e_ab for the index as CIE first defined it.

    Returns
    -------
    float array, shape (...). [1]

    Raises
    ------
    ValueError
        An unknown correction; a sample of no light under the reference light, which nothing corrects.

    Errors
    ------
    Both corrections stand for a small change of the recipe and grow vague with the difference under the
    reference light; past DE00 of about 2 the index says little (rule of thumb, from memory).

    Source
    ------
    CIE 015:2018, special metamerism index: change in illuminant; ISO 18314-4.
    """
    if correction not in CORRECTIONS:
        raise ValueError(f"correction {correction!r}; {suggestion(correction, CORRECTIONS)}")
    under = {}
    for light, key in ((reference_light, "reference"), (test_light, "test")):
        table = tristimulus.weights(light, observer_deg, wavelength_nm)
        seen = [tristimulus.xyz(s, light, observer_deg, wavelength_nm) for s in (standard, sample)]
        under[key] = (*seen, table.sum(axis=0))
    return index_from_xyz(*under["reference"], *under["test"], correction=correction, difference=difference)


def index_from_xyz(
    standard_reference: np.ndarray,
    sample_reference: np.ndarray,
    white_reference: np.ndarray,
    standard_test: np.ndarray,
    sample_test: np.ndarray,
    white_test: np.ndarray,
    *,
    correction: str = MULTIPLICATIVE,
    difference: Difference = delta_e_2000,
) -> np.ndarray:
    """`metamerism_index` from tristimulus values (..., 3) under both lights, whites (3,)."""
    if correction == MULTIPLICATIVE:
        refuse_where(~(sample_reference > 0), sample_reference, "sample", "a sample that reflects some light")
        sample_test = sample_test * (standard_reference / sample_reference)
    shown_standard, shown_sample = lab(standard_test, white_test), lab(sample_test, white_test)
    if correction == ADDITIVE:
        apart = lab(sample_reference, white_reference) - lab(standard_reference, white_reference)
        shown_sample = shown_sample - apart
    return difference(shown_standard, shown_sample)
