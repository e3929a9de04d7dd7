"""The charge balance of a solution as a function of pH at a given Davies D, and its root.

Every substance is counted from its fully protonated form, so that the balance reads

    [H+] + q0  =  [OH-] + sum c n_lost(pH) + [HCO3-] + 2 [CO3 2-]      (the last two: open to the air)

with q0 the charge when no proton is lost. Both sides are positive once q0 stands on its side, the left
falls and the right rises with pH: ln(left/right) is monotone, and Newton on it, kept inside a bracket,
always ends. The pH is -log10 of the activity of H+.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from formcheck.acid_base.protons import LN10, loss_moments, step_constants

Array = NDArray[np.float64]

LOWEST_PH, HIGHEST_PH = -2.0, 16.0
_MOST_STEPS = 120
_ENOUGH_STEP = 1e-13
_ENOUGH_IMBALANCE = 1e-14  # what rounding leaves of ln(left/right)


@dataclass(frozen=True)
class Solution:
    """What is dissolved, per kg of water; R recipes, S substances, n pKa values at most."""

    total: Array            # (R,S) mol/kg
    pka: Array              # (S,n) or (R,S,n), NaN after the last
    charge_0: Array         # (S,) charge of the fully protonated form
    counter_charge: Array   # (S,) charge of the ions that came with it
    pkw: Array              # (R,)
    log_open_bicarbonate: Array  # (R,) log10 of [HCO3-] a_H at D = 0; -inf when closed to the air
    log_open_carbonate: Array    # (R,) log10 of [CO3 2-] a_H^2 at D = 0

    def rows(self, where: slice) -> Solution:
        return Solution(self.total[where], self.pka[where] if self.pka.ndim == 3 else self.pka,
                        self.charge_0, self.counter_charge, self.pkw[where],
                        self.log_open_bicarbonate[where], self.log_open_carbonate[where])

    def steps(self, d: Array) -> Array:
        """Step constants of every substance at Davies D (R,). (R,S,n)"""
        return step_constants(self.pka, charge_fully_protonated=self.charge_0, d=d)


@dataclass(frozen=True)
class Balance:
    """Both sides of the balance, and their change per unit of pH; (R,), mol/kg."""

    left: Array
    right: Array
    left_slope: Array
    right_slope: Array

    @property
    def residual(self) -> Array:
        return self.left - self.right

    @property
    def buffer_capacity(self) -> Array:
        """Strong base per unit of pH, at constant ionic strength. [mol/kg]"""
        return self.right_slope - self.left_slope


def balance(solution: Solution, ph: Array, d: Array, steps: Array) -> Balance:
    """The two sides of the charge balance at pH (R,), Davies D (R,) and the step constants there."""
    hydrogen, hydroxide, bicarbonate, carbonate = free_ions(solution, ph, d)
    mean, variance = loss_moments(ph, steps)
    lost, lost_slope = ((solution.total * moment).sum(axis=1) for moment in (mean, variance))
    q0 = solution.total @ (solution.charge_0 + solution.counter_charge)
    return Balance(
        left=hydrogen + np.maximum(q0, 0.0),
        right=hydroxide + lost + bicarbonate + 2 * carbonate + np.maximum(-q0, 0.0),
        left_slope=-LN10 * hydrogen,
        right_slope=LN10 * (hydroxide + bicarbonate + 4 * carbonate + lost_slope))


def free_ions(solution: Solution, ph: Array, d: Array) -> tuple[Array, Array, Array, Array]:
    """[H+], [OH-], and [HCO3-], [CO3 2-] kept up by the air; each (R,), mol/kg."""
    return (np.exp(LN10 * (d - ph)),
            np.exp(LN10 * (ph - solution.pkw + d)),
            np.exp(LN10 * (solution.log_open_bicarbonate + ph + d)),
            np.exp(LN10 * (solution.log_open_carbonate + 2 * ph + 4 * d)))


def ionic_strength(solution: Solution, ph: Array, d: Array, steps: Array) -> Array:
    """Half the sum of c z^2 over all ions; counter ions are taken as of charge one. (R,), mol/kg"""
    hydrogen, hydroxide, bicarbonate, carbonate = free_ions(solution, ph, d)
    mean, variance = loss_moments(ph, steps)
    mean_square = (solution.charge_0 - mean) ** 2 + variance
    return 0.5 * (hydrogen + hydroxide + bicarbonate + 4 * carbonate
                  + (solution.total * (mean_square + np.abs(solution.counter_charge))).sum(axis=1))


def root(solution: Solution, d: Array, steps: Array, start: Array) -> Array:
    """The pH (R,) at which the charges balance at Davies D; NaN where none lies in -2..16."""
    low, high = np.full_like(start, LOWEST_PH), np.full_like(start, HIGHEST_PH)
    ph = start
    for _ in range(_MOST_STEPS):
        sides = balance(solution, ph, d, steps)
        imbalance = np.log(sides.left / sides.right)
        low, high = np.where(imbalance > 0, ph, low), np.where(imbalance < 0, ph, high)
        guess = ph - imbalance / (sides.left_slope / sides.left - sides.right_slope / sides.right)
        guess = np.where((guess > low) & (guess < high), guess, 0.5 * (low + high))
        going_on = (np.abs(imbalance) > _ENOUGH_IMBALANCE) & (np.abs(guess - ph) > _ENOUGH_STEP)
        ph = np.where(going_on, guess, ph)
        if not going_on.any():
            break
    at_an_end = (ph < LOWEST_PH + 1e-9) | (ph > HIGHEST_PH - 1e-9)
    return np.where(at_an_end | np.isnan(imbalance), np.nan, ph)
