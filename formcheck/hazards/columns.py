"""Quantities of rules as linear forms: for each a lower and an upper column over the ingredients.

A quantity of a recipe is (mass fractions) @ (column), so that one recipe or a million are the same
product, a limit is a linear constraint, and how much more of an ingredient fits has a closed form.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import NamedTuple

import numpy as np

from formcheck.hazards.matching import Matcher, class_of, is_identified, substance_key
from formcheck.hazards.missing import RECIPE, Missing, data_missing
from formcheck.hazards.selector import Selector
from formcheck.hazards.summed import UNITS, RuleQuantity, Summed, Term
from formcheck.materials.record import Material

Materials = tuple[Material, ...]


class Row(NamedTuple):
    """One linear form of a quantity: least and largest content per ingredient (I,), and what it speaks of.

    `label` names the substance where a rule asks of each; `factor` is the limit of this row over the
    limit of the rule: from `surely` on a quantity exceeds, up to `at_most` it is within.
    """

    label: str
    low: np.ndarray
    high: np.ndarray
    surely: float = 1.0
    at_most: float = 1.0


@dataclass(frozen=True)
class Quantity:
    """The rows of one quantity and the data that would narrow them. VOC has no columns: it comes whole."""

    summed: Summed
    rows: tuple[Row, ...]
    missing: tuple[Missing, ...] = ()

    @property
    def unit_factor(self) -> float:
        return UNITS[self.summed.unit][1]


def quantity_columns(summed: Summed, materials: Materials, matcher: Matcher, *, limit: float = 0.0
                     ) -> Quantity:
    """The linear forms of a quantity over these materials; `limit` as the rule writes it, for `each`."""
    if summed.of[0].voc:
        return Quantity(summed, ())
    if isinstance(summed, RuleQuantity) and (summed.each or summed.specific_limits):
        assert summed.of[0].share is not None
        rows = _row_of_each(summed, summed.of[0].share, materials, matcher, limit=limit)
        rows = rows if summed.each else (_weighed_sum(rows, summed),)
    else:
        rows = (_row_of_sum(summed, materials, matcher),)
    return Quantity(summed, rows, _missing(summed, materials, matcher))


def _row_of_sum(summed: Summed, materials: Materials, matcher: Matcher) -> Row:
    low, high = np.zeros(len(materials)), np.zeros(len(materials))
    for term in summed.of:
        pairs = np.array([_content(term, material, matcher) for material in materials]).reshape(-1, 2)
        ordered = pairs if term.times > 0 else pairs[:, ::-1]
        low += term.times * ordered[:, 0]
        high += term.times * ordered[:, 1]
    return Row(summed.name, low, high)


def _weighed_sum(rows: tuple[Row, ...], quantity: RuleQuantity) -> Row:
    """The sum of substances, each counting by the limit of the rule over its own."""
    low = np.sum([row.low / row.surely for row in rows], axis=0)
    high = np.sum([row.high / row.at_most for row in rows], axis=0)
    return Row(quantity.name, low, high)


def _content(term: Term, material: Material, matcher: Matcher) -> tuple[float, float]:
    if term.element:
        low, high = matcher.knowledge.element_bounds(material, term.element)[:2]
    else:
        assert term.share is not None
        low, high = matcher.content(term.share, material)
    return (0.0, high) if term.only_the else (low, high)


def _row_of_each(quantity: RuleQuantity, selector: Selector, materials: Materials, matcher: Matcher, *,
                 limit: float) -> tuple[Row, ...]:
    """A row for each substance that agrees or may; what nobody identified may be more of any of them."""
    anything = np.array([_unidentified(selector, material, matcher) for material in materials])
    rows = []
    for shares, record in _substances(materials, matcher).values():
        pair = matcher.of_pure(selector, record, content=True)
        if pair[1] > 0:
            surely, at_most = _own_limits(quantity, selector, record, limit=limit)
            apart = pair[1] * shares[1] if is_identified(record) else 0.0  # else counted in `anything`
            rows.append(Row(record.names[0], pair[0] * shares[0], apart + anything, surely, at_most))
    if anything.any() or not rows:
        lowest = quantity.specific_limits.lowest / limit if quantity.specific_limits and limit else 1.0
        rows.append(Row("", np.zeros(len(materials)), anything, 1.0, min(1.0, lowest)))
    return tuple(rows)


def _substances(materials: Materials, matcher: Matcher) -> dict[str, tuple[np.ndarray, Material]]:
    """Each substance with its least and largest mass fraction in every ingredient (2, I)."""
    found: dict[str, tuple[np.ndarray, Material]] = {}
    for i, material in enumerate(materials):
        for one in matcher.knowledge.composition(material).constituents:
            if one.material is not None:
                shares, _ = found.setdefault(
                    substance_key(one.material), (np.zeros((2, len(materials))), one.material))
                shares[:, i] += one.low, one.high
    return found


def _unidentified(selector: Selector, material: Material, matcher: Matcher) -> float:
    """The most of any one agreeing substance in what nobody identified of this ingredient."""
    parts = matcher.knowledge.composition(material)
    total = 0.0
    for one in parts.constituents:
        if one.material is None:
            total += one.high
        elif not is_identified(one.material):
            total += one.high * matcher.of_pure(selector, one.material, content=True)[1]
    if parts.undeclared > 0:
        total += parts.undeclared * matcher.of_undeclared(selector, material, content=True)[1]
    return min(total, matcher.cap(selector, material) if material.composition else 1.0)


def _own_limits(quantity: RuleQuantity, selector: Selector, record: Material, *, limit: float
                ) -> tuple[float, float]:
    """The limit that the classification of a substance sets for itself, over the limit of the rule."""
    if quantity.specific_limits is None or not limit:
        return 1.0, 1.0
    own = [entry.specific_limit_percent for entry in (record.hazards.entries if record.hazards else [])
           if class_of(entry) in selector.hazard_class and entry.specific_limit_percent is not None]
    if own:
        factor = min(own) / 100 / UNITS[quantity.unit][1] / limit
        return factor, factor
    return 1.0, min(1.0, quantity.specific_limits.lowest / limit)


def _missing(summed: Summed, materials: Materials, matcher: Matcher) -> tuple[Missing, ...]:
    found: list[Missing] = []
    for i, material in enumerate(materials):
        for term in summed.of:
            low, high = _content(term, material, matcher)
            if low < high:
                found += _missing_of_term(i, material, term, matcher)
    return tuple(dict.fromkeys(found))


def _missing_of_term(i: int, material: Material, term: Term, matcher: Matcher) -> list[Missing]:
    tested = [Missing(RECIPE, f"a test for {term.only_the}")] if term.only_the else []
    if term.share:
        data = data_missing(matcher, term.share, material, content=True)
        return [*(Missing(i, datum) for datum in data), *tested]
    assert term.element
    low, high, _ = matcher.knowledge.element_bounds(material, term.element)
    return [*([Missing(i, f"the {term.element} content")] if low < high else []), *tested]
