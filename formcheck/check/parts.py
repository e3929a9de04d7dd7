"""What the ingredients of a batch come to when every known composition is opened."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np

from formcheck.materials.record import Material
from formcheck.materials.shelf import Composition, Constituent, Found, Shelf, expand, find


@dataclass(frozen=True)
class Parts:
    """C constituents of I ingredients; the undeclared rest of an ingredient is a constituent of its own.

    share (I, C): mass fraction of each constituent in each ingredient, rows sum to 1. `found` is None
    for an undeclared rest and for a constituent that no shelf holds.
    """

    names: tuple[str, ...]
    found: tuple[Found | None, ...]
    share: np.ndarray

    @property
    def materials(self) -> tuple[Material | None, ...]:
        return tuple(one.material if one else None for one in self.found)

    def fractions(self, mass_fraction: np.ndarray) -> np.ndarray:
        """(R, I) -> (R, C); an unknown amount makes the constituents it touches unknown, no others."""
        present = np.nan_to_num(mass_fraction, nan=0.0) @ self.share
        touched = np.isnan(mass_fraction) @ (self.share > 0)
        return np.where(touched, np.nan, present)


def parts_of(shelf: Shelf, materials: Sequence[Material], *,
             kept_whole: Callable[[Material], bool] = lambda material: False) -> Parts:
    """Open the compositions of a batch's ingredients, in order of first appearance.

    `kept_whole` names ingredients to leave closed: those of which something is known as they are.
    """
    index: dict[str, int] = {}
    found: list[Found | None] = []
    rows: list[dict[int, float]] = []
    for material in materials:
        composition = whole(material) if kept_whole(material) else expand(shelf, material)
        row: dict[int, float] = {}
        for part in composition.constituents:
            if part.name not in index:
                index[part.name] = len(found)
                found.append(find(shelf, part.name) if part.material else None)
            row[index[part.name]] = row.get(index[part.name], 0.0) + part.mass_fraction
        if composition.undeclared > 0:
            name = f"undeclared part of {material.names[0]}"
            index[name] = len(found)
            found.append(None)
            row[index[name]] = composition.undeclared
        rows.append(row)
    share = np.zeros((len(rows), len(found)))
    for i, row in enumerate(rows):
        for c, fraction in row.items():
            share[i, c] = fraction
    names = tuple(one.material.names[0] if one else name for name, one in zip(index, found, strict=True))
    return Parts(names, tuple(found), share)


def whole(material: Material) -> Composition:
    """A material as its own single constituent."""
    return Composition((Constituent(material.id, material, 1.0, 1.0, 1.0),), 0.0)
