"""What a learned ladder says of films that are not in it."""

from __future__ import annotations

import numpy as np

from formcheck.colour.learning.film_slopes import film_slopes, surface_slopes
from formcheck.colour.learning.ladder import LearnedLadder


def reckoned_reflectance(learned: LearnedLadder, *, volume_fraction: np.ndarray, thickness_um: np.ndarray,
                         ground_of: np.ndarray) -> np.ndarray:
    """Reflectance in air of films over the grounds of the ladder, with the learned surface, (Q, W).

    volume_fraction (Q, C), thickness_um (Q,), ground_of (Q,): one row for each film on a ground.
    """
    amount = volume_fraction * thickness_um[:, None]
    ground = 1 / (1 + np.exp(-learned.unknowns.each[:, learned.layout.ground].T))
    inside = film_slopes(amount @ learned.K, amount @ learned.S, ground[ground_of])
    return surface_slopes(inside.value, k1=learned.k1, k2=learned.k2,
                          specular_included=learned.ladder.specular_included).value
