"""Chemical formulas: what they contain, and how much each element weighs in them."""

from __future__ import annotations

import json
import re
from functools import lru_cache
from pathlib import Path

ATOMIC_WEIGHTS = Path(__file__).parent / "data" / "atomic_weights.json"
SUBSCRIPTS = str.maketrans("₀₁₂₃₄₅₆₇₈₉", "0123456789")
MOST_CHARACTERS, MOST_DEEP, MOST_ATOMS = 200, 12, 100_000
OPENS, CLOSES = "([{", ")]}"

# A full stop may part off water of crystallisation (CuSO4.5H2O) or mark a decimal (Fe0.95O). It
# parts where a letter follows, or a number and then water or ammonia, or a number that has a full
# stop of its own (CaSO4.0.5H2O); after a lone 0 it is always a decimal.
PARTING_STOP = re.compile(
    r"(?<![A-Za-z)\]}]0)\.(?:(?=[A-Z(\[{])|(\d+(?:\.\d+)?)(?=H2O|NH3)|(\d+\.\d+))")
NUMBER = re.compile(r"\d+(?:\.\d+)?")
SYMBOL = re.compile(r"[A-Z][a-z]?")


@lru_cache(maxsize=1)
def atomic_weights() -> dict[str, float]:
    """Standard atomic weight of each element that has one. [g/mol]"""
    return json.loads(ATOMIC_WEIGHTS.read_text(encoding="utf-8"))["g_mol"]


@lru_cache(maxsize=4096)
def _parsed(formula: str) -> tuple[tuple[str, float], ...]:
    text = re.sub(r"\s+", "", formula).translate(SUBSCRIPTS)
    if not text or len(text) > MOST_CHARACTERS:
        raise ValueError(f"a formula of {len(text)} characters|1 to {MOST_CHARACTERS} characters")
    total: dict[str, float] = {}
    for part in PARTING_STOP.sub(_dot, text.replace("•", "·").replace("*", "·")).split("·"):
        multiple = NUMBER.match(part)
        factor = float(multiple.group()) if multiple else 1.0
        counts, end = _group(part, multiple.end() if multiple else 0, depth=0)
        if end < len(part) or not counts:
            raise _unreadable(formula, part[end:] or part)
        _add(total, counts, factor)
    if not 0 < sum(total.values()) <= MOST_ATOMS or min(total.values()) <= 0:
        raise ValueError(f"the formula {formula[:40]!r}|counts above 0 that sum to at most {MOST_ATOMS}")
    return tuple(total.items())


def parse_formula(formula: str) -> dict[str, float]:
    """Atoms of each element in a formula unit: `CuSO4.5H2O` gives Cu 1, S 1, O 9, H 10.

    Brackets of all three kinds, hydrates parted by a middle dot, an asterisk or a full stop, decimal
    counts and subscript digits are read.

    Raises
    ------
    ValueError
        "found|expected" for a text that is no formula, or an element without a standard weight.
    """
    return dict(_parsed(formula))


def molar_mass(formula: str) -> float:
    """Mass of a mole of formula units. [g/mol]  Raises ValueError as parse_formula does."""
    weights = atomic_weights()
    return sum(weights[symbol] * n for symbol, n in _parsed(formula))


def element_mass_fractions(formula: str) -> dict[str, float]:
    """Mass fraction of each element of a formula. Raises ValueError as parse_formula does."""
    weights, whole = atomic_weights(), molar_mass(formula)
    return {symbol: weights[symbol] * n / whole for symbol, n in _parsed(formula)}


def _dot(stop: re.Match[str]) -> str:
    return "·" + (stop.group(1) or stop.group(2) or "")


def _group(text: str, at: int, *, depth: int) -> tuple[dict[str, float], int]:
    """Counts from `at` to the bracket that closes this group, and where that is."""
    counts: dict[str, float] = {}
    while at < len(text) and text[at] not in CLOSES:
        if text[at] in OPENS:
            inner, end = _group(text, at + 1, depth=_deeper(text, depth))
            if end >= len(text) or OPENS.index(text[at]) != CLOSES.index(text[end]):
                raise _unreadable(text, text[at:])
            end += 1
        else:
            symbol = _symbol(text, at)
            inner, end = {symbol: 1.0}, at + len(symbol)
        number = NUMBER.match(text, end)
        _add(counts, inner, float(number.group()) if number else 1.0)
        at = number.end() if number else end
    return counts, at


def _symbol(text: str, at: int) -> str:
    match = SYMBOL.match(text, at)
    if not match or match.group() not in atomic_weights():
        raise _unreadable(text, text[at:])
    return match.group()


def _deeper(text: str, depth: int) -> int:
    if depth >= MOST_DEEP:
        raise ValueError(f"brackets deeper than {MOST_DEEP} in {text[:40]!r}|a flatter formula")
    return depth + 1


def _add(total: dict[str, float], counts: dict[str, float], factor: float) -> None:
    for symbol, n in counts.items():
        total[symbol] = total.get(symbol, 0.0) + factor * n


def _unreadable(formula: str, rest: str) -> ValueError:
    return ValueError(f"the formula {formula[:40]!r}, not readable from {rest[:12]!r}"
                      "|element symbols, counts and brackets such as CuSO4.5H2O")
