"""Mass and volume balance of a recipe as linear equations, solved as far as the densities allow.

Three unknowns stand for a recipe: T, its total mass [g]; V, its total volume [mL]; F, the free amount:
the mass of one part, or of the ingredient that makes up the rest [g]. Mass and volume of every line are
linear in (1, T, V, F); a coefficient is NaN where it takes a density that is not known.
Shapes: R recipes that share their lines, L lines.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from itertools import combinations

import numpy as np
from numpy.typing import NDArray

from formcheck.units import Amount, UnitKind

Floats = NDArray[np.float64]

ONE, T, V, F = range(4)
# Which of (1, T, V, F) a line's amount multiplies, and whether the product is a mass or a volume.
COLUMN: dict[UnitKind, int] = {
    "mass": ONE, "volume": ONE, "mass_fraction": T, "volume_fraction": V, "mass_per_volume": V, "parts": F,
    "rest": F}
BY_VOLUME = ("volume", "volume_fraction")

L_PER_ML = 1e-3


@dataclass(frozen=True)
class Equation:
    """`form` (R, 4) times (1, T, V, F) is zero; `unknowns` and `constant` tell its shape, not its numbers."""

    name: str
    form: Floats
    unknowns: frozenset[int]
    constant: bool

    @property
    def only_a_check(self) -> bool:
        """(sum of shares - 1) times one unknown: says whether the shares add up, not how much there is."""
        return not self.constant and len(self.unknowns) == 1

    @property
    def usable(self) -> bool:
        return not np.isnan(self.form).any()


def line_forms(kinds: Sequence[UnitKind], values: Floats,
               specific_volume_ml_g: Floats) -> tuple[Floats, Floats]:
    """Mass [g] and volume [mL] of each line over (1, T, V, F).

    Parameters
    ----------
    kinds
        What each amount is; L of them.
    values : (R, L)
        Amounts in the base unit of their kind; 1 for the rest.
    specific_volume_ml_g : (L,)
        Volume of a gram; NaN where unknown.

    Returns
    -------
    mass_form, volume_form : (R, L, 4)
    """
    mass = np.zeros((*values.shape, 4))
    volume = np.zeros((*values.shape, 4))
    for line, kind in enumerate(kinds):
        column, amount, s = COLUMN[kind], values[:, line], specific_volume_ml_g[line]
        if kind == "mass_per_volume":
            amount = amount * L_PER_ML
        mass[:, line, column] = amount / s if kind in BY_VOLUME else amount
        volume[:, line, column] = amount if kind in BY_VOLUME else amount * s
    return mass, volume


@dataclass(frozen=True)
class Solution:
    """What the balance gives for R recipes: NaN where a density is missing."""

    system: tuple[Equation, ...]
    x: Floats  # (R, 4), the values of (1, T, V, F)
    mass_g: Floats  # (R, L)
    total_mass_g: Floats  # (R,)

    @property
    def total_volume_ml(self) -> Floats:
        return self.x[:, V]


def settle(kinds: Sequence[UnitKind], values: Floats, *, specific_volume_ml_g: Floats,
           heaped: NDArray[np.bool_], batch: Amount | None, density_g_cm3: float | None) -> Solution:
    """Masses and totals from amounts (R, L); see `line_forms` and `equations` for the arguments.

    `heaped` (L,) marks lines whose mass and volume are both unknown. Total mass is the sum of the
    masses where all are known, so that they balance to rounding.
    """
    mass_form, volume_form = line_forms(kinds, values, specific_volume_ml_g)
    mass_form[:, heaped] = volume_form[:, heaped] = np.nan
    system = equations(kinds, mass_form, volume_form, batch=batch, density_g_cm3=density_g_cm3)
    x = solve(system, len(values))
    x[:, F] = np.where(np.abs(x[:, F]) < 1e-12 * np.abs(x[:, T]), 0.0, x[:, F])  # a rest of nothing, rounded
    mass = apply(mass_form, x[:, None, :])
    total = np.where(np.isnan(mass).any(axis=1), x[:, T], mass.sum(axis=1))
    return Solution(tuple(system), x, mass, total)


def equations(kinds: Sequence[UnitKind], mass_form: Floats, volume_form: Floats, *, batch: Amount | None,
              density_g_cm3: float | None) -> list[Equation]:
    """What must hold, in the order in which it is drawn upon: batch size, volumes, masses.

    With a measured density the total volume is T / density; without one, volumes are additive.
    """
    n_recipes = len(mass_form)
    used = {COLUMN[kind] for kind in kinds} - {ONE}
    constant = any(COLUMN[kind] == ONE for kind in kinds)
    found = []
    if batch:
        total = T if batch.kind == "mass" else V
        form = _row(n_recipes, {total: 1.0, ONE: -batch.value})
        found.append(Equation("batch", form, frozenset({total}), True))
    if density_g_cm3 is None:
        form = volume_form.sum(axis=1) - _row(n_recipes, {V: 1.0})
        found.append(Equation("volumes", form, frozenset(used | {V}), constant))
    else:
        form = _row(n_recipes, {T: 1.0, V: -density_g_cm3})
        found.append(Equation("density", form, frozenset({T, V}), False))
    form = mass_form.sum(axis=1) - _row(n_recipes, {T: 1.0})
    found.append(Equation("masses", form, frozenset(used | {T}), constant))
    return found


def _row(n_recipes: int, coefficients: dict[int, float]) -> Floats:
    row = np.zeros((n_recipes, 4))
    for column, value in coefficients.items():
        row[:, column] = value
    return row


Block = tuple[tuple[Equation, ...], tuple[int, ...]]  # equations, and the unknowns they settle together


def plan(system: Sequence[Equation]) -> list[Block]:
    """Which equations to solve together for which unknowns, step by step: the smallest solvable blocks."""
    steps: list[Block] = []
    left = [equation for equation in system if not equation.only_a_check]
    settled: set[int] = set()
    while block := next(_blocks(left, settled), None):
        together, unknowns = block
        steps.append(block)
        settled |= set(unknowns)
        left = [equation for equation in left if equation not in together]
    return steps


def _blocks(left: list[Equation], settled: set[int]) -> Iterator[Block]:
    for size in (1, 2, 3):
        for together in combinations(left, size):
            unknowns = set().union(*(equation.unknowns for equation in together)) - settled
            if len(unknowns) == size:
                yield together, tuple(sorted(unknowns))


def undetermined(system: Sequence[Equation], kinds: Sequence[UnitKind]) -> set[int]:
    """The unknowns that no density, were it known, could settle: the recipe does not say how much."""
    settled = {unknown for _, unknowns in plan(system) for unknown in unknowns}
    wanted = {T, V} | ({F} if any(COLUMN[kind] == F for kind in kinds) else set())
    return wanted - settled


def solve(system: Sequence[Equation], n_recipes: int) -> Floats:
    """(1, T, V, F) of each recipe, (R, 4); NaN where densities are missing or the numbers have no answer."""
    x = np.full((n_recipes, 4), np.nan)
    x[:, ONE] = 1.0
    for together, unknowns in plan([equation for equation in system if equation.usable]):
        forms = np.stack([equation.form for equation in together], axis=1)  # (R, size, 4)
        settled = [column for column in range(4) if column not in unknowns]
        right = -apply(forms[..., settled], x[:, None, settled])
        x[:, unknowns] = _solve_blocks(forms[..., unknowns], right)
    return x


def _solve_blocks(left: Floats, right: Floats) -> Floats:
    """Solutions of R small systems, NaN for the singular ones. Rows and columns are scaled to 1 first."""
    rows = _nonzero(np.abs(left).max(axis=2))
    left, right = left / rows[..., None], right / rows
    columns = _nonzero(np.abs(left).max(axis=1))
    left = left / columns[:, None, :]
    regular = np.abs(np.linalg.det(left)) > 1e-12
    left = np.where(regular[:, None, None], left, np.eye(left.shape[1]))
    answer = np.linalg.solve(left, right[..., None])[..., 0] / columns
    return np.where(regular[:, None], answer, np.nan)


def _nonzero(scale: Floats) -> Floats:
    return np.where(scale == 0, 1.0, scale)


def apply(form: Floats, x: Floats) -> Floats:
    """Sum of form times x over the last axis, where a coefficient of zero silences an unknown total."""
    with np.errstate(invalid="ignore"):
        return np.where(form == 0, 0.0, form * x).sum(axis=-1)
