"""Limits on sums, over arrays of recipes: columns times mass fractions against the limit of the day."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import date

import numpy as np

from formcheck.hazards.columns import Materials, Quantity, quantity_columns
from formcheck.hazards.dated import Limit, in_force
from formcheck.hazards.matching import Matcher
from formcheck.hazards.mixture import Bounds, MixtureFacts, filled, sum_bounds
from formcheck.hazards.rule import LimitOnSum
from formcheck.hazards.verdict import Kleene, anywhere, both, passed

G_PER_L = 1000.0  # of 1 g/mL


@dataclass(frozen=True)
class CompiledLimit:
    """A limit in force, its quantity and its conditions as columns over the materials."""

    rule: LimitOnSum
    limit: Limit
    quantity: Quantity
    conditions: tuple[Quantity, ...]

    @property
    def quantities(self) -> tuple[Quantity, ...]:
        return (self.quantity, *self.conditions)


def compile_limit(rule: LimitOnSum, materials: Materials, matcher: Matcher, *, as_of: date
                  ) -> CompiledLimit | None:
    """None on a day without a limit."""
    limit = in_force(rule.limit, as_of)
    if limit is None:
        return None
    quantity = quantity_columns(rule.quantity, materials, matcher, limit=limit.value)
    conditions = tuple(quantity_columns(one, materials, matcher) for one in rule.only_if)
    return CompiledLimit(rule, limit, quantity, conditions)


def quantity_bounds(quantities: Sequence[Quantity], facts: MixtureFacts) -> list[Bounds]:
    """For each quantity, bounds (R, rows) in its own unit; all the columns in one product."""
    low = _stacked([row.low for one in quantities for row in one.rows], facts)
    high = _stacked([row.high for one in quantities for row in one.rows], facts)
    lower, upper = sum_bounds(facts.mass_fraction, low, high)
    found, start = [], 0
    for one in quantities:
        part = slice(start, start + len(one.rows))
        found.append(_on_its_basis(one, (lower[:, part], upper[:, part]), facts))
        start = part.stop
    return found


def _stacked(columns: list[np.ndarray], facts: MixtureFacts) -> np.ndarray:
    return np.array(columns, dtype=float).reshape(len(columns), len(facts.materials))


def _on_its_basis(quantity: Quantity, sums: Bounds, facts: MixtureFacts) -> Bounds:
    """From mass fractions of the mixture to the basis and unit of the rule."""
    summed, n = quantity.summed, facts.n_recipes
    lower, upper = sums
    if summed.of[0].voc:
        low, high = filled(facts.voc_g_l.get(summed.of[0].voc), n, low=0.0, high=np.inf)
        return low[:, None], high[:, None]
    if summed.basis == "as_used":
        low, high = filled(facts.density_g_ml, n, low=0.0, high=np.inf)
        with np.errstate(invalid="ignore"):
            lower, upper = lower * low[:, None] * G_PER_L, upper * high[:, None] * G_PER_L
        upper = np.nan_to_num(upper, nan=0.0, posinf=np.inf)  # none of it stays none, whatever the density
    elif summed.basis == "dry_film":
        most = max(term.times for term in summed.of)
        lower, upper = _of_film(lower, upper, film_bounds(facts), most=most)
    return lower / quantity.unit_factor, upper / quantity.unit_factor


def film_bounds(facts: MixtureFacts) -> Bounds:
    """Bounds (R,) of the mass fraction that stays in the dry film."""
    low, high = filled((facts.nonvolatile_fraction,) * 2, len(facts.materials), low=0.0, high=1.0)
    lower, upper = sum_bounds(facts.mass_fraction, low[None, :], high[None, :])
    return lower[:, 0], upper[:, 0]


def _of_film(lower: np.ndarray, upper: np.ndarray, film: Bounds, *, most: float) -> Bounds:
    """What is counted stays in the film, whole: (R, rows) over (R,). Never more than all of the film."""
    least_film, most_film = film[0][:, None], film[1][:, None]
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        low = np.where(lower > 0, lower / most_film, 0.0)
        high = np.where(upper > 0, upper / least_film, 0.0)
    return np.minimum(low, most), np.minimum(high, most)


def limit_exceeded(compiled: CompiledLimit, values: Bounds) -> Kleene:
    """Whether any row passes its limit: (R,) surely, possibly."""
    lower, upper = values
    limit, rule = compiled.limit.value, compiled.rule
    surely, at_most = row_limits(compiled)
    return anywhere((passed(lower, limit * surely, rule.comparison),
                     passed(upper, limit * at_most, rule.comparison)))


def row_limits(compiled: CompiledLimit) -> tuple[np.ndarray, np.ndarray]:
    """Factors (rows,) on the limit of the rule: from where a row surely exceeds, to where it is within."""
    rows = compiled.quantity.rows
    if not rows:
        return np.ones(1), np.ones(1)
    return np.array([row.surely for row in rows]), np.array([row.at_most for row in rows])


def conditions_met(compiled: CompiledLimit, values: Sequence[Bounds]) -> Kleene:
    """Whether the further quantities are as the rule asks: (R,) surely, possibly."""
    met = [(passed(lower[:, 0], one.value, one.comparison), passed(upper[:, 0], one.value, one.comparison))
           for one, (lower, upper) in zip(compiled.rule.only_if, values, strict=True)]
    return both(*met)
