"""Time to solve the pH of 100,000 mixtures of eight substances, ideal and activity-corrected.

Run from the project's folder: python benchmarks/ph_solver.py. Goal: at most 10 s on two cores.
For scale, a loop of scipy's root finder over the same charge balance is timed on 50 of the mixtures.
"""

from __future__ import annotations

import time

import numpy as np
from scipy.optimize import brentq

from formcheck.acid_base import activity, water
from formcheck.acid_base.ph import solve_ph

N_MIXTURES, N_SUBSTANCES, N_STEPS, N_LOOPED, GOAL_S = 100_000, 8, 3, 50, 10.0


def mixtures(seed: int = 1) -> tuple[np.ndarray, np.ndarray, np.ndarray, np.ndarray]:
    """Random totals, pKa, charges and counter charges, from traces to 2 mol/kg, two in five absent."""
    rng = np.random.default_rng(seed)
    total = 10 ** rng.uniform(-6, 0.3, (N_MIXTURES, N_SUBSTANCES))
    total *= rng.random(total.shape) < 0.6
    pka = np.sort(rng.uniform(-1, 14, (N_SUBSTANCES, N_STEPS)), axis=1)
    for row, n in zip(pka, rng.integers(0, N_STEPS + 1, N_SUBSTANCES), strict=True):
        row[n:] = np.nan
    return total, pka, rng.integers(-1, 3, N_SUBSTANCES), rng.integers(-3, 4, N_SUBSTANCES)


def one_by_one(total: np.ndarray, pka: np.ndarray, charge: np.ndarray, counter: np.ndarray) -> float:
    """The same by a scalar root finder inside a fixed point on the ionic strength."""
    a, pkw, d, ph = float(activity.debye_hueckel_a(25.0)), float(water.pkw(25.0)), 0.0, 7.0
    substances = [(c, np.cumsum([0.0, *row[~np.isnan(row)]]), z0, zc)
                  for c, row, z0, zc in zip(total, pka, charge, counter, strict=True)]
    for _ in range(30):
        ph = brentq(lambda x, d: net_and_strength(substances, pkw, x, d)[0], -2, 16, args=(d,), xtol=1e-13)
        new = float(activity.davies_d(net_and_strength(substances, pkw, ph, d)[1], a=a))
        if abs(new - d) < 1e-12:
            break
        d = new
    return ph


def net_and_strength(substances: list, pkw: float, ph: float, d: float) -> tuple[float, float]:
    """Net charge and ionic strength of one mixture at a pH and a Davies D."""
    hydrogen, hydroxide = 10 ** (d - ph), 10 ** (ph - pkw + d)
    net, strength = hydrogen - hydroxide, hydrogen + hydroxide
    for c, cumulative, z0, zc in substances:
        lost = np.arange(len(cumulative))
        z = z0 - lost
        exponent = lost * ph - cumulative + d * (z**2 - z0**2)
        weight = 10 ** (exponent - exponent.max())
        net += c * (zc + (weight @ z) / weight.sum())
        strength += c * (abs(zc) + (weight @ z**2) / weight.sum())
    return net, strength / 2


def main() -> None:
    total, pka, charge, counter = mixtures()
    start = time.perf_counter()
    state = solve_ph(total, pka, charge_fully_protonated=charge, counter_charge=counter)
    ours = time.perf_counter() - start
    start = time.perf_counter()
    looped = np.array([one_by_one(total[i], pka, charge, counter) for i in range(N_LOOPED)])
    loop = (time.perf_counter() - start) * N_MIXTURES / N_LOOPED
    print(f"{N_MIXTURES} mixtures of {N_SUBSTANCES} substances: {ours:.2f} s (goal {GOAL_S:g} s)")
    print(f"loop of scipy brentq, scaled from {N_LOOPED}: {loop:.0f} s, {loop / ours:.0f} times as long")
    print(f"largest gap to the loop {np.abs(state.ph[:N_LOOPED] - looped).max():.1e} pH; "
          f"largest charge residual {np.abs(state.residual_mol_kg).max():.1e} mol/kg; "
          f"unsettled {int((~state.settled).sum())}")


if __name__ == "__main__":
    main()
