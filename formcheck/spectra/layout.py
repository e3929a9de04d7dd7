"""Tables of spectra: wavelengths down the rows with values beside them, or along a heading with a sample to a row.

Rows of notes may stand above the numbers. What a table holds is taken at its word or refused with its place;
nothing is guessed, skipped or repaired.
"""

from __future__ import annotations

from itertools import pairwise

from formcheck.cells import Cell, Rows
from formcheck.spectra.headings import (
    LONGEST_NM,
    OTHER_UNIT,
    SHORTEST_NM,
    letter_quantity,
    name_columns,
    names_wavelength,
    note_how,
    note_quantity,
    note_scale,
    quantity_of,
    scale_of,
    told_quantity,
    told_scale,
    wavelength_label,
)
from formcheck.spectra.text_rows import WHAT, begins_a_number
from formcheck.spectra.written import NUMBER, Written, WrittenFile
from formcheck.trouble import trouble

MOST_NOTE_LINES = 100
LEAST_LABELS = 3  # wavelengths side by side that make a row the heading of a table with a sample to a row


def spectra_of_table(rows: Rows, comments: list[str], file: str, *, decimal_comma: bool) -> WrittenFile:
    """The spectra that a table holds, as written.

    Raises
    ------
    InputError
        no numbers, a single row or column, rows of unequal length, wavelengths in another unit than nm, or a
        table that may be read either way.
    """
    first = next((i for i, row in enumerate(rows) if row and begins_a_number(_text(row[0]))), None)
    at = _sample_rows_heading(rows, first, file)
    if at is not None:
        return _samples_in_rows(rows, at, comments, file, decimal_comma)
    inner = _inner_wavelength_column(rows)
    if inner is not None:
        return _listed(rows, *inner, comments, file, decimal_comma)
    if first is None:
        raise trouble(file, "no line that begins with a number" if rows else "an empty file", WHAT, line=1, column=1)
    if first > MOST_NOTE_LINES:
        raise trouble(file, f"{first} lines of notes before the first number", f"at most {MOST_NOTE_LINES}",
                      line=rows[first][0].line, column=1)
    return _wavelengths_in_rows(rows, first, comments, file, decimal_comma)


def _text(cell: Cell) -> str:
    return "" if cell.value is None else str(cell.value)


def _notes(rows: Rows, comments: list[str]) -> list[str]:
    """Comments, and the rows above the heading as lines of text."""
    above = [[text for cell in row if (text := _text(cell))] for row in rows[:MOST_NOTE_LINES]]
    return comments + [": ".join([texts[0], " ".join(texts[1:])]) if len(texts) > 1 else texts[0]
                       for texts in above if texts]


# --- wavelengths down the rows -------------------------------------------------------------------------


def _wavelengths_in_rows(rows: Rows, first: int, comments: list[str], file: str, decimal_comma: bool) -> WrittenFile:
    header = rows[first - 1] if first else []
    body = _even_rows(file, rows[first:], header)
    headings = [_text(cell) for cell in header]
    width = max(len(body[0]), len(headings))
    names = [headings[i] if i < len(headings) and headings[i] else str(i + 1) for i in range(width)]
    _refuse_other_unit(headings[0] if headings else "", header, file)
    wavelengths = [row[0] for row in body]
    notes = _notes(rows[:max(first - 1, 0)], comments)
    spectra = [_column(names[i], i + 1, wavelengths, [_cell(row, i, names[i]) for row in body], notes,
                       alone=width == 2) for i in range(1, width)]
    return WrittenFile(file, spectra, "column", body[0][0].line, names[0], decimal_comma)


def _even_rows(file: str, body: Rows, header: list[Cell]) -> Rows:
    first = body[0]
    if len(body) < 2:
        raise trouble(file, "a single row of numbers", "a row for each wavelength", line=first[0].line, column=1)
    if len(first) < 2:
        raise trouble(file, "one column", "the wavelength in nm, then values, with comma, semicolon or tab between",
                      line=first[0].line, column=1)
    most, where = (len(header), "the header") if len(header) > 1 else (len(first), "the first row")
    for row in body:
        _refuse_longer(file, row, most, where)
    return body


