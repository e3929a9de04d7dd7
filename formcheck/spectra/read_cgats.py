"""Spectra in keyword text: CGATS.17 and ISO 28178.

    CGATS.17
    INSTRUMENTATION "..."
    NUMBER_OF_FIELDS 33
    BEGIN_DATA_FORMAT
    SAMPLE_ID SAMPLE_NAME SPECTRAL_NM380 SPECTRAL_NM390 ...     (or nm380, SPECTRAL_PCT380, SPECTRAL_DEC380;
    END_DATA_FORMAT                                             or pairs of SPECTRAL_NM and SPECTRAL_DEC or _PCT)
    NUMBER_OF_SETS 2
    BEGIN_DATA
    1 "pale oak" 0.2016 0.2070 ...
    END_DATA

A file may hold several tables. SPECTRAL_PCT is percent, SPECTRAL_DEC a fraction; for other fields a SPECTRAL_NORM
of 100 or 1 tells, else percent or fraction is not settled by the file.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator
from dataclasses import dataclass, field

from formcheck.cells import Cell
from formcheck.spectra.measured import How, Scale, specular_of
from formcheck.spectra.text_rows import LINE_END
from formcheck.spectra.written import Written, WrittenFile
from formcheck.trouble import InputError, shown, trouble

FIRST_LINES = 400  # of a file, in which the tables of such a file begin
TOKEN = re.compile(r'"((?:[^"]|"")*)"(?=\s|\Z)|(\S+)')
BAND = re.compile(r"((?:[A-Z]\d?_)?(?:SPECTRAL_(?:NM_?|PCT_?|DEC_?|DATA_?)?|SPEC_?|NM_?|R_?|T_?))"
                  r"(\d{3,4}(?:\.\d+)?)(?:NM)?", re.IGNORECASE)
PAIRED: dict[str, Scale] = {"SPECTRAL_DEC": "fraction", "SPECTRAL_PCT": "percent"}
NAME_FIELDS = ("SAMPLE_NAME", "SAMPLE_ID", "SAMPLEID", "SAMPLE_LOC", "STRING")
NORMS: dict[str, Scale] = {"1": "fraction", "100": "percent"}


@dataclass
class _Table:
    """One table while it is read: its fields, its sets, and the keywords that stood before it."""

    keywords: dict[str, str]
    fields: list[Cell] = field(default_factory=list)
    sets: list[list[Cell]] = field(default_factory=list)


def is_cgats(text: str) -> bool:
    """Whether a text holds the keyword that every such file has."""
    head = LINE_END.split(text, FIRST_LINES)[:FIRST_LINES]
    return any(line.strip().upper() == "BEGIN_DATA_FORMAT" for line in head)


def read_cgats(text: str, file: str) -> WrittenFile:
    """The spectra of a keyword text, as written.

    Raises
    ------
    InputError
        a table without its end, fields or sets other than as many as said, no spectral field.
    """
    spectra: list[Written] = []
    tables = list(_tables(text, file))
    for table in tables:
        spectra += _spectra_of(table, file, len(spectra))
    if not spectra:
        line = tables[0].fields[0].line if tables and tables[0].fields else 1
        raise trouble(file, "no spectral field", "fields such as SPECTRAL_NM380 or nm380, or pairs of SPECTRAL_NM and "
                      "SPECTRAL_DEC", line=line)
    return WrittenFile(file, spectra, "sample", spectra[0].values[0].line, "", decimal_comma=True)


def _tables(text: str, file: str) -> Iterator[_Table]:
    """The tables of a text, each checked against the numbers of fields and sets that it gives."""
    keywords: dict[str, str] = {}
    table, inside, begun = _Table(keywords), "", 0
    for n, line in enumerate(LINE_END.split(text), 1):
        row = [] if line.lstrip().startswith("#") else _tokens(line, n, file)
        word = str(row[0].value).upper() if len(row) == 1 else ""
        if not row:
            continue
        if inside and word == f"END_{inside}":
            if inside == "DATA":
                yield _checked(table, file, n)
                table = _Table(keywords, table.fields)
            inside = ""
        elif word in ("BEGIN_DATA_FORMAT", "BEGIN_DATA"):
            if inside:
                raise _unended(file, inside, begun, n)
            inside, begun = word.removeprefix("BEGIN_"), n
            table = _Table(dict(keywords), [] if inside == "DATA_FORMAT" else table.fields)
        elif inside == "DATA_FORMAT":
            table.fields += row
        elif inside == "DATA":
            table.sets.append(_as_many(row, table.fields, file))
        else:
            keywords[str(row[0].value).upper()] = " ".join(str(cell.value) for cell in row[1:])
    if inside:
        raise _unended(file, inside, begun, n)


def _unended(file: str, inside: str, begun: int, line: int) -> InputError:
    return trouble(file, f"no END_{inside} for the BEGIN_{inside} in line {begun}: the file is cut off or damaged",
                   f"END_{inside}", line=line)


def _tokens(line: str, number: int, file: str) -> list[Cell]:
    found = []
    for match in TOKEN.finditer(line):
        quoted, plain = match.groups()
        if plain and plain.startswith('"'):
            raise trouble(file, 'a quote (") that does not close', "a quote at both ends of a text", line=number,
                          column=match.start() + 1)
        found.append(Cell(plain if quoted is None else quoted.replace('""', '"').strip(), number, match.start() + 1))
    return found


def _as_many(row: list[Cell], fields: list[Cell], file: str) -> list[Cell]:
    if len(row) != len(fields):
        last = row[min(len(row), len(fields) + 1) - 1]
        raise trouble(file, f"a set of {len(row)} values for {len(fields)} fields",
                      "one value for each field, texts with blanks in quotes", line=last.line, column=last.column)
    return row


def _checked(table: _Table, file: str, line: int) -> _Table:
    for word, things in (("NUMBER_OF_FIELDS", table.fields), ("NUMBER_OF_SETS", table.sets)):
        said = table.keywords.get(word, "")
        if said and said != str(len(things)):
            raise trouble(file, f"{len(things)} where {word} says {shown(said)}", f"{word} as many as there are",
                          line=line)
    return table


def _spectra_of(table: _Table, file: str, before: int) -> list[Written]:
    names = [str(cell.value).upper() for cell in table.fields]
    named = [names.index(name) for name in NAME_FIELDS if name in names]
    families: dict[str, list[int]] = {}
    for i, name in enumerate(names):
        if i not in named and (match := BAND.fullmatch(name)):
            families.setdefault(match[1].rstrip("_"), []).append(i)
    pairs = [(i, i + 1) for i, name in enumerate(names[:-1]) if name == "SPECTRAL_NM" and names[i + 1] in PAIRED]
    found: list[Written] = []

    def add(labels: Iterable[str], wavelengths: list[Cell], values: list[Cell], scale: Scale | None) -> None:
        number = before + len(found) + 1
        found.append(Written(tuple(filter(None, labels)) or (str(number),), number, wavelengths, values,
                             _quantity(table), False, scale or NORMS.get(_norm(table)), _how(table)))

    for prefix, columns in families.items():
        scale = next((said for word, said in PAIRED.items() if prefix.endswith(word)), None)
        bands = [_band(table.fields[i]) for i in columns]
        suffix = f" {prefix}" if len(families) > 1 else ""
        for row in table.sets:
            add((f"{row[i].value}{suffix}" for i in named), bands, [row[i] for i in columns], scale)
    for key, rows in _grouped(table.sets, named, alone=len(pairs) == 1).items() if pairs else ():
        add(key, [row[i] for row in rows for i, _ in pairs], [row[i] for row in rows for _, i in pairs],
            PAIRED[names[pairs[0][1]]])
    return found


def _grouped(sets: list[list[Cell]], named: list[int], *, alone: bool) -> dict[tuple[str, ...], list[list[Cell]]]:
    """Sets that make up one spectrum: each on its own, or (one wavelength to a set) those of one name."""
    groups: dict[tuple[str, ...], list[list[Cell]]] = {}
    for n, row in enumerate(sets, 1):
        key = tuple(str(row[i].value) for i in named)
        groups.setdefault(key if alone else (*key, "" if key else str(n)), []).append(row)
    return groups


def _band(cell: Cell) -> Cell:
    match = BAND.fullmatch(str(cell.value))
    assert match
    return Cell(match[2], cell.line, cell.column)


def _norm(table: _Table) -> str:
    text = table.keywords.get("SPECTRAL_NORM", "")
    return text.rstrip("0").rstrip(".") if "." in text else text


def _quantity(table: _Table):
    said = " ".join(table.keywords.get(word, "") for word in (
        "MEASUREMENT_TYPE", "MEASUREMENT_MODE", "MEASUREMENT_SOURCE", "MEASUREMENT_GEOMETRY", "DEVICE_CLASS",
        "FILE_DESCRIPTOR", "DESCRIPTOR")).casefold()
    if "emissi" in said or "display" in said:
        return "relative_power"
    return "transmittance" if "transmi" in said and "reflect" not in said else "reflectance"


def _how(table: _Table) -> How:
    said = table.keywords
    geometry = said.get("MEASUREMENT_GEOMETRY", "")
    light = [said.get(word, "") for word in ("MEASUREMENT_SOURCE", "ILLUMINATION_NAME", "FILTER")]
    return How(geometry, said.get("INSTRUMENTATION", ""), " ".join(filter(None, light)), specular_of(geometry))
