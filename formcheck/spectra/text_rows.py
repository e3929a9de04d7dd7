"""Delimited text as rows of cells with their places; comment lines (#) apart."""

from __future__ import annotations

import re
from functools import cache

from formcheck.cells import Cell, Rows
from formcheck.documents import decode
from formcheck.spectra.headings import wavelength_label
from formcheck.trouble import trouble

SEPARATORS = "\t;,"
LINE_END = re.compile(r"\r\n|\r|\n")
BEGINS_A_NUMBER = re.compile(r"\s*\"?[-+]?[.,]?\d")
A_DAY = re.compile(r"\s*\"?\d{1,4}[-/.]\d{1,2}[-/.]\d{2,4}\b(?![.,]\d)")
LOOKED_AT = 200  # lines searched for the wavelengths of a table that begins no line with a number
WHAT = "a spectrum file (wavelength in nm, then values)"


def text_of(raw: bytes, file: str) -> str:
    """The text of a file, UTF-8 or (with its mark) UTF-16; InputError for anything else."""
    if raw.startswith((b"\xff\xfe", b"\xfe\xff")):
        try:
            return raw.decode("utf-16")
        except UnicodeDecodeError:
            raise trouble(file, "text that is not the UTF-16 it says it is", "a text file saved as UTF-8") from None
    if b"\x00" in raw:
        line = raw[: raw.index(b"\x00")].count(b"\n") + 1
        raise trouble(file, "a binary file", WHAT, line=line)
    return decode(raw, file)


def begins_a_number(text: str) -> bool:
    """Whether a line, or the first cell of a row, begins with a number that is no date."""
    return bool(BEGINS_A_NUMBER.match(text)) and not A_DAY.match(text)


def rows_of(text: str) -> tuple[Rows, list[str], bool]:
    """(rows, comments, whether numbers may carry a decimal comma)."""
    rows, comments = [], []
    for number, line in enumerate(LINE_END.split(text), 1):
        if line.lstrip().startswith("#"):
            comments.append(line.strip().lstrip("#").strip())
        elif line.strip():
            rows.append((number, line))
    mark = separator([line for _, line in rows])
    return [cells(line, number, mark) for number, line in rows], comments, mark != ","


def separator(lines: list[str]) -> str | None:
    """Tab, semicolon or comma, the first of them that the first row of numbers holds; None: spaces."""
    first = next((line for line in lines if begins_a_number(line)), None)
    if first is None:
        for line in lines[:LOOKED_AT]:
            for mark in (*SEPARATORS, None):
                if (mark is None or mark in line) and _labels(cells(line, 0, mark)) >= 3:
                    return mark
        first = lines[0] if lines else ""
    return next((mark for mark in SEPARATORS if mark in first), None)


def _labels(row: list[Cell]) -> int:
    return sum(wavelength_label(cell.value) is not None for cell in row)


def cells(line: str, number: int, mark: str | None) -> list[Cell]:
    """The cells of one line; quotes round a cell are taken off, doubled ones inside it are one."""
    if mark is None:
        return [Cell(m.group().strip('"'), number, m.start() + 1) for m in re.finditer(r"\S+", line)]
    found = []
    for m in _cell_pattern(mark).finditer(line):
        quoted, plain = m.groups()
        value = plain.strip() if quoted is None else quoted.replace('""', '"').strip()
        lead = len(m[0]) - len(m[0].lstrip(" ")) if value or quoted else 0
        found.append(Cell(value, number, m.start() + 1 + lead))
        if m.end() == len(line) and not m[0].endswith(mark):
            break
    while len(found) > 2 and not found[-1].value:  # a separator at the end of the line
        found.pop()
    return found


@cache
def _cell_pattern(mark: str) -> re.Pattern[str]:
    m = re.escape(mark)
    return re.compile(rf'(?: *"((?:[^"]|"")*)" *|([^{m}]*))(?:{m}|\Z)')
