"""The pH of mixtures of shelf materials, with its standard deviation, or unknown with the reason."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from formcheck.acid_base import carbon_dioxide, water
from formcheck.acid_base.charge_balance import Solution
from formcheck.acid_base.ph import PhState, dissolved, solve_ph
from formcheck.acid_base.sensitivity import ph_slopes, root_sum_square
from formcheck.acid_base.unsettled import MOST_MOL_KG
from formcheck.acid_base.water_phase import WaterPhase

Array = NDArray[np.float64]

# What Davies leaves of the standard buffers of Bates, below 0.1 mol/kg (tests/published/test_ph_buffers.py).
_MODEL_SD = 0.02
# pKa move with temperature by 0.000 (acetic acid) to 0.031 (ammonia) per kelvin; records give them at
# 25 C, so a quarter of that range on either side stands for what is not known.
_PKA_SD_PER_KELVIN = 0.015
# Two standard deviations for what 20 % of the least water-like common cosolvent does to acetic acid: from
# 4.76 to 5.29 in dioxane (Harned & Owen 1958, from memory).
_PKA_SD_PER_COSOLVENT_SHARE = (5.29 - 4.76) / 0.20 / 2
_LEAST_SD_BEYOND_DAVIES = 0.1
_PKW_SD = 0.01


@dataclass(frozen=True)
class MixturePh:
    """Arrays (R,); NaN where the pH is unknown, and then `reasons` says why (empty where known).

    ph                 activity-corrected, closed to the air
    ph_sd              one standard deviation: model, activity, pKa, amounts, temperature, cosolvent, CO2
    ph_ideal           every activity coefficient 1
    ph_with_air_co2    with the carbon dioxide that water left open to the air holds
    state, solution    for titration, dosing and the forms of dyes
    """

    ph: Array
    ph_sd: Array
    ph_ideal: Array
    ph_with_air_co2: Array
    ionic_strength_mol_kg: Array
    buffer_capacity_mol_kg: Array
    beyond_davies: NDArray[np.bool_]
    reasons: tuple[str, ...]
    notes: tuple[str, ...]
    state: PhState
    solution: Solution


def mixture_ph(phase: WaterPhase, *, temperature_c: ArrayLike = 25.0,
               relative_amount_sd: ArrayLike = 0.0) -> MixturePh:
    """pH of each recipe from its water phase (see `water_phase`).

    Parameters
    ----------
    temperature_c : scalar or (R,)
        Of the mixture; unknown pH outside 0 to 100. [C]
    relative_amount_sd : scalar or (R,S)
        Weighing: standard deviation of each amount over the amount. [1]

    Source
    ------
    `ph.solve_ph`; first-order propagation by the implicit charge balance (`sensitivity`).
    """
    t = np.broadcast_to(np.asarray(temperature_c, float), (len(phase.total_mol_kg),))
    state, solution = _solved(phase, phase.total_mol_kg, phase.pka, phase.charge_fully_protonated,
                              phase.counter_charge, t)
    too_strong = state.ionic_strength_mol_kg > MOST_MOL_KG
    with_co2 = _with_air_co2(phase, t).ph
    sd = root_sum_square(_input_sd(phase, solution, state, t, relative_amount_sd), _activity_sd(state),
                         (state.ph - with_co2) / 2, np.full(len(t), _MODEL_SD))
    known = ~too_strong & ~np.isnan(state.ph) & state.settled
    reasons = tuple("" if known[r] else _reason(phase, r, t[r], bool(too_strong[r])) for r in range(len(t)))

    def where_known(values: Array) -> Array:
        return np.where(known, values, np.nan)

    return MixturePh(
        ph=where_known(state.ph), ph_sd=where_known(sd), ph_ideal=where_known(state.ph_ideal),
        ph_with_air_co2=where_known(with_co2),
        ionic_strength_mol_kg=where_known(state.ionic_strength_mol_kg),
        buffer_capacity_mol_kg=where_known(state.buffer_capacity_mol_kg),
        beyond_davies=state.beyond_davies & known, reasons=reasons, notes=phase.notes,
        state=state, solution=solution)


def _solved(phase: WaterPhase, total: Array, pka: Array, charge: Array, counter: Array,
            t: Array) -> tuple[PhState, Solution]:
    state = solve_ph(total, pka, charge_fully_protonated=charge, counter_charge=counter, temperature_c=t,
                     other_ionic_strength_mol_kg=phase.other_ionic_strength_mol_kg)
    return state, dissolved(total, pka, charge_fully_protonated=charge, counter_charge=counter,
                            temperature_c=t)


def _with_air_co2(phase: WaterPhase, t: Array) -> PhState:
    """The same mixture with as much carbon dioxide as plain water takes up from the air, no more."""
    co2 = carbon_dioxide.henry_mol_kg_atm(t) * carbon_dioxide.OF_AIR_ATM
    total = np.concatenate([phase.total_mol_kg, np.where(np.isnan(t), np.nan, co2)[:, None]], axis=1)
    n = max(phase.pka.shape[1], 2)
    pka = np.full((len(phase.pka) + 1, n), np.nan)
    pka[:-1, : phase.pka.shape[1]] = phase.pka
    pka[-1, :2] = carbon_dioxide.pka(25.0)
    return _solved(phase, total, pka, np.append(phase.charge_fully_protonated, 0.0),
                   np.append(phase.counter_charge, 0.0), t)[0]


def _input_sd(phase: WaterPhase, solution: Solution, state: PhState, t: Array,
              relative_amount_sd: ArrayLike) -> Array:
    """From every pKa (its own spread, temperature, cosolvent), every amount, and pKw. (R,)"""
    slopes = ph_slopes(solution, state)
    of_medium = np.hypot(_PKA_SD_PER_KELVIN * (t - 25.0), _PKA_SD_PER_COSOLVENT_SHARE * phase.cosolvent_share)
    pka_sd = np.hypot(np.nan_to_num(phase.pka_sd), of_medium[:, None, None])
    by_pka = (np.where(np.isnan(phase.pka), 0.0, slopes.by_pka * pka_sd) ** 2).sum(axis=(1, 2))
    amount_sd = phase.total_mol_kg * np.asarray(relative_amount_sd, float)
    by_amount = ((slopes.by_total * amount_sd) ** 2).sum(axis=1)
    pkw_sd = np.hypot(_PKW_SD, _PKA_SD_PER_COSOLVENT_SHARE * phase.cosolvent_share)
    return np.sqrt(by_pka + by_amount + (slopes.by_pkw * pkw_sd) ** 2)


def _activity_sd(state: PhState) -> Array:
    """Half the gap between ideal and corrected pH; the whole gap where Davies no longer holds. (R,)"""
    gap = np.abs(state.ph - state.ph_ideal)
    return np.where(state.beyond_davies, np.maximum(gap, _LEAST_SD_BEYOND_DAVIES), gap / 2)


def _reason(phase: WaterPhase, recipe: int, temperature_c: float, too_strong: bool) -> str:
    said = phase.unsettled.reason(recipe)
    if said:
        return said
    if not water.LOWEST_C <= temperature_c <= water.HIGHEST_C:
        return f"the mixture is at {temperature_c:g} C; the pH of water is computed from 0 to 100 C"
    if too_strong:
        return (f"an ionic strength above {MOST_MOL_KG:g} mol per kg of water is beyond any simple model of "
                "activity")
    return "the charges of its ions balance at no pH from -2 to 16"
