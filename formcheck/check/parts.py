"""What the ingredients of a batch come to when every known composition is opened."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace

import numpy as np

from formcheck.materials.record import Material
from formcheck.materials.shelf import Composition, Constituent, Found, Shelf, expand, find
from formcheck.recipe.batch import Batch


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


def with_impure_rests(parts: Parts, batch: Batch, r: int = 0) -> Parts:
    """The same where lines state a purity below 1: what is left of such an ingredient is a constituent of its own,
    of which nothing is known."""
    for i, material in enumerate(batch.materials):
        rest = 1.0 - _purity(batch, i, r)
        if rest > 0:
            share = np.concatenate([parts.share, np.zeros((len(parts.share), 1))], axis=1)
            share[i] *= 1.0 - rest
            share[i, -1] = rest
            parts = replace(parts, names=(*parts.names, f"rest of {material.names[0]}"), found=(*parts.found, None),
                            share=share)
    return parts


def _purity(batch: Batch, i: int, r: int) -> float:
    """Of one ingredient, by the mass of its lines; by their mean where a mass is unknown."""
    lines = [(n, line) for n, line in enumerate(batch.lines[r]) if line.material == i]
    purity = np.array([1.0 if line.purity is None else line.purity for _, line in lines])
    mass = batch.line_mass_g[r, [n for n, _ in lines]]
    if len(lines) == 0:
        return 1.0
    return float(purity @ mass / mass.sum() if mass.sum() > 0 else purity.mean())
