"""The base of everything a user can write: unknown keys refused, types taken at their word."""

from __future__ import annotations

from datetime import date
from typing import Annotated, Any

from pydantic import BaseModel, BeforeValidator, ConfigDict
from pydantic_core import PydanticCustomError


class Strict(BaseModel):
    """A model that refuses keys it does not know, and never turns text into numbers."""

    model_config = ConfigDict(extra="forbid", frozen=True, strict=True, allow_inf_nan=False,
                              defer_build=True)


def wrong(found: str, expected: str) -> PydanticCustomError:
    """Raise this inside a validator: it reaches the user as `found ..., expected ...` with its place."""
    return PydanticCustomError("ours", "{expected}", {"found": found, "expected": expected})


def _day(value: Any) -> Any:
    if isinstance(value, str):
        try:
            return date.fromisoformat(value)
        except ValueError:
            raise wrong(repr(value[:40]), "a date such as 2026-12-01") from None
    return value


Day = Annotated[date, BeforeValidator(_day)]