def _refuse_longer(file: str, row: list[Cell], most: int, where: str) -> None:
    if len(row) > most:
        raise trouble(file, f"{len(row)} cells in a row where {where} has {most}",
                      "as many; numbers with a decimal comma need semicolons or tabs between them",
                      line=row[0].line, column=row[most].column)


def _cell(row: list[Cell], at: int, name: str) -> Cell:
    """A cell of a row; beyond its end one that says so, at the place where it should begin."""
    if at < len(row):
        return row[at]
    end = row[-1]
    return Cell("", end.line, end.column + len(_text(end)), f"a row of {len(row)} cells, none for {name[:60]!r}")


def _column(name: str, number: int, wavelengths: list[Cell], values: list[Cell], notes: list[str], *,
            alone: bool) -> Written:
    """A value column; what its heading does not say, the notes may."""
    quantity = told_quantity(notes) or quantity_of(name) or note_quantity(notes)
    letter = letter_quantity(name) if alone else None
    return Written((name,), number, wavelengths, values, quantity or letter, quantity_is_sure=bool(quantity),
                   scale=told_scale(notes) or scale_of(name) or note_scale(notes), how=note_how(notes))


def _refuse_other_unit(heading: str, header: list[Cell], file: str) -> None:
    if OTHER_UNIT.search(heading.replace("_", " ")):
        raise trouble(file, f"wavelengths headed {heading[:60]!r}", "wavelengths in nm", line=header[0].line,
                      column=header[0].column)


# --- one value to a row, with the wavelength in a column that is not the first ------------------------------


def _inner_wavelength_column(rows: Rows) -> tuple[int, int] | None:
    """(row of headings, column) where a column further right is headed as the wavelength."""
    for i, row in enumerate(rows[:-1][:MOST_NOTE_LINES]):
        if names_wavelength(row[0].value):
            return None
        for k, cell in enumerate(row):
            if k and names_wavelength(cell.value) and k < len(rows[i + 1]) and _in_range(rows[i + 1][k]):
                return i, k
    return None


def _listed(rows: Rows, at: int, k: int, comments: list[str], file: str, decimal_comma: bool) -> WrittenFile:
    """Spectra listed one below the other, each row with the name of its sample."""
    header, body = rows[at], rows[at + 1:]
    headings = [_text(cell) for cell in header]
    for row in body:
        _refuse_longer(file, row, len(header), "the header")
    _refuse_other_unit(headings[k], header[k:], file)
    named = name_columns(headings)
    groups: dict[str, Rows] = {}
    for row in body:
        groups.setdefault(_text(_cell(row, named[0], "name")) if named else "", []).append(row)
    columns = [i for i in range(len(headings)) if i not in (k, *named) and _is_number(_cell(body[0], i, ""))]
    notes = _notes(rows[:at], comments)
    spectra: list[Written] = []
    for sample, group in groups.items():
        wavelengths = [_cell(row, k, headings[k]) for row in group]
        for i in columns:
            heading = headings[i] or str(i + 1)
            one = _column(heading, len(spectra) + 1, wavelengths, [_cell(row, i, heading) for row in group], notes,
                          alone=len(columns) == 1)
            name = sample if len(columns) == 1 else f"{sample} {heading}"
            spectra.append(_renamed(one, name.strip() or heading) if named else one)
    if not spectra:
        raise trouble(file, "no column of numbers beside the wavelengths", WHAT, line=header[0].line)
    return WrittenFile(file, spectra, "spectrum", header[0].line, headings[k], decimal_comma)


def _renamed(one: Written, name: str) -> Written:
    return Written((name,), one.number, one.wavelengths, one.values, one.quantity, one.quantity_is_sure, one.scale,
                   one.how, one.notes)


# --- a sample to a row ----------------------------------------------------------------------------------


def _sample_rows_heading(rows: Rows, first: int | None, file: str) -> int | None:
    """The row whose headings are wavelengths; None where wavelengths run down the rows."""
    last = MOST_NOTE_LINES if first is None else first
    for i, row in enumerate(rows[:last + 1]):
        if _label_run(row) is None:
            continue
        headed_above = i == first and i > 0 and sum(bool(_text(cell)) for cell in rows[i - 1]) > 1
        if headed_above or not _reads_along(rows, i, file):
            return None
        return i
    return None


