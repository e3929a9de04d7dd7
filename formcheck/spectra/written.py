"""Spectra as their file writes them: cells with their places, and what the file says of them."""

from __future__ import annotations

import re
from contextlib import suppress
from dataclasses import dataclass, field
from functools import cached_property, lru_cache
from math import isfinite

import numpy as np

from formcheck.cells import Cell
from formcheck.spectra.measured import How, Quantity, Scale
from formcheck.trouble import InputError, shown, suggestion, trouble

NUMBER = re.compile(r"[-+]?(\d+([.,]\d*)?|[.,]\d+)([eE][-+]?\d{1,3})?", re.ASCII)
PERCENT_CELL = re.compile(rf"({NUMBER.pattern})\s*%", re.ASCII)


@dataclass(frozen=True)
class Written:
    """One spectrum. Its first name is shown; any of them, or its number, asks for it."""

    names: tuple[str, ...]
    number: int
    wavelengths: list[Cell]
    values: list[Cell]
    quantity: Quantity | None = None
    quantity_is_sure: bool = True  # False: a single letter, which may as well be the name of a sample
    scale: Scale | None = None
    how: How = field(default_factory=How)
    notes: tuple[str, ...] = ()


@dataclass(frozen=True)
class WrittenFile:
    """All spectra of a file. `thing` is what it holds several of, `line` where they begin."""

    file: str
    spectra: list[Written]
    thing: str = "spectrum"
    line: int | None = None
    wavelength_heading: str = ""
    decimal_comma: bool = False
    checked: dict[int, np.ndarray] = field(default_factory=dict, repr=False)  # wavelengths by the id of their cells

    @cached_property
    def names(self) -> tuple[str, ...]:
        return tuple(one.names[0] for one in self.spectra)

    @cached_property
    def highest(self) -> dict[Quantity | None, float]:
        """The largest number among the values of each quantity, leaving out what is none."""
        most: dict[Quantity | None, float] = {}
        for one in self.spectra:
            for cell in one.values:
                with suppress(InputError):
                    most[one.quantity] = max(most.get(one.quantity, -float("inf")), number(self, cell, ""))
        return most

    def refused(self, cell: Cell, found: str, expected: str) -> InputError:
        return trouble(self.file, found, expected, line=cell.line, column=cell.column)


def asked_for(written: WrittenFile, wanted: str | None) -> list[Written]:
    """All spectra, or the one of a name or number; InputError where there is none, or several.

    Names are compared without regard to case and to blanks around them; a number counts where no name fits.
    """
    if wanted is None:
        return written.spectra
    same = [one for one in written.spectra if _name(wanted) in map(_name, one.names)]
    if len(same) > 1:
        raise trouble(written.file, f"{len(same)} {plural(written.thing)} named {wanted!r}"[:200],
                      f"{written.thing} names that differ, or its number", line=written.line)
    same = same or [one for one in written.spectra if str(one.number) == wanted.strip()]
    if not same:
        raise trouble(written.file, f"no {written.thing} {shown(wanted)}", suggestion(wanted[:200], written.names),
                      line=written.line)
    return same


def only_one(written: WrittenFile) -> Written:
    """The spectrum of a file that has one; InputError names those it has."""
    if len(written.spectra) > 1:
        things = "value columns" if written.thing == "column" else plural(written.thing)
        listed = ", ".join(name[:40] for name in written.names[:8]) + ", ..." * (len(written.names) > 8)
        raise trouble(written.file, f"{len(written.spectra)} {things} ({listed})",
                      "the name of one, with `column`", line=written.line)
    return written.spectra[0]


def plural(thing: str) -> str:
    return "spectra" if thing == "spectrum" else thing + "s"


def _name(text: str) -> str:
    return text.strip().casefold()


def number(written: WrittenFile, cell: Cell, expected: str) -> float:
    """The number in a cell, a per cent sign left aside; InputError with its place."""
    if cell.flaw:
        raise written.refused(cell, cell.flaw, expected)
    value = cell.value
    if isinstance(value, float | int) and not isinstance(value, bool):
        return float(value)
    found = parsed(value) if isinstance(value, str) and (written.decimal_comma or "," not in value) else None
    if found is None:
        raise written.refused(cell, "an empty cell" if value in ("", None) else shown(value), expected)
    return found


@lru_cache(maxsize=1 << 16)
def parsed(text: str) -> float | None:
    """The finite number in a text, a per cent sign left aside and a comma taken as decimal; None for others."""
    plain = text.rstrip("% ") if PERCENT_CELL.fullmatch(text) else text
    found = float(plain.replace(",", ".")) if NUMBER.fullmatch(plain) else float("inf")
    return found if isfinite(found) else None


def is_percent(cell: Cell) -> bool:
    return isinstance(cell.value, str) and cell.value.endswith("%") and bool(PERCENT_CELL.fullmatch(cell.value))
