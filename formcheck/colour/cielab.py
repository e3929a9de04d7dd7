"""CIELAB coordinates: from tristimulus values, back to them, and as lightness, chroma, hue."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from formcheck.colour import tristimulus
from formcheck.colour.lights import Light
from formcheck.spectra.grid import WAVELENGTH_NM

LINEAR_BELOW = (6 / 29) ** 3  # of the white's X, Y or Z; the cube root is replaced by its tangent there
SLOPE, OFFSET = (29 / 6) ** 2 / 3, 4 / 29


def lab(xyz: ArrayLike, white: ArrayLike) -> np.ndarray:
    """L*, a*, b* (..., 3) of tristimulus values (..., 3) against those of the white (3,), in one scale.

    Source: ISO/CIE 11664-4.
    """
    ratio = np.asarray(xyz, dtype=float) / np.asarray(white, dtype=float)
    f = np.where(ratio > LINEAR_BELOW, np.cbrt(ratio), SLOPE * ratio + OFFSET)
    x, y, z = np.moveaxis(f, -1, 0)
    return np.stack([116 * y - 16, 500 * (x - y), 200 * (y - z)], axis=-1)


def xyz_from_lab(lab: ArrayLike, white: ArrayLike) -> np.ndarray:
    """Tristimulus values (..., 3) of L*, a*, b* (..., 3), in the scale of the white (3,)."""
    L, a, b = np.moveaxis(np.asarray(lab, dtype=float), -1, 0)
    y = (L + 16) / 116
    f = np.stack([y + a / 500, y, y - b / 200], axis=-1)
    ratio = np.where(f > 6 / 29, f**3, (f - OFFSET) / SLOPE)
    return ratio * np.asarray(white, dtype=float)


def lch(lab: ArrayLike) -> np.ndarray:
    """L*, C*ab, h_ab (..., 3) of L*, a*, b* (..., 3); hue in degrees from 0 up to 360."""
    L, a, b = np.moveaxis(np.asarray(lab, dtype=float), -1, 0)
    return np.stack([L, np.hypot(a, b), np.degrees(np.arctan2(b, a)) % 360], axis=-1)


def lab_of_spectrum(
    spectrum: ArrayLike,
    light: Light = "D65",
    observer_deg: int = 10,
    wavelength_nm: ArrayLike = WAVELENGTH_NM,
) -> np.ndarray:
    """L*, a*, b* (..., 3) of spectra (..., W) under a light, the perfect white of that light as white.

    Arguments and ValueErrors as `tristimulus.xyz`. For a solution in a cell the spectrum is its
    transmittance, so the white is the light through the empty path.
    """
    white = tristimulus.white_point(light, observer_deg, wavelength_nm)
    return lab(tristimulus.xyz(spectrum, light, observer_deg, wavelength_nm), white)
