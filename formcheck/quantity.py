"""A number with its unit, its uncertainty and where it came from; or unknown, with the reason."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

SourceKind = Literal[
    "measured", "supplier", "law", "standard", "handbook", "paper", "database",
    "computed", "estimated", "common_practice", "memory", "user", "invented_demo",
]


@dataclass(frozen=True)
class Provenance:
    """Where a number came from. `verified` is False for what was never read in its source."""

    kind: SourceKind
    cite: str
    edition: str = ""
    verified: bool = True

    def __str__(self) -> str:
        text = f"{self.cite}, {self.edition}" if self.edition else self.cite
        return text if self.verified else f"{text} (from memory, not confirmed)"


@dataclass(frozen=True)
class Quantity:
    """`value` is None exactly when unknown, and then `reason` says why."""

    value: float | None
    unit: str
    sd: float | None = None
    provenance: Provenance | None = None
    reason: str = ""

    @property
    def known(self) -> bool:
        return self.value is not None


def known(value: float, unit: str, *, sd: float | None = None,
          provenance: Provenance | None = None) -> Quantity:
    return Quantity(float(value), unit, sd, provenance)


def unknown(unit: str, reason: str) -> Quantity:
    return Quantity(None, unit, reason=reason)
