"""How the computed pH answers to each pKa, each amount and the ion product of water.

From the implicit charge balance F(pH, q) = 0: d pH / d q = (dF/dq) / buffer capacity, at constant
ionic strength (its own change is of second order next to these).
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from formcheck.acid_base.charge_balance import Solution, free_ions
from formcheck.acid_base.forms import form_fraction_slopes
from formcheck.acid_base.ph import PhState
from formcheck.acid_base.protons import LN10, shares

Array = NDArray[np.float64]


@dataclass(frozen=True)
class PhSlopes:
    """Change of pH per unit of each pKa (R,S,n), per mol/kg of each substance (R,S), per pKw (R,)."""

    by_pka: Array
    by_total: Array
    by_pkw: Array


def ph_slopes(solution: Solution, state: PhState) -> PhSlopes:
    """Slopes at a solved state; NaN where the pH is. `solution` from `ph.dissolved`."""
    steps = solution.steps(state.davies_d)
    per_capacity = 1 / state.buffer_capacity_mol_kg
    fraction = shares(state.ph, steps)
    lost = np.arange(fraction.shape[-1], dtype=float)
    charge = solution.charge_0 - fraction @ lost + solution.counter_charge
    loss_by_pka = np.einsum("rsji,j->rsi", form_fraction_slopes(fraction)[1], lost)
    hydroxide = free_ions(solution, state.ph, state.davies_d)[1]
    return PhSlopes(
        by_pka=-solution.total[:, :, None] * loss_by_pka * per_capacity[:, None, None],
        by_total=charge * per_capacity[:, None],
        by_pkw=LN10 * hydroxide * per_capacity)


def root_sum_square(*parts: Array) -> Array:
    """Standard deviation of a sum of independent parts, each (R,)."""
    return np.sqrt(sum((part**2 for part in parts), np.zeros_like(parts[0])))
