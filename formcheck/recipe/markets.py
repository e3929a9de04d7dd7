"""Where goods are sold: the codes of data/markets.csv, and which wider market each lies in."""

from __future__ import annotations

import csv
from collections.abc import Iterable
from dataclasses import dataclass
from functools import cache
from importlib import resources
from typing import Annotated, Any

from pydantic import BeforeValidator, Field

from formcheck.strict import wrong
from formcheck.trouble import shown, suggestion


@dataclass(frozen=True)
class MarketRow:
    code: str
    name: str
    within: str
    also: str


@cache
def markets() -> dict[str, MarketRow]:
    """Every market by its code."""
    text = resources.files("formcheck.recipe").joinpath("data/markets.csv").read_text(encoding="utf-8")
    rows = csv.DictReader(line for line in text.splitlines() if not line.startswith("#"))
    return {row["code"]: MarketRow(**row) for row in rows}


def markets_reached(codes: Iterable[str]) -> tuple[str, ...]:
    """The markets named and the wider ones they lie in: ("DE",) gives ("DE", "EU")."""
    reached: dict[str, None] = {}
    for code in codes:
        reached[code] = None
        if within := markets()[code].within:
            reached[within] = None
    return tuple(reached)


def _check(value: Any) -> Any:
    if isinstance(value, str) and value not in markets():
        raise wrong(shown(value), _nearest(value[:60]))
    return value


def _nearest(word: str) -> str:
    by_other_name = {other.lower(): row.code for row in markets().values()
                     for other in (row.code, row.name, row.also) if other}
    code = by_other_name.get(word.strip().lower())
    if code:
        return f"did you mean {code!r}?"
    close = suggestion(word, [row.name for row in markets().values()])
    if close.startswith("did you mean"):
        name = next(name for name in by_other_name if repr(name) in close.lower())
        return f"did you mean {by_other_name[name]!r}?"
    return "a market code: EU, or the two capital letters of a country in ISO 3166-1, such as US, CA, GB"


Market = Annotated[
    str, BeforeValidator(_check),
    Field(json_schema_extra=lambda schema: schema.update(enum=sorted(markets())))]
