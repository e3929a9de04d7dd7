"""Absorptivity of a dye from a dilution series, with tests for what betrays aggregation."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from formcheck.colour.refuse import refuse_where

LEAST_SEEN = 0.1  # of a solution's peak: wavelengths that absorb less do not tell its strength
SURE = 3.0  # standard deviations
BENDS, CHANGES = 0.03, 0.02  # least change of strength, and of shape, from end to end that is spoken of
ROUNDS = 6


@dataclass(frozen=True)
class Dilution:
    """Decadic absorptivity per unit of concentration and cm, and whether the lines are straight.

    bend: relative change of strength from the most dilute to the strongest solution; shape_change: the
    greatest change of the spectrum over the same way, in parts of its peak, the strength aside.
    """

    absorptivity: np.ndarray  # (W,)
    sd: np.ndarray
    strength: np.ndarray  # (N,), each solution's own over the mean
    weighing_sd: float  # relative scatter of `strength` about its line
    bend: float
    bend_sd: float
    shape_change: float
    shape_change_sd: float

    @property
    def bent(self) -> bool:
        return abs(self.bend) > max(BENDS, SURE * self.bend_sd)

    @property
    def changes_shape(self) -> bool:
        return self.shape_change > max(CHANGES, SURE * self.shape_change_sd)


def learn_dilution(absorbance: ArrayLike, concentration: ArrayLike, *, path_length_cm: ArrayLike,
                   repeatability: float, weighing_relative_sd: float = 0.01) -> Dilution:
    """Absorptivity by weighted least squares through the origin, A = a c d, of all solutions at once.

    Each solution has an unknown strength near 1 (weighing and pipetting), shared by its wavelengths, so that
    a slip in one concentration does not bend the line. What the strengths and the residuals then do with
    concentration is the test: with Beer and Lambert neither strength nor shape of the spectrum moves.

    Parameters
    ----------
    absorbance : float array, shape (N, W)
        Decadic, against the solvent; N at least 2. [1]
    concentration : float array, shape (N,)
        Above 0, in any unit; not all the same.
    path_length_cm : float array that broadcasts with (N,)
        Above 0. [cm]
    repeatability : float
        One standard deviation of an absorbance, above 0. [1]
    weighing_relative_sd : float
        One standard deviation of a concentration, above 0. [1]

    Returns
    -------
    Dilution
        absorptivity in 1/(unit of concentration x cm), with one standard deviation.

    Raises
    ------
    ValueError
        Fewer than two concentrations, or a value not above 0 where it must be.

    Source
    ------
    A. Beer, Ann. Phys. 162 (1852) 78; bent lines and moved bands as signs of dimers: E. Rabinowitch & L. F.
    Epstein, J. Am. Chem. Soc. 63 (1941) 69.
    """
    A = np.asarray(absorbance, dtype=float)
    c = np.asarray(concentration, dtype=float)
    d = np.broadcast_to(np.asarray(path_length_cm, dtype=float), c.shape)
    for values, name in ((c, "concentration"), (d, "path_length_cm")):
        refuse_where(~(values > 0), values, name, "above 0")
    refuse_where(~np.isfinite(A), A, "absorbance", "a number")
    if A.ndim != 2 or len(A) != len(c) or len(np.unique(c)) < 2:
        raise ValueError(f"{len(np.unique(c))} concentrations of {A.shape} absorbances; expected at least 2 different")
    if not (repeatability > 0 and weighing_relative_sd > 0):
        raise ValueError("a repeatability or weighing sd of 0; expected above 0")
    amount = c * d
    a, strength, strength_sd = _alternating(A, amount, repeatability, weighing_relative_sd)
    bend, bend_sd, scatter = _bend(strength, strength_sd, c, weighing_relative_sd)
    change, change_sd = _shape_change(A, a, strength * amount, c, repeatability)
    total = np.sqrt(repeatability**2 / (amount**2).sum() + (a * max(scatter, strength_sd.min())) ** 2 / len(c))
    return Dilution(a, total, strength, scatter, bend, bend_sd, change, change_sd)


def _alternating(A: np.ndarray, amount: np.ndarray, repeatability: float, weighing_sd: float
                 ) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    """Absorptivity (W,), strength (N,) of mean 1 and its standard deviation, each from the other in turn."""
    strength = np.ones(len(amount))
    for _ in range(ROUNDS):
        weight = amount * strength
        a = weight @ A / (weight @ weight)
        seen = a >= LEAST_SEEN * a.max()
        signal = np.outer(amount, a)[:, seen]
        information = (signal**2).sum(axis=1) / repeatability**2
        pulled = (signal * A[:, seen]).sum(axis=1) / repeatability**2
        strength = (pulled + weighing_sd**-2) / (information + weighing_sd**-2)
        own = pulled / np.maximum(information, 1e-300)
        level = np.average(strength, weights=1 / (weighing_sd**2 + 1 / np.maximum(information, 1e-300)))
        strength, own = strength / level, own / level
    return a * level, own, 1 / np.sqrt(np.maximum(information, 1e-300))


def _bend(strength: np.ndarray, sd: np.ndarray, c: np.ndarray, weighing_sd: float) -> tuple[float, float, float]:
    """Change of strength over the whole range, its standard deviation, and the scatter about the line."""
    weight = 1 / (sd**2 + weighing_sd**2)
    x = (c - c.min()) / np.ptp(c)
    rows = np.stack([np.ones(len(c)), x], axis=1)
    covariance = np.linalg.inv(rows.T @ (weight[:, None] * rows))
    found = covariance @ rows.T @ (weight * strength)
    off = strength - rows @ found
    free = len(c) - 2
    scatter = float(np.sqrt((weight * off**2).sum() / weight.sum() * len(c) / free)) if free > 0 else weighing_sd
    worse = max(1.0, (weight * off**2).sum() / free) if free > 0 else 1.0
    return float(found[1]), float(np.sqrt(covariance[1, 1] * worse)), scatter


def _shape_change(A: np.ndarray, a: np.ndarray, weight: np.ndarray, c: np.ndarray, repeatability: float
                  ) -> tuple[float, float]:
    """The greatest slope of A/(c d) with concentration over the range, in parts of the peak, strength aside."""
    spectra = A / weight[:, None] - a
    x = (c - c.min()) / np.ptp(c)
    w = weight**2
    x = x - np.average(x, weights=w)
    slope = (w * x) @ spectra / (w @ x**2)
    sd = repeatability / np.sqrt(w @ x**2) / a.max()
    smooth = np.convolve(slope, np.ones(3) / 3, mode="same") if len(slope) >= 3 else slope
    return float(np.abs(smooth).max() / a.max()), float(sd * np.sqrt(2 * np.log(max(len(a), 2)) / 3))
