"""How far readings, gloss and loadings stray from the model, as the readings themselves tell."""

from __future__ import annotations

import numpy as np

from formcheck.colour.learning.panels import Ladder
from formcheck.colour.learning.unknowns import Layout, Spreads, Unknowns, alike

# Believed before a reading is looked at; of gloss and loading also the most that is granted, so that neither
# explains away what the model misses (common practice of careful drawdowns).
FIRST_SPREAD = Spreads(model=0.004, gloss=0.01, loading=0.05)
BELIEF_FILMS, LEAST_TOLD = 0.01, 0.01  # weight of that belief, in films; the least share of it
LEAST_MODEL, MOST_MODEL = 1e-5, 0.05
CHANCE = 2.0  # standard deviations of a sum of squares that are put down to chance
FAR = 4.0  # standard deviations beyond which a reading pulls no harder (Huber 1964)
LEAST_REFLECTANCE = 0.003


def reading_sd(ladder: Ladder, model: float, *, smooth: bool = True) -> np.ndarray:
    """One standard deviation of each reading and bare ground, (W, N + G).

    The model's part is even in the cube root of reflectance, which is how CIELAB sees it. What a model
    misses runs on over neighbouring wavelengths; `smooth` counts them as telling it once.
    """
    lightness = 3 * np.maximum(ladder.reading, LEAST_REFLECTANCE) ** (2 / 3)
    films = np.sqrt(ladder.repeatability**2 + (model * lightness) ** 2 * (alike(ladder) if smooth else 1.0))
    grounds = np.full(ladder.ground_reading.shape, ladder.repeatability)
    return np.concatenate([films, grounds]).T


def less_of_the_far(residual: np.ndarray, sd: np.ndarray) -> np.ndarray:
    """Weights (W, N + G) of readings, below 1 for those beyond FAR.

    Source: P. J. Huber, Ann. Math. Statist. 35 (1964) 73.
    """
    return np.minimum(1.0, FAR / np.maximum(np.abs(residual) / sd, 1e-9))


def told_spreads(ladder: Ladder, layout: Layout, now: Unknowns, *, residual: np.ndarray, variance: np.ndarray,
                 free: float, before: Spreads) -> Spreads:
    """The spreads that a fit shows.

    residual (W, N + G); variance (O,) of the shared unknowns; `free` readings in excess of what they
    settled; `before`: the spreads that the fit was made with.
    """
    gloss, loading = layout.gloss, layout.loading
    return Spreads(
        model=_model_spread(ladder, residual, free),
        gloss=_told(now.shared[gloss], variance[gloss], before.gloss, FIRST_SPREAD.gloss),
        loading=_told(now.shared[loading], variance[loading], before.loading, FIRST_SPREAD.loading))


def _told(off: np.ndarray, variance: np.ndarray, before: float, believed: float) -> float:
    """The spread of values believed to lie about 0, from how far off they came to lie.

    Those that the readings hardly settle (variance near before**2) count for little.

    Source: D. J. C. MacKay, Neural Computation 4 (1992) 415.
    """
    settled = np.maximum(1 - variance / before**2, 0.0).sum()
    mean = ((off**2).sum() + BELIEF_FILMS * believed**2) / (settled + BELIEF_FILMS)
    return float(np.clip(np.sqrt(mean), LEAST_TOLD * believed, believed))


def _model_spread(ladder: Ladder, residual: np.ndarray, free: float) -> float:
    """The spread at which the sum of squares is what the free readings should give; by bisection.

    The least there is where repeatability alone explains the readings, within the chance of a sum of squares.
    """
    def squares(model: float) -> float:
        far = residual / reading_sd(ladder, model, smooth=False)
        return float(np.minimum(far**2, FAR**2).sum())

    low, high = LEAST_MODEL, MOST_MODEL
    if squares(low) <= free + CHANCE * np.sqrt(2 * free):
        return low
    for _ in range(40):
        middle = float(np.sqrt(low * high))
        low, high = (middle, high) if squares(middle) > free else (low, middle)
    return float(np.sqrt(low * high))
