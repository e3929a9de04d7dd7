"""Workbooks (.xlsx), opened only after the file was found to be harmless.

A workbook is a zip of XML. Before the reader library sees it, the parts it needs are unpacked under
limits, walked for their extent (one cell at XFD1048576 makes a reader reserve the whole sheet) and for
what a plain value hides: percent formats, errors, formulas without a saved value.
"""

from __future__ import annotations

import io
import posixpath
import re
import zipfile
import zlib
from collections.abc import Iterator
from datetime import date, time, timedelta
from pathlib import Path
from xml.parsers import expat

from formcheck.cells import MOST_COLUMNS, MOST_ROWS, Cell, Rows, refuse_too_large
from formcheck.documents import read_bytes
from formcheck.trouble import InputError, trouble

MOST_ENTRIES = 500
MOST_UNPACKED = 50_000_000  # with pictures and all
MOST_UNPACKED_XML = 5_000_000  # of the parts that are read
MOST_RATIO = 200  # unpacked to packed; plain sheets reach some tens
MOST_SHEETS = 30
CHUNK = 1 << 16
TOO_FAR = 10**9
NO_XML = b"<none/>"
NEEDED_PART = re.compile(r"\[Content_Types\]\.xml|_rels/\.rels|xl/[\w./-]+\.(xml|rels)", re.IGNORECASE)
CELL = re.compile(r"([A-Z]{1,4})([0-9]{1,9})")
PERCENT_FORMATS = ("9", "10")  # built-in number formats 0 % and 0.00 % (ISO/IEC 29500-1, 18.8.30)

UNREADABLE = (zipfile.BadZipFile, zlib.error, RuntimeError, NotImplementedError, ValueError, EOFError,
              OSError)
Element = tuple[str, dict[str, str]]


def sheets(path: Path | str, *, what: str, most_rows: int = MOST_ROWS,
           most_columns: int = MOST_COLUMNS) -> Iterator[tuple[str, Rows]]:
    """Name and rows of each sheet of a workbook, one after the other.

    `what` is what the file should be, for messages. A percentage comes as text ("5 %"), everything else
    as it is; a cell that cannot be used carries its flaw.

    Raises
    ------
    InputError
        not a workbook, a damaged or suspicious one, or a sheet beyond `most_rows` or `most_columns`.
    """
    file = str(path)
    parts = unpacked(read_bytes(path, what=what), file)
    part_of = sheet_parts(parts, file)
    percent_styles = _percent_styles(parts, file)
    hidden = {part: hidden_in_cells(content, part, file, percent_styles, most=(most_rows, most_columns))
              for part, content in parts.items() if part.endswith(".xml")}
    for name, values in _values(_packed_again(parts), file):
        yield name, _rows(values, hidden.get(part_of.get(name, ""), {}))


def unpacked(raw: bytes, file: str) -> dict[str, bytes]:
    """The XML parts of a workbook, unpacked under limits on their number, size and ratio."""
    try:
        with zipfile.ZipFile(io.BytesIO(raw)) as archive:
            entries = archive.infolist()
            needed = [entry for entry in entries if NEEDED_PART.fullmatch(entry.filename)]
            size, xml_size = (sum(entry.file_size for entry in some) for some in (entries, needed))
            if (len(entries) > MOST_ENTRIES or xml_size > MOST_UNPACKED_XML
                    or size > min(MOST_UNPACKED, MOST_RATIO * max(len(raw), 10_000))):
                raise trouble(
                    file, f"a workbook of {len(entries):,} parts that unpacks to {size:,} bytes "
                    f"({xml_size:,} of tables)",
                    f"at most {MOST_ENTRIES} parts and {MOST_UNPACKED_XML:,} bytes of tables")
            return {entry.filename: archive.read(entry) for entry in needed}
    except UNREADABLE as error:
        raise trouble(file, f"a file that is not a readable workbook ({str(error)[:80]})",
                      "an .xlsx workbook without a password") from None


def _packed_again(parts: dict[str, bytes]) -> io.BytesIO:
    """Only what was looked at goes on, so no header can promise one size and hold another."""
    packed = io.BytesIO()
    with zipfile.ZipFile(packed, "w") as archive:
        for name, content in parts.items():
            archive.writestr(name, content)
    packed.seek(0)
    return packed


def elements(content: bytes, part: str, file: str) -> Iterator[Element]:
    """Starts and ends (`/name`) of the elements of an XML part; a document type is refused."""
    found: list[Element] = []
    parser = expat.ParserCreate()

    def refuse(*_) -> None:
        raise trouble(file, f"a document type in {part}", "a workbook as spreadsheet programs write it")

    parser.StartDoctypeDeclHandler = refuse
    parser.StartElementHandler = lambda name, attributes: found.append((_local(name), attributes))
    parser.EndElementHandler = lambda name: found.append(("/" + _local(name), {}))
    try:
        for start in range(0, len(content) + 1, CHUNK):
            parser.Parse(content[start:start + CHUNK], start + CHUNK > len(content))
            yield from found
            found.clear()
    except (expat.ExpatError, ValueError, LookupError) as error:
        raise trouble(file, f"damaged XML in {part} ({error})",
                      "a workbook as spreadsheet programs write it") from None


