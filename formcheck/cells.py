"""Cells of a table with their places, and a delimited text as rows of such cells."""

from __future__ import annotations

import re
from dataclasses import dataclass
from datetime import date, time, timedelta

from formcheck.trouble import trouble

MOST_ROWS = 2_000  # of a recipe; other tables give limits of their own
MOST_COLUMNS = 60


@dataclass(frozen=True)
class Cell:
    """What a cell holds and where it stands, counted from 1. `flaw` says why it cannot be used as it is."""

    value: str | float | bool | date | time | timedelta | None
    line: int
    column: int
    flaw: str = ""

    @property
    def empty(self) -> bool:
        return not self.flaw and (self.value is None or self.value == "")


Rows = list[list[Cell]]


def delimited_rows(text: str, delimiter: str, file: str) -> Rows:
    """The rows of a delimited text (RFC 4180: quotes round a field, doubled inside it).

    Raises
    ------
    InputError
        a quote that does not close its field, more than `MOST_ROWS` rows or `MOST_COLUMNS` columns.
    """
    text = text.replace("\r\n", "\n").replace("\r", "\n")
    mark = re.escape(delimiter)
    field = re.compile(rf'(?: *"([^"]*(?:""[^"]*)*)" *|([^{mark}\n]*))({mark}|\n|\Z)')
    rows: Rows = [[]]
    position, line, line_start = 0, 1, 0
    while match := field.match(text, position):
        quoted, plain, end = match.groups()
        column = position - line_start + 1
        if quoted is None and plain.lstrip().startswith('"'):
            break
        value = plain if quoted is None else quoted.replace('""', '"')
        rows[-1].append(Cell(value.strip(), line, column))
        refuse_too_large(len(rows), len(rows[-1]), file)
        if "\n" in match[0]:
            line += match[0].count("\n")
            line_start = match.start() + match[0].rindex("\n") + 1
        if end == "":
            return rows
        if end == "\n":
            rows.append([])
        position = match.end()
    raise trouble(file, 'a quote (") that does not close its field', "a quote at both ends of the field",
                  line=line, column=position - line_start + 1)


def refuse_too_large(n_rows: int, n_columns: int, file: str, *, most_rows: int = MOST_ROWS,
                     most_columns: int = MOST_COLUMNS) -> None:
    """InputError for a table larger than what is read can be."""
    if n_rows > most_rows or n_columns > most_columns:
        raise trouble(file, f"a table that reaches row {n_rows:,}, column {n_columns:,}",
                      f"at most {most_rows:,} rows and {most_columns:,} columns", line=n_rows)
