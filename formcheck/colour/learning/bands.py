"""How sure learned K, S and surface constants are."""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from formcheck.colour.learning import arrow as arrows
from formcheck.colour.learning.downhill import arrow_of
from formcheck.colour.learning.panels import Ladder
from formcheck.colour.learning.residuals import Forward
from formcheck.colour.learning.unknowns import (
    K1_STRAYS,
    K2_STRAYS,
    LN_K_SD,
    LN_S_SD,
    Beliefs,
    Layout,
    Unknowns,
    alike,
)

FARTHEST_LN = 30.0


def covariances(ladder: Ladder, layout: Layout, at: Forward, now: Unknowns, beliefs: Beliefs, *, sd: np.ndarray,
                held: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """Of the unknowns as they are laid out: (W, M, M) and (O, O).

    The beliefs of k1 and k2 are wider than surfaces truly stray, so they enter in sandwich form.
    """
    arrow = arrow_of(ladder, layout, at, now, beliefs, sd)
    return arrows.covariance(arrow, held, discount=_discount(layout, beliefs))


def optical_sd(ladder: Ladder, layout: Layout, at: Forward, now: Unknowns, beliefs: Beliefs, *, sd: np.ndarray,
               held: np.ndarray) -> np.ndarray:
    """One standard deviation of K, then of S, of each colourant, (2C, W).

    The lesser of two answers: from ln K, right where readings hold K off 0, and from K itself, right
    where a K near 0 shows in no reading.
    """
    arrow = arrow_of(ladder, layout, at, now, beliefs, sd)
    discount = _discount(layout, beliefs)
    optical = slice(0, layout.s.stop)
    size = np.exp(now.each[:, optical])
    ln_sd = _root(arrows.covariance(arrow, held, discount=discount)[0])[:, optical]
    plain = _in_plain_units(ladder, layout, arrow, beliefs, size)
    plain_sd = _root(arrows.covariance(plain, held, discount=discount)[0])[:, optical]
    return np.minimum(np.expm1(np.minimum(ln_sd, FARTHEST_LN)) * size, plain_sd).T


def _discount(layout: Layout, beliefs: Beliefs) -> np.ndarray:
    strays, weight = np.array([K1_STRAYS, K2_STRAYS]), beliefs.shared_weight[:2]
    discount = np.zeros(layout.shared)
    discount[:2] = weight * (1 - weight * strays**2)
    return discount


def _in_plain_units(ladder: Ladder, layout: Layout, arrow: arrows.Arrow, beliefs: Beliefs, size: np.ndarray
                    ) -> arrows.Arrow:
    """The normal equations for K and S instead of their logarithms; what is believed of them scaled alike."""
    M, optical = layout.each, slice(0, layout.s.stop)
    scale = np.ones((len(size), M))
    scale[:, optical] = size
    learned = np.tile(ladder.learned, 2)
    wide = np.repeat([LN_K_SD, LN_S_SD], layout.colourants) * np.sqrt(alike(ladder))
    weight = np.zeros((len(size), M))
    weight[:, optical] = np.where(learned, (wide * size.max(axis=0)) ** -2.0, beliefs.weight[:, optical] / size**2)
    read = arrow.block - beliefs.weight[:, :, None] * np.eye(M)
    block = read / scale[:, :, None] / scale[:, None, :] + weight[:, :, None] * np.eye(M)
    return replace(arrow, block=block, border=arrow.border / scale[:, :, None])


def _root(block: np.ndarray) -> np.ndarray:
    return np.sqrt(np.maximum(np.einsum("wmm->wm", block), 0.0))


def condition_number(ladder: Ladder, layout: Layout, at: Forward, now: Unknowns, beliefs: Beliefs, sd: np.ndarray
                     ) -> np.ndarray:
    """Of the readings' equations for ln K and ln S of the learned colourants, each scaled to 1, (W,).

    How many times worse than alone they are known together: above about 30 two of them pass for each other.

    Source: D. A. Belsley, E. Kuh & R. E. Welsch, Regression Diagnostics, Wiley 1980, chapter 3.
    """
    arrow = arrow_of(ladder, layout, at, now, beliefs, sd)
    learned = np.flatnonzero(np.tile(ladder.learned, 2))
    read = (arrow.block - beliefs.weight[:, :, None] * np.eye(layout.each))[:, learned[:, None], learned]
    root = np.sqrt(np.maximum(np.einsum("wmm->wm", read), 1e-300))
    singular = np.linalg.eigvalsh(read / root[:, :, None] / root[:, None, :])
    return np.sqrt(singular[:, -1] / np.maximum(singular[:, 0], 1e-16))
