"""Recipes in comma-, semicolon- or tab-separated text."""

from __future__ import annotations

import dataclasses
import re
from pathlib import Path

from formcheck.cells import MOST_COLUMNS, MOST_ROWS, Cell, Rows, delimited_rows
from formcheck.documents import Document, decode, read_bytes
from formcheck.recipe.table import document_from_rows, heading_row, numeric_cells
from formcheck.trouble import InputError, Place, Problem, shown

DELIMITERS = (",", ";", "\t")
DECIMAL_COMMA = re.compile(r"([-+]?\d+),(\d+)((?:\s*[^\d\s,.].*)?)")
DECIMAL_POINT = re.compile(r"[-+]?\d[\d.]*\.\d+(,\d+)?(\s*[^\d\s,.].*)?")


def read_csv(path: Path) -> Document:
    """The recipe in a delimited text file; see table.py for its layout.

    The delimiter is the one that yields a row of headings. Where it is a semicolon or a tab, numbers
    may have a decimal comma; decimal commas and decimal points in one file are refused.
    """
    file = str(path)
    text = decode(read_bytes(path, what="a recipe file"), file).replace("\r\n", "\n").replace("\r", "\n")
    text = re.sub(r"\Asep=.[ \t]*(?=\n)", "", text)  # a hint some spreadsheets write for themselves
    delimiter = _delimiter(text)
    if delimiter is None:
        return document_from_rows([], file)  # which says that there is no row of headings
    rows = delimited_rows(text, delimiter, file)
    return document_from_rows(rows if delimiter == "," else with_decimal_points(rows, file), file)


def _delimiter(text: str) -> str | None:
    """The delimiter that makes some line a row of headings."""
    for line in text.split("\n", MOST_ROWS)[:MOST_ROWS]:
        for delimiter in DELIMITERS:
            if delimiter not in line:
                continue
            cells = [Cell(cell[:100].strip(' "'), 1, 1) for cell in line.split(delimiter, MOST_COLUMNS)]
            if heading_row([cells]) is not None:
                return delimiter
    return None


def with_decimal_points(rows: Rows, file: str) -> Rows:
    """Rows whose amounts and numbers carry a decimal comma, rewritten with a point.

    Raises
    ------
    InputError
        a number with a point in a file that has decimal commas: `1.000` may then be one or a thousand.
    """
    numeric = {cell for cell in numeric_cells(rows) if isinstance(cell.value, str)}
    if not any(DECIMAL_COMMA.fullmatch(str(cell.value)) for cell in numeric):
        return rows
    pointed = [cell for row in rows for cell in row
               if cell in numeric and DECIMAL_POINT.fullmatch(str(cell.value))]
    if pointed:
        raise InputError([
            Problem(Place(file, cell.line, cell.column), f"{shown(cell.value)} in a file with decimal commas",
                    "one decimal mark throughout the file and no thousands mark") for cell in pointed[:20]])
    return [[_pointed(cell) if cell in numeric else cell for cell in row] for row in rows]


def _pointed(cell: Cell) -> Cell:
    match = DECIMAL_COMMA.fullmatch(str(cell.value))
    return dataclasses.replace(cell, value=f"{match[1]}.{match[2]}{match[3]}") if match else cell
