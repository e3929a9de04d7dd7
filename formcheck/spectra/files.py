"""Measured spectra from the files that instruments and spreadsheets write: comma, semicolon or tab.

What a file holds is taken at its word or refused with file, line and column; nothing is guessed, skipped or
repaired. Rows of notes above the numbers and lines that begin with # are passed over.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from pathlib import Path

import numpy as np

from formcheck.documents import decode, read_bytes
from formcheck.trouble import InputError, shown, suggestion, trouble

MOST_NOTE_LINES = 100
SHORTEST_NM, LONGEST_NM = 150.0, 4000.0
NUMBER = re.compile(r"[-+]?(\d+([.,]\d*)?|[.,]\d+)([eE][-+]?\d{1,3})?")
BEGINS_A_NUMBER = re.compile(r"\s*\"?[-+]?[.,]?\d")
WHAT = "a spectrum file (CSV: wavelength in nm, then values)"


@dataclass(frozen=True)
class MeasuredSpectrum:
    """One column of a spectrum file, wavelengths rising; `columns` names all value columns of the file."""

    wavelength_nm: np.ndarray
    values: np.ndarray
    column: str
    columns: tuple[str, ...]
    file: str


@dataclass(frozen=True)
class Cell:
    text: str
    line: int
    column: int  # of its first character, counted from 1


@dataclass(frozen=True)
class Table:
    """Rows of cells below a header; `columns` counts the wavelength column first."""

    file: str
    columns: tuple[str, ...]
    rows: list[list[Cell]]
    decimal_comma: bool


def read_spectrum_csv(path: Path | str, *, column: str | None = None) -> MeasuredSpectrum:
    """A measured spectrum from a CSV or TSV file.

    Parameters
    ----------
    column : name of the value column, or its number counted from 1 with the wavelength column as 1; may be
        left out where the file has one value column.

    Returns
    -------
    MeasuredSpectrum
        wavelengths rising, as many as the file has; see `grid.resample` for bringing it onto a grid.

    Raises
    ------
    InputError
        with file:line:column: no such file, too large, binary, empty, not UTF-8; a cell that is no number or
        not finite; wavelengths that turn back, repeat or cannot be nm; rows of unequal length; a column that
        is not there, or several to choose from.
    """
    table = read_table(path)
    at = _column_index(table, column)
    wavelength = _wavelengths(table)
    values = np.array([_number(table, _cell(table, row, at), "a finite number") for row in table.rows])
    if wavelength[0] > wavelength[-1]:
        wavelength, values = wavelength[::-1].copy(), values[::-1].copy()
    return MeasuredSpectrum(wavelength, values, table.columns[at], table.columns[1:], str(path))


def read_k_and_s(path: Path | str) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    """K and S of a pigment from a file with the columns wavelength, K (or K_per_um) and S (or S_per_um).

    Returns wavelengths (N,) [nm], rising, and K and S (N,) [1/um of pigment volume].

    Raises
    ------
    InputError
        as `read_spectrum_csv`; also K or S below 0, or no columns of these names.
    """
    table = read_table(path)
    found = []
    for symbol in ("K", "S"):
        at = next(
            (
                i
                for i, name in enumerate(table.columns)
                if name.casefold() in (symbol.casefold(), f"{symbol}_per_um".casefold())
            ),
            None,
        )
        if at is None:
            raise trouble(
                str(path),
                f"the columns {', '.join(table.columns)}",
                "the columns wavelength_nm, K_per_um, S_per_um",
                line=_first_line(table),
            )
        column = []
        for row in table.rows:
            cell = _cell(table, row, at)
            column.append(_number(table, cell, f"{symbol} in 1/um"))
            if column[-1] < 0:
                raise _refused(table, cell, f"{symbol} of {cell.text}", f"{symbol} of 0 or more")
        found.append(np.array(column))
    wavelength = _wavelengths(table)
    order = slice(None, None, -1 if wavelength[0] > wavelength[-1] else 1)
    return wavelength[order].copy(), found[0][order].copy(), found[1][order].copy()


# --- the table -----------------------------------------------------------------------------------------


def read_table(path: Path | str) -> Table:
    """Header and rows of a CSV or TSV file, as text with places; the same refusals as `read_spectrum_csv`."""
    file = str(path)
    lines = _text(read_bytes(path, what=WHAT), file).splitlines()
    numbered = [
        (i, line) for i, line in enumerate(lines, 1) if line.strip() and not line.lstrip().startswith("#")
    ]
    first = next((k for k, (_, line) in enumerate(numbered) if BEGINS_A_NUMBER.match(line)), None)
    if first is None:
        found = "an empty file" if not numbered else "no line that begins with a number"
        raise trouble(file, found, WHAT, line=1, column=1)
    if first > MOST_NOTE_LINES:
        raise trouble(
            file,
            f"{first} lines of notes before the first number",
            f"at most {MOST_NOTE_LINES}",
            line=numbered[first][0],
            column=1,
        )
    separator = _separator(numbered[first][1])
    rows = [_cells(line, i, separator) for i, line in numbered[first:]]
    header = _cells(numbered[first - 1][1], numbered[first - 1][0], separator) if first else []
    return Table(file, _names(header, rows[0]), _even_rows(file, rows, header), separator != ",")


def _text(raw: bytes, file: str) -> str:
    if raw.startswith((b"\xff\xfe", b"\xfe\xff")):
        try:
            return raw.decode("utf-16")
        except UnicodeDecodeError:
            raise trouble(
                file, "text that is not the UTF-16 it says it is", "a text file saved as UTF-8"
            ) from None
    if b"\x00" in raw:
        line = raw[: raw.index(b"\x00")].count(b"\n") + 1
        raise trouble(file, "a binary file", WHAT, line=line)
    return decode(raw, file)


def _separator(line: str) -> str | None:
    """The first of tab, semicolon and comma that the first row of numbers holds; None: spaces."""
    return next((mark for mark in "\t;," if mark in line), None)


def _cells(line: str, number: int, separator: str | None) -> list[Cell]:
    if separator is None:
        return [Cell(m.group().strip('"'), number, m.start() + 1) for m in re.finditer(r"\S+", line)]
    cells, start, quoted = [], 0, False
    for i, character in enumerate([*line, separator]):
        if character == '"':
            quoted = not quoted
        elif character == separator and (not quoted or i == len(line)):
            raw = line[start:i]
            cells.append(
                Cell(raw.strip().strip('"').strip(), number, start + 1 + len(raw) - len(raw.lstrip()))
            )
            start = i + 1
    while len(cells) > 2 and not cells[-1].text:  # a separator at the end of the line
        cells.pop()
    return cells


def _names(header: list[Cell], first_row: list[Cell]) -> tuple[str, ...]:
    """Column names; numbers from 1 where the header has none."""
    named = [cell.text for cell in header]
    return tuple(
        named[i] if i < len(named) and named[i] else str(i + 1)
        for i in range(max(len(first_row), len(named)))
    )


def _even_rows(file: str, rows: list[list[Cell]], header: list[Cell]) -> list[list[Cell]]:
    first = rows[0]
    if len(rows) < 2:
        raise trouble(
            file, "a single row of numbers", "a row for each wavelength", line=first[0].line, column=1
        )
    if len(first) < 2:
        expected = "the wavelength in nm, then values, with comma, semicolon or tab between"
        raise trouble(file, "one column", expected, line=first[0].line, column=1)
    most, where = (len(header), "the header") if len(header) > 1 else (len(first), "the first row")
    for row in rows:
        if len(row) > most:
            raise trouble(
                file,
                f"{len(row)} cells in a row where {where} has {most}",
                "as many; numbers with a decimal comma need semicolons or tabs between them",
                line=row[0].line,
                column=row[most].column,
            )
    return rows


# --- cells ---------------------------------------------------------------------------------------------


def _column_index(table: Table, wanted: str | None) -> int:
    values = table.columns[1:]
    if wanted is None:
        if len(values) > 1:
            raise trouble(
                table.file,
                f"{len(values)} value columns ({', '.join(values[:8])})",
                "the name of one, with `column`",
                line=_first_line(table),
            )
        return 1
    same = [
        i
        for i, name in enumerate(table.columns)
        if i and name.strip().casefold() == wanted.strip().casefold()
    ]
    if len(same) > 1:
        raise trouble(
            table.file,
            f"{len(same)} columns named {wanted!r}",
            "column names that differ",
            line=_first_line(table),
        )
    if same:
        return same[0]
    if wanted.isascii() and wanted.isdigit() and 2 <= int(wanted) <= len(table.columns):
        return int(wanted) - 1
    raise trouble(table.file, f"no column {wanted!r}", suggestion(wanted, values), line=_first_line(table))


def _cell(table: Table, row: list[Cell], at: int) -> Cell:
    if at >= len(row):
        end = row[-1]
        raise trouble(
            table.file,
            f"a row of {len(row)} cells",
            f"a value for {table.columns[at]!r}",
            line=end.line,
            column=end.column + len(end.text),
        )
    return row[at]


def _number(table: Table, cell: Cell, expected: str) -> float:
    if not NUMBER.fullmatch(cell.text) or ("," in cell.text and not table.decimal_comma):
        raise _refused(table, cell, "an empty cell" if not cell.text else shown(cell.text), expected)
    number = float(cell.text.replace(",", "."))
    if not np.isfinite(number):
        raise _refused(table, cell, shown(cell.text), expected)
    return number


def _wavelengths(table: Table) -> np.ndarray:
    """Wavelengths as written, all rising or all falling."""
    found = np.array([_number(table, row[0], "a wavelength in nm") for row in table.rows])
    for row, nm in zip(table.rows, found, strict=True):
        if not SHORTEST_NM <= nm <= LONGEST_NM:
            raise _refused(
                table, row[0], f"a wavelength of {row[0].text}", f"{SHORTEST_NM:g} to {LONGEST_NM:g} nm"
            )
    direction = np.sign(found[-1] - found[0]) or 1.0
    for before, row, step in zip(table.rows, table.rows[1:], np.diff(found), strict=False):
        if step == 0:
            raise _refused(
                table,
                row[0],
                f"{row[0].text} nm a second time (before in line {before[0].line})",
                "each wavelength once",
            )
        if step * direction < 0:
            raise _refused(
                table,
                row[0],
                f"{row[0].text} nm after {before[0].text} nm",
                "wavelengths that rise, or fall, throughout",
            )
    return found


def _refused(table: Table, cell: Cell, found: str, expected: str) -> InputError:
    return trouble(table.file, found, expected, line=cell.line, column=cell.column)


def _first_line(table: Table) -> int:
    return table.rows[0][0].line
