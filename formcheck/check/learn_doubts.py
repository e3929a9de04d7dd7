"""What a ladder leaves unsettled, in words: each warning with what would settle it."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from formcheck.check.learn_model import Colourant
from formcheck.check.record_learned import Doubt
from formcheck.colour.learning import doubts
from formcheck.colour.learning.ladder import LearnedLadder

POORLY_KNOWN = 0.3  # relative sd of the greater of K and S
ILL_CONDITIONED = 100.0  # condition number; above 30 is strong dependence (Belsley, Kuh & Welsch 1980)
DARK_INSIDE = 0.2  # reflectance inside a tint where it absorbs most; K/S is 1.6 there
GROUND_SHOWS = 0.02  # of reflectance inside, from black to white ground: a contrast ratio near 0.98
APART_DE00, RELIEF = 2.0, 0.5  # a panel so far off, without which the others agree so much better
WORSE_DE00 = 1.0


def ladder_doubts(learned: LearnedLadder, colourants: Sequence[Colourant], panels: Sequence[str], *,
                  left_out: Sequence[float | None], relief: Sequence[float], between: Sequence[bool],
                  without_black: float | None) -> list[Doubt]:
    """Every warning of a ladder.

    left_out (panels): DE00 of each reckoned from the others, relief what the others gain by that, between
    whether its mix lies between theirs; without_black: median DE00 of the mixes with black reckoned from
    panels without, None where there are none.
    """
    return [*_thickness(learned, panels), *_surface(learned), *_conditioning(learned, colourants),
            *_pale_tints(learned, colourants), *_black(learned, colourants, without_black),
            *_apart(panels, left_out, relief, between)]


def _thickness(learned: LearnedLadder, panels: Sequence[str]) -> list[Doubt]:
    shows = doubts.thickness_shows(learned) > GROUND_SHOWS
    once = doubts.grounds_of_films(learned.ladder) < 2
    found = []
    if not learned.ladder.thickness_known:
        names = _listed([name for name, one in zip(panels, shows, strict=True) if one])
        found.append(Doubt(
            kind="thickness unknown",
            said="The thickness of the films is unknown, so K and S hold for one film as drawn, not per um: for "
                 "films that hide, and in mixes of colourants learned together"
                 + (f". The ground shows through {names}." if names else "."),
            what_to_do="Measure the dry films (ISO 2808) and write `film: {dry: ... um, sd: ... um}`."))
    unsettled = [name for name, one, other in zip(panels, shows, once, strict=True) if one and other]
    if unsettled:
        found.append(Doubt(
            kind="film not hiding",
            said=f"The ground shows through {_listed(unsettled)}, read over one ground alone: what is film and what "
                 "is ground hangs on the thickness.",
            what_to_do="Read it over black and over white, or draw it thicker."))
    return found


def _surface(learned: LearnedLadder) -> list[Doubt]:
    values = {"k1": learned.k1, "k2": learned.k2}
    return [Doubt(
        kind="surface constant at an end",
        said=f"{name} came to lie at {values[name]:.3f}, an end of its range: the readings do not settle it, or the "
             "mirror reflection is not in them as `measured` says.",
        what_to_do="Check `mirror` and the zero of the instrument; add a glossy film that is very dark, and a hiding "
                   "white.") for name in learned.at_end]


def _conditioning(learned: LearnedLadder, colourants: Sequence[Colourant]) -> list[Doubt]:
    found = []
    k_sd = doubts.relative_sd(learned.K, learned.K_sd_together)
    s_sd = doubts.relative_sd(learned.S, learned.S_sd_together)
    for c in np.flatnonzero(learned.ladder.learned).tolist():
        absorbs = np.median(learned.K[c]) > np.median(learned.S[c])
        sd, symbol = (k_sd[c], "K") if absorbs else (s_sd[c], "S")
        if sd > POORLY_KNOWN:
            found.append(Doubt(
                kind="ill-conditioned ladder",
                said=f"{symbol} of {colourants[c].id} is known to {sd:.0%} only.",
                what_to_do=f"Add panels of {colourants[c].id} at other loadings, most of all reductions with white."))
    condition = float(np.median(learned.condition))
    if condition > ILL_CONDITIONED and not found:
        found.append(Doubt(
            kind="ill-conditioned ladder",
            said=f"Some K and S of the ladder pass for one another (condition number {condition:.0f}): mixes like its "
                 "panels are told well, others may not be.",
            what_to_do="Add panels that differ more: paler tints, mixes with black, a film that does not hide."))
    return found


def _pale_tints(learned: LearnedLadder, colourants: Sequence[Colourant]) -> list[Doubt]:
    if not any(one.role == "white" for one in colourants):
        return []
    palest = doubts.palest_absorption(learned)
    return [Doubt(
        kind="no pale tint",
        said=f"{colourants[c].id} is strong: even its palest mix reflects {palest[c]:.0%} inside the film where it "
             "absorbs most, which is more surface than pigment.",
        what_to_do=f"Add a tint with so little {colourants[c].id} that it reflects a third or more throughout.")
        for c in np.flatnonzero(learned.ladder.learned).tolist()
        if colourants[c].role != "white" and np.isfinite(palest[c]) and palest[c] < DARK_INSIDE]


def _black(learned: LearnedLadder, colourants: Sequence[Colourant], without_black: float | None) -> list[Doubt]:
    roles = np.array([one.role for one in colourants])
    held = learned.ladder.volume_fraction > 0
    if (roles == "white").any():
        held_dark = held[:, roles == "black"].any(axis=1)
        lone = [one.id for c, one in enumerate(colourants)
                if one.role == "colour" and learned.ladder.learned[c] and not (held[:, c] & held_dark).any()]
        if lone:
            return [Doubt(
                kind="no mix with black",
                said=f"{_listed(lone)} is learned from masstone and white tints alone, which say how it mixes with "
                     "white; mixes with black are told badly by such constants.",
                what_to_do="Add one or two panels of it darkened with the black you use.")]
    if without_black is not None and without_black > WORSE_DE00:
        return [Doubt(
            kind="mixes with black differ",
            said=f"Reckoned from the panels without colour and black together, those mixes are off by ΔE00 "
                 f"{without_black:.1f} in the median: white tints alone do not tell them.",
            what_to_do="Keep mixes with black in the ladder, at the loadings you use.")]
    return []


def _apart(panels: Sequence[str], left_out: Sequence[float | None], relief: Sequence[float],
           between: Sequence[bool]) -> list[Doubt]:
    """The one panel that the others agree without; those at the ends are alone in what they tell."""
    able = [n for n, one in enumerate(between) if one]
    if not able:
        return []
    n = min(able, key=lambda one: relief[one])
    off = left_out[n]
    if off is None or off < APART_DE00 or relief[n] > RELIEF:
        return []
    return [Doubt(
        kind="panel apart",
        said=f"{panels[n]} is off by ΔE00 {off:.1f} from what the other panels say, which agree with one another "
             f"{1 / relief[n]:.1f} times as well without it.",
        what_to_do="Look at its weighing, its drawdown and its file, or leave it out.")]


def _listed(names: Sequence[str], most: int = 4) -> str:
    return ", ".join(names[:most]) + (f" and {len(names) - most} more" if len(names) > most else "")
