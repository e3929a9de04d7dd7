"""The pH of water with acids, bases, ampholytes and salts in it, for many recipes at once."""

from __future__ import annotations

from dataclasses import dataclass, fields

import numpy as np
from numpy.typing import ArrayLike, NDArray

from formcheck.acid_base import activity, carbon_dioxide, water
from formcheck.acid_base.charge_balance import Solution, balance, ionic_strength, root
from formcheck.acid_base.protons import refuse_pka_out_of_order

Array = NDArray[np.float64]

_ROWS_AT_ONCE = 4096  # keeps the working arrays in the processor's cache
_MOST_ROUNDS = 100
_ENOUGH_STRENGTH = 1e-12
_SETTLED = 1e-10


@dataclass(frozen=True)
class PhState:
    """Arrays (R,). `ph` and `ph_ideal` are NaN where the balance has no root in -2..16.

    ph                  -log10 of the activity of H+, activity coefficients by Davies
    ph_ideal            the same with every activity coefficient 1
    ionic_strength_mol_kg, buffer_capacity_mol_kg (strong base per unit of pH)
    residual_mol_kg     what is left of the charge balance
    davies_d            D of the Davies equation, -log10 gamma of an ion of charge one
    beyond_davies       ionic strength above 0.5 mol/kg: D was held at its value there
    settled             the ionic strength agrees with the ions it was reckoned from
    """

    ph: Array
    ph_ideal: Array
    ionic_strength_mol_kg: Array
    buffer_capacity_mol_kg: Array
    residual_mol_kg: Array
    davies_d: Array
    beyond_davies: NDArray[np.bool_]
    settled: NDArray[np.bool_]


def solve_ph(total_mol_kg: ArrayLike, pka: ArrayLike, *, charge_fully_protonated: ArrayLike,
             counter_charge: ArrayLike, temperature_c: ArrayLike = 25.0,
             other_ionic_strength_mol_kg: ArrayLike = 0.0,
             co2_partial_pressure_atm: ArrayLike = 0.0, pkw: ArrayLike | None = None) -> PhState:
    """pH, ideal and activity-corrected, from the charge balance over all dissolved substances.

    Parameters
    ----------
    total_mol_kg : (R,S)
        Each substance over all its forms, per kg of water (pigment and binder take up no water);
        NaN where unknown gives NaN for that recipe. [mol/kg]
    pka : (S,n) or (R,S,n)
        Thermodynamic pKa at the temperature, most acidic first, padded with NaN. [1]
    charge_fully_protonated, counter_charge : (S,)
        As in `materials.record.AcidBase`. A strong acid or base has no pKa and a counter charge alone
        (HCl: -1); a salt that takes no part has both (NaCl: -1 and +1). Ammonia is charge 1 with no
        counter charge, ammonium chloride 1 and -1, an amino acid 1 and 0. Counter ions count as of
        charge one in the ionic strength. [1]
    temperature_c : scalar or (R,)
        0 to 100; NaN results outside. [C]
    other_ionic_strength_mol_kg : scalar or (R,)
        From ions that are not among the substances. [mol/kg]
    co2_partial_pressure_atm : scalar or (R,)
        CO2 over a solution open to the air at equilibrium; 0 for closed. [atm]
    pkw : scalar or (R,), optional
        In place of the published one at the temperature. [1]

    Raises
    ------
    ValueError
        Negative or infinite totals or pressures, pKa out of order, shapes that do not fit.

    Source
    ------
    Charge and mass balance with activity coefficients by C. W. Davies, Ion Association (1962).
    """
    solution = dissolved(total_mol_kg, pka, charge_fully_protonated=charge_fully_protonated,
                         counter_charge=counter_charge, temperature_c=temperature_c,
                         co2_partial_pressure_atm=co2_partial_pressure_atm, pkw=pkw)
    n_recipes = len(solution.total)
    a = _per_recipe(activity.debye_hueckel_a(temperature_c), n_recipes, "temperature_c")
    other = _per_recipe(other_ionic_strength_mol_kg, n_recipes, "other_ionic_strength_mol_kg")
    refuse_where(~(other >= 0) & ~np.isnan(other), other, "other_ionic_strength_mol_kg")
    blocks = [slice(i, i + _ROWS_AT_ONCE) for i in range(0, max(n_recipes, 1), _ROWS_AT_ONCE)]
    parts = [_solve(solution.rows(rows), a[rows], other[rows]) for rows in blocks]
    return PhState(*(np.concatenate([getattr(part, field.name) for part in parts])
                     for field in fields(PhState)))


