"""The CMC(l:c) difference: an ellipsoid about the standard, as the dyeing trade sets its tolerances."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from formcheck.colour.difference import DifferenceParts, cielab_parts

ACCEPTABILITY = (2.0, 1.0)  # l:c for pass or fail of textiles; 1:1 for what an eye can tell
DARK_BELOW = 16.0  # L* under which the lightness weight no longer falls


def delta_e_cmc(
    standard: ArrayLike, sample: ArrayLike, *, l: float = ACCEPTABILITY[0], c: float = ACCEPTABILITY[1]
) -> np.ndarray:
    """CMC(l:c), shape (...), of L*, a*, b* (..., 3) that broadcast; not symmetric, the standard weighs. [1]

    Source: ISO 105-J03; F. J. J. Clarke, R. McDonald & B. Rigg, J. Soc. Dyers Colour. 100 (1984) 128.
    """
    return parts_cmc(standard, sample, l=l, c=c).total


def parts_cmc(
    standard: ArrayLike, sample: ArrayLike, *, l: float = ACCEPTABILITY[0], c: float = ACCEPTABILITY[1]
) -> DifferenceParts:
    """CMC(l:c) with its weighted lightness, chroma and hue parts; arguments as `delta_e_cmc`.

    total**2 = lightness**2 + chroma**2 + hue**2, signs as in difference.DifferenceParts.
    """
    L, a, b = np.moveaxis(np.asarray(standard, dtype=float), -1, 0)
    C, h = np.hypot(a, b), np.degrees(np.arctan2(b, a)) % 360
    S_L = np.where(L < DARK_BELOW, 0.511, 0.040975 * L / (1 + 0.01765 * L))
    S_C = 0.0638 * C / (1 + 0.0131 * C) + 0.638
    plain = cielab_parts(standard, sample)
    lightness, chroma = plain.lightness / (l * S_L), plain.chroma / (c * S_C)
    hue = plain.hue / (S_C * _hue_weight(C, h))
    return DifferenceParts(np.sqrt(lightness**2 + chroma**2 + hue**2), lightness, chroma, hue)


def _hue_weight(C: np.ndarray, h: np.ndarray) -> np.ndarray:
    """S_H / S_C: 1 near the grey axis, F T + 1 - F away from it."""
    F = np.sqrt(C**4 / (C**4 + 1900))
    blue_to_green = (h >= 164) & (h <= 345)
    T = np.where(
        blue_to_green,
        0.56 + np.abs(0.2 * np.cos(np.radians(h + 168))),
        0.36 + np.abs(0.4 * np.cos(np.radians(h + 35))),
    )
    return F * T + 1 - F
