"""Days: limits, windows and citations that hold from one day to another."""

from collections.abc import Sequence
from datetime import date
from itertools import pairwise
from typing import Annotated, Self, TypeVar

from pydantic import Field, model_validator

from formcheck.strict import Day, Strict, wrong


class Limit(Strict):
    """A value with the days it holds: `from` on, up to and including `until`."""

    starts: Annotated[Day, Field(alias="from")]
    ends: Annotated[Day | None, Field(alias="until")] = None
    value: Annotated[float, Field(ge=0)]
    source: str


class DatedWindow(Strict):
    """A pH range with the day its text begins to count; either end may be open."""

    starts: Annotated[Day | None, Field(alias="from")] = None
    ends: Annotated[Day | None, Field(alias="until")] = None
    low: Annotated[float, Field(ge=-2, le=16)] | None = None
    high: Annotated[float, Field(ge=-2, le=16)] | None = None
    source: str

    @model_validator(mode="after")
    def _has_an_end(self) -> Self:
        if self.low is None and self.high is None:
            raise wrong("a window without ends", "`low`, `high` or both")
        if self.low is not None and self.high is not None and not self.low < self.high:
            raise wrong(f"a window from {self.low} to {self.high}", "`low` below `high`")
        return self


class InForce(Strict):
    """Days and source of a rule that has no limit to carry them."""

    starts: Annotated[Day | None, Field(alias="from")] = None
    ends: Annotated[Day | None, Field(alias="until")] = None
    source: str


Dated = TypeVar("Dated", Limit, DatedWindow, InForce)


def in_force(dated: Sequence[Dated], as_of: date) -> Dated | None:
    """The entry of a dated list that holds on a day, or None before the first and after the last `until`."""
    held = [one for one in dated if one.starts is None or one.starts <= as_of]
    if not held:
        return None
    last = held[-1]
    return None if last.ends is not None and as_of > last.ends else last


def refuse_disorder(limits: list[Limit]) -> None:
    """Days must rise; each limit ends where the next begins, or on its own `until` before that."""
    for one, following in pairwise(limits):
        runs_on = one.ends is not None and one.ends >= following.starts
        if not one.starts < following.starts or runs_on:
            raise wrong(f"limits from {one.starts} and {following.starts} that overlap",
                        "days in rising order")
    for one in limits:
        if one.ends is not None and one.ends < one.starts:
            raise wrong(f"a limit until {one.ends} from {one.starts}", "`until` on or after `from`")