def _label_run(row: list[Cell]) -> tuple[int, int] | None:
    """First column and the one past the last of the longest run of wavelengths in a row."""
    best, start = (0, 0), None
    for k in range(len(row) + 1):
        is_label = k < len(row) and wavelength_label(row[k].value) is not None
        if is_label and start is None:
            start = k
        if not is_label and start is not None:
            best, start = max(best, (start, k), key=lambda run: run[1] - run[0]), None
    return best if best[1] - best[0] >= LEAST_LABELS else None


def _reads_along(rows: Rows, i: int, file: str) -> bool:
    """Whether wavelengths run along row i, not down its first column; InputError where both may be."""
    corner = rows[i][0]
    down = [row[0] for row in rows[i + 1:] if row]
    if not down or not all(_in_range(cell) for cell in down[:LEAST_LABELS]):
        return True
    if names_wavelength(corner.value):
        return False
    if _text(corner) and not _in_range(corner):
        return True  # numbers of samples below a word such as ID
    start, end = _label_run(rows[i]) or (0, 0)
    along_even, down_even = _even(rows[i][start:end]), _even([corner, *down] if _text(corner) else down)
    if along_even == down_even:
        raise trouble(file, "a table whose wavelengths may run along its heading or down its first column",
                      "the heading `wavelength_nm` above the column of wavelengths, or `sample` above that of names",
                      line=corner.line, column=1)
    return along_even


def _even(cells: list[Cell]) -> bool:
    """Whether cells hold rising or falling wavelengths in equal steps."""
    labels = [wavelength_label(cell.value) for cell in cells]
    nm = [float(label) for label in labels if label is not None]
    steps = [b - a for a, b in pairwise(nm)]
    return len(nm) == len(cells) and bool(steps) and steps[0] != 0 and all(
        abs(step - steps[0]) < 1e-6 for step in steps)


def _samples_in_rows(rows: Rows, at: int, comments: list[str], file: str, decimal_comma: bool) -> WrittenFile:
    header, body = rows[at], rows[at + 1:]
    if not body:
        raise trouble(file, "no row of values below the wavelengths", "a row for each sample", line=header[0].line)
    start, end = _label_run(header) or (0, 0)
    headings = [_text(cell) for cell in header]
    named = name_columns(headings) or [k for k in range(len(headings)) if not start <= k < end][:1]
    wavelengths = [Cell(wavelength_label(cell.value), cell.line, cell.column) for cell in header[start:end]]
    labels = list(dict.fromkeys(_without_digits(text) for text in headings[start:end]))
    beside = [text for k, text in enumerate(headings) if not start <= k < end]
    notes = _notes(rows[:at], comments)
    quantity = told_quantity(notes) or note_quantity([*labels, *beside]) or note_quantity(notes)
    letter = letter_quantity(labels[0]) if len(labels) == 1 else None
    scales = {scale for text in labels if (scale := scale_of(text))}
    scale = told_scale(notes) or (scales.pop() if len(scales) == 1 else note_scale(beside) or note_scale(notes))
    how, spectra = note_how(notes), []
    for n, row in enumerate(body, 1):
        _refuse_longer(file, row, len(header), "the header")
        names = tuple(text for k in named if k < len(row) and (text := _text(row[k]))) or (str(n),)
        values = [_cell(row, k, headings[k]) for k in range(start, end)]
        spectra.append(Written(names, n, wavelengths, values, quantity or letter, bool(quantity), scale, how))
    return WrittenFile(file, spectra, "sample", header[0].line, headings[0], decimal_comma)


def _without_digits(label: str) -> str:
    return "".join(c for c in label if not c.isdigit()).replace("nm", " ").strip(" _.")


def _in_range(cell: Cell) -> bool:
    text = _text(cell)
    return bool(NUMBER.fullmatch(text)) and SHORTEST_NM <= float(text.replace(",", ".")) <= LONGEST_NM


def _is_number(cell: Cell) -> bool:
    return bool(NUMBER.fullmatch(_text(cell).rstrip("% ")))
