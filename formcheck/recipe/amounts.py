"""From amounts as written to masses, as far as the densities allow.

Everything is linear in the total mass, the total volume and the mass of a part (see balance.py).
Volumes are taken as additive unless the density of the mixture was measured. A density that is not known
is not guessed: what hangs on it is NaN with the reason, save that ingredients which together weigh less
than `SMALL_SHARE` may take any volume between the lightest and the densest of matter; the spread that
gives is carried along as low and high.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, fields, replace

import numpy as np
from numpy.typing import NDArray

from formcheck.recipe import amount_checks as checks
from formcheck.recipe.balance import BY_VOLUME, COLUMN, F, Floats, Solution, T, V, settle
from formcheck.recipe.lines import SPECIFIC_VOLUME_RANGE_ML_G, Lines
from formcheck.recipe.reasons import Reason, notes_for, reasons_for
from formcheck.units import Amount, UnitKind

SMALL_SHARE = 0.02

DEFAULT_MASS = Amount(100.0, "mass", "100 g")
DEFAULT_VOLUME = Amount(1000.0, "volume", "1 L")


@dataclass(frozen=True)
class Resolved:
    """Masses of R recipes of L lines. `*_low` and `*_high` bound what is not known exactly.

    An unknown mass or fraction is NaN; its bounds are never NaN (0 and inf, 0 and 1 where nothing is
    known). A total that is unknown is NaN, its bounds too.
    """

    mass_g: Floats  # (R, L)
    mass_low_g: Floats
    mass_high_g: Floats
    mass_fraction: Floats
    mass_fraction_low: Floats
    mass_fraction_high: Floats
    total_mass_g: Floats  # (R,)
    total_volume_ml: Floats
    total_volume_low_ml: Floats
    total_volume_high_ml: Floats
    notes: tuple[tuple[str, ...], ...]
    reasons: tuple[tuple[Reason, ...], ...]


def resolve(lines: Lines, *, kinds: Sequence[UnitKind] | None = None,
            values: Floats | None = None) -> Resolved:
    """Masses, totals and what could not be told.

    Parameters
    ----------
    lines
        The recipe's lines.
    kinds : (L,), values : (R, L), optional
        Amounts in place of those written, for a sweep: values in the base unit of their kind, 1 for
        the rest.

    Raises
    ------
    InputError
        amounts that contradict each other or the batch size, or do not say how much there is.
    """
    lines = lines if kinds is None else replace(lines, kinds=tuple(kinds))
    values = lines.values[None, :] if values is None else values
    checks.refuse_impossible(lines, values)
    groups = []
    for rows, present in _by_lines_present(values > 0):
        groups.append((rows, present, _resolve_present(lines.only(present), values[rows][:, present])))
    return _gathered(groups, shape=values.shape)


def _by_lines_present(present: NDArray[np.bool_]) -> list[tuple[NDArray[np.intp], NDArray[np.bool_]]]:
    """Recipes (R, L) grouped by the lines of which they hold anything: rows and pattern of each group."""
    groups = [(np.arange(len(present)), present[0])]
    for line in np.flatnonzero((present != present[0]).any(axis=0)):  # few lines come and go in a sweep
        split = []
        for rows, _ in groups:
            has = present[rows, line]
            split += [(some, present[some[0]]) for some in (rows[has], rows[~has]) if len(some)]
        groups = split
    return groups


Group = tuple[NDArray[np.intp], NDArray[np.bool_], Resolved]


def _gathered(groups: list[Group], *, shape: tuple[int, int]) -> Resolved:
    """Groups of recipes put back in order; a line of nothing has a mass of nothing."""
    if len(groups) == 1 and groups[0][1].all():
        return groups[0][2]
    arrays: dict[str, Floats] = {}
    words: dict[str, list] = {"notes": [()] * shape[0], "reasons": [()] * shape[0]}
    for rows, present, solved in groups:
        for field in fields(Resolved):
            value = getattr(solved, field.name)
            if field.name in words:
                for row, said in zip(rows, value, strict=True):
                    words[field.name][row] = said
            elif value.ndim == 2:
                arrays.setdefault(field.name, np.zeros(shape))[np.ix_(rows, np.flatnonzero(present))] = value
            else:
                arrays.setdefault(field.name, np.zeros(shape[0]))[rows] = value
    return Resolved(**arrays, notes=tuple(words["notes"]), reasons=tuple(words["reasons"]))


def _resolve_present(lines: Lines, values: Floats) -> Resolved:
    """`resolve` for recipes in which every line holds something."""
    batch, batch_note = batch_size(lines)
    values, share_note = checks.brought_to_whole(lines, values)
    exact = _settle(lines, values, batch, lines.specific_volume_ml_g)
    checks.refuse_unsolvable(lines, exact)
    trials, small = _with_small_unknowns(lines, values, batch, exact)
    middle = trials[0]
    mass = np.where(_lacking(lines) & _by_volume(lines) | lines.heaped, np.nan, middle.mass_g)
    mass_low, mass_high = _mass_bounds(lines, values, trials, small)
    fraction = mass / middle.total_mass_g[:, None]
    fraction_low, fraction_high = _fraction_bounds(fraction, mass_low, mass_high, trials, small)
    volumes = np.stack([trial.total_volume_ml for trial in trials])
    said = [note for note in (batch_note, share_note) if note]
    notes, reasons = _words(lines, mass, middle, small, said)
    return Resolved(mass, mass_low, mass_high, fraction, fraction_low, fraction_high, middle.total_mass_g,
                    middle.total_volume_ml, volumes.min(axis=0), volumes.max(axis=0), notes, reasons)


def _lacking(lines: Lines) -> NDArray[np.bool_]:
    return np.array([bool(why) for why in lines.lacks])


def _by_volume(lines: Lines) -> NDArray[np.bool_]:
    return np.array([kind in BY_VOLUME for kind in lines.kinds])


def batch_size(lines: Lines) -> tuple[Amount | None, str]:
    """The batch as written; a round one with a note where every amount is relative; else none."""
    columns = {COLUMN[kind] for kind in lines.kinds}
    relative = not any(kind in ("mass", "volume") for kind in lines.kinds)
    if lines.batch or not relative:
        return lines.batch, ""
    by_volume = V in columns and T not in columns and "parts" not in lines.kinds
    batch = DEFAULT_VOLUME if by_volume else DEFAULT_MASS
    return batch, f"Reckoned for {batch.written}: no batch size is given and every amount is relative."


def _settle(lines: Lines, values: Floats, batch: Amount | None, specific_volume_ml_g: Floats) -> Solution:
    return settle(lines.kinds, values, specific_volume_ml_g=specific_volume_ml_g, heaped=lines.heaped,
                  batch=batch, density_g_cm3=lines.density_g_cm3)


def _with_small_unknowns(lines: Lines, values: Floats, batch: Amount | None,
                         exact: Solution) -> tuple[list[Solution], NDArray[np.bool_]]:
    """The balance at the least, middle and largest volume of what has no density, where that is little.

    Returns
    -------
    trials, small : solutions, (R,)
        The middle one comes first, then the corners of the range: what is given by volume gets heavier
        where what is given by mass takes less room. `small` tells the recipes for which the trials
        stand; the others keep their exact solution.
    """
    lacking = _lacking(lines)
    unknown = np.isnan(exact.mass_g).any() or np.isnan(exact.x[:, [T, V]]).any()
    if not lacking.any() or lines.heaped.any() or not unknown:
        return [exact], np.zeros(len(values), dtype=np.bool_)
    low, high = SPECIFIC_VOLUME_RANGE_ML_G
    middle = (low + high) / 2
    trials = [
        _settle(lines, values, batch,
                np.where(lacking, np.where(_by_volume(lines), s, other_s), lines.specific_volume_ml_g))
        for s, other_s in ((middle, middle), (low, low), (low, high), (high, low), (high, high))]
    shares = np.stack([trial.mass_g[:, lacking].sum(axis=1) / trial.total_mass_g for trial in trials])
    sound = np.stack([(trial.x[:, [T, V]] > 0).all(axis=1) & ~(trial.x[:, F] < 0) for trial in trials])
    small: NDArray[np.bool_] = np.all((shares < SMALL_SHARE) & sound, axis=0)
    return [_chosen(small, trial, exact) for trial in trials], small


def _chosen(where: NDArray[np.bool_], first: Solution, second: Solution) -> Solution:
    column = where[:, None]
    return Solution(first.system, np.where(column, first.x, second.x),
                    np.where(column, first.mass_g, second.mass_g),
                    np.where(where, first.total_mass_g, second.total_mass_g))


def _mass_bounds(lines: Lines, values: Floats, trials: Sequence[Solution],
                 small: NDArray[np.bool_]) -> tuple[Floats, Floats]:
    """Bounds of each mass (R, L): from the trials where they stand, else from what is given by itself."""
    masses = np.stack([trial.mass_g for trial in trials])
    low, high = masses.min(axis=0), masses.max(axis=0)
    most = np.full(values.shape, np.inf)
    for n, kind in enumerate(lines.kinds):
        if kind == "volume":  # no more than the densest matter in that volume
            s = SPECIFIC_VOLUME_RANGE_ML_G[0] if lines.lacks[n] else lines.specific_volume_ml_g[n]
            most[:, n] = values[:, n] / s
    low, high = np.where(np.isnan(low), 0.0, low), np.where(np.isnan(high), most, high)
    total = np.fmax.reduce(np.stack([trial.total_mass_g for trial in trials]))
    left = np.where(np.isnan(total), np.inf, total)[:, None] - (low.sum(axis=1, keepdims=True) - low)
    return low, np.where(small[:, None], high, np.minimum(high, np.maximum(left, low)))


def _fraction_bounds(fraction: Floats, mass_low: Floats, mass_high: Floats, trials: Sequence[Solution],
                     small: NDArray[np.bool_]) -> tuple[Floats, Floats]:
    """Bounds of each mass fraction (R, L).

    Each mass against the most and the least that the others can weigh, and against the total where that
    is known; a fraction that is known is its own bounds.
    """
    others_low = mass_low.sum(axis=1, keepdims=True) - mass_low
    others_high = _sum_of_others(mass_high)
    with np.errstate(invalid="ignore", divide="ignore"):
        low = np.nan_to_num(mass_low / (mass_low + others_high), nan=0.0)
        high = np.nan_to_num(mass_high / (mass_high + others_low), nan=1.0)  # inf / inf
        total = trials[0].total_mass_g[:, None]
        low = np.fmax(low, mass_low / total)
        high = np.fmin(high, mass_high / total)
        shares = np.stack([trial.mass_g / trial.total_mass_g[:, None] for trial in trials])
    low = np.where(small[:, None], shares.min(axis=0), np.where(np.isnan(fraction), low, fraction))
    high = np.where(small[:, None], shares.max(axis=0), np.where(np.isnan(fraction), high, fraction))
    return np.clip(low, 0.0, 1.0), np.clip(high, 0.0, 1.0)


def _sum_of_others(masses: Floats) -> Floats:
    """Sum of all other entries of the row, for each entry; infinite entries count for the others alone."""
    infinite = np.isinf(masses)
    finite = np.where(infinite, 0.0, masses)
    sums = finite.sum(axis=1, keepdims=True) - finite
    others_infinite = infinite.sum(axis=1, keepdims=True) - infinite > 0
    return np.where(others_infinite, np.inf, sums)


def _words(lines: Lines, mass_g: Floats, solution: Solution, small: NDArray[np.bool_],
           said: Sequence[str]) -> tuple[tuple[tuple[str, ...], ...], tuple[tuple[Reason, ...], ...]]:
    """Notes and reasons of each recipe; they differ only by whether the small unknowns were allowed for."""
    notes: dict[bool, tuple[str, ...]] = {}
    reasons: dict[bool, tuple[Reason, ...]] = {}
    for is_small in {bool(flag) for flag in small}:
        row = int(np.argmax(small == is_small))
        volume = float(solution.total_volume_ml[row])
        notes[is_small] = notes_for(lines, total_volume_ml=volume, small_unknowns=is_small, said=said)
        reasons[is_small] = reasons_for(lines, mass_g=mass_g[row], total_volume_ml=volume,
                                        total_mass_g=float(solution.total_mass_g[row]))
    return tuple(notes[bool(flag)] for flag in small), tuple(reasons[bool(flag)] for flag in small)
