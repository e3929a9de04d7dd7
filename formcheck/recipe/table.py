"""A recipe laid out as a table, as in a maker's spreadsheet, turned into what a YAML recipe would hold.

Above, one row for each field: its name, then its value or values. Below, a row of headings and the
ingredients. Empty rows and columns may stand anywhere.

    title,     Harbour blue
    what,      ink
    sold in,   EU, US
    film wet,  30 um
    lab,       45, -10, -25          (a name is that of the recipe file; `wanted lab` and `lab` are one)

    ingredient,     amount, unit,  note
    Water,          to make up
    PB 15:3 paste,  12,     % w/w
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from pathlib import PurePath
from typing import Any

from formcheck.cells import Cell, Rows
from formcheck.documents import Document, FieldPath, path_text, plain_scalar
from formcheck.trouble import InputError, Place, Problem, shown, suggestion
from formcheck.units import REST_WORDS

# How the values of a field are read: text as it is, an amount or length, words of a vocabulary, numbers.
FIELDS: dict[str, str] = {
    "formcheck": "number", "title": "text", "what": "word", "note": "text", "use": "words",
    "sold_in": "texts", "batch": "amount", "film.wet": "amount", "film.dry": "amount", "film.sd": "amount",
    "path_length": "amount",
    "ground": "text", "ground.spectrum": "text", "ground.column": "text",
    "ground.scale": "word", "wanted.scale": "word",
    "wanted.lab": "numbers", "wanted.spectrum": "text", "wanted.column": "text", "wanted.light": "text",
    "wanted.observer": "number", "wanted.tolerance": "number",
    "lights": "texts", "under": "texts", "over": "texts", "observer": "number", "specular": "word", "geometry": "word",
    "measured.ph": "number", "measured.ph_sd": "number", "measured.density_g_cm3": "number",
    "measured.temperature_c": "number", "binder_index": "number", "weighing": "amount", "acts": "words",
    "shelf": "text",
}
SHORT_NAMES = {"lab": "wanted.lab", "tolerance": "wanted.tolerance", "ph": "measured.ph"}
HEADINGS = {
    "ingredient": "material", "ingredients": "material", "material": "material", "name": "material",
    "component": "material", "amount": "amount", "quantity": "amount", "qty": "amount", "unit": "unit",
    "units": "unit", "purity": "purity", "note": "note", "notes": "note",
}
HEADING_WITH_UNIT = re.compile(r"([^()\[\]]+?)\s*[(\[]\s*([^()\[\]]+?)\s*[)\]]")


def document_from_rows(rows: Rows, file: str) -> Document:
    """The recipe that a table holds, with the place of every field.

    Raises
    ------
    InputError
        no row of headings, an unknown field or heading, a field given twice, a value that cannot be
        read, cells outside any heading; one problem for each.
    """
    rows = [row for row in rows if not all(cell.empty for cell in row)]
    at = heading_row(rows)
    if at is None:
        raise InputError(Problem(Place(file, 1, 1), "no row with the headings `ingredient` and `amount`",
                                 "a row `ingredient, amount, unit`, and the ingredients below it"))
    table = _Table(file)
    for row in rows[:at]:
        table.take_field(row)
    table.take_ingredients(rows[at], rows[at + 1:])
    if table.problems:
        raise InputError(table.problems[:20])
    return table.document()


def heading_row(rows: Rows) -> int | None:
    """Index of the first row that names both the ingredient and the amount column."""
    for index, row in enumerate(rows):
        if {"material", "amount"} <= {_heading(cell)[0] for cell in row}:
            return index
    return None


def numeric_cells(rows: Rows) -> set[Cell]:
    """The cells that hold a number by their place: amounts, purities, fields of numbers or lengths."""
    at = heading_row(rows) or 0
    found: set[Cell] = set()
    for row in rows[:at]:
        key, *cells = [cell for cell in row if not cell.empty] or [Cell(None, 0, 0)]
        if FIELDS.get(field_name(cell_text(key.value)), "") in ("number", "numbers", "amount"):
            found.update(cells)
    columns = {n for n, cell in enumerate(rows[at]) if _heading(cell)[0] in ("amount", "purity")}
    for row in rows[at + 1:]:
        found.update(cell for n, cell in enumerate(row) if n in columns)
    return found


def _heading(cell: Cell) -> tuple[str, str]:
    """The column that a heading means and the unit it names: `Amount (g)` gives ("amount", "g")."""
    text = cell.value.strip() if isinstance(cell.value, str) else ""
    match = HEADING_WITH_UNIT.fullmatch(text[:100])
    words, unit = (match[1], match[2]) if match else (text, "")
    column = HEADINGS.get(words.strip().lower().removesuffix(":"), "")
    return column, unit if column == "amount" else ""


def field_name(written: str) -> str:
    """`Film wet:` as `film.wet`; what is no field comes back with underscores."""
    name = re.sub(r"[\s_.]+", "_", written.strip().lower().removesuffix(":").strip())
    by_plain_name = {known.replace(".", "_"): known for known in FIELDS} | SHORT_NAMES
    return by_plain_name.get(name, name)


class _Table:
    """Gathers data, places and problems while rows are read; a class because all three grow together."""

    def __init__(self, file: str):
        self.file = file
        self.data: dict[str, Any] = {}
        self.places: dict[FieldPath, Place] = {(): Place(file, 1, 1)}
        self.problems: list[Problem] = []

    def document(self) -> Document:
        self.data.setdefault("formcheck", 1)  # a spreadsheet is no older than this layout
        self.data.setdefault("title", PurePath(self.file).stem)
        return Document(self.file, self.data, self.places)

    def complain(self, cell: Cell, found: str, expected: str, path: FieldPath = ()) -> None:
        place = Place(self.file, cell.line, cell.column)
        self.problems.append(Problem(place, found, expected, path_text(path)))

    def put(self, path: FieldPath, value: Any, cell: Cell) -> None:
        """Set a field inside nested mappings; complains when it is there already."""
        inner: Any = self.data
        for step in path[:-1]:
            inner = inner.setdefault(step, {})
            if not isinstance(inner, dict):
                return self.complain(cell, f"{path_text(path)!r} beside {step!r}", "one of the two", path)
        if path[-1] in inner:
            return self.complain(cell, f"{path_text(path)!r} a second time", "each field once", path)
        inner[path[-1]] = value
        for n in range(1, len(path) + 1):
            self.places.setdefault(path[:n], Place(self.file, cell.line, cell.column))

    def take_field(self, row: list[Cell]) -> None:
        key, *cells = [cell for cell in row if not cell.empty]
        written = cell_text(key.value)[:100]
        name = field_name(written)
        path = tuple(name.split("."))
        if name not in FIELDS:
            known = [field.replace(".", " ") for field in FIELDS]
            self.complain(key, f"the unknown field {shown(written)}",
                          suggestion(name.replace("_", " "), known))
        elif not cells:
            self.complain(key, f"no value for {written!r}", f"a value in the cell beside {written!r}", path)
        elif flawed := next((cell for cell in cells if cell.flaw), None):
            self.complain(flawed, flawed.flaw, "a plain value", path)
        elif FIELDS[name] in ("words", "texts", "numbers"):
            self.put(path, [self.scalar(part, name) for cell in cells for part in _parts(cell)], cells[0])
        elif len(cells) > 1:
            self.complain(cells[1], f"a second value, {shown(cells[1].value)}",
                          f"one value for {written!r}", path)
        else:
            self.put(path, self.scalar(cells[0].value, name), cells[0])

    def scalar(self, value: Any, name: str) -> Any:
        """A cell's value as the field wants it; what does not fit is left for the recipe's own checks."""
        kind = FIELDS[name]
        if kind in ("number", "numbers"):
            return plain_scalar(value) if isinstance(value, str) else whole_if_it_is(value)
        text = cell_text(value)
        return re.sub(r"[\s\-]+", "_", text.strip().lower()) if kind in ("word", "words") else text

    def take_ingredients(self, headings: list[Cell], rows: Rows) -> None:
        columns: dict[str, int] = {}
        unit_of_heading = ""
        for index, cell in enumerate(headings):
            column, unit = _heading(cell)
            if cell.empty:
                continue
            if not column:
                known = ["ingredient", "amount", "unit", "purity", "note"]
                self.complain(cell, f"the unknown heading {shown(cell.value)}",
                              suggestion(str(cell.value)[:60], known))
            elif column in columns:
                self.complain(cell, f"a second column {shown(cell.value)}", "each heading once")
            else:
                columns[column], unit_of_heading = index, unit_of_heading or unit
        self.data["ingredients"] = []
        self.places["ingredients",] = Place(self.file, headings[0].line, headings[0].column)
        for row in rows:
            self.take_ingredient(row, columns, unit_of_heading)

    def take_ingredient(self, row: list[Cell], columns: dict[str, int], unit_of_heading: str) -> None:
        cells = {name: row[index] for name, index in columns.items() if index < len(row)}
        for index, cell in enumerate(row):
            if not cell.empty and index not in columns.values():
                self.complain(cell, f"{shown(cell.value)} outside the columns that have a heading",
                              "a heading above it, or an empty cell")
        for cell in cells.values():
            if cell.flaw:
                self.complain(cell, cell.flaw, "a plain value", ("ingredients",))
        n = len(self.data["ingredients"])
        self.data["ingredients"].append({})
        first = next(cell for cell in row if not cell.empty)
        if cell_text(first.value).lower().rstrip(":") in ("total", "totals", "sum"):
            self.complain(first, f"a row {first.value!r}",
                          "the ingredients alone: formcheck adds them up itself")
        self.places["ingredients", n] = Place(self.file, first.line, first.column)
        for name, value, cell in _ingredient_fields(cells, unit_of_heading):
            self.put_in_line(n, name, value, cell)

    def put_in_line(self, n: int, name: str, value: Any, cell: Cell) -> None:
        self.data["ingredients"][n][name] = value
        self.places["ingredients", n, name] = Place(self.file, cell.line, cell.column)


def _ingredient_fields(cells: dict[str, Cell], unit_of_heading: str) -> Iterator[tuple[str, Any, Cell]]:
    for name in ("material", "note", "purity"):
        cell = cells.get(name)
        if cell and not cell.empty:
            yield name, cell_text(cell.value), cell
    nothing = Cell(None, 0, 0)
    amount, unit = cells.get("amount", nothing), cells.get("unit", nothing)
    if not amount.empty:
        yield "amount", joined_amount(amount.value, unit.value, unit_of_heading), amount
    elif cell_text(unit.value).lower() in REST_WORDS:
        yield "amount", cell_text(unit.value), unit


def joined_amount(value: Any, unit: Any, unit_of_heading: str = "") -> Any:
    """Amount and unit of two cells as one text: 12.0 and `% w/w` give `12 % w/w`.

    A number without any unit stays a number, which the recipe refuses with words about units.
    """
    text, own_unit = cell_text(value), cell_text(unit)
    is_number = isinstance(plain_scalar(text), int | float)
    if text.endswith("%") and own_unit.startswith("%"):
        return text.removesuffix("%").strip() + " " + own_unit  # a percent cell beside a percent unit
    unit_text = own_unit or (unit_of_heading if is_number else "")
    return f"{text} {unit_text}" if unit_text else plain_scalar(text) if is_number else text


def _parts(cell: Cell) -> list[Any]:
    """The items of a list that stand in one cell: `EU; US` or `EU, US`."""
    if isinstance(cell.value, str):
        return [part.strip() for part in re.split(r"[;,]", cell.value) if part.strip()]
    return [cell.value]


def whole_if_it_is(value: Any) -> Any:
    """Spreadsheets keep every number as a float: 10.0 was written 10."""
    return int(value) if isinstance(value, float) and value.is_integer() and abs(value) < 1e15 else value


def cell_text(value: Any) -> str:
    """A cell's value as the maker sees it."""
    return "" if value is None else str(whole_if_it_is(value)).strip()
