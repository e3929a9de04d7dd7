"""A figure per recipe with the bounds that missing data leave it, or unknown with the reason."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]


@dataclass(frozen=True)
class Bounded:
    """Arrays (R,). `value` is NaN where unknown; `low` and `high` hold even then, or are NaN themselves.

    Where every datum is known the three agree. `reasons` says what is missing, recipe by recipe; a
    value may stand beside a reason when what is missing is too little to matter much.
    """

    value: Array
    low: Array
    high: Array
    reasons: tuple[str, ...]


def bounded(value: Array, low: Array, high: Array, reasons: Sequence[str]) -> Bounded:
    """A Bounded whose value lies within its bounds wherever both are known."""
    return Bounded(np.clip(value, low, high), low, high, tuple(reasons))


def exact(value: Array) -> Bounded:
    """A figure that is known as it stands."""
    return Bounded(value, value, value, ("",) * len(value))


def quotient(top: Bounded, bottom: Bounded) -> Bounded:
    """top / bottom of independent positive figures; NaN where the bottom may be 0."""
    with np.errstate(divide="ignore", invalid="ignore"):
        parts = [np.where(b > 0, a / b, np.nan) for a, b in (
            (top.value, bottom.value), (top.low, bottom.high), (top.high, bottom.low))]
    return Bounded(parts[0], parts[1], parts[2], join_reasons(top.reasons, bottom.reasons))


def share(part: tuple[Array, Array, Array], rest: tuple[Array, Array, Array],
          reasons: Sequence[str]) -> Bounded:
    """part / (part + rest), each given as (value, low, high); monotone in both, so the bounds are exact."""
    with np.errstate(divide="ignore", invalid="ignore"):
        value, low, high = (np.where(a + b > 0, a / (a + b), np.nan) for a, b in (
            (part[0], rest[0]), (part[1], rest[2]), (part[2], rest[1])))
    return bounded(value, low, high, reasons)


def join_reasons(*reasons: Sequence[str]) -> tuple[str, ...]:
    """Recipe by recipe, every different reason once."""
    return tuple("; ".join(dict.fromkeys(text for text in texts if text))
                 for texts in zip(*reasons, strict=True))


def reasons_for(missing: NDArray[np.bool_], names: Sequence[str],
                says: Callable[[str], str]) -> tuple[str, ...]:
    """One text per recipe that names the ingredients (R,I) whose datum is missing; empty where none is."""
    return tuple(says(", ".join(names[int(i)] for i in np.flatnonzero(row))) if row.any() else ""
                 for row in missing)
