"""A film seen in air and its slopes: what a least-squares fit of drawdowns needs of the two-flux film.

The formulas of kubelka_munk.film and saunderson.to_measured once more, differentiated by hand; a test
holds both together.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from formcheck.colour.kubelka_munk import LEAST_ALPHA

SMALL_DEPTH = 1e-4  # alpha**2 below which the slope of tanh(alpha)/alpha is taken from its series


@dataclass(frozen=True)
class Slopes:
    """A value and its partial derivatives, all of one shape."""

    value: np.ndarray
    by_k: np.ndarray  # K X
    by_s: np.ndarray  # S X
    by_ground: np.ndarray


def film_slopes(k: np.ndarray, s: np.ndarray, ground: np.ndarray) -> Slopes:
    """Reflectance inside a film of k = K X and s = S X over `ground`, and its slopes; all broadcast. [1]

    With q = k (k + 2s), t = tanh(sqrt q)/sqrt q: R = (g - g t k + t s (1 - g)) / (1 + t k + t s (1 - g)).

    Source: P. Kubelka, J. Opt. Soc. Am. 38 (1948) 448, as in kubelka_munk.film.
    """
    k, s, g = np.broadcast_arrays(k, s, ground)
    t, t_by_q = _tanh_ratio(k * (k + 2 * s))
    lit = 1 - g
    denominator = 1 + t * k + t * s * lit
    R = np.maximum(g * (1 - t * k) + t * s * lit, 0.0) / denominator
    by_t = (s * lit - g * k - R * (k + s * lit)) / denominator * t_by_q
    return Slopes(
        value=R,
        by_k=-t * (g + R) / denominator + by_t * 2 * (k + s),
        by_s=t * lit * (1 - R) / denominator + by_t * 2 * k,
        by_ground=(1 - t * (k + s) + R * t * s) / denominator,
    )


def _tanh_ratio(q: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """tanh(alpha)/alpha for q = alpha**2, and its slope in q; smooth through q = 0."""
    alpha = np.sqrt(q) + LEAST_ALPHA
    t = np.tanh(alpha) / alpha
    series = -1 / 3 + 4 * q / 15 - 17 * q**2 / 105
    slope = (1 - (t * alpha) ** 2 - t) / (2 * np.maximum(q, SMALL_DEPTH))
    return t, np.where(q < SMALL_DEPTH, series, slope)


@dataclass(frozen=True)
class SurfaceSlopes:
    """A measured reflectance and its partial derivatives, all of one shape; that by gloss is 1."""

    value: np.ndarray
    by_inside: np.ndarray
    by_k1: np.ndarray
    by_k2: np.ndarray


def surface_slopes(inside: np.ndarray, *, k1: float, k2: float, specular_included: bool,
                   gloss: np.ndarray | float = 0.0) -> SurfaceSlopes:
    """Reflectance in air of that inside the film, and its slopes; `gloss` that broadcasts is added. [1]

    Source: J. L. Saunderson, J. Opt. Soc. Am. 32 (1942) 727, as in saunderson.to_measured.
    """
    passed = 1 - k2 * inside
    body = (1 - k2) * inside / passed
    mirror = 1.0 if specular_included else 0.0
    return SurfaceSlopes(
        value=mirror * k1 + gloss + (1 - k1) * body,
        by_inside=(1 - k1) * (1 - k2) / passed**2,
        by_k1=mirror - body,
        by_k2=(1 - k1) * inside * (inside - 1) / passed**2,
    )
