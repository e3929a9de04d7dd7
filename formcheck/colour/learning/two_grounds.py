"""K and S of one film measured over two grounds, a white and a black: closed form."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from formcheck.colour import saunderson
from formcheck.colour.refuse import refuse_where

HIDING = 1e-9  # 1 - tanh(alpha X) below which the two readings are the same and the thickness shows no more
STEP = 1e-5  # of a reflectance, for slopes


@dataclass(frozen=True)
class TwoGrounds:
    """K and S per um, with one standard deviation; NaN, and `hiding`, where the film hides its grounds."""

    K: np.ndarray
    S: np.ndarray
    K_sd: np.ndarray
    S_sd: np.ndarray
    hiding: np.ndarray


def k_and_s_over_two_grounds(
    *,
    over_white: ArrayLike,
    over_black: ArrayLike,
    white: ArrayLike,
    black: ArrayLike,
    thickness_um: ArrayLike,
    k1: float,
    k2: float,
    specular_included: bool,
    repeatability: float,
    thickness_sd_um: ArrayLike = 0.0,
) -> TwoGrounds:
    """K and S of a film from its reflectance over two grounds.

    With t = tanh(alpha X)/alpha the film of kubelka_munk.film is linear in p = tK and q = tS:
    p (R + g) - q (1 - g)(1 - R) = g - R, one equation for each ground g; tanh(alpha X)**2 = p**2 + 2pq
    then gives t, and so K and S.

    Parameters
    ----------
    over_white, over_black, white, black : float arrays, shape (..., W)
        Reflectance in air of the film over each ground and of the bare grounds, 0 to 1; which ground is
        the lighter does not matter, but they must differ. [1]
    thickness_um : float array, shape (...)
        X, above 0. [um]
    k1, k2, specular_included
        Surface constants and geometry, as in saunderson.to_measured; one surface for film and grounds.
    repeatability, thickness_sd_um
        One standard deviation of each reading [1] and of the thickness [um].

    Returns
    -------
    TwoGrounds
        Arrays of the broadcast shape (..., W), at least 0. Standard deviations to first order, from all four
        readings and the thickness; k1 and k2 are taken as exact.

    Raises
    ------
    ValueError
        A thickness not above 0, readings outside 0 to 1, grounds alike.

    Errors
    ------
    Of readings that no film gives (lighter over black than over white) the nearest film that there is.

    Source
    ------
    P. Kubelka, J. Opt. Soc. Am. 38 (1948) 448; JCGM 100:2008 (GUM), clause 5.1.
    """
    readings = [np.asarray(values, dtype=float) for values in (over_white, over_black, white, black)]
    for values, name in zip(readings, ("over_white", "over_black", "white", "black"), strict=True):
        refuse_where(~((values >= 0) & (values <= 1)), values, name, "a reflectance from 0 to 1")
    X = np.asarray(thickness_um, dtype=float)[..., None]
    refuse_where(~(X > 0), X, "thickness_um", "above 0 um")
    readings = [values.copy() for values in np.broadcast_arrays(*readings)]
    alike = np.abs(readings[2] - readings[3]) < 1e-3
    refuse_where(alike, readings[2], "white", "a ground that differs from the other")

    def solve(measured: list[np.ndarray]) -> np.ndarray:
        inside = (saunderson.to_internal(values, k1=k1, k2=k2, specular_included=specular_included)
                  for values in measured)
        return _k_x_and_s_x(*inside)

    found = solve(readings)
    variance = _variance(solve, readings, repeatability)
    relative = np.asarray(thickness_sd_um, dtype=float)[..., None] / X
    with np.errstate(invalid="ignore"):
        sd = np.sqrt(variance + (found * relative) ** 2)
    return TwoGrounds(found[0] / X, found[1] / X, sd[0] / X, sd[1] / X, np.isnan(found[0] + found[1]))


def _k_x_and_s_x(over_white: np.ndarray, over_black: np.ndarray, white: np.ndarray, black: np.ndarray) -> np.ndarray:
    """K X and S X (2, ..., W) from reflectances inside the film; NaN where it hides."""
    a1, b1, r1 = over_white + white, (1 - white) * (1 - over_white), white - over_white
    a2, b2, r2 = over_black + black, (1 - black) * (1 - over_black), black - over_black
    determinant = a2 * b1 - a1 * b2
    with np.errstate(divide="ignore", invalid="ignore"):
        p = np.maximum((r2 * b1 - r1 * b2) / determinant, 0.0)
        q = np.maximum((r2 * a1 - r1 * a2) / determinant, 0.0)
        depth = np.sqrt(p * (p + 2 * q))
        known = (depth < 1 - HIDING) & np.isfinite(depth)
        t = np.where(depth > 1e-6, depth / np.arctanh(np.where(known, depth, 0.5)), 1.0)
        return np.where(known, np.stack([p / t, q / t]), np.nan)


def _variance(solve: Callable[[list[np.ndarray]], np.ndarray], readings: list[np.ndarray], sd: float) -> np.ndarray:
    """First order, by one-sided differences towards readings that stay within 0 to 1."""
    found = solve(readings)
    variance = np.zeros_like(found)
    for i, values in enumerate(readings):
        step = np.where(values > 0.5, -STEP, STEP)
        moved = [*readings[:i], values + step, *readings[i + 1 :]]
        variance += ((solve(moved) - found) / step * sd) ** 2
    return variance
