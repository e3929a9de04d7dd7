"""How well two spectra match as curves, whatever the light and the eye."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

# Goodness of fit from which a match is told as such [Hernandez-Andres et al. 2001; from memory]
GRADES = ((0.9999, "excellent"), (0.999, "good"), (0.995, "acceptable"))
POOR = "poor"


def rms_difference(spectrum: ArrayLike, other: ArrayLike) -> np.ndarray:
    """Root of the mean squared difference, shape (...), of spectra (..., W) that broadcast; in their unit."""
    apart = np.asarray(spectrum, dtype=float) - np.asarray(other, dtype=float)
    return np.sqrt(np.mean(apart**2, axis=-1))


def goodness_of_fit(spectrum: ArrayLike, other: ArrayLike) -> np.ndarray:
    """Goodness-of-fit coefficient: |sum(a b)| / sqrt(sum(a**2) sum(b**2)), 0 to 1. [1]

    Spectra (..., W) that broadcast; gives (...). It is the cosine of the angle between them, so shape
    alone counts and height does not: read it beside rms_difference. NaN where a spectrum is 0 throughout.

    Source: J. Hernandez-Andres, J. Romero & R. L. Lee, J. Opt. Soc. Am. A 18 (2001) 1325.
    """
    a, b = np.broadcast_arrays(np.asarray(spectrum, dtype=float), np.asarray(other, dtype=float))
    size = np.linalg.norm(a, axis=-1) * np.linalg.norm(b, axis=-1)
    out = np.full(np.shape(size), np.nan)
    return np.divide(np.abs(np.sum(a * b, axis=-1)), size, out=out, where=size > 0)


def match_word(goodness: float) -> str:
    """`excellent`, `good`, `acceptable` or `poor`, by the thresholds of the same paper; NaN counts as poor."""
    return next((word for least, word in GRADES if goodness >= least), POOR)
