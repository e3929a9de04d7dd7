"""A colour for the screen: Lab under its light to sRGB, drawn into the gamut where it lies outside."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from formcheck.colour.cielab import xyz_from_lab
from formcheck.colour.lights import Light
from formcheck.colour.tristimulus import white_point

# IEC 61966-2-1: linear sRGB from XYZ (Y of white = 1, D65).
RGB_FROM_XYZ = np.array(
    [
        [3.2406, -1.5372, -0.4986],
        [-0.9689, 1.8758, 0.0415],
        [0.0557, -0.2040, 1.0570],
    ]
)
# Bradford cone responses from XYZ (K. M. Lam 1985, as in ICC.1:2022 annex E).
BRADFORD = np.array(
    [
        [0.8951, 0.2664, -0.1614],
        [-0.7502, 1.7135, 0.0367],
        [0.0389, -0.0685, 1.0296],
    ]
)
SLACK = 0.5 / 255  # a component this far outside still rounds to one of the 256 steps
HALVINGS = 20


def swatch(lab: ArrayLike, light: Light = "D65", observer_deg: int = 10) -> tuple[str, bool]:
    """(`#rrggbb`, in gamut) of one colour, L*, a*, b* of shape (3,) under `light`; see `srgb`."""
    rgb, inside = srgb(lab, light, observer_deg)
    return hex_code(rgb), bool(inside)


def hex_code(rgb: np.ndarray) -> str:
    """`#rrggbb` of one colour, sRGB from 0 to 1, shape (3,)."""
    r, g, b = (int(level) for level in np.rint(rgb * 255))
    return f"#{r:02x}{g:02x}{b:02x}"


def srgb(
    lab: ArrayLike, light: Light = "D65", observer_deg: int = 10
) -> tuple[np.ndarray, np.ndarray]:
    """sRGB of colours seen under a light, as they look to an eye used to it.

    Lab to XYZ with the white of its light, white adapted to D65 (2 degrees) by Bradford, then
    IEC 61966-2-1. A colour outside the gamut is drawn in: chroma down, hue and lightness kept.

    Parameters
    ----------
    lab : float array, shape (..., 3)
    light, observer_deg
        Under which the Lab holds, as for `tristimulus.weights`.

    Returns
    -------
    rgb : float array, shape (..., 3)
        From 0 to 1.
    in_gamut : bool array, shape (...)
        False where the true colour lies outside sRGB.

    Source: IEC 61966-2-1; chromatic adaptation as in ICC.1:2022 annex E.
    """
    lab = np.array(lab, dtype=float)
    inside = _fits(_linear(lab, light, observer_deg))
    lab[..., 0] = np.clip(lab[..., 0], 0, 100)
    drawn = lab if inside.all() else _with_less_chroma(lab, light, observer_deg)
    linear = np.clip(_linear(np.where(inside[..., None], lab, drawn), light, observer_deg), 0, 1)
    return _companded(linear), inside


def _with_less_chroma(lab: np.ndarray, light: Light, observer_deg: int) -> np.ndarray:
    """The most chroma that fits at the same lightness and hue, found by halving; grey always fits."""
    low, high = np.zeros(lab.shape[:-1]), np.ones(lab.shape[:-1])
    for _ in range(HALVINGS):
        middle = (low + high) / 2
        fits = _fits(_linear(_scaled_chroma(lab, middle), light, observer_deg))
        low, high = np.where(fits, middle, low), np.where(fits, high, middle)
    return _scaled_chroma(lab, low)


def _scaled_chroma(lab: np.ndarray, factor: np.ndarray) -> np.ndarray:
    return lab * np.stack([np.ones_like(factor), factor, factor], axis=-1)


def _linear(lab: np.ndarray, light: Light, observer_deg: int) -> np.ndarray:
    """Linear sRGB, unbounded."""
    white = white_point(light, observer_deg)
    adapted = xyz_from_lab(lab, white) @ _adaptation(white, white_point("D65", 2)).T
    return adapted / 100 @ RGB_FROM_XYZ.T


def _adaptation(white_from: np.ndarray, white_to: np.ndarray) -> np.ndarray:
    gain = (BRADFORD @ white_to) / (BRADFORD @ white_from)
    return np.linalg.solve(BRADFORD, gain[:, None] * BRADFORD)


def _fits(linear: np.ndarray) -> np.ndarray:
    companded = _companded(linear)
    return np.all((companded >= -SLACK) & (companded <= 1 + SLACK), axis=-1)


def _companded(linear: np.ndarray) -> np.ndarray:
    """The sRGB transfer curve; straight through 0, so that what lies below stays below."""
    curved = 1.055 * np.power(np.maximum(linear, 0.0031308), 1 / 2.4) - 0.055
    return np.where(linear > 0.0031308, curved, 12.92 * linear)
