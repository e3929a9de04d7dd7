"""Amounts that cannot be: each refused at its line, with what would be right."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from formcheck.recipe.balance import COLUMN, Equation, F, Floats, Solution, T, V, apply, undetermined
from formcheck.recipe.lines import Lines
from formcheck.trouble import InputError
from formcheck.units import UnitKind

CLOSE = 0.005  # of amounts to their whole: rounding in a maker's percentages
CLOSE_BY_VOLUME = 0.05  # where volumes enter, which are not quite additive (ethanol and water lose 3.6 %)
WHOLE: tuple[tuple[UnitKind, str], ...] = (("mass_fraction", "% w/w"), ("volume_fraction", "% v/v"))
ONE_TO_MAKE_UP = "one ingredient `to make up`"


def refuse_impossible(lines: Lines, values: Floats) -> None:
    """InputError for amounts (R, L) that no batch size could make right."""
    rests, parts = lines_of_kind(lines, "rest"), lines_of_kind(lines, "parts")
    if len(rests) > 1:
        raise lines.refuse(rests[1], f"a second ingredient {lines.written[rests[1]]!r}", ONE_TO_MAKE_UP)
    if rests and parts:
        raise lines.refuse(parts[0], f"parts beside {lines.names[rests[0]]} {lines.written[rests[0]]!r}",
                           "parts, or one ingredient to make up: both together do not say how much of each")
    empty = values.sum(axis=1) <= 0
    if empty.any():
        raise lines.refuse(None, "amounts that come to nothing" + variant(empty), "an amount above zero")
    for kind, symbol in WHOLE:
        _refuse_over_whole(lines, values, kind, symbol)
    _refuse_no_room(lines, values)


def lines_of_kind(lines: Lines, kind: UnitKind) -> list[int]:
    return [n for n, other in enumerate(lines.kinds) if other == kind]


def variant(bad: NDArray[np.bool_]) -> str:
    """Which of several variants of a recipe is the first bad one; nothing for a single recipe."""
    return f" (variant {int(np.argmax(bad)) + 1} of {len(bad)})" if len(bad) > 1 else ""


def _refuse_over_whole(lines: Lines, values: Floats, kind: UnitKind, symbol: str) -> None:
    at = lines_of_kind(lines, kind)
    running = np.cumsum(values[:, at], axis=1)
    over = running[:, -1:].max(axis=1, initial=0) > 1 + CLOSE
    if over.any():
        row = running[np.argmax(over)]
        line = at[int(np.argmax(row > 1 + CLOSE))]
        found = f"percentages that come to {100 * row[-1]:.5g} {symbol} in all{variant(over)}"
        raise lines.refuse(line, found, f"at most 100 {symbol} in all")


def _refuse_no_room(lines: Lines, values: Floats) -> None:
    """100 % w/w leaves nothing for lines of other kinds; a rest may be nothing."""
    shares = values[:, lines_of_kind(lines, "mass_fraction")].sum(axis=1)
    others = [n for n, kind in enumerate(lines.kinds) if kind not in ("mass_fraction", "rest")]
    full = (shares >= 1 - 1e-9) & (values[:, others] > 0).any(axis=1)
    if full.any():
        line = next(n for n in others if values[np.argmax(full), n] > 0)
        raise lines.refuse(line, f"{lines.written[line]!r} beside percentages that come to "
                           f"{100 * shares[np.argmax(full)]:.5g} % w/w{variant(full)}",
                           "percentages below 100 % w/w, which leave room for it")


def brought_to_whole(lines: Lines, values: Floats) -> tuple[Floats, str]:
    """Percentages that are all there is, brought to exactly 100 %, with a note when that changed them.

    Raises
    ------
    InputError
        they miss 100 % by more than `CLOSE`.
    """
    for kind, symbol in WHOLE:
        if any(other != kind for other in lines.kinds):
            continue
        sums = values.sum(axis=1)
        off = np.abs(sums - 1) > CLOSE
        if off.any():
            found = f"percentages that sum to {100 * sums[np.argmax(off)]:.5g} {symbol}{variant(off)}"
            raise lines.refuse(None, found, f"100 {symbol} (within {100 * CLOSE:g}), or {ONE_TO_MAKE_UP}")
        note = ""
        if np.abs(sums - 1).max() > 1e-9:
            note = f"The percentages sum to {100 * sums[0]:.5g} and were brought to 100 {symbol}."
        return values / sums[:, None], note
    return values, ""


def refuse_unsolvable(lines: Lines, solution: Solution) -> None:
    """InputError where the balance leaves the batch size open, or has no answer, or a negative one."""
    free = next((n for n, kind in enumerate(lines.kinds) if COLUMN[kind] == F), None)
    if undetermined(solution.system, lines.kinds):
        written = repr(lines.written[free]) if free is not None else "amounts"
        raise lines.refuse(free, f"{written} without a batch size, beside amounts in g or mL",
                           "`batch: 1 kg` or the like above, or no amounts in g or mL")
    refuse_negative_free_amount(lines, solution, free)
    totals = solution.x[:, [T, V]]
    wholly_known = all(equation.usable for equation in solution.system)
    bad: NDArray[np.bool_] = np.any(~(totals > 0) if wholly_known else totals <= 0, axis=1)
    if bad.any():
        raise lines.refuse(None, f"amounts that no batch can hold together{variant(bad)}",
                           f"amounts that leave each other room, or {ONE_TO_MAKE_UP}")
    for equation in solution.system:
        _refuse_mismatch(lines, solution, equation)
    _refuse_more_than_batch(lines, solution)


def _refuse_more_than_batch(lines: Lines, solution: Solution) -> None:
    """InputError where what is known by mass outweighs the batch, whatever the unknown ingredients weigh."""
    known, whole = np.nan_to_num(solution.mass_g, nan=0.0).sum(axis=1), solution.total_mass_g
    over = known > (1 + CLOSE_BY_VOLUME) * whole
    if over.any() and lines.batch is not None:
        row = int(np.argmax(over))
        raise lines.refuse_batch(
            f"a batch of {lines.batch.written}, {whole[row]:.5g} g, with {known[row]:.5g} g in it{variant(over)}",
            f"a larger batch, or {ONE_TO_MAKE_UP}")


def refuse_negative_free_amount(lines: Lines, solution: Solution, free: int | None) -> None:
    """InputError for a rest, or parts, that the other ingredients leave less than nothing for."""
    bad = solution.x[:, F] < 0
    if free is None or not bad.any():
        return
    row = int(np.argmax(bad))
    total = solution.x[row, T]
    others = total - solution.mass_g[row, [n for n, k in enumerate(lines.kinds) if COLUMN[k] == F]].sum()
    raise lines.refuse(
        free, f"{lines.written[free]!r} where the other ingredients come to {others:.5g} g "
        f"in a batch of {total:.5g} g{variant(bad)}",
        "other ingredients that come to less, or a larger batch")


def _refuse_mismatch(lines: Lines, solution: Solution, equation: Equation) -> None:
    """InputError where amounts that say it all do not come to the batch they are said to be."""
    if equation.name not in ("masses", "volumes") or not equation.usable:
        return
    column, unit = (T, "g") if equation.name == "masses" else (V, "mL")
    whole = solution.x[:, column]
    come_to = apply(equation.form, solution.x) + whole
    off = np.abs(come_to - whole) > _tolerance(lines, equation) * whole
    if not off.any():
        return
    row = int(np.argmax(off))
    if lines.batch is None:
        raise _not_whole(lines, come_to[row] / whole[row], equation.name, off)
    found = (f"a batch of {lines.batch.written}, {whole[row]:.5g} {unit}, whose ingredients come to "
             f"{come_to[row]:.5g} {unit}{variant(off)}")
    raise lines.refuse_batch(found, f"`batch: {come_to[row]:.5g} {unit}`, or {ONE_TO_MAKE_UP}")


def _not_whole(lines: Lines, share: float, what: str, off: NDArray[np.bool_]) -> InputError:
    return lines.refuse(None, f"amounts whose {what} come to {100 * share:.5g} % of the whole{variant(off)}",
                        f"100 %, or {ONE_TO_MAKE_UP}")


def _tolerance(lines: Lines, equation: Equation) -> float:
    by_mass_alone = equation.name == "masses" and not (lines.batch and lines.batch.kind == "volume")
    return CLOSE if by_mass_alone and V not in equation.unknowns else CLOSE_BY_VOLUME
