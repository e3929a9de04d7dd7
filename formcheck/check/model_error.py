"""The error that a model showed on left-out panels, carried to the L*, a*, b* of a prediction."""

from __future__ import annotations

import numpy as np

from formcheck.colour.difference import delta_e_2000

STEP = 0.05  # in L*, a*, b*: small beside any tolerance, large beside rounding


def model_error_covariance(lab: np.ndarray, de00: float) -> np.ndarray:
    """Covariance of L*, a*, b* (3, 3) whose mean square CIEDE2000 about `lab` (3,) is `de00` squared.

    Equal in every direction as CIEDE2000 weighs it: near a shade DE00**2 = d^T G d for small differences
    d, and the covariance is G^-1 de00**2 / 3. G by second differences of DE00**2 itself.
    """
    axes = np.eye(3) * STEP
    square = np.array([[_squared(lab, axes[i] + axes[j] * (i != j)) for j in range(3)] for i in range(3)])
    along = np.diag(square)
    metric = (square - along[:, None] - along[None, :]) / 2
    metric[np.diag_indices(3)] = along
    return np.linalg.inv(metric / STEP**2) * de00**2 / 3


def _squared(lab: np.ndarray, away: np.ndarray) -> float:
    return float(delta_e_2000(lab, lab + away)) ** 2
