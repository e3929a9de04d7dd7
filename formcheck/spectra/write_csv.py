"""Spectra as a CSV table: wavelengths down the rows, a column to each spectrum, what is known of them above."""

from __future__ import annotations

import re
from collections.abc import Sequence
from pathlib import Path

import numpy as np

from formcheck.files_out import write_text
from formcheck.spectra.measured import RATIOS, MeasuredSpectrum
from formcheck.trouble import trouble

TOLD = ("geometry", "instrument", "illumination")


def write_spectra_csv(path: Path | str, spectra: Sequence[MeasuredSpectrum]) -> None:
    """Write spectra of one quantity on the same wavelengths; `read_spectra` gives the same numbers back.

    Reflectance and transmittance are written as fractions, and the file says so. Geometry, instrument and
    illumination are written where all spectra share them.

    Raises
    ------
    InputError
        no spectra, several quantities or several sets of wavelengths, or a place that cannot be written to.
    """
    write_text(Path(path), csv_text(spectra, str(path)))


def csv_text(spectra: Sequence[MeasuredSpectrum], file: str) -> str:
    """The text of such a file; InputError as for `write_spectra_csv`."""
    _refuse_unlike(spectra, file)
    first = spectra[0]
    lines = [f"# quantity: {first.quantity}"] * (first.quantity is not None)
    lines += ["# scale: fraction"] * (first.quantity is None or first.quantity in RATIOS)
    lines += [f"# {word}: {said}" for word in TOLD if (said := one_line(_shared(spectra, word) or ""))]
    specular = _shared(spectra, "specular_included")
    lines += [f"# specular: {'included' if specular else 'excluded'}"] * (specular is not None)
    names = [quoted(one_line(one.name) or str(n)) for n, one in enumerate(spectra, 2)]
    lines.append(",".join(["wavelength_nm", *names]))
    columns = [first.wavelength_nm, *(one.values for one in spectra)]
    lines += [",".join(repr(float(value)) for value in row) for row in zip(*columns, strict=True)]
    return "\n".join(lines) + "\n"


def _refuse_unlike(spectra: Sequence[MeasuredSpectrum], file: str) -> None:
    if not spectra:
        raise trouble(file, "no spectra to write", "at least one")
    for one in spectra[1:]:
        if one.quantity != spectra[0].quantity:
            raise trouble(file, f"{one.quantity} beside {spectra[0].quantity}", "one quantity to a file")
        if not np.array_equal(one.wavelength_nm, spectra[0].wavelength_nm):
            raise trouble(file, f"other wavelengths for {one.name[:60]!r} than for {spectra[0].name[:60]!r}",
                          "spectra on the same wavelengths, or a file for each")


def _shared(spectra: Sequence[MeasuredSpectrum], word: str):
    said = {getattr(one, word) for one in spectra}
    return said.pop() if len(said) == 1 else None


def one_line(text: str) -> str:
    """A text on one line, without control characters."""
    return re.sub(r"[\x00-\x1f\x7f-\x9f\u2028\u2029\ufeff]+", " ", text).strip()


def quoted(name: str) -> str:
    return '"' + name.replace('"', '""') + '"' if re.search(r'[",;\t#]|^\s|\s$', name) else name
