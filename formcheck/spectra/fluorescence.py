"""Signs in a reflectance that the film sends out light of its own, which the optical model leaves out.

A reflectance measured with one white light cannot prove fluorescence; ISO 13655 (M0 against M1 and M2) or a
bispectral instrument (ASTM E2153) does. What is here are formcheck's own rules of thumb. Each says what it saw.
"""

from __future__ import annotations

import numpy as np

from formcheck.spectra.grid import resample

STEP_NM = 5.0
ABOVE_ONE = 1.0 + 1e-9
# An emission band sits on the long-wave foot of the absorption that feeds it, some tens of nm wide.
RISE_WITHIN_NM, FALL_WITHIN_NM = 80.0, 90.0
LEAST_RISE = 0.5  # of the peak
LEAST_FALL = 0.08  # of the peak: how far a hump stands above the plateau behind it
HIGH_PLATEAU = 0.6  # of the peak: below it the fall is an absorption, as in any green
FLAT_WITHIN = 0.06  # of the peak: the plateau neither rises nor falls by more
# Whitened by a brightener: highest between these wavelengths, level and bright beyond the last.
BRIGHTENED_NM, LEVEL_FROM_NM = (415.0, 465.0), 520.0
BRIGHT, LEAST_EXCESS = 0.7, 0.03
LEAST_PEAK = 0.92  # below it a pale blue tint looks the same


def fluorescence_signs(wavelength_nm, reflectance) -> list[str]:
    """What in a reflectance lies outside the model: values above 1, a hump behind an edge, a brightener's peak.

    Parameters
    ----------
    wavelength_nm : float array, shape (N,), rising [nm]
    reflectance : float array, shape (N,), fraction of 1

    Returns
    -------
    list of str
        one sentence for each sign, empty where there is none. None is no proof of absence.

    Source
    ------
    formcheck's own thresholds, on the shape that emission adds to reflectance in F. Grum & C. J. Bartleson (eds),
    Optical Radiation Measurements vol. 2 (1980), chapter 6, and ISO 13655 (from memory).
    """
    x, y = np.asarray(wavelength_nm, float), np.asarray(reflectance, float)
    signs = _above_one(x, y)
    grid = np.arange(np.ceil(max(x[0], 380.0) / STEP_NM) * STEP_NM, min(x[-1], 730.0) + 1e-9, STEP_NM)
    if x.size < 6 or grid.size < 30 or np.diff(x).max() > 25:
        return signs
    even = resample(x, y, grid)[0]
    return signs + (_brightener(grid, even) or _hump(grid, even))


def _above_one(x, y) -> list[str]:
    over = y > ABOVE_ONE
    if not over.any():
        return []
    span = f"at {x[over][0]:g} nm" if over.sum() == 1 else f"between {x[over][0]:g} and {x[over][-1]:g} nm"
    return [f"reflectance above 1 (to {y.max():.3g}) {span}: fluorescence, a mirror-like sheen or a white calibration "
            "that is off; outside the model"]


def _hump(x, y) -> list[str]:
    """A peak behind a steep edge, on a plateau that stays high and level."""
    peak = int(np.argmax(y))
    before, after = y[max(0, peak - round(RISE_WITHIN_NM / STEP_NM)):peak], y[peak:]
    n_fall = round(FALL_WITHIN_NM / STEP_NM)
    plateau = after[n_fall:]
    if not before.size or plateau.size < 8 or y[peak] <= 0:
        return []
    rise, level = 1 - before.min() / y[peak], float(np.median(plateau)) / y[peak]
    flat = np.ptp(plateau) / y[peak] <= FLAT_WITHIN
    if rise < LEAST_RISE or not HIGH_PLATEAU <= level <= 1 - LEAST_FALL or not flat:
        return []
    return [f"a hump at {x[peak]:g} nm, {1 / level - 1:.0%} above the level plateau behind it: light sent out by "
            "fluorescence looks so; outside the model"]


def _brightener(x, y) -> list[str]:
    """A white that is brightest in the blue over a level remainder."""
    blue, behind = (x >= BRIGHTENED_NM[0]) & (x <= BRIGHTENED_NM[1]), x >= LEVEL_FROM_NM
    if not blue.any() or behind.sum() < 20:
        return []
    level, top = float(np.median(y[behind])), float(y[blue].max())
    is_level = level >= BRIGHT and np.ptp(y[behind]) <= FLAT_WITHIN
    if not is_level or top - level < LEAST_EXCESS or top < max(y.max() - 1e-12, LEAST_PEAK):
        return []
    return [f"a peak at {x[blue][np.argmax(y[blue])]:g} nm, {top - level:.3f} above a level white: an optical "
            "brightener looks so; outside the model"]
