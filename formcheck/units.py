"""Units of amount as the trade writes them, with what each is in the base unit of its kind."""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import Literal

UnitKind = Literal["mass", "volume", "length", "mass_fraction", "volume_fraction", "parts",
                   "mass_per_volume", "rest"]

# Base units: g, mL, um, fraction, g/L of product. Symbols keep their case; words do not.
UNITS: dict[str, tuple[UnitKind, float]] = {
    "g": ("mass", 1.0), "kg": ("mass", 1e3), "mg": ("mass", 1e-3), "ug": ("mass", 1e-6),
    "t": ("mass", 1e6),
    "mL": ("volume", 1.0), "ml": ("volume", 1.0), "L": ("volume", 1e3), "l": ("volume", 1e3),
    "uL": ("volume", 1e-3), "cL": ("volume", 10.0), "cm3": ("volume", 1.0),
    "um": ("length", 1.0), "nm": ("length", 1e-3), "mm": ("length", 1e3), "cm": ("length", 1e4),
    "m": ("length", 1e6),
    "% w/w": ("mass_fraction", 1e-2), "%": ("mass_fraction", 1e-2), "ppm w/w": ("mass_fraction", 1e-6),
    "% v/v": ("volume_fraction", 1e-2),
    "parts": ("parts", 1.0), "part": ("parts", 1.0),
    "g/L": ("mass_per_volume", 1.0), "g/l": ("mass_per_volume", 1.0), "mg/L": ("mass_per_volume", 1e-3),
    "mg/l": ("mass_per_volume", 1e-3), "g/mL": ("mass_per_volume", 1e3), "kg/L": ("mass_per_volume", 1e3),
}
REST_WORDS = ("to make up", "rest", "balance", "q.s.")

NUMBER_AND_UNIT = re.compile(r"\s*([-+]?(?:\d+(?:\.\d*)?|\.\d+)(?:[eE][-+]?\d{1,3})?)\s*(\S.*?)\s*")


@dataclass(frozen=True)
class Amount:
    """A number in the base unit of its kind; `value` is 0 and meaningless for the rest."""

    value: float
    kind: UnitKind
    written: str


def known_units(*kinds: UnitKind) -> list[str]:
    return [name for name, (kind, _) in UNITS.items() if not kinds or kind in kinds]


def parse_amount(text: str, *kinds: UnitKind) -> Amount:
    """`"300 g"`, `"5 % w/w"`, `"to make up"` as an Amount of one of `kinds` (any, when none is named).

    Raises
    ------
    ValueError
        "found|expected": what was found, and what would be right.
    """
    if text.strip().lower() in REST_WORDS and (not kinds or "rest" in kinds):
        return Amount(0.0, "rest", text)
    allowed = known_units(*kinds)
    match = NUMBER_AND_UNIT.fullmatch(text.replace("µ", "u").replace("μ", "u"))
    if not match:
        raise ValueError(f"{text[:40]!r}|a number and a unit such as '5 {allowed[0]}'")
    unit = re.sub(r"\s+", " ", match.group(2))
    unit = re.sub(r"^%\s*(?=[wv]/)", "% ", unit)
    if unit not in allowed:
        raise ValueError(f"the unit {unit[:20]!r}|one of {', '.join(allowed)}")
    kind, factor = UNITS[unit]
    value = float(match.group(1)) * factor
    if not 0 <= value < 1e15:
        raise ValueError(f"{text[:40]!r}|an amount from 0 up to what a workshop could hold")
    return Amount(value, kind, text)
