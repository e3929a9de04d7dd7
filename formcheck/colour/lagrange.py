"""Local Lagrange interpolation as a matrix, the one behind ASTM E2022's tables of weights."""

from __future__ import annotations

import numpy as np


def interpolation_matrix(from_nm: np.ndarray, onto_nm: np.ndarray) -> np.ndarray:
    """Matrix M (onto, from) such that M @ values, given at `from_nm`, are the values at `onto_nm`.

    Through four points, two on each side; through three in the first and the last interval
    [ASTM E2022]. `from_nm` rises and has at least four points; `onto_nm` lies within it. Steps may be uneven.
    """
    n = len(from_nm)
    interval = np.clip(np.searchsorted(from_nm, onto_nm, side="right") - 1, 0, n - 2)
    matrix = np.zeros((len(onto_nm), n))
    ends = {0: range(3), n - 2: range(n - 3, n)}
    for i in sorted(set(interval.tolist())):
        nodes = list(ends.get(i, range(i - 1, i + 3)))
        rows = np.flatnonzero(interval == i)
        matrix[rows[:, None], nodes] = lagrange_coefficients(from_nm[nodes], onto_nm[rows])
    return matrix


def lagrange_coefficients(nodes: np.ndarray, x: np.ndarray) -> np.ndarray:
    """Weights (len(x), len(nodes)) of the polynomial through all nodes."""
    away = x[:, None] - nodes
    between = nodes[:, None] - nodes
    np.fill_diagonal(between, 1.0)
    columns = [np.delete(away, j, axis=1).prod(axis=1) for j in range(len(nodes))]
    return np.stack(columns, axis=1) / between.prod(axis=1)
