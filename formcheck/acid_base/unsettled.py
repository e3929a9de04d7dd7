"""Why the pH of a mixture cannot be computed, ingredient by ingredient.

An ingredient that says nothing of its protons leaves the pH unknown however little of it there is: in
an unbuffered mixture 0.01 % of a base moves the pH by units. Only what a record says counts.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from formcheck.materials.record import AcidBase, Material

Array = NDArray[np.float64]
Mask = NDArray[np.bool_]

# Below this share of water in the liquid part the pKa of water no longer serve: acetic acid, 4.76 in
# water, is 5.3 in 20 % and 6.3 in 45 % dioxane (Harned & Owen 1958, from memory).
LEAST_WATER_IN_LIQUID = 0.7
# In a paste with less water than this most ions sit at the surfaces of its solids (own choice).
LEAST_WATER_IN_MIXTURE = 0.2
# Ionic strength, or amount of any one acid or base per kg of water, beyond which no simple activity
# model holds: coefficients of 1:1 salts then differ twofold and rise with concentration (own choice).
MOST_MOL_KG = 3.0

SALT_KINDS = ("salt", "mordant")


@dataclass(frozen=True)
class Unsettled:
    """Masks of what stands in the way; R recipes, I ingredients. `by_record` is "" where nothing does."""

    names: tuple[str, ...]
    mass_fraction: Array        # (R,I)
    by_record: tuple[str, ...]  # (I,)
    undissolved: Mask           # (R,I)
    no_water: Mask              # (R,)
    too_little_water: Mask      # (R,)
    water_diluted: Mask         # (R,)
    too_concentrated: Mask      # (R,)

    @property
    def any(self) -> Mask:
        """Recipes whose pH cannot be computed. (R,)"""
        present = self.mass_fraction != 0  # an unknown amount counts as present
        silent = present & np.array([bool(text) for text in self.by_record], bool)
        return (silent.any(axis=1) | np.isnan(self.mass_fraction).any(axis=1)
                | self.undissolved.any(axis=1) | self.no_water | self.too_little_water
                | self.water_diluted | self.too_concentrated)

    def reason(self, recipe: int) -> str:
        """Why the pH of one recipe cannot be computed, naming the ingredients; empty where it can."""
        said = []
        for i, name in enumerate(self.names):
            said += self._of_ingredient(recipe, i, name)
        if self.no_water[recipe]:
            said.append("there is no water in the mixture, and pH is a property of water")
        elif self.too_little_water[recipe]:
            said.append(f"less than {LEAST_WATER_IN_MIXTURE:.0%} of the mixture is water")
        if self.water_diluted[recipe]:
            said.append(f"less than {LEAST_WATER_IN_LIQUID:.0%} of the liquid is water: pKa values "
                        "measured in water no longer hold")
        if self.too_concentrated[recipe]:
            said.append(f"more than {MOST_MOL_KG:g} mol of acid, base or salt per kg of water: beyond any "
                        "simple model of activity")
        return "; ".join(said)

    def _of_ingredient(self, recipe: int, i: int, name: str) -> list[str]:
        fraction = self.mass_fraction[recipe, i]
        if fraction == 0:
            return []
        share = "" if np.isnan(fraction) else f" ({100 * fraction:.2g} % of the mixture)"
        said = [self.by_record[i] + share] if self.by_record[i] else []
        if np.isnan(fraction):
            said.append(f"the amount of {name} is not known")
        if self.undissolved[recipe, i]:
            said.append(f"there is more {name} than its water dissolves{share}")
        return said


def why_unsettled(material: Material | None, name: str) -> str:
    """Why this material, wherever it is present, keeps the pH from being computed; empty if it does not."""
    if material is None:
        return f"what {name} is made of is not known"
    if material.kind == "water":
        return ""
    record = material.acid_base
    if record is None or not (takes_part(record) or record.buffers_unknowably or record.neutral):
        return f"whether {name} takes up or gives off protons is not on its record"
    if record.buffers_unknowably:
        return f"{name} buffers in a way that cannot be computed"
    if material.molar_mass_g_mol is None and (takes_part(record) or material.kind in SALT_KINDS):
        return f"{name} has no molar mass on its record"
    return ""


def takes_part(record: AcidBase) -> bool:
    """Whether the substance enters the charge balance or the ionic strength by its record."""
    return bool(record.pka) or record.counter_charge != 0 or record.charge_fully_protonated != 0


def names_of(materials: Sequence[Material | None], given: Sequence[str] | None) -> tuple[str, ...]:
    """What the maker calls each material, else the first name of its record."""
    if given is not None:
        return tuple(given)
    if any(material is None for material in materials):
        raise ValueError("an undeclared part without a name; expected `names`")
    return tuple(material.names[0] for material in materials if material is not None)