def dissolved(total_mol_kg: ArrayLike, pka: ArrayLike, *, charge_fully_protonated: ArrayLike,
              counter_charge: ArrayLike, temperature_c: ArrayLike = 25.0,
              co2_partial_pressure_atm: ArrayLike = 0.0, pkw: ArrayLike | None = None) -> Solution:
    """The arguments of `solve_ph`, checked, as the charge balance wants them."""
    total, pka_ = np.asarray(total_mol_kg, float), np.array(pka, float)
    charge_0, counter = np.asarray(charge_fully_protonated, float), np.asarray(counter_charge, float)
    if total.ndim != 2 or pka_.ndim not in (2, 3) or pka_.shape[-2] != total.shape[1]:
        raise ValueError(f"totals {total.shape} with pKa {pka_.shape}; expected (R,S) and (S,n) or (R,S,n)")
    if charge_0.shape != counter.shape or charge_0.shape != total.shape[1:]:
        raise ValueError(f"charges {charge_0.shape}, {counter.shape}; expected one for each of "
                         f"{total.shape[1]} substances")
    refuse_where(~((total >= 0) & np.isfinite(total)) & ~np.isnan(total), total, "total_mol_kg")
    refuse_pka_out_of_order(pka_)
    n_recipes = len(total)
    t = _per_recipe(temperature_c, n_recipes, "temperature_c")
    pressure = _per_recipe(co2_partial_pressure_atm, n_recipes, "co2_partial_pressure_atm")
    refuse_where(~(pressure >= 0) & ~np.isnan(pressure), pressure, "co2_partial_pressure_atm")
    log_bicarbonate, log_carbonate = _open_to_air(pressure, t)
    return Solution(total, pka_, charge_0, counter,
                    _per_recipe(water.pkw(t) if pkw is None else pkw, n_recipes, "pkw"),
                    log_bicarbonate, log_carbonate)


def _solve(solution: Solution, a: Array, other: Array) -> PhState:
    """Ideal pH first; from there pH and ionic strength in turn until they agree."""
    none = np.zeros_like(a)
    steps = solution.steps(none)
    ph = ph_ideal = root(solution, none, steps, np.full_like(a, 7.0))
    strength = other + ionic_strength(solution, ph, none, steps)
    for round_ in range(_MOST_ROUNDS):
        d = activity.davies_d(strength, a=a)
        steps = solution.steps(d)
        ph = root(solution, d, steps, np.where(np.isnan(ph), 7.0, ph))
        new = other + ionic_strength(solution, ph, d, steps)
        apart = np.abs(new - strength) / np.maximum(strength, 1.0)
        if not (apart > _ENOUGH_STRENGTH).any():
            break
        # Plain substitution settles within a dozen rounds; what still swings after many is damped.
        strength = new if round_ < _MOST_ROUNDS // 2 else 0.5 * (new + strength)
    sides = balance(solution, ph, d, steps)
    return PhState(ph, ph_ideal, strength, sides.buffer_capacity, sides.residual, d,
                   activity.beyond_davies(strength), apart < _SETTLED)


def _open_to_air(pressure: Array, temperature_c: Array) -> tuple[Array, Array]:
    """log10 of what HCO3- and CO3 2- are held at by the air, times a_H and a_H^2, at D = 0."""
    with np.errstate(divide="ignore"):
        log_co2 = np.log10(pressure) + np.log10(carbon_dioxide.henry_mol_kg_atm(temperature_c))
    first, second = np.moveaxis(carbon_dioxide.pka(temperature_c), -1, 0)
    return log_co2 - first, log_co2 - first - second


def _per_recipe(value: ArrayLike, n_recipes: int, name: str) -> Array:
    array = np.asarray(value, float)
    if array.ndim > 1 or array.shape not in ((), (1,), (n_recipes,)):
        raise ValueError(f"{name} of shape {array.shape}; expected one value, or one for each of "
                         f"{n_recipes} recipes")
    return np.broadcast_to(array, (n_recipes,)).copy()


def refuse_where(bad: NDArray[np.bool_], values: Array, name: str,
                 expected: str = "a finite value of at least 0") -> None:
    """Raise ValueError that names the first value where `bad` holds."""
    if bad.any():
        place = tuple(int(i) for i in np.argwhere(bad)[0])
        raise ValueError(f"{name}{list(place)} is {values[place]}; expected {expected}")
