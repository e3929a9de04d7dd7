"""Where a fit of a ladder begins: the films taken as hiding, their K/S shared out by Duncan's rule."""

from __future__ import annotations

import numpy as np

from formcheck.colour import saunderson
from formcheck.colour.learning.panels import Ladder
from formcheck.colour.learning.unknowns import (
    K1_BELIEVED,
    K2_BELIEVED,
    LEAST_KNOWN,
    Layout,
    Unknowns,
    mean_thickness,
)

USUAL_S_X = 5.0  # of a film near hiding
LEAST_SHARE = 0.004  # of the usual S X: K and S begin no lower, so that they can still move
SLIGHT = 1e-3


def start_of(ladder: Ladder, layout: Layout) -> Unknowns:
    """First guesses of the unknowns."""
    shared = np.zeros(layout.shared)
    shared[:2] = K1_BELIEVED, K2_BELIEVED
    each = np.zeros((len(ladder.wavelength_nm), layout.each))
    ground = np.clip(_inside(ladder, ladder.ground_reading), SLIGHT, 1 - SLIGHT)
    each[:, layout.ground] = np.log(ground / (1 - ground)).T
    K, S = _shared_out(ladder)
    each[:, layout.k], each[:, layout.s] = np.log(K).T, np.log(S).T
    return Unknowns(each, shared)


def _inside(ladder: Ladder, reading: np.ndarray) -> np.ndarray:
    lifted = np.maximum(reading, (K1_BELIEVED if ladder.specular_included else 0.0) + SLIGHT)
    return saunderson.to_internal(lifted, k1=K1_BELIEVED, k2=K2_BELIEVED, specular_included=ladder.specular_included)


def _shared_out(ladder: Ladder) -> tuple[np.ndarray, np.ndarray]:
    """K and S (C, W), above 0: non-negative least squares of  sum c K = (K/S of the film) sum c S."""
    from scipy.optimize import nnls

    films, colourants = ladder.volume_fraction.shape
    scale = USUAL_S_X / mean_thickness(ladder)
    R = np.array([_inside(ladder, ladder.reading[ladder.film_of == f]).mean(axis=0) for f in range(films)])
    R = np.clip(R, SLIGHT, 1 - SLIGHT)
    ratio = (1 - R) ** 2 / (2 * R)
    learned = np.tile(ladder.learned, 2)
    known = np.concatenate([ladder.known_k, ladder.known_s])
    # Two weak wishes settle what the ratios leave open: the usual scattering, and no more K than needed.
    wish = np.concatenate([np.zeros(colourants), np.full(colourants, 0.3 / colourants)])
    pin = np.where(learned, SLIGHT, 10.0)
    found = np.empty((2 * colourants, ratio.shape[1]))
    for w in range(ratio.shape[1]):
        rows = np.hstack([ladder.volume_fraction, -ratio[:, w, None] * ladder.volume_fraction])
        matrix = np.vstack([rows / (1 + ratio[:, w, None]), wish, np.diag(pin)])
        right = np.concatenate([np.zeros(films), [0.3], pin * np.where(learned, 0.0, known[:, w]) / scale])
        found[:, w] = nnls(matrix, right)[0] * scale
    found = np.where(learned[:, None], found, known)
    least = np.where(learned, LEAST_SHARE * scale, LEAST_KNOWN / mean_thickness(ladder))
    K, S = np.split(np.maximum(found, least[:, None]), 2)
    return K, S
