"""How much of one acid or base brings a solution to a wanted pH."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from formcheck.acid_base import activity
from formcheck.acid_base.charge_balance import Solution, balance, ionic_strength
from formcheck.acid_base.ph import refuse_where
from formcheck.acid_base.protons import loss_moments, refuse_pka_out_of_order, step_constants

Array = NDArray[np.float64]

_ROUNDS = 60


@dataclass(frozen=True)
class Titrant:
    """One acid or base, as in `materials.record.AcidBase`, with the water that comes with a mole of it."""

    pka: tuple[float, ...]
    charge_fully_protonated: int
    counter_charge: int
    water_kg_mol: float = 0.0


@dataclass(frozen=True)
class Dose:
    """Arrays (R,). `mol_kg` is per kg of the water that was there; NaN where this titrant cannot do it."""

    mol_kg: Array
    ionic_strength_mol_kg: Array
    beyond_davies: NDArray[np.bool_]
    reachable: NDArray[np.bool_]


def dose_for_ph(solution: Solution, titrant: Titrant, wanted_ph: ArrayLike, *,
                temperature_c: ArrayLike = 25.0, ideal: bool = False) -> Dose:
    """Moles of a titrant, per kg of water, after which the pH is the wanted one.

    At a given pH and ionic strength the charge balance is linear in the dose, so the dose is a ratio;
    the ionic strength is then reckoned anew until both agree. The water that comes with the titrant
    dilutes the rest.

    Parameters
    ----------
    solution : from `ph.dissolved`, R recipes
    wanted_ph : scalar or (R,)
        -log10 of the activity of H+, in -2..16. [1]
    ideal : every activity coefficient 1.

    Returns
    -------
    Dose; not reachable where the dose would be negative (the wrong kind of titrant) or without end
    (a weak acid or base, or one too dilute, for this pH).

    Raises
    ------
    ValueError
        A wanted pH outside -2..16 or NaN, pKa out of order.

    Source
    ------
    The same charge balance as `ph.solve_ph`.
    """
    n = len(solution.total)
    ph = np.broadcast_to(np.asarray(wanted_ph, float), (n,)).copy()
    refuse_where(~((ph >= -2) & (ph <= 16)), ph, "wanted_ph", "a pH from -2 to 16")
    pka = np.array([titrant.pka or (np.nan,)], float)
    refuse_pka_out_of_order(pka)
    a = np.zeros(n) if ideal else np.broadcast_to(activity.debye_hueckel_a(temperature_c), (n,))
    d = np.zeros(n)
    for _ in range(_ROUNDS):
        dose, strength = _at_given_activity(solution, titrant, pka, ph, d)
        new = activity.davies_d(np.where(np.isnan(strength), 0.0, strength), a=a)
        if not (np.abs(new - d) > 1e-13).any():
            break
        d = new
    reachable = ~np.isnan(dose)
    return Dose(dose, strength, activity.beyond_davies(strength), reachable)


def _at_given_activity(solution: Solution, titrant: Titrant, pka: Array, ph: Array,
                       d: Array) -> tuple[Array, Array]:
    """Dose and the ionic strength after it, at a given Davies D; NaN where it cannot be reached."""
    steps = solution.steps(d)
    sides = balance(solution, ph, d, steps)
    charge_0 = np.array([float(titrant.charge_fully_protonated)])
    mean, variance = loss_moments(ph, step_constants(pka, charge_fully_protonated=charge_0, d=d))
    mean_charge = (charge_0 - mean)[:, 0]
    water_alone = _no_substance(solution)
    free = balance(water_alone, ph, d, water_alone.steps(d)).residual  # charge that new water takes up
    per_mole = mean_charge + titrant.counter_charge + titrant.water_kg_mol * free
    with np.errstate(divide="ignore", invalid="ignore"):
        dose = -sides.residual / per_mole
    dose = np.where(np.isfinite(dose) & (dose >= 0), dose, np.nan)
    square = mean_charge**2 + variance[:, 0] + abs(titrant.counter_charge)
    alone = ionic_strength(water_alone, ph, d, water_alone.steps(d))
    before = ionic_strength(solution, ph, d, steps)
    water = titrant.water_kg_mol * dose
    return dose, (before + 0.5 * dose * square + water * alone) / (1 + water)


def _no_substance(solution: Solution) -> Solution:
    none = np.zeros(0)
    return Solution(solution.total[:, :0], np.zeros((0, solution.pka.shape[-1])), none, none, solution.pkw,
                    solution.log_open_bicarbonate, solution.log_open_carbonate)
