"""The rule book over a set of materials on one day, ready to judge any number of recipes of them."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

import numpy as np

from formcheck.hazards.book import Book
from formcheck.hazards.cautions import CompiledCaution, compile_caution, ingredients_called
from formcheck.hazards.columns import Materials
from formcheck.hazards.limits import (
    CompiledLimit,
    compile_limit,
    conditions_met,
    limit_exceeded,
    quantity_bounds,
)
from formcheck.hazards.matching import Matcher
from formcheck.hazards.meetings import CompiledMeeting, compile_meeting, each_material_once, meets
from formcheck.hazards.mixture import Bounds, Knowledge, MixtureFacts
from formcheck.hazards.rule import Caution, LimitOnSum, MustNotMeet, PhWindow, Rule
from formcheck.hazards.scope import distinct_scopes, scope_of
from formcheck.hazards.verdict import (
    APPLIES,
    EXCEEDS,
    NO_FLAG,
    NOT_IN_FORCE,
    WITHIN,
    Kleene,
    answered,
    anywhere,
    both,
    either,
)
from formcheck.hazards.water import water_bearing, water_present
from formcheck.hazards.windows import CompiledWindow, compile_window, outside, windows_untold

CompiledRule = CompiledLimit | CompiledWindow | CompiledMeeting | CompiledCaution


@dataclass(frozen=True)
class CompiledBook:
    """`compiled` is None for a rule that is not in force on the day."""

    book: Book
    as_of: date
    materials: Materials
    matcher: Matcher
    rules: tuple[Rule, ...]
    compiled: tuple[CompiledRule | None, ...]
    water: np.ndarray  # (2, I) bool: the material surely, possibly, holds water

    def water_in(self, facts: MixtureFacts) -> Kleene:
        return water_present(facts, self.water)


def compile_book(book: Book, materials: Materials, knowledge: Knowledge, *, as_of: date) -> CompiledBook:
    """Every rule of the book as columns or marks over `materials`, with the text of the day `as_of`."""
    matcher = Matcher(book.words, knowledge)
    rules = tuple(book.rules)
    compiled = tuple(_compile(rule, materials, matcher, as_of=as_of) for rule in rules)
    return CompiledBook(book, as_of, materials, matcher, rules, compiled, water_bearing(materials, matcher))


def _compile(rule: Rule, materials: Materials, matcher: Matcher, *, as_of: date) -> CompiledRule | None:
    if isinstance(rule, LimitOnSum):
        return compile_limit(rule, materials, matcher, as_of=as_of)
    if isinstance(rule, PhWindow):
        return compile_window(rule, materials, matcher, as_of=as_of)
    if isinstance(rule, MustNotMeet):
        return compile_meeting(rule, materials, matcher, as_of=as_of)
    assert isinstance(rule, Caution)
    return compile_caution(rule, materials, matcher, as_of=as_of)


def answer_codes(compiled: CompiledBook, facts: MixtureFacts) -> np.ndarray:
    """The answer of every rule to every recipe: codes (R, rules) of `verdict.WORDS`.

    The materials of `facts` are those the book was compiled over.
    """
    codes = np.full((facts.n_recipes, len(compiled.rules)), NOT_IN_FORCE, np.int8)
    values = limit_values(compiled, facts)
    water, once = compiled.water_in(facts), each_material_once(facts)
    distinct, which = distinct_scopes(facts.scopes)
    for q, (rule, one) in enumerate(zip(compiled.rules, compiled.compiled, strict=True)):
        if one is not None:
            scope = scope_of(rule, distinct, which, compiled.book.words)
            codes[:, q] = _codes(one, facts, once, water, scope, values.get(q, []))
    return codes


def limit_values(compiled: CompiledBook, facts: MixtureFacts) -> dict[int, list[Bounds]]:
    """By the number of the rule, bounds (R, rows) of its quantity and its conditions, in their units."""
    limits = {q: one for q, one in enumerate(compiled.compiled) if isinstance(one, CompiledLimit)}
    quantities = [quantity for one in limits.values() for quantity in one.quantities]
    bounds = iter(quantity_bounds(quantities, facts))
    return {q: [next(bounds) for _ in one.quantities] for q, one in limits.items()}


def _codes(one: CompiledRule, facts: MixtureFacts, once: np.ndarray, water: Kleene, scope: Kleene,
           values: list[Bounds]) -> np.ndarray:
    if isinstance(one, CompiledLimit):
        scope = both(scope, conditions_met(one, values[1:])) if one.conditions else scope
        return answered(limit_exceeded(one, values[0]), scope, trips_as=EXCEEDS, else_as=WITHIN)
    if isinstance(one, CompiledWindow):
        return _window_codes(one, facts, water, scope)
    if isinstance(one, CompiledMeeting):
        return answered(meets(one, facts, once, water), scope, trips_as=APPLIES, else_as=NO_FLAG)
    called = anywhere(ingredients_called(one, facts))
    return answered(called, scope, trips_as=APPLIES, else_as=NO_FLAG)


def _window_codes(one: CompiledWindow, facts: MixtureFacts, water: Kleene, scope: Kleene) -> np.ndarray:
    untold = windows_untold(one, facts, water)
    tripped = either(anywhere(outside(one, facts, water)), (np.zeros_like(untold), untold))
    codes = answered(tripped, scope, trips_as=EXCEEDS, else_as=NO_FLAG)
    asked = facts.present[:, [s.ingredient for s in one.stood]]
    confirmed = np.array([s.source.verified and s.surely for s in one.stood], bool)
    stands = asked.any(axis=1) & ~(asked & ~confirmed).any(axis=1) & ~np.isnan(np.asarray(facts.ph[0], float))
    return np.where((codes == NO_FLAG) & stands, WITHIN, codes).astype(np.int8)
