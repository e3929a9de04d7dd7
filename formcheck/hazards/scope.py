"""Whether a rule speaks of a recipe: what it is, what it is for, where it is sold, what is done with it."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from formcheck.hazards.mixture import Scope
from formcheck.hazards.rule import Rule
from formcheck.hazards.verdict import Kleene
from formcheck.hazards.vocabulary import Vocabulary

Pair = tuple[bool, bool]
NOT_STATED = {"what": "what it is", "use": "what it is used for", "sold_in": "where it will be sold",
              "acts": "what is done with it"}


def distinct_scopes(scopes: Sequence[Scope]) -> tuple[list[Scope], np.ndarray]:
    """The different scopes of a batch, and which of them each recipe has (R,)."""
    numbers: dict[Scope, int] = {}
    which = [numbers.setdefault(scope, len(numbers)) for scope in scopes]
    return list(numbers), np.array(which, int)


def scope_of(rule: Rule, distinct: Sequence[Scope], which: np.ndarray, words: Vocabulary) -> Kleene:
    """(R,) bool twice: the rule surely, and possibly, speaks of the recipe. See `distinct_scopes`."""
    pairs = np.array([speaks_of(rule, scope, words) for scope in distinct], bool).reshape(-1, 2)
    return pairs[which, 0], pairs[which, 1]


def speaks_of(rule: Rule, scope: Scope, words: Vocabulary) -> Pair:
    """One recipe: (surely, possibly). What the recipe does not state may be anything."""
    wanted = [_met(name, asked, scope, words) for name, asked in _asked(rule)]
    lifted = [_met(name, getattr(rule.unless, name), scope, words)
              for name in NOT_STATED if getattr(rule.unless, name)]
    surely = all(pair[0] for pair in wanted) and not any(pair[1] for pair in lifted)
    possibly = all(pair[1] for pair in wanted) and not any(pair[0] for pair in lifted)
    return surely, possibly


def not_stated(rule: Rule, scope: Scope, words: Vocabulary) -> list[str]:
    """What the recipe would have to state to tell whether the rule speaks of it."""
    asked = [*_asked(rule), *((name, getattr(rule.unless, name)) for name in NOT_STATED)]
    names = [name for name, wanted in asked if wanted and _met(name, wanted, scope, words) == (False, True)]
    return [NOT_STATED[name] for name in dict.fromkeys(names)]


def _asked(rule: Rule) -> list[tuple[str, list[str]]]:
    """The lists a recipe has to meet; the jurisdiction is where goods must be sold, unless it is said."""
    asked = {name: list(getattr(rule.applies_when, name)) for name in NOT_STATED}
    if rule.jurisdiction != "any" and not asked["sold_in"]:
        asked["sold_in"] = [rule.jurisdiction]
    return [(name, wanted) for name, wanted in asked.items() if wanted]


def _met(name: str, wanted: list[str], scope: Scope, words: Vocabulary) -> Pair:
    stated = (scope.what,) if name == "what" else getattr(scope, name)
    if not any(stated):
        return False, True
    if name != "sold_in":
        met = bool(set(stated) & set(wanted))
        return met, met
    held = {market for code in stated for market in words.market_of(code)}
    members = {m for code in stated if code in words.markets for m in words.markets[code].members}
    met = bool(held & set(wanted))
    return met, met or bool(members & set(wanted))
