"""pH windows of ingredients, over arrays of recipes."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

import numpy as np

from formcheck.hazards.columns import Materials
from formcheck.hazards.dated import in_force
from formcheck.hazards.matching import Matcher
from formcheck.hazards.mixture import MixtureFacts, filled
from formcheck.hazards.rule import PhWindow, RuleSource
from formcheck.hazards.verdict import Kleene, both
from formcheck.hazards.water import water_in
from formcheck.materials.record import Material


@dataclass(frozen=True)
class Stood:
    """The pH one ingredient stands, what happens beyond, and by which source; NaN ends are open."""

    ingredient: int
    of: str  # the constituent that asks for it, when it is not the ingredient itself
    low: float
    high: float
    below: str
    above: str
    source: RuleSource
    surely: bool  # that the window is this ingredient's


@dataclass(frozen=True)
class CompiledWindow:
    rule: PhWindow
    stood: tuple[Stood, ...]
    without: tuple[int, ...]  # ingredients the rule means whose record tells no window


def compile_window(rule: PhWindow, materials: Materials, matcher: Matcher, *, as_of: date
                   ) -> CompiledWindow | None:
    """None on a day without a window."""
    if rule.from_records:
        return _from_records(rule, materials, matcher)
    window = in_force(rule.window, as_of)
    if window is None:
        return None
    low = -np.inf if window.low is None else window.low
    high = np.inf if window.high is None else window.high
    pairs = [matcher.presence(rule.where, material) for material in materials]
    stood = tuple(Stood(i, "", low, high, rule.below, rule.above, rule.sources[window.source], pair[0] == 1)
                  for i, pair in enumerate(pairs) if pair[1] > 0)
    return CompiledWindow(rule, stood, ())


def _from_records(rule: PhWindow, materials: Materials, matcher: Matcher) -> CompiledWindow:
    """The windows of the records: of the ingredient, or else of each of its constituents."""
    stood: list[Stood] = []
    without: list[int] = []
    for i, material in enumerate(materials):
        if material.ph_window is not None:
            if matcher.presence(rule.where, material)[1] > 0:
                stood.append(_of_record(i, material, ""))
            continue
        asked = [one for one in _records_in(material, matcher) if _meant(rule, one, matcher)]
        told = [one for one in asked if one is not None and one.ph_window is not None]
        stood += [_of_record(i, one, one.names[0]) for one in told]
        if len(told) < len(asked):
            without.append(i)
    return CompiledWindow(rule, tuple(stood), tuple(without))


def _records_in(material: Material, matcher: Matcher) -> list[Material | None]:
    """The record, those of its pure constituents, and None for each part without one."""
    parts = matcher.knowledge.composition(material)
    inside = [one.material for one in parts.constituents if one.material is not material]
    return [material, *inside, *([None] if parts.undeclared > 0 else [])]


def _meant(rule: PhWindow, material: Material | None, matcher: Matcher) -> bool:
    if material is None:
        return True
    delegates = bool(material.composition)
    return matcher.own(rule.where, material, delegates=delegates, content=False)[1] > 0


def _of_record(i: int, material: Material, of: str) -> Stood:
    window = material.ph_window
    assert window is not None
    cited = material.provenance(window.source)
    source = RuleSource(instrument=cited.cite, edition=cited.edition, kind=cited.kind,
                        verified=cited.verified)
    return Stood(i, of, -np.inf if window.low is None else window.low,
                 np.inf if window.high is None else window.high, window.below, window.above, source, True)


def outside(compiled: CompiledWindow, facts: MixtureFacts, water: Kleene) -> Kleene:
    """(R, windows) bool twice: the pH surely, possibly, is outside of the window of an ingredient in it."""
    low, high = (one[:, None] for one in filled(facts.ph, facts.n_recipes, low=-np.inf, high=np.inf))
    least, most = np.array([s.low for s in compiled.stood]), np.array([s.high for s in compiled.stood])
    there = facts.present[:, [s.ingredient for s in compiled.stood]]
    sure = there & np.array([s.surely for s in compiled.stood], bool)
    wet = tuple(one[:, None] for one in water_in(facts, water))
    return both((sure, there), (wet[0] & there, wet[1] & there),
                ((high < least) | (low > most), (low < least) | (high > most)))


def windows_untold(compiled: CompiledWindow, facts: MixtureFacts, water: Kleene) -> np.ndarray:
    """(R,) bool: an ingredient of the recipe has no window on record, and the recipe may hold water."""
    if not compiled.without:
        return np.zeros(facts.n_recipes, bool)
    return facts.present[:, list(compiled.without)].any(axis=1) & water_in(facts, water)[1]
