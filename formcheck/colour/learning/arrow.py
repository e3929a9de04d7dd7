"""Least squares in which each wavelength has unknowns of its own and all wavelengths share a few.

The normal equations then form an arrow: one small block per wavelength and a border of the shared unknowns,
which is solved by eliminating the blocks (Schur complement) instead of as one large matrix.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np


@dataclass(frozen=True)
class Arrow:
    """Normal equations: W wavelengths with M unknowns each, and O shared ones."""

    block: np.ndarray  # (W, M, M)
    border: np.ndarray  # (W, M, O)
    shared: np.ndarray  # (O, O)
    slope: np.ndarray  # (W, M): of half the sum of squares
    slope_shared: np.ndarray  # (O,)


def normal_equations(J: np.ndarray, B: np.ndarray, residual: np.ndarray) -> Arrow:
    """Of residuals (W, N), already divided by their spread, with slopes J (W, N, M) and B (W, N, O)."""
    turned = np.swapaxes(J, 1, 2)
    flat = B.reshape(-1, B.shape[-1])
    return Arrow(
        block=turned @ J,
        border=turned @ B,
        shared=flat.T @ flat,
        slope=(turned @ residual[:, :, None])[:, :, 0],
        slope_shared=flat.T @ residual.reshape(-1),
    )


def with_prior(arrow: Arrow, *, pull: np.ndarray, weight: np.ndarray, shared_pull: np.ndarray,
               shared_weight: np.ndarray) -> Arrow:
    """The same with an independent prior on each unknown.

    weight (W, M) and shared_weight (O,): 1/sd**2, 0 for none; pull and shared_pull: the unknown less
    what the prior says of it.
    """
    M, O = arrow.slope.shape[1], len(arrow.slope_shared)
    return Arrow(
        block=arrow.block + weight[:, :, None] * np.eye(M),
        border=arrow.border,
        shared=arrow.shared + np.diag(shared_weight) if O else arrow.shared,
        slope=arrow.slope + weight * pull,
        slope_shared=arrow.slope_shared + shared_weight * shared_pull,
    )


def step(arrow: Arrow, damping: float, held: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """The damped Gauss-Newton step (W, M), (O,) downhill; shared unknowns that are `held` (O,) do not move.

    Source: D. W. Marquardt, J. Soc. Ind. Appl. Math. 11 (1963) 431 (damping by the diagonal).
    """
    block, border, shared = _damped(arrow, damping)
    free = ~held
    solved = np.linalg.solve(block, np.concatenate([border[:, :, free], arrow.slope[:, :, None]], axis=2))
    by_border, by_slope = solved[:, :, :-1], solved[:, :, -1]
    turned = np.swapaxes(border[:, :, free], 1, 2)
    complement = shared[np.ix_(free, free)] - (turned @ by_border).sum(axis=0)
    pull = arrow.slope_shared[free] - (turned @ by_slope[:, :, None]).sum(axis=0)[:, 0]
    moved = np.zeros(len(held))
    moved[free] = -np.linalg.solve(complement, pull)
    return -(by_slope + by_border @ moved[free]), moved


def _damped(arrow: Arrow, damping: float) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    diagonal = np.einsum("wmm->wm", arrow.block)
    M, O = diagonal.shape[1], len(arrow.slope_shared)
    block = arrow.block + (damping * diagonal + 1e-300)[:, :, None] * np.eye(M)
    return block, arrow.border, arrow.shared + np.eye(O) * (damping * np.diag(arrow.shared) + 1e-300)


def covariance(arrow: Arrow, held: np.ndarray, *, discount: np.ndarray | None = None
               ) -> tuple[np.ndarray, np.ndarray]:
    """Covariances (W, M, M) of each block and (O, O) of the shared unknowns; 0 for those held.

    Each block's holds what the doubt of the shared unknowns adds to it. `discount` (O,) is for priors wider
    than what they stand for: a prior of weight p = 1/sd**2 on an unknown that truly strays by v counts as
    the doubt p**2 v instead of p, so that p - p**2 v is taken off (sandwich form).
    """
    free = ~held
    inverse = np.linalg.pinv(arrow.block, hermitian=True)
    by_border = inverse @ arrow.border[:, :, free]
    turned = np.swapaxes(arrow.border[:, :, free], 1, 2)
    complement = arrow.shared[np.ix_(free, free)] - (turned @ by_border).sum(axis=0)
    shared_free = np.linalg.pinv(complement, hermitian=True)
    if discount is not None:
        shared_free = shared_free - shared_free @ np.diag(discount[free]) @ shared_free
    shared = np.zeros((len(held), len(held)))
    shared[np.ix_(free, free)] = shared_free
    return inverse + by_border @ shared_free @ np.swapaxes(by_border, 1, 2), shared