def _local(name: str) -> str:
    return name.rpartition(":")[2]


def sheet_parts(parts: dict[str, bytes], file: str) -> dict[str, str]:
    """The part that holds each sheet, by the sheet's name."""
    if "xl/workbook.xml" not in parts:
        raise trouble(file, "a zip file without xl/workbook.xml", "an .xlsx workbook")
    relations = "xl/_rels/workbook.xml.rels"
    targets = {attributes.get("Id"): attributes.get("Target", "")
               for _, attributes in elements(parts.get(relations, NO_XML), relations, file)}
    found: dict[str, str] = {}
    for name, attributes in elements(parts["xl/workbook.xml"], "xl/workbook.xml", file):
        if name == "sheet":
            relation = next((value for key, value in attributes.items() if _local(key) == "id"), "")
            found[attributes.get("name", "")] = posixpath.normpath(
                posixpath.join("/xl", targets.get(relation, ""))).lstrip("/")
    if len(found) > MOST_SHEETS:
        raise trouble(file, f"{len(found)} sheets", f"at most {MOST_SHEETS} sheets")
    return found


def hidden_in_cells(content: bytes, part: str, file: str, percent_styles: set[str], *,
                    most: tuple[int, int]) -> dict[tuple[int, int], set[str]]:
    """What the plain values of a sheet hide, by (row, column): any of `percent`, `error`, `formula`.

    Raises
    ------
    InputError
        damaged XML, or a cell beyond the `most` rows and columns.
    """
    found: dict[tuple[int, int], set[str]] = {}
    row, column, (most_rows, most_columns) = 0, 0, most
    for name, attributes in elements(content, part, file):
        if name == "row":
            row, column = _number(attributes["r"]) if "r" in attributes else row + 1, 0
            refuse_too_large(row, 1, file, most_rows=most_rows, most_columns=most_columns)
        elif name == "c":
            row, column = _row_and_column(attributes["r"]) if "r" in attributes else (row, column + 1)
            refuse_too_large(row, column, file, most_rows=most_rows, most_columns=most_columns)
            if attributes.get("t") == "e":
                found.setdefault((row, column), set()).add("error")
            elif attributes.get("t", "n") == "n" and attributes.get("s", "0") in percent_styles:
                found.setdefault((row, column), set()).add("percent")
        elif name == "f":
            found.setdefault((row, column), set()).add("formula")
    return found


def _number(text: str) -> int:
    return int(text) if re.fullmatch(r"[0-9]{1,9}", text) else TOO_FAR


def _row_and_column(reference: str) -> tuple[int, int]:
    """`C4` as (4, 3); what is no reference counts as too far."""
    match = CELL.fullmatch(reference.upper())
    if not match:
        return TOO_FAR, TOO_FAR
    column = 0
    for letter in match[1]:
        column = 26 * column + ord(letter) - ord("A") + 1
    return int(match[2]), column


def _percent_styles(parts: dict[str, bytes], file: str) -> set[str]:
    """Style numbers (as cells name them) whose number format shows a percentage."""
    formats, styles, inside = set(PERCENT_FORMATS), set(), False
    n = 0
    for name, attributes in elements(parts.get("xl/styles.xml", NO_XML), "xl/styles.xml", file):
        if name == "numFmt" and "%" in re.sub(r'"[^"]*"|\\.', "", attributes.get("formatCode", "")):
            formats.add(attributes.get("numFmtId", ""))
        elif name in ("cellXfs", "/cellXfs"):
            inside = name == "cellXfs"
        elif name == "xf" and inside:
            if attributes.get("numFmtId") in formats:
                styles.add(str(n))
            n += 1
    return styles


def _values(packed: io.BytesIO, file: str) -> list[tuple[str, list[list]]]:
    """Name and values of each sheet, from the first row and column on."""
    import python_calamine

    try:
        book = python_calamine.CalamineWorkbook.from_filelike(packed)
        return [(name, book.get_sheet_by_name(name).to_python(skip_empty_area=False))
                for name in book.sheet_names]
    except InputError:
        raise
    except (KeyboardInterrupt, SystemExit):
        raise
    except BaseException as error:  # the library's own panics are no Exception
        raise trouble(file, f"a workbook that cannot be read ({str(error)[:80]})",
                      "an .xlsx workbook as spreadsheet programs write it") from None


def _rows(values: list[list], hidden: dict[tuple[int, int], set[str]]) -> Rows:
    return [[_cell(value, line, column, hidden.get((line, column), set()))
             for column, value in enumerate(row, start=1)] for line, row in enumerate(values, start=1)]


def _cell(value, line: int, column: int, hidden: set[str]) -> Cell:
    if isinstance(value, str):
        value = value.strip()
    if "error" in hidden:
        return Cell(value, line, column, "a formula that ended in an error")
    if "formula" in hidden and value in ("", None):
        return Cell(value, line, column, "a formula whose value was not saved")
    if isinstance(value, date | time | timedelta):
        return Cell(value, line, column, f"a date or time, {value}")
    if "percent" in hidden and isinstance(value, int | float):
        value = f"{value * 100:.12g} %"  # 5 % is kept as 0.05
    return Cell(value, line, column)
