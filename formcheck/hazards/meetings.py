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
from formcheck.hazards.selector import Selector
from formcheck.hazards.verdict import Kleene, both
from formcheck.hazards.water import water_in


@dataclass(frozen=True)
class CompiledMeeting:
    """Which materials are of the first and of the second party: (2, I) bool, surely and possibly."""

    rule: MustNotMeet
    force: InForce
    first: np.ndarray
    second: np.ndarray


def compile_meeting(rule: MustNotMeet, materials: Materials, matcher: Matcher, *, as_of: date
                    ) -> CompiledMeeting | None:
    force = in_force([rule.in_force], as_of)
    if force is None:
        return None
    return CompiledMeeting(rule, force, party(rule.first.where, materials, matcher),
                           party(rule.second.where, materials, matcher))


def party(selector: Selector, materials: Materials, matcher: Matcher) -> np.ndarray:
    pairs: list[Pair] = [matcher.presence(selector, material) for material in materials]
    return np.array(pairs).reshape(-1, 2).T > 0


def each_material_once(facts: MixtureFacts) -> np.ndarray:
    """(R, I) float: 1 where a material is in the recipe, on the first of its lines alone."""
    ids = [material.id for material in facts.materials]
    present = facts.present.copy()
    for i, one in enumerate(ids):
        first = ids.index(one)
        if first != i:
            present[:, first] |= present[:, i]
            present[:, i] = False
    return present.astype(np.float32)


def meets(compiled: CompiledMeeting, facts: MixtureFacts, once: np.ndarray, water: Kleene) -> Kleene:
    """Whether two different materials of a recipe are the pair, under the conditions: (R,) twice.

    `once` is `each_material_once(facts)`, which all pairs share.
    """
    surely, possibly = (_two_different(once, compiled.first[which], compiled.second[which])
                        for which in (0, 1))
    return both((surely, possibly), conditions(compiled.rule.when, facts, water))


def _two_different(once: np.ndarray, first: np.ndarray, second: np.ndarray) -> np.ndarray:
    """(R,) bool. Pairs of one of each party, less those in which both are the same material."""
    counts = once @ np.array([first, second, first & second], np.float32).T
    return counts[:, 0] * counts[:, 1] > counts[:, 2]


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
