"""The lines of a recipe as its amounts need them: kinds, numbers, densities, and places for messages."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from formcheck.documents import path_text
from formcheck.materials.record import Material
from formcheck.recipe.read import WrittenRecipe
from formcheck.recipe.written import INGREDIENT_KINDS
from formcheck.trouble import InputError, Place, Problem
from formcheck.units import Amount, UnitKind, parse_amount

POSSIBLE_DENSITY_G_CM3 = (0.05, 25.0)  # lightest hollow spheres to the densest metals; else a slip of the pen
# Of what has no density: 20 to 0.67 g/cm3, tungsten to hexane (CRC Handbook); not gases, not hollow spheres.
SPECIFIC_VOLUME_RANGE_ML_G = (0.05, 1.5)
HEAPED_FORMS = ("powder", "granules", "flake", "crystals")


@dataclass(frozen=True)
class Lines:
    """L lines. `values` are in the base unit of their kind (g, mL, fraction, parts, g/L), 1 for the rest.

    `specific_volume_ml_g` is NaN where unknown, and `lacks` then says what is missing. `heaped` marks dry
    powders measured by volume: neither their mass nor their own volume follows from the heap. `numbers`
    are the lines' places in the recipe, from 0.
    """

    names: tuple[str, ...]
    kinds: tuple[UnitKind, ...]
    values: NDArray[np.float64]
    written: tuple[str, ...]
    specific_volume_ml_g: NDArray[np.float64]
    lacks: tuple[str, ...]
    heaped: NDArray[np.bool_]
    places: tuple[Place, ...]
    numbers: tuple[int, ...]
    batch: Amount | None
    batch_place: Place
    ingredients_place: Place
    density_g_cm3: float | None

    def refuse(self, at: int | None, found: str, expected: str) -> InputError:
        """The error of one line's amount, or, without a line, of the ingredients together."""
        if at is None:
            return InputError(Problem(self.ingredients_place, found, expected, "ingredients"))
        field = path_text(("ingredients", self.numbers[at], "amount"))
        return InputError(Problem(self.places[at], found, expected, field))

    def refuse_batch(self, found: str, expected: str) -> InputError:
        """The error of the batch size."""
        return InputError(Problem(self.batch_place, found, expected, "batch"))

    def only(self, kept: NDArray[np.bool_]) -> Lines:
        """Some of the lines."""
        at = np.flatnonzero(kept)

        def some(items: tuple) -> tuple:
            return tuple(items[n] for n in at)

        return replace(
            self, names=some(self.names), kinds=some(self.kinds), values=self.values[at],
            written=some(self.written), specific_volume_ml_g=self.specific_volume_ml_g[at],
            lacks=some(self.lacks), heaped=self.heaped[at], places=some(self.places),
            numbers=some(self.numbers))


def lines_of(written: WrittenRecipe, materials: Sequence[Material]) -> Lines:
    """The lines of a recipe whose ingredients are `materials`, in order."""
    recipe, document = written.recipe, written.document
    amounts = [parse_amount(item.amount, *INGREDIENT_KINDS) for item in recipe.ingredients]
    known = [specific_volume(material) for material in materials]
    return Lines(
        names=tuple(item.material for item in recipe.ingredients),
        kinds=tuple(amount.kind for amount in amounts),
        values=np.array([1.0 if amount.kind == "rest" else amount.value for amount in amounts]),
        written=tuple(item.amount for item in recipe.ingredients),
        specific_volume_ml_g=np.array([s for s, _ in known]),
        lacks=tuple(why for _, why in known),
        heaped=np.array([amount.kind == "volume" and material.physical_form in HEAPED_FORMS
                         for amount, material in zip(amounts, materials, strict=True)]),
        places=tuple(document.place(("ingredients", n, "amount")) for n in range(len(amounts))),
        numbers=tuple(range(len(amounts))),
        batch=parse_amount(recipe.batch, "mass", "volume") if recipe.batch else None,
        batch_place=document.place(("batch",)),
        ingredients_place=document.place(("ingredients",)),
        density_g_cm3=recipe.measured.density_g_cm3 if recipe.measured else None,
    )


def specific_volume(material: Material) -> tuple[float, str]:
    """Volume of a gram [mL/g]; NaN and what is missing where the record has no possible density."""
    if material.density_g_cm3 is None:
        return np.nan, f"no density on the record of {material.names[0]}"
    density = material.density_g_cm3.value
    low, high = POSSIBLE_DENSITY_G_CM3
    if not low <= density <= high:
        return np.nan, f"{density:g} g/cm3 on the record of {material.names[0]}, which cannot be"
    return 1 / density, ""
