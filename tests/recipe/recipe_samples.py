"""Recipes for the tests, written as a maker would, with records of their own so that no shelf is needed."""

from __future__ import annotations

from pathlib import Path

from formcheck.documents import parse_yaml
from formcheck.recipe.batch import Batch, build_batch
from formcheck.recipe.read import WrittenRecipe, written_recipe

# Densities at 20 deg C from the CRC Handbook of Chemistry and Physics (density of water; physical constants
# of organic compounds), except where a test says that the figure is made up.
WATER_G_CM3 = 0.9982
ETHANOL_G_CM3 = 0.7893
GLYCEROL_G_CM3 = 1.2613
DENSITIES = {"water": WATER_G_CM3, "ethanol": ETHANOL_G_CM3, "glycerol": GLYCEROL_G_CM3, "mystery": None,
             "second_mystery": None}


def record(name: str, density_g_cm3: float | None, *, kind: str = "solvent", form: str = "liquid") -> str:
    density = "" if density_g_cm3 is None else f", density_g_cm3: {{value: {density_g_cm3}, source: given}}"
    return f"  - {{id: {name}, names: [{name}], kind: {kind}, physical_form: {form}{density}}}\n"


def written(lines: dict[str, str] | list[tuple[str, str]], *, head: str = "",
            densities: dict[str, float | None] | None = None) -> WrittenRecipe:
    """A recipe of these ingredients and amounts; `head` holds further fields."""
    pairs = list(lines.items()) if isinstance(lines, dict) else lines
    text = "formcheck: 1\ntitle: Sample\nwhat: ink\n" + head + "\ningredients:\n"
    text += "".join(f"  - {{material: {name}, amount: {amount}}}\n" for name, amount in pairs)
    text += "materials:\n"
    text += "".join(record(name, value) for name, value in (densities or DENSITIES).items())
    text += record("white", 4.23, kind="pigment", form="powder")  # rutile, CRC Handbook
    return written_recipe(parse_yaml(text, "sample.yaml"), folder=Path("."))


def batch_of(lines: dict[str, str] | list[tuple[str, str]], **more) -> Batch:
    return build_batch([written(lines, **more)])
