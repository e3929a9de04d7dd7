"""Percent or fraction: settled by the file or by the one who gives it, never guessed in silence.

1. `scale` as asked for wins; where the file says otherwise, a note tells.
2. Else the file: a per cent sign in the cells, a word in heading or notes, the keyword or the standard of the format.
3. Else, where no value of the file is above `PLAINLY_A_FRACTION`, the definition of the quantity: reflectance and
   transmittance are ratios (CIE S 017, ILV). A note tells.
4. Else it is asked for.
"""

from __future__ import annotations

import numpy as np

from formcheck.cells import Cell
from formcheck.spectra.measured import Scale
from formcheck.spectra.written import Written, WrittenFile, is_percent
from formcheck.trouble import InputError, Place, Problem

PLAINLY_A_FRACTION = 1.1  # a good white may read a little above 1
LEAST, MOST = -0.1, 3.0  # as a fraction: the bounds of a ReflectanceSpectrum in the CxF3 schema
LN_100 = float(np.log(100.0))
NEAR = 0.3  # in ln: how near to a factor of 100 a jump must be, and how level its two sides
GIVE = "`scale: percent` or `scale: fraction`, or a heading such as `reflectance (%)` or `reflectance (0 to 1)`"


class ScaleNotSettled(InputError):
    """Percent or fraction must be said; whoever named the file can tell where."""


def as_fractions(written: WrittenFile, one: Written, values: np.ndarray, asked: Scale | None
                 ) -> tuple[np.ndarray, list[str]]:
    """Values as fractions, and what to say of how the scale was settled; InputError where it is not."""
    said = _said(written, one)
    _refuse_mixed(written, one, values)
    notes = []
    scale = asked or said
    if asked and said and asked != said:
        notes.append(f"read as {asked} as asked for, although the file says {said}")
    if scale is None:
        most = written.highest[one.quantity]
        if most > PLAINLY_A_FRACTION:
            cell = one.values[int(np.argmax(values))]
            raise ScaleNotSettled(written.refused(
                cell, f"values up to {most:.4g} and no word on whether they are percent or a fraction", GIVE).problems)
        scale = "fraction"
        notes.append(f"no unit stated: read as a fraction of 1, as no value is above {PLAINLY_A_FRACTION:g}")
    elif scale == "percent" and not asked and written.highest[one.quantity] <= PLAINLY_A_FRACTION:
        notes.append(f"stated as percent although no value is above {PLAINLY_A_FRACTION:g} %")
    fractions = values / 100.0 if scale == "percent" else values
    _refuse_impossible(written, one, fractions, scale)
    if (fractions < 0).any():
        notes.append(f"below 0 at {int((fractions < 0).sum())} wavelengths, as noise or a zero that is off makes it")
    return fractions, notes


def _said(written: WrittenFile, one: Written) -> Scale | None:
    signs = [is_percent(cell) for cell in one.values]
    if any(signs) and not all(signs):
        odd = one.values[signs.index(not signs[0])]
        raise written.refused(odd, f"{odd.value} {'without' if signs[0] else 'with'} a per cent sign, unlike "
                              f"{one.values[0].value} before it", "one unit throughout")
    return "percent" if signs and signs[0] else one.scale


def _refuse_mixed(written: WrittenFile, one: Written, values: np.ndarray) -> None:
    """InputError for a jump by a factor of 100 between two level stretches: percent beside fractions."""
    with np.errstate(divide="ignore", invalid="ignore"):
        jumps = np.diff(np.log(values))
    for i in np.flatnonzero(np.abs(np.abs(jumps) - LN_100) < NEAR):
        beside = np.abs(np.concatenate([jumps[max(0, i - 2):i], jumps[i + 1:i + 3]]))
        if beside.size >= 2 and (beside < NEAR).all():
            before, after = one.values[i], one.values[i + 1]
            raise written.refused(after, f"{_shown(after)} right after {_shown(before)}: percent and fractions mixed",
                                  "one unit throughout")


def _refuse_impossible(written: WrittenFile, one: Written, fractions: np.ndarray, scale: str) -> None:
    bad = np.flatnonzero((fractions <= LEAST) | (fractions >= MOST))
    if bad.size:
        cell = one.values[bad[0]]
        hint = "; values in percent need `scale: percent`" if scale == "fraction" and fractions[bad[0]] > 0 else ""
        raise written.refused(cell, f"{_shown(cell)} as {'percent' if scale == 'percent' else 'a fraction'}",
                              f"{'0 to 100' if scale == 'percent' else '0 to 1'}{hint}")


def refuse_scale(written: WrittenFile, one: Written, what: str) -> InputError:
    """The error of a scale asked for where there is none."""
    place = Place(written.file, written.line)
    return InputError(Problem(place, f"`scale` with {what} of {one.names[0][:60]!r}",
                              "`scale` with reflectance or transmittance alone"))


def _shown(cell: Cell) -> str:
    return str(cell.value)[:40]
