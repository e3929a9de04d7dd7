"""What a ladder should read for given unknowns, and how each reading moves with each of them."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from formcheck.colour.learning.film_slopes import Slopes, SurfaceSlopes, film_slopes, surface_slopes
from formcheck.colour.learning.panels import Ladder
from formcheck.colour.learning.unknowns import Layout


@dataclass(frozen=True)
class Forward:
    """Everything that leads from the unknowns to the readings."""

    K: np.ndarray  # (W, C)
    S: np.ndarray
    ground: np.ndarray  # (G, W), from inside
    amount: np.ndarray  # (F, C): volume fraction times thickness
    k: np.ndarray  # (F, W): K X of the film
    s: np.ndarray
    inside: Slopes  # (N, W)
    measured: SurfaceSlopes  # (N, W)
    bare: SurfaceSlopes  # (G, W)


def forward(ladder: Ladder, layout: Layout, each: np.ndarray, shared: np.ndarray) -> Forward:
    K, S = np.exp(each[:, layout.k]), np.exp(each[:, layout.s])
    ground = 1 / (1 + np.exp(-each[:, layout.ground].T))
    amount = ladder.volume_fraction * (ladder.thickness_um * np.exp(shared[layout.thickness]))[:, None]
    amount[layout.mix_film, layout.mix_colourant] *= np.exp(shared[layout.loading])
    k, s = amount @ K.T, amount @ S.T
    inside = film_slopes(k[ladder.film_of], s[ladder.film_of], ground[ladder.ground_of])
    film_gloss, bare_gloss = shared[layout.gloss][ladder.film_of, None], shared[layout.ground_gloss][:, None]
    k1, k2, mirror = float(shared[0]), float(shared[1]), ladder.specular_included
    return Forward(
        K, S, ground, amount, k, s, inside,
        measured=surface_slopes(inside.value, k1=k1, k2=k2, specular_included=mirror, gloss=film_gloss),
        bare=surface_slopes(ground, k1=k1, k2=k2, specular_included=mirror, gloss=bare_gloss))


def residuals(ladder: Ladder, at: Forward) -> np.ndarray:
    """Reckoned less measured, (W, N + G): the readings, then the bare grounds."""
    return np.concatenate([at.measured.value - ladder.reading, at.bare.value - ladder.ground_reading]).T


def slopes(ladder: Ladder, layout: Layout, at: Forward) -> tuple[np.ndarray, np.ndarray]:
    """Slopes of the residuals: by the unknowns of each wavelength (W, N + G, M), by the shared ones (W, N + G, O)."""
    N, G, W = len(ladder.film_of), layout.grounds, len(at.K)
    J = np.zeros((W, N + G, layout.each))
    B = np.zeros((W, N + G, layout.shared))
    by_k, by_s = at.measured.by_inside * at.inside.by_k, at.measured.by_inside * at.inside.by_s
    amount = at.amount[ladder.film_of]
    J[:, :N, layout.k] = by_k.T[:, :, None] * amount * at.K[:, None, :]
    J[:, :N, layout.s] = by_s.T[:, :, None] * amount * at.S[:, None, :]
    logit = at.ground * (1 - at.ground)
    reading, ground = np.arange(N), np.arange(G)
    J[:, reading, layout.ground.start + ladder.ground_of] = (
        at.measured.by_inside * at.inside.by_ground * logit[ladder.ground_of]).T
    J[:, N + ground, layout.ground.start + ground] = (at.bare.by_inside * logit).T
    B[:, :N, 0], B[:, :N, 1] = at.measured.by_k1.T, at.measured.by_k2.T
    B[:, N:, 0], B[:, N:, 1] = at.bare.by_k1.T, at.bare.by_k2.T
    film = ladder.film_of
    B[:, reading, layout.thickness.start + film] = (by_k * at.k[film] + by_s * at.s[film]).T
    B[:, reading, layout.gloss.start + film] = 1.0
    B[:, N + ground, layout.ground_gloss.start + ground] = 1.0
    for column, (mixed, colourant) in enumerate(zip(layout.mix_film, layout.mix_colourant, strict=True)):
        rows = np.flatnonzero(film == mixed)
        B[:, rows, layout.loading.start + column] = (
            J[:, rows, layout.k.start + colourant] + J[:, rows, layout.s.start + colourant])
    return J, B
