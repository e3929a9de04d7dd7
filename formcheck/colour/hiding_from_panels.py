"""Hiding power from two readings of a coating: a panel over black, and a film that hides."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from formcheck.colour.hiding import COMPLETE_HIDING, scattering_power, scattering_power_for_contrast
from formcheck.colour.kubelka_munk import k_over_s
from formcheck.colour.refuse import refuse_where

WHITE = 0.80  # nominal reflectance of the white ground in ASTM D2805


def panel_scattering_power(*, over_black: ArrayLike, hiding: ArrayLike) -> np.ndarray:
    """S X of a film over ideal black from its reflectance there and that of a film that hides.

    b coth(bSX) = 1/R_0 - a, with a and b from R_inf; both reflectances above 0, R_0 below R_inf. Shapes
    broadcast. As in the method, no surface is taken off. [1]

    ValueError where the panel reads as light as the hiding film: a thinner panel is needed.

    Source: ASTM D2805; P. Kubelka, J. Opt. Soc. Am. 38 (1948) 448.
    """
    R_0, R_inf = np.asarray(over_black, dtype=float), np.asarray(hiding, dtype=float)
    refuse_where(~((R_inf > 0) & (R_inf <= 1)), R_inf, "hiding", "a reflectance above 0, at most 1")
    refuse_where(~((R_0 > 0) & (R_0 - R_inf < 0)), R_0, "over_black", "above 0, below the film that hides")
    ratio = k_over_s(R_inf)
    return scattering_power(1 / R_0 - (1 + ratio), np.sqrt(ratio * (2 + ratio)))


def spreading_rate_for_contrast(
    spreading_rate: ArrayLike,
    *,
    over_black: ArrayLike,
    hiding: ArrayLike,
    white: ArrayLike = WHITE,
    contrast: ArrayLike = COMPLETE_HIDING,
) -> np.ndarray:
    """Spreading rate at which the coating reaches a contrast ratio, in the unit of the panel's own rate.

    spreading_rate (...) of the panel over black, above 0 (m2/L or m2/kg); other arguments as
    `panel_scattering_power` and `hiding.scattering_power_for_contrast`.

    Source: ASTM D2805; ISO 6504-1.
    """
    rate = np.asarray(spreading_rate, dtype=float)
    refuse_where(~(rate > 0), rate, "spreading_rate", "a spreading rate above 0")
    panel = panel_scattering_power(over_black=over_black, hiding=hiding)
    needed = scattering_power_for_contrast(k_over_s(hiding), white=white, contrast=contrast)
    return rate * panel / needed
