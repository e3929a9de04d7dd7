"""From a spectrum as written to one that can be used: numbers, wavelengths in order, quantity, scale, notes."""

from __future__ import annotations

from typing import get_args

import numpy as np

from formcheck.spectra.fluorescence import fluorescence_signs
from formcheck.spectra.headings import LONGEST_NM, SHORTEST_NM
from formcheck.spectra.measured import ABSORPTION, RATIOS, MeasuredSpectrum, Quantity, Scale
from formcheck.spectra.ranges import step_notes
from formcheck.spectra.scale import as_fractions, refuse_scale
from formcheck.spectra.written import Written, WrittenFile, number
from formcheck.trouble import trouble

NOT_SAID = ("a heading or a note such as `reflectance (%)` or `absorbance`; or say what it is where the file is named "
            "(`scale: percent` or `scale: fraction` for a reflectance)")


def settled(written: WrittenFile, one: Written, *, scale: Scale | None, quantity: Quantity | None
            ) -> MeasuredSpectrum:
    """The spectrum, wavelengths rising, with its notes.

    Raises
    ------
    InputError
        what is no number, wavelengths that turn back, repeat or cannot be nm; a quantity other than the one
        asked for, or unknown; percent or fraction unsettled, mixed or impossible.
    """
    what = _quantity(written, one, quantity, scale)
    wavelength_nm, values = figures(written, one)
    notes = list(one.notes)
    if what in RATIOS or what is None:
        values, said = as_fractions(written, one, values, scale)
        notes += said
    elif scale:
        raise refuse_scale(written, one, what)
    if wavelength_nm[0] > wavelength_nm[-1]:
        wavelength_nm, values = wavelength_nm[::-1].copy(), values[::-1].copy()
    notes += step_notes(wavelength_nm)
    if what == "reflectance":
        notes += fluorescence_signs(wavelength_nm, values)
    return MeasuredSpectrum(one.names[0], wavelength_nm, values, what, **vars(one.how), notes=tuple(notes),
                            names=written.names, file=written.file)


def as_written(written: WrittenFile, one: Written) -> MeasuredSpectrum:
    """The spectrum with its values as they stand in the file, wavelengths rising; no scale is settled."""
    wavelength_nm, values = figures(written, one)
    order = slice(None, None, -1 if wavelength_nm[0] > wavelength_nm[-1] else 1)
    return MeasuredSpectrum(one.names[0], wavelength_nm[order].copy(), values[order].copy(), one.quantity,
                            **vars(one.how), notes=one.notes, names=written.names, file=written.file)


def figures(written: WrittenFile, one: Written) -> tuple[np.ndarray, np.ndarray]:
    """Wavelengths (all rising or all falling) and values, shape (N,) each; InputError with the place."""
    if not one.values:
        raise trouble(written.file, f"no values for {one.names[0][:60]!r}", "a value for each wavelength",
                      line=written.line)
    key = id(one.wavelengths)  # samples of one table share theirs
    wavelength_nm = written.checked.get(key)
    if wavelength_nm is None:
        wavelength_nm = written.checked[key] = _wavelengths(written, one)
    expected = f"a finite number for {one.names[0][:60]!r}; leave out what was not measured"
    return wavelength_nm.copy(), np.array([number(written, cell, expected) for cell in one.values])


def _wavelengths(written: WrittenFile, one: Written) -> np.ndarray:
    cells = one.wavelengths
    found = np.array([number(written, cell, "a wavelength in nm") for cell in cells])
    for cell, nm in zip(cells, found, strict=True):
        if not SHORTEST_NM <= nm <= LONGEST_NM:
            raise written.refused(cell, f"a wavelength of {cell.value}", f"{SHORTEST_NM:g} to {LONGEST_NM:g} nm")
    direction = np.sign(found[-1] - found[0]) or 1.0
    for before, cell, step in zip(cells, cells[1:], np.diff(found), strict=False):
        if step == 0:
            raise written.refused(cell, f"{cell.value} nm a second time (before in line {before.line})",
                                  "each wavelength once")
        if step * direction < 0:
            raise written.refused(cell, f"{cell.value} nm after {before.value} nm",
                                  "wavelengths that rise, or fall, throughout")
    return found


def _quantity(written: WrittenFile, one: Written, asked: Quantity | None, scale: Scale | None) -> Quantity | None:
    if asked is not None and asked not in get_args(Quantity):
        raise ValueError(f"quantity {asked!r}; expected one of {', '.join(get_args(Quantity))}")
    said = one.quantity
    if asked and said and said != asked and one.quantity_is_sure and not (
            said in ABSORPTION and asked in ABSORPTION):
        raise trouble(written.file, f"{_shown(said)} in {one.names[0][:60]!r}", _shown(asked), line=written.line)
    if asked or said:
        return asked or said
    if scale or one.scale:
        return None
    raise trouble(written.file, f"nothing that says what {one.names[0][:60]!r} holds", NOT_SAID, line=written.line)


def _shown(quantity: Quantity) -> str:
    return quantity.split("_")[0] if quantity in ABSORPTION else quantity.replace("_", " ")
