"""What a rule may ask of a batch of recipes, as arrays, and of the materials in it.

R recipes over I ingredients; one recipe is a batch of one. `check` fills these from its own records.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, field, replace
from functools import cached_property

import numpy as np

from formcheck.materials.elements import element_bounds
from formcheck.materials.record import Material
from formcheck.materials.shelf import Composition, Shelf, expand

SMALLEST_REST = 1e-12  # what is left of 1 after summing known mass fractions is nothing below this


@dataclass(frozen=True)
class Scope:
    """What a recipe says of itself. An empty tuple is not stated, and so unknown."""

    what: str
    use: tuple[str, ...] = ()
    sold_in: tuple[str, ...] = ()
    acts: tuple[str, ...] = ()


@dataclass(frozen=True)
class Knowledge:
    """How to look into a material: the mass fraction of an element in it (low, high, why), and its parts."""

    element_bounds: Callable[[Material, str], tuple[float, float, str]]
    composition: Callable[[Material], Composition]


def knowledge_of(shelf: Shelf) -> Knowledge:
    """Knowledge as the records of a shelf give it; each question is answered once."""

    def bounds(material: Material, symbol: str) -> tuple[float, float, str]:
        low, high, why = element_bounds(shelf, material, symbol)
        return low, high, why

    return Knowledge(_once(bounds), _once(lambda material: expand(shelf, material)))


def _once(ask: Callable) -> Callable:
    """The answer kept by the identity of the record (records are frozen and live as long as the shelf)."""
    kept: dict = {}

    def asked(material: Material, *more):
        key = (id(material), *more)
        if key not in kept:
            kept[key] = (material, ask(material, *more))
        return kept[key][1]

    return asked


Bounds = tuple[np.ndarray, np.ndarray]


@dataclass(frozen=True)
class MixtureFacts:
    """R recipes over the same I ingredients (0 where a recipe has none of one).

    materials, names, places
        I each: the records, what the recipe calls them, where they stand ("" where nowhere).
    mass_fraction : (R, I)
        NaN where the amount is unknown; the rest of 1 is then shared among the unknown ones.
    scopes : R
    nonvolatile_fraction : (I,)
        Mass fraction that stays in the dry film; NaN where unknown.
    ph : (low (R,), high (R,)); NaN where unknown.
    voc_g_l : {"ready_to_use" | "less_water": (low (R,), high (R,))}; NaN where unknown. [g/L]
    density_g_ml : (low (R,), high (R,)); NaN where unknown. [g/mL]
    """

    materials: tuple[Material, ...]
    names: tuple[str, ...]
    places: tuple[str, ...]
    mass_fraction: np.ndarray
    scopes: tuple[Scope, ...]
    nonvolatile_fraction: np.ndarray
    ph: Bounds
    voc_g_l: dict[str, Bounds] = field(default_factory=dict)
    density_g_ml: Bounds | None = None

    @property
    def n_recipes(self) -> int:
        return len(self.mass_fraction)

    def only(self, recipe: int) -> MixtureFacts:
        """The same of one recipe, as a batch of one."""
        one = slice(recipe, recipe + 1)

        def cut(bounds: Bounds) -> Bounds:
            return np.asarray(bounds[0], float)[one], np.asarray(bounds[1], float)[one]

        return replace(self, mass_fraction=self.mass_fraction[one], scopes=self.scopes[one], ph=cut(self.ph),
                       voc_g_l={kind: cut(bounds) for kind, bounds in self.voc_g_l.items()},
                       density_g_ml=None if self.density_g_ml is None else cut(self.density_g_ml))

    @cached_property
    def present(self) -> np.ndarray:
        """(R, I) bool: the ingredient is in the recipe, be its amount known or not."""
        return ~(self.mass_fraction == 0)


def filled(bounds: Bounds | None, n: int, *, low: float, high: float) -> Bounds:
    """Bounds with NaN (or no bounds at all) widened to all that could be."""
    if bounds is None:
        return np.full(n, low), np.full(n, high)
    lower, upper = (np.asarray(one, dtype=float) for one in bounds)
    return np.where(np.isnan(lower), low, lower), np.where(np.isnan(upper), high, upper)


def sum_bounds(mass_fraction: np.ndarray, low: np.ndarray, high: np.ndarray) -> Bounds:
    """Bounds (R, Q) of sum_i x_i c_qi for columns between `low` and `high` (Q, I).

    Where amounts are unknown, together they make up what the known ones leave of 1, in any shares:
    the sum is least when all of it is the ingredient of the least column, largest likewise.
    """
    unknown = np.isnan(mass_fraction)
    x = np.where(unknown, 0.0, mass_fraction)
    lower, upper = x @ low.T, x @ high.T
    for r in np.flatnonzero(unknown.any(axis=1)):
        rest = max(0.0, 1.0 - x[r].sum())
        rest = rest if rest > SMALLEST_REST else 0.0
        lower[r] += rest * low[:, unknown[r]].min(axis=1)
        upper[r] += rest * high[:, unknown[r]].max(axis=1)
    return lower, upper
