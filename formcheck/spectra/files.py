"""The door for spectrum files: CSV and TSV, CGATS.17 (ISO 28178), CxF3 (ISO 17972), .xlsx.

What a file is, its content tells; what it holds is taken at its word or refused with its place. Values come as
fractions, absorbance or another quantity, wavelengths rising in nm; `grid.resample` brings them onto a grid.
"""

from __future__ import annotations

from pathlib import Path

import numpy as np

from formcheck.cells import Cell
from formcheck.documents import MOST_BYTES, read_bytes
from formcheck.spectra.layout import spectra_of_table
from formcheck.spectra.measured import MeasuredSpectrum, Quantity, Scale
from formcheck.spectra.settle import as_written, figures, settled
from formcheck.spectra.text_rows import WHAT, rows_of, text_of
from formcheck.spectra.written import Written, WrittenFile, asked_for, only_one
from formcheck.trouble import InputError, trouble

__all__ = ["MeasuredSpectrum", "read_k_and_s", "read_spectra", "read_spectrum", "read_spectrum_csv"]

MOST_XML_BYTES = 8_000_000  # a chart of some thousand patches under three lights
MOST_ROWS, MOST_COLUMNS = 10_000, 4_000  # of a sheet: a wavelength, or a sample, to a row
BEGINS_XML = (b"<", b"\xef\xbb\xbf<", b"\xff\xfe<", b"\xfe\xff\x00<")
ZIP = b"PK"
K_AND_S = "the columns wavelength_nm, K_per_um, S_per_um"


def read_spectra(path: Path | str, *, column: str | None = None, scale: Scale | None = None,
                 quantity: Quantity | None = None) -> list[MeasuredSpectrum]:
    """The spectra of a file: all of them, or the one named by `column`.

    Parameters
    ----------
    column : heading of a value column, name of a sample or object, or its number: in a table with wavelengths
        down the rows that of the column (the wavelengths are 1), elsewhere counted from 1.
    scale : percent or fraction, for a reflectance or transmittance whose file does not say.
    quantity : what the caller takes the file to hold; needed where the file does not say.

    Returns
    -------
    list of MeasuredSpectrum
        at least one, in the order of the file.

    Raises
    ------
    InputError
        with file:line:column: no such file, too large, binary, empty, damaged, cut off or hostile; what is no
        finite number; wavelengths that turn back, repeat or cannot be nm; percent or fraction not settled by
        the file, mixed, or impossible; a quantity other than asked for; a name that is not there.
    """
    written = read_written(path)
    return [settled(written, one, scale=scale, quantity=quantity) for one in asked_for(written, column)]


def read_spectrum(path: Path | str, *, column: str | None = None, scale: Scale | None = None,
                  quantity: Quantity | None = None) -> MeasuredSpectrum:
    """The spectrum of a file that holds one, or the one named by `column`; else as `read_spectra`."""
    written = read_written(path)
    return settled(written, _one(written, column), scale=scale, quantity=quantity)


def read_spectrum_csv(path: Path | str, *, column: str | None = None) -> MeasuredSpectrum:
    """One spectrum with its values as they stand in the file; no quantity or scale is asked for."""
    written = read_written(path)
    return as_written(written, _one(written, column))


def read_k_and_s(path: Path | str) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    """K and S of a pigment from a table with the columns wavelength, K (or K_per_um) and S (or S_per_um).

    Returns wavelengths (N,) [nm], rising, and K and S (N,) [1/um of pigment volume].

    Raises
    ------
    InputError
        as `read_spectra`; also K or S below 0, or no columns of these names.
    """
    written = read_written(path)
    wavelength_nm, k = _constant(written, "K")
    _, s = _constant(written, "S")
    order = slice(None, None, -1 if wavelength_nm[0] > wavelength_nm[-1] else 1)
    return wavelength_nm[order].copy(), k[order].copy(), s[order].copy()


def _one(written: WrittenFile, column: str | None) -> Written:
    return only_one(written) if column is None else asked_for(written, column)[0]


def _constant(written: WrittenFile, symbol: str) -> tuple[np.ndarray, np.ndarray]:
    asked = (symbol.casefold(), f"{symbol}_per_um".casefold())
    one = next((one for one in written.spectra if one.names[0].casefold() in asked), None)
    if one is None:
        listed = ", ".join([written.wavelength_heading, *written.names])
        raise trouble(written.file, f"the columns {listed[:200]}", K_AND_S, line=written.line)
    wavelength_nm, values = figures(written, one)
    if (values < 0).any():
        cell = one.values[int(np.argmax(values < 0))]
        raise written.refused(cell, f"{symbol} of {cell.value}", f"{symbol} of 0 or more")
    return wavelength_nm, values


# --- which reader ---------------------------------------------------------------------------------------


def read_written(path: Path | str) -> WrittenFile:
    """The spectra of a file as written; the format is known by the content, and by .xlsx and .cxf."""
    path, file = Path(path), str(path)
    suffix = path.suffix.lower()
    raw = read_bytes(path, most_bytes=MOST_XML_BYTES, what=WHAT)
    if raw.startswith(ZIP) or suffix == ".xlsx":
        return _read_workbook(path)
    if suffix == ".cxf" or raw[:200].lstrip().startswith(BEGINS_XML) or raw.startswith(b"<\x00"):
        from formcheck.spectra.read_cxf import read_cxf  # XML is only loaded for a file of it

        return read_cxf(raw, file)
    if len(raw) > MOST_BYTES:
        raise trouble(file, f"{len(raw):,} bytes", f"{WHAT} of at most {MOST_BYTES:,} bytes")
    text = text_of(raw, file)
    from formcheck.spectra.read_cgats import is_cgats, read_cgats

    if is_cgats(text):
        return read_cgats(text, file)
    rows, comments, decimal_comma = rows_of(text)
    return spectra_of_table(rows, comments, file, decimal_comma=decimal_comma)


def _read_workbook(path: Path) -> WrittenFile:
    """The first sheet that holds a table of spectra; InputError of the first sheet where none does."""
    from formcheck.workbook import sheets  # zip and XML are only loaded for a workbook

    first_error: InputError | None = None
    for _, rows in sheets(path, what=WHAT, most_rows=MOST_ROWS, most_columns=MOST_COLUMNS):
        try:
            return spectra_of_table(_without_margins(rows), [], str(path), decimal_comma=True)
        except InputError as error:
            first_error = first_error or error
    raise first_error or trouble(str(path), "a workbook without a sheet", WHAT)


def _without_margins(rows: list[list[Cell]]) -> list[list[Cell]]:
    """Rows without empty ones, and without empty columns to the left and cells to the right of all."""
    rows = [row for row in rows if not all(cell.empty for cell in row)]
    left = min((next(i for i, cell in enumerate(row) if not cell.empty) for row in rows), default=0)
    return [row[left:len(row) - next(i for i, cell in enumerate(reversed(row)) if not cell.empty)] for row in rows]
