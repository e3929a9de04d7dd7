"""Pairs that must not meet, over arrays of recipes."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

import numpy as np

from formcheck.hazards.columns import Materials
from formcheck.hazards.dated import InForce, in_force
from formcheck.hazards.matching import Matcher, Pair
from formcheck.hazards.mixture import MixtureFacts, filled
from formcheck.hazards.rule import Company, MustNotMeet
from formcheck.hazards.verdict import Kleene, both
from formcheck.hazards.water import water_in


@dataclass(frozen=True)
class CompiledMeeting:
    """Which materials are of the first and of the second party: (2, I) bool, surely and possibly."""

    rule: MustNotMeet
    force: InForce
    first: np.ndarray
    second: np.ndarray
    same: np.ndarray  # (I, M) bool: lines of one material are one


def compile_meeting(rule: MustNotMeet, materials: Materials, matcher: Matcher, *, as_of: date
                    ) -> CompiledMeeting | None:
    force = in_force([rule.in_force], as_of)
    if force is None:
        return None
    return CompiledMeeting(rule, force, party(rule.first.where, materials, matcher),
                           party(rule.second.where, materials, matcher), one_column_each(materials))


def party(selector, materials: Materials, matcher: Matcher) -> np.ndarray:
    pairs: list[Pair] = [matcher.presence(selector, material) for material in materials]
    return np.array(pairs).reshape(-1, 2).T > 0


def one_column_each(materials: Materials) -> np.ndarray:
    ids = [material.id for material in materials]
    kept = list(dict.fromkeys(ids))
    return np.array([[one == other for other in kept] for one in ids], bool).reshape(len(ids), len(kept))


def meets(compiled: CompiledMeeting, facts: MixtureFacts, water: Kleene) -> Kleene:
    """Whether two different materials of a recipe are the pair, under the conditions: (R,) twice."""
    present = facts.present
    surely, possibly = (_two_different(present, compiled, which) for which in (0, 1))
    return both((surely, possibly), conditions(compiled.rule.when, facts, water))


def _two_different(present: np.ndarray, compiled: CompiledMeeting, which: int) -> np.ndarray:
    """(R,) bool. Pairs of one of each party, less those in which both are the same material."""
    first, second = (((present & one[which]).astype(np.int32) @ compiled.same) > 0
                     for one in (compiled.first, compiled.second))
    return first.sum(axis=1) * second.sum(axis=1) > (first & second).sum(axis=1)


def points_to_it(compiled: CompiledMeeting, facts: MixtureFacts) -> np.ndarray:
    """(R,) bool: at least one of the two parties is surely there."""
    present = facts.present
    return (present & compiled.first[0]).any(axis=1) | (present & compiled.second[0]).any(axis=1)


def conditions(when: Company, facts: MixtureFacts, water: Kleene) -> Kleene:
    """The conditions of pH and water: (R,) surely, possibly. pH is a matter of water."""
    n = facts.n_recipes
    low, high = filled(facts.ph, n, low=-np.inf, high=np.inf)
    met = [(np.ones(n, bool), np.ones(n, bool))]
    if when.in_water or when.ph_below is not None or when.ph_above is not None:
        met.append(water_in(facts, water))
    if when.ph_below is not None:
        met.append((high < when.ph_below, low < when.ph_below))
    if when.ph_above is not None:
        met.append((low > when.ph_above, high > when.ph_above))
    return both(*met)
