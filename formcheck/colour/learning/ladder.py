"""K and S of colourants from a ladder of drawdowns: all films at once, weighted least squares.

At each wavelength K and S of every colourant are unknown, with the grounds; k1 and k2 of the surface, the
thickness of each film, its own gloss and the true loadings of the mixes are shared by all wavelengths and
free within what is believed of them. How far readings scatter beyond their repeatability, gloss from film
to film and loadings from what was written is told by the readings themselves.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np

from formcheck.colour.learning.bands import condition_number, covariances, optical_sd
from formcheck.colour.learning.downhill import settled
from formcheck.colour.learning.panels import Ladder, checked
from formcheck.colour.learning.residuals import Forward, forward, residuals
from formcheck.colour.learning.spreads import FIRST_SPREAD, less_of_the_far, reading_sd, told_spreads
from formcheck.colour.learning.start import start_of
from formcheck.colour.learning.unknowns import (
    K1_MOST,
    K2_MOST,
    Beliefs,
    Layout,
    Spreads,
    Unknowns,
    beliefs_of,
    layout_of,
)

ROUNDS, ROUNDS_AGAIN = 8, 2
AT_AN_END = 1e-3  # of the range of k1 or k2


@dataclass(frozen=True)
class LearnedLadder:
    """K and S per um of colourant alone (per film where thickness is unknown), with spreads."""

    ladder: Ladder
    layout: Layout
    unknowns: Unknowns
    spreads: Spreads
    K: np.ndarray  # (C, W)
    S: np.ndarray
    K_sd: np.ndarray
    S_sd: np.ndarray
    K_sd_together: np.ndarray  # the same for whoever uses all K and S together, with the k1 and k2 learned beside them
    S_sd_together: np.ndarray
    k1: float
    k2: float
    k1_sd: float
    k2_sd: float
    at_end: tuple[str, ...]  # of k1, k2: those that lie at an end of their range
    thickness_um: np.ndarray  # (F,), as fitted
    reckoned: np.ndarray  # (N, W): the readings as fitted
    condition: np.ndarray  # (W,), see bands.condition_number


def fit_ladder(ladder: Ladder, *, begin: LearnedLadder | None = None,
               surface: tuple[float, float] | None = None, with_bands: bool = True) -> LearnedLadder:
    """K and S of every colourant of a ladder, its surface constants, and how sure each is.

    Parameters
    ----------
    ladder : Ladder
    begin : LearnedLadder, optional
        A fit of nearly the same ladder: this one begins at its unknowns and keeps its spreads.
    surface : (k1, k2), optional
        Held at these instead of fitted.
    with_bands : bool
        False saves the time that standard deviations and conditioning take; they are NaN then.

    Returns
    -------
    LearnedLadder
        K and S at least 0; K_sd and S_sd one standard deviation per wavelength from the slopes of the
        readings, the doubt of all shared unknowns included.

    Raises
    ------
    ValueError
        See panels.checked.

    Errors
    ------
    Those of the two-flux theory, of Duncan's mixing and of one pair of surface constants; what is left of
    them shows in `spreads` and, better, in leave_one_out.

    Source
    ------
    P. Kubelka, J. Opt. Soc. Am. 38 (1948) 448; D. R. Duncan, Proc. Phys. Soc. 52 (1940) 390; J. L. Saunderson,
    J. Opt. Soc. Am. 32 (1942) 727; the least squares as in downhill.py, spreads.py and bands.py.
    """
    layout = layout_of(checked(ladder))
    now, spreads = (start_of(ladder, layout), FIRST_SPREAD) if begin is None else _again(begin, layout)
    held = np.zeros(layout.shared, dtype=bool)
    if surface is not None:
        held[:2] = True
        now.shared[:2] = surface
    weight = np.ones((len(ladder.wavelength_nm), len(ladder.reading) + layout.grounds))
    for _ in range(ROUNDS if begin is None else ROUNDS_AGAIN):
        beliefs = beliefs_of(ladder, layout, spreads, now.each)
        sd = reading_sd(ladder, spreads.model) / np.sqrt(weight)
        now = settled(ladder, layout, now, beliefs, sd, held)
        at = forward(ladder, layout, now.each, now.shared)
        weight = less_of_the_far(residuals(ladder, at), reading_sd(ladder, spreads.model))
        if begin is None:
            spreads = _told(ladder, layout, at, now, beliefs, sd, held, spreads)
    return _learned(ladder, layout, now, beliefs, spreads, sd, held, with_bands)


def _again(begin: LearnedLadder, layout: Layout) -> tuple[Unknowns, Spreads]:
    """The unknowns of another fit for a ladder with the same colourants and grounds, and other films."""
    shared = np.zeros(layout.shared)
    shared[:2] = begin.unknowns.shared[:2]
    return Unknowns(begin.unknowns.each.copy(), shared), begin.spreads


def _told(ladder: Ladder, layout: Layout, at: Forward, now: Unknowns, beliefs: Beliefs, sd: np.ndarray,
          held: np.ndarray, before: Spreads) -> Spreads:
    block, shared = covariances(ladder, layout, at, now, beliefs, sd=sd, held=held)
    variance = np.diag(shared)
    # Unknowns less what beliefs alone hold of them: those that the readings had to settle.
    used = now.each.size + (~held).sum() - np.einsum("wmm,wm->", block, beliefs.weight)
    used -= variance @ beliefs.shared_weight
    residual = residuals(ladder, at)
    return told_spreads(ladder, layout, now, residual=residual, variance=variance,
                        free=max(residual.size - float(used), 0.0), before=before)


def _learned(ladder: Ladder, layout: Layout, now: Unknowns, beliefs: Beliefs, spreads: Spreads, sd: np.ndarray,
             held: np.ndarray, with_bands: bool) -> LearnedLadder:
    at = forward(ladder, layout, now.each, now.shared)
    sure = _surety if with_bands else _untold
    share = now.shared[:2] / (K1_MOST, K2_MOST)
    ends = (share < AT_AN_END) | (share > 1 - AT_AN_END)
    return LearnedLadder(
        ladder=ladder, layout=layout, unknowns=now, spreads=spreads, K=at.K.T, S=at.S.T,
        k1=float(now.shared[0]), k2=float(now.shared[1]),
        at_end=tuple(name for name, end in zip(("k1", "k2"), ends & ~held[:2], strict=True) if end),
        thickness_um=ladder.thickness_um * np.exp(now.shared[layout.thickness]), reckoned=at.measured.value,
        **sure(ladder, layout, at, now, beliefs, sd, held))


def _surety(ladder: Ladder, layout: Layout, at: Forward, now: Unknowns, beliefs: Beliefs, sd: np.ndarray,
            held: np.ndarray) -> dict[str, Any]:
    """Every standard deviation of a LearnedLadder, and its conditioning."""
    K_sd, S_sd = np.split(optical_sd(ladder, layout, at, now, beliefs, sd=sd, held=held), 2)
    _, shared = covariances(ladder, layout, at, now, beliefs, sd=sd, held=held)
    common = held | (np.arange(layout.shared) < 2)
    if not ladder.thickness_known:  # K and S are those of the films as drawn, whatever that is in um
        common[layout.thickness] = True
    K_together, S_together = np.split(optical_sd(ladder, layout, at, now, beliefs, sd=sd, held=common), 2)
    k1_sd, k2_sd = np.sqrt(np.maximum(np.diag(shared)[:2], 0.0)).tolist()
    return {"K_sd": K_sd, "S_sd": S_sd, "K_sd_together": K_together, "S_sd_together": S_together,
            "k1_sd": k1_sd, "k2_sd": k2_sd, "condition": condition_number(ladder, layout, at, now, beliefs, sd)}


def _untold(ladder: Ladder, *_: object) -> dict[str, Any]:
    sd = np.full(ladder.known_k.shape, np.nan)
    return {"K_sd": sd, "S_sd": sd, "K_sd_together": sd, "S_sd_together": sd, "k1_sd": np.nan,
            "k2_sd": np.nan, "condition": np.full(len(ladder.wavelength_nm), np.nan)}
