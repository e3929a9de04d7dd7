"""Answers as small numbers, so that a million recipes are judged as arrays; and how they combine."""

from __future__ import annotations

import numpy as np

NOT_APPLICABLE, NOT_IN_FORCE, NO_FLAG, WITHIN, CANNOT_TELL, EXCEEDS, APPLIES = range(7)
WORDS = ("not_applicable", "not_in_force", "no_flag", "within", "cannot_tell", "exceeds", "applies")

Kleene = tuple[np.ndarray, np.ndarray]  # bool arrays: surely so, possibly so

ROUNDING = 1e-9  # relative: what a sum of fractions may miss its limit by in rounding


def passed(value: np.ndarray, limit: float | np.ndarray, comparison: str) -> np.ndarray:
    """Whether a value passes a limit, where rounding must not decide."""
    margin = ROUNDING * np.abs(limit)
    return value >= limit - margin if comparison == "at_or_above" else value > limit + margin


def both(*statements: Kleene) -> Kleene:
    """All of them: sure when all are sure, possible when all are possible."""
    return (np.logical_and.reduce([one[0] for one in statements]),
            np.logical_and.reduce([one[1] for one in statements]))


def either(*statements: Kleene) -> Kleene:
    return (np.logical_or.reduce([one[0] for one in statements]),
            np.logical_or.reduce([one[1] for one in statements]))


def anywhere(statement: Kleene) -> Kleene:
    """(R, N) to (R,): of any of the N."""
    return np.asarray(statement[0].any(axis=1)), np.asarray(statement[1].any(axis=1))


def answered(tripped: Kleene, scope: Kleene, *, trips_as: int, else_as: int) -> np.ndarray:
    """Codes (R,): the rule's own answer, where it speaks of the recipe at all.

    A rule that would trip, or cannot tell, and may not speak of the recipe, cannot tell; one that
    surely does not trip says so whether it speaks of the recipe or not.
    """
    surely, possibly = both(tripped, scope)
    code = np.where(surely, trips_as, np.where(possibly, CANNOT_TELL, else_as))
    return np.where(scope[1], code, NOT_APPLICABLE).astype(np.int8)
