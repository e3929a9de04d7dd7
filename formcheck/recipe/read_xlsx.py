"""Recipes in .xlsx workbooks."""

from __future__ import annotations

from pathlib import Path

from formcheck.documents import Document
from formcheck.recipe.table import document_from_rows, heading_row
from formcheck.workbook import sheets


def read_xlsx(path: Path) -> Document:
    """The recipe in the first sheet that has a row of headings; see table.py for its layout.

    Raises
    ------
    InputError
        not a workbook, a damaged or suspicious one, or a table that is no recipe.
    """
    file = str(path)
    for _, rows in sheets(path, what="a recipe file"):
        if heading_row(rows) is not None:
            return document_from_rows(rows, file)
    return document_from_rows([], file)
