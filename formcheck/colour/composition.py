"""Two scattering layers laid on one another: reflectance and transmittance of the pair from those of each.

Everything is for diffuse light inside the layers; how the pair looks in air is for geometry.py.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from formcheck.colour import kubelka_munk, saunderson


@dataclass(frozen=True)
class Optics:
    """A layer, a boundary or a pile of them, as diffuse light meets it from above and from below.

    All from 0 to 1, of shapes that broadcast. [1]
    """

    reflectance: np.ndarray
    transmittance: np.ndarray  # downwards
    reflectance_below: np.ndarray
    transmittance_below: np.ndarray  # upwards


def film_optics(k_x: ArrayLike, s_x: ArrayLike) -> Optics:
    """One homogeneous film of K X = k_x and S X = s_x (at least 0): alike from both sides.

    Source: P. Kubelka, J. Opt. Soc. Am. 38 (1948) 448.
    """
    R = kubelka_munk.film(k_x, s_x, thickness_um=1.0, ground=0.0)
    T = kubelka_munk.film_transmittance(k_x, s_x, thickness_um=1.0)
    return Optics(R, T, R, T)


def boundary_optics(*, n_above: ArrayLike, n_below: ArrayLike) -> Optics:
    """A smooth boundary between two indices, for diffuse light (saunderson.diffuse_reflection)."""
    down = saunderson.diffuse_reflection(n_from=n_above, n_to=n_below)
    up = saunderson.diffuse_reflection(n_from=n_below, n_to=n_above)
    return Optics(down, 1 - down, up, 1 - up)


def compose(upper: Optics, lower: Optics) -> Optics:
    """The pair: R = R_1 + T_1 T_1' R_2 / (1 - R_1' R_2), T = T_1 T_2 / (1 - R_1' R_2), primes from below.

    Source: P. Kubelka, J. Opt. Soc. Am. 38 (1948) 448; for layers that differ from their two sides,
    P. Kubelka, J. Opt. Soc. Am. 44 (1954) 330.
    """
    # Two faces that both reflect all let no light between them: any number above 0 divides nothing.
    between = np.maximum(1 - upper.reflectance_below * lower.reflectance, np.finfo(float).tiny)
    return Optics(
        upper.reflectance + upper.transmittance * upper.transmittance_below * lower.reflectance / between,
        upper.transmittance * lower.transmittance / between,
        lower.reflectance_below
        + lower.transmittance * lower.transmittance_below * upper.reflectance_below / between,
        upper.transmittance_below * lower.transmittance_below / between,
    )


def over_ground(pile: Optics, ground: ArrayLike) -> np.ndarray:
    """Reflectance of a pile on a ground of reflectance `ground` as met from inside, 0 to 1. [1]"""
    R_g = np.asarray(ground, dtype=float)
    between = np.maximum(1 - pile.reflectance_below * R_g, np.finfo(float).tiny)
    return pile.reflectance + pile.transmittance * pile.transmittance_below * R_g / between
