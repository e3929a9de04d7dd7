"""The answer of a limit: the row that decides, what each ingredient brings to it, what is missing."""

from __future__ import annotations

import numpy as np

from formcheck.hazards.answer import Answer, Share
from formcheck.hazards.columns import Quantity, Row
from formcheck.hazards.limits import CompiledLimit, film_bounds, row_limits
from formcheck.hazards.missing import RECIPE, Missing
from formcheck.hazards.mixture import Bounds, MixtureFacts
from formcheck.hazards.sentences import limit_sentence
from formcheck.hazards.tell import Asked, plain_answer
from formcheck.hazards.verdict import CANNOT_TELL, EXCEEDS, passed


def told_limit(asked: Asked, how: CompiledLimit, values: list[Bounds]) -> Answer:
    low, high = values[0][0][0], values[0][1][0]
    k = _deciding_row(asked.code, how, low, high)
    row = how.quantity.rows[k] if how.quantity.rows else None
    shares = _shares(asked.facts, how.quantity, row) if row else ()
    missing = _missing(asked, how, row, values) if asked.code == CANNOT_TELL else ()
    limit = how.limit.value * float(row_limits(how)[0][k])
    summed = how.rule.quantity
    said = limit_sentence(
        asked.word, name=_name(how, row), low=float(low[k]), high=float(high[k]), limit=limit,
        unit=summed.unit, basis=summed.basis, comparison=how.rule.comparison, since=how.limit.starts)
    said += _unstated(asked)
    by_weight = sorted(shares, key=lambda share: -(share.high if share.high is not None else np.inf))
    ingredients = tuple(share.ingredient for share in by_weight)
    return plain_answer(
        asked, how.rule.sources[how.limit.source], said, value_low=float(low[k]),
        value_high=float(high[k]) if np.isfinite(high[k]) else None, limit=limit, unit=summed.unit,
        basis=summed.basis, in_force_from=how.limit.starts, contributions=tuple(by_weight),
        ingredients=ingredients, missing=missing,
        place=asked.place([*ingredients, *(one.ingredient for one in missing if one.ingredient != RECIPE)]))


def _deciding_row(code: int, how: CompiledLimit, low: np.ndarray, high: np.ndarray) -> int:
    """The row nearest to, or farthest past, its own limit."""
    surely, at_most = row_limits(how)
    ratio = low / surely if code == EXCEEDS else high / at_most
    return int(np.argmax(ratio))


def _name(how: CompiledLimit, row: Row | None) -> str:
    name = how.rule.quantity.name
    if row is None or not how.rule.quantity.each:
        return name
    label = row.label or "a substance that no record names"
    return f"{name} (if {label} is one)" if not row.low.any() else f"{name} ({label})"


def _unstated(asked: Asked) -> str:
    if asked.code != CANNOT_TELL or asked.surely_in_scope:
        return ""
    return f"; whether the rule asks depends on {' and '.join(m.datum for m in asked.scope_missing())}"


def _shares(facts: MixtureFacts, quantity: Quantity, row: Row) -> tuple[Share, ...]:
    """Contribution of each ingredient that brings, or may bring, something. [unit of the rule]"""
    x = facts.mass_fraction[0]
    scale_low, scale_high = _scale(facts, quantity)
    shares = []
    for i in np.flatnonzero(facts.present[0] & (row.high != 0)):
        known = not np.isnan(x[i]) and scale_high is not None
        shares.append(Share(
            int(i), facts.names[i], float(x[i] * row.low[i] * scale_low) if known else None,
            float(x[i] * row.high[i] * scale_high) if known and scale_high is not None else None,
            quantity.summed.unit, facts.places[i]))
    return tuple(shares)


def _scale(facts: MixtureFacts, quantity: Quantity) -> tuple[float, float | None]:
    """From mass fraction to the unit of the rule: least and largest; None where nothing bounds it."""
    least, most = 1.0, 1.0
    if quantity.summed.basis == "dry_film":
        film = film_bounds(facts)
        least, most = float(film[1][0]), float(film[0][0])
        if most <= 0 or least <= 0:
            return 0.0, None
        least, most = 1 / least, 1 / most
    elif quantity.summed.basis == "as_used":
        if facts.density_g_ml is None or np.isnan(np.concatenate(facts.density_g_ml)).any():
            return 0.0, None
        least, most = (1000 * float(one[0]) for one in facts.density_g_ml)
    return least / quantity.unit_factor, most / quantity.unit_factor


def _missing(asked: Asked, how: CompiledLimit, row: Row | None, values: list[Bounds]) -> tuple[Missing, ...]:
    """What would settle a *cannot tell*: of the quantity where it is open, the conditions, the scope."""
    facts, found = asked.facts, asked.scope_missing()
    lower, upper = values[0]
    factors = row_limits(how)
    limit, comparison = how.limit.value, how.rule.comparison
    open_now = ~passed(lower, limit * factors[0], comparison) & passed(upper, limit * factors[1], comparison)
    if open_now.any():
        found += _of_quantity(facts, how.quantity, row)
    for one, (low, high), quantity in zip(how.rule.only_if, values[1:], how.conditions, strict=True):
        if not passed(low, one.value, one.comparison).any() and passed(high, one.value, one.comparison).any():
            found += _of_quantity(facts, quantity, quantity.rows[0] if quantity.rows else None)
    if open_now.any() and how.quantity.rows and not found:
        found.append(Missing(RECIPE, "the limit that the classification sets for the substance itself"))
    return tuple(dict.fromkeys(found))


def _of_quantity(facts: MixtureFacts, quantity: Quantity, row: Row | None) -> list[Missing]:
    """The data that widen a quantity: contents, amounts, what stays in the film, density, VOC."""
    if row is None:
        return [Missing(RECIPE, "the VOC content of the mixture")]
    present, x = facts.present[0], facts.mass_fraction[0]
    widths = np.nan_to_num(x, nan=1.0) * (row.high - row.low)
    found = [one for one in quantity.missing if one.ingredient == RECIPE or present[one.ingredient]]
    found.sort(key=lambda one: np.inf if one.ingredient == RECIPE else -widths[one.ingredient])
    found += [Missing(int(i), "the amount") for i in np.flatnonzero(np.isnan(x))]
    if quantity.summed.basis == "dry_film":
        found += [Missing(int(i), "the part that stays in the dry film")
                  for i in np.flatnonzero(present & np.isnan(facts.nonvolatile_fraction))]
    if quantity.summed.basis == "as_used" and _scale(facts, quantity)[1] is None:
        found.append(Missing(RECIPE, "the density of the mixture"))
    return found
