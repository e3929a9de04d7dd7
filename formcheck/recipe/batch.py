"""Recipes side by side as arrays over the materials they share. One recipe is a batch of one.

Shapes: R recipes, I materials (the union over the recipes), L the most lines that a recipe has.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path

import numpy as np

from formcheck.documents import path_text
from formcheck.materials.record import Material
from formcheck.materials.shelf import Found, Shelf, find, open_shelf, suggest
from formcheck.recipe.amounts import Resolved, resolve
from formcheck.recipe.balance import Floats
from formcheck.recipe.lines import lines_of
from formcheck.recipe.read import WrittenRecipe
from formcheck.recipe.reasons import Reason
from formcheck.trouble import InputError, Place, Problem, shown
from formcheck.units import UnitKind


@dataclass(frozen=True)
class Line:
    """One ingredient as written; `material` is its column in the arrays of the batch."""

    name: str
    written: str
    place: Place
    material: int
    purity: float | None
    note: str


@dataclass(frozen=True)
class Batch:
    """R recipes as arrays. NaN is unknown, 0 is none; `reasons` says why anything is NaN.

    Bounds of a mass fraction are never NaN: 0 and 1 where nothing is known of it.
    """

    recipes: tuple[WrittenRecipe, ...]  # R; the same one throughout for a sweep
    shelves: tuple[Shelf, ...]  # R
    found: tuple[Found, ...]  # I records and where each is from
    lines: tuple[tuple[Line, ...], ...]  # R
    line_mass_g: Floats  # (R, L), 0 beyond the lines of a recipe
    mass_g: Floats  # (R, I)
    mass_fraction: Floats  # (R, I)
    mass_fraction_low: Floats
    mass_fraction_high: Floats
    total_mass_g: Floats  # (R,)
    total_volume_ml: Floats  # (R,)
    total_volume_low_ml: Floats
    total_volume_high_ml: Floats
    notes: tuple[tuple[str, ...], ...]  # R; what was assumed
    reasons: tuple[tuple[Reason, ...], ...]  # R; what could not be told

    @property
    def materials(self) -> tuple[Material, ...]:
        return tuple(found.material for found in self.found)


@dataclass(frozen=True)
class Varied:
    """Amounts that one line takes in a sweep: R values in the base unit of `kind`.

    Base units: g, mL, fraction (0.05 for 5 %), parts, g/L.
    """

    line: int
    kind: UnitKind
    values: Floats


def build_batch(written: Sequence[WrittenRecipe], *, shelf_folder: Path | None = None) -> Batch:
    """Look up the materials of recipes and resolve their amounts.

    Parameters
    ----------
    written
        Recipes as read; at least one.
    shelf_folder
        A folder of the user's records; where None, the `shelf` that each recipe names.

    Raises
    ------
    InputError
        ingredients that no shelf knows (all of them at once), a broken shelf folder, or amounts that
        cannot be; see `amounts.resolve`.
    """
    shelves = _shelves(written, shelf_folder)
    found = _look_up(written, shelves)
    columns, index = _columns(found)
    lines = tuple(_lines(recipe, at) for recipe, at in zip(written, index, strict=True))
    resolved = [resolve(lines_of(recipe, [one.material for one in mine]))
                for recipe, mine in zip(written, found, strict=True)]
    return _assembled(tuple(written), shelves, columns, lines, resolved)


def with_amounts(batch: Batch, varied: Sequence[Varied], *, recipe: int = 0) -> Batch:
    """One recipe of a batch in R variants, in which some lines take other amounts.

    Raises
    ------
    InputError
        a variant that cannot be, named by its number.
    ValueError
        no varied line, or values of different lengths.
    """
    lines = batch.lines[recipe]
    base = lines_of(batch.recipes[recipe], [batch.materials[line.material] for line in lines])
    n_variants = {len(one.values) for one in varied}
    if len(n_variants) != 1:
        raise ValueError(f"varied lines of {sorted(n_variants)} values; expected one common length")
    n = n_variants.pop()
    kinds, values = list(base.kinds), np.tile(base.values, (n, 1))
    for one in varied:
        kinds[one.line], values[:, one.line] = one.kind, one.values
    resolved = resolve(base, kinds=kinds, values=values)
    return _assembled((batch.recipes[recipe],) * n, (batch.shelves[recipe],) * n, batch.found, (lines,) * n,
                      [resolved])


def _shelves(written: Sequence[WrittenRecipe], shelf_folder: Path | None) -> tuple[Shelf, ...]:
    """The shelf of each recipe; recipes without records of their own share the shelf of their folder."""
    shared: dict[Path | None, Shelf] = {}
    found = []
    for one in written:
        folder = shelf_folder or _own_folder(one)
        if one.recipe.materials:
            found.append(open_shelf(own=one.recipe.materials, folder=folder, own_file=one.document.file,
                                    own_root=one.folder))
            continue
        if folder not in shared:
            shared[folder] = open_shelf(folder=folder)
        found.append(shared[folder])
    return tuple(found)


def _own_folder(written: WrittenRecipe) -> Path | None:
    """The folder that the recipe names as its shelf."""
    if written.recipe.shelf is None:
        return None
    folder = written.folder / written.recipe.shelf
    try:
        if folder.is_dir():
            return folder
    except (OSError, ValueError):
        pass
    raise InputError(Problem(written.document.place(("shelf",)), f"no folder {shown(written.recipe.shelf)}",
                             "a folder of material records, named from the folder of the recipe", "shelf"))


def _look_up(written: Sequence[WrittenRecipe], shelves: Sequence[Shelf]) -> list[list[Found]]:
    """The record of every ingredient of every recipe."""
    found: list[list[Found]] = []
    problems: list[Problem] = []
    for one, shelf in zip(written, shelves, strict=True):
        found.append([])
        for n, ingredient in enumerate(one.recipe.ingredients):
            record = find(shelf, ingredient.material)
            if record:
                found[-1].append(record)
            else:
                problems.append(_unknown(one, shelf, n))
    if problems:
        raise InputError(problems[:20])
    return found


def _unknown(written: WrittenRecipe, shelf: Shelf, n: int) -> Problem:
    name = written.recipe.ingredients[n].material
    path = ("ingredients", n, "material")
    return Problem(
        written.document.place(path), f"{shown(name)}, which no shelf knows",
        f"{suggest(shelf, name)} Or a record of it under `materials:` (id, names and kind will do; what is "
        "left out is unknown)", path_text(path))


def _columns(found: Sequence[Sequence[Found]]) -> tuple[tuple[Found, ...], list[list[int]]]:
    """The union of the records, and for each recipe the column of each of its lines."""
    columns: list[Found] = []
    by_id: dict[str, list[int]] = {}
    index: list[list[int]] = []
    for mine in found:
        index.append([])
        for one in mine:
            bearers = by_id.setdefault(one.material.id, [])
            at = next((n for n in bearers if columns[n].material == one.material), None)
            if at is None:
                at = len(columns)
                columns.append(one)
                bearers.append(at)
            index[-1].append(at)
    return tuple(columns), index


def _lines(written: WrittenRecipe, index: Sequence[int]) -> tuple[Line, ...]:
    return tuple(
        Line(item.material, item.amount, written.document.place(("ingredients", n)), column,
             item.purity_fraction, item.note)
        for n, (item, column) in enumerate(zip(written.recipe.ingredients, index, strict=True)))


def _assembled(recipes: tuple[WrittenRecipe, ...], shelves: tuple[Shelf, ...], columns: tuple[Found, ...],
               lines: tuple[tuple[Line, ...], ...], resolved: Sequence[Resolved]) -> Batch:
    """Resolved recipes (one Resolved of many rows, or many of one) gathered over the materials."""
    most_lines = max(len(mine) for mine in lines)
    line_mass = np.zeros((len(recipes), most_lines))
    over_materials = {name: np.zeros((len(recipes), len(columns)))
                      for name in ("mass_g", "mass_fraction", "mass_fraction_low", "mass_fraction_high")}
    row = 0
    for one in resolved:
        rows = slice(row, row + len(one.mass_g))
        line_mass[rows, : one.mass_g.shape[1]] = one.mass_g
        for n, line in enumerate(lines[row]):
            for name, into in over_materials.items():
                into[rows, line.material] += getattr(one, name)[:, n]
        row = rows.stop
    over_materials["mass_fraction_high"] = np.minimum(over_materials["mass_fraction_high"], 1.0)

    def over_recipes(name: str) -> Floats:
        return np.concatenate([getattr(one, name) for one in resolved])

    return Batch(
        recipes=recipes, shelves=shelves, found=columns, lines=lines, line_mass_g=line_mass, **over_materials,
        total_mass_g=over_recipes("total_mass_g"), total_volume_ml=over_recipes("total_volume_ml"),
        total_volume_low_ml=over_recipes("total_volume_low_ml"),
        total_volume_high_ml=over_recipes("total_volume_high_ml"),
        notes=tuple(note for one in resolved for note in one.notes),
        reasons=tuple(reason for one in resolved for reason in one.reasons))
