"""From a first guess of a ladder's unknowns to the least sum of squares: Marquardt's damped steps."""

from __future__ import annotations

import numpy as np

from formcheck.colour.learning import arrow as arrows
from formcheck.colour.learning.panels import Ladder
from formcheck.colour.learning.residuals import Forward, forward, residuals, slopes
from formcheck.colour.learning.unknowns import (
    K1_MOST,
    K2_MOST,
    LEAST_LN,
    MOST_LN,
    Beliefs,
    Layout,
    Unknowns,
    mean_thickness,
)

STEPS, TRIES = 40, 8
ENOUGH = 1e-6  # relative fall of the sum of squares below which the walk ends
LONGEST_LN_STEP, LONGEST_SHARED_STEP = 1.5, 0.5


def settled(ladder: Ladder, layout: Layout, start: Unknowns, beliefs: Beliefs, sd: np.ndarray,
            held: np.ndarray) -> Unknowns:
    """The unknowns of least squares; `sd` (W, N + G) of the readings, `held` (O,) shared ones stay.

    Source: D. W. Marquardt, J. Soc. Ind. Appl. Math. 11 (1963) 431.
    """
    now, damping = start, 1e-2
    at = forward(ladder, layout, now.each, now.shared)
    cost = _cost(ladder, at, now, beliefs, sd)
    for _ in range(STEPS):
        arrow = arrow_of(ladder, layout, at, now, beliefs, sd)
        before = cost
        for _ in range(TRIES):
            then = _stepped(arrow, layout, now, damping, held, mean_thickness(ladder))
            then_at = forward(ladder, layout, then.each, then.shared)
            then_cost = _cost(ladder, then_at, then, beliefs, sd)
            if then_cost < cost:
                now, at, cost, damping = then, then_at, then_cost, max(damping / 5, 1e-9)
                break
            damping *= 5
        if before - cost < ENOUGH * cost:
            break
    return now


def arrow_of(ladder: Ladder, layout: Layout, at: Forward, now: Unknowns, beliefs: Beliefs, sd: np.ndarray
             ) -> arrows.Arrow:
    """The normal equations where the unknowns stand."""
    J, B = slopes(ladder, layout, at)
    found = arrows.normal_equations(J / sd[:, :, None], B / sd[:, :, None], residuals(ladder, at) / sd)
    return arrows.with_prior(found, pull=now.each - beliefs.centre, weight=beliefs.weight,
                             shared_pull=now.shared - beliefs.shared_centre, shared_weight=beliefs.shared_weight)


def _cost(ladder: Ladder, at: Forward, now: Unknowns, beliefs: Beliefs, sd: np.ndarray) -> float:
    pulls = (beliefs.weight * (now.each - beliefs.centre) ** 2).sum()
    pulls += (beliefs.shared_weight * (now.shared - beliefs.shared_centre) ** 2).sum()
    return float(((residuals(ladder, at) / sd) ** 2).sum() + pulls)


def _stepped(arrow: arrows.Arrow, layout: Layout, now: Unknowns, damping: float, held: np.ndarray,
             thickness_um: float) -> Unknowns:
    """One step, cut short; a surface constant that would leave its range stays while the others move."""
    stays = held.copy()
    most = np.array([K1_MOST, K2_MOST])
    for _ in range(3):
        by_each, by_shared = arrows.step(arrow, damping, stays)
        shared = now.shared + np.clip(by_shared, -LONGEST_SHARED_STEP, LONGEST_SHARED_STEP)
        leaving = ((shared[:2] < 0) | (shared[:2] > most)) & ~stays[:2]
        if not leaving.any():
            break
        stays[:2] |= leaving
    shared[:2] = np.where(held[:2], shared[:2], np.clip(shared[:2], 0.0, most))
    each = now.each + np.clip(by_each, -LONGEST_LN_STEP, LONGEST_LN_STEP)
    optical = slice(0, layout.s.stop)
    each[:, optical] = np.clip(each[:, optical], LEAST_LN - np.log(thickness_um), MOST_LN - np.log(thickness_um))
    return Unknowns(each, shared)
