"""The arrow-shaped normal equations against the same ones written out whole and solved by numpy."""

from __future__ import annotations

import numpy as np
import pytest

from formcheck.colour.learning import arrow as arrows

W, N, M, O = 5, 9, 3, 4


@pytest.fixture
def problem():
    rng = np.random.default_rng(1)
    J, B, r = rng.standard_normal((W, N, M)), rng.standard_normal((W, N, O)), rng.standard_normal((W, N))
    prior = {"weight": rng.uniform(0.1, 1, (W, M)), "pull": rng.standard_normal((W, M)),
             "shared_weight": rng.uniform(0.1, 1, O), "shared_pull": rng.standard_normal(O)}
    return J, B, r, prior


def whole(J, B, prior):
    """The same as one matrix: its information, and the slope of half the cost."""
    rows = np.zeros((W * N, W * M + O))
    for w in range(W):
        rows[w * N:(w + 1) * N, w * M:(w + 1) * M] = J[w]
        rows[w * N:(w + 1) * N, W * M:] = B[w]
    weights = np.concatenate([prior["weight"].ravel(), prior["shared_weight"]])
    return rows, rows.T @ rows + np.diag(weights), weights


@pytest.mark.parametrize("held", [(), (0, 2)])
def test_step_and_covariance_are_those_of_the_whole_matrix(problem, held):
    J, B, r, prior = problem
    rows, information, weights = whole(J, B, prior)
    slope = rows.T @ r.ravel() + weights * np.concatenate([prior["pull"].ravel(), prior["shared_pull"]])
    mask = np.zeros(O, bool)
    mask[list(held)] = True
    free = np.concatenate([np.ones(W * M, bool), ~mask])
    expected = np.zeros(W * M + O)
    expected[free] = -np.linalg.solve(information[np.ix_(free, free)], slope[free])
    arrow = arrows.with_prior(arrows.normal_equations(J, B, r), **prior)
    each, shared = arrows.step(arrow, 0.0, mask)
    np.testing.assert_allclose(np.concatenate([each.ravel(), shared]), expected, atol=1e-10)

    inverse = np.zeros_like(information)
    inverse[np.ix_(free, free)] = np.linalg.inv(information[np.ix_(free, free)])
    block, shared_covariance = arrows.covariance(arrow, mask)
    for w in range(W):
        at = slice(w * M, (w + 1) * M)
        np.testing.assert_allclose(block[w], inverse[at, at], atol=1e-10)
    np.testing.assert_allclose(shared_covariance, inverse[W * M:, W * M:], atol=1e-10)


def test_a_discount_takes_prior_weight_off_the_covariance(problem):
    """The sandwich H^-1 (H - D) H^-1, written out whole."""
    J, B, r, prior = problem
    _, information, _ = whole(J, B, prior)
    discount = np.array([0.05, 0.0, 0.02, 0.0])
    inverse = np.linalg.inv(information)
    less = np.zeros_like(information)
    less[W * M:, W * M:] = np.diag(discount)
    expected = inverse @ (information - less) @ inverse
    arrow = arrows.with_prior(arrows.normal_equations(J, B, r), **prior)
    block, shared = arrows.covariance(arrow, np.zeros(O, bool), discount=discount)
    np.testing.assert_allclose(shared, expected[W * M:, W * M:], atol=1e-10)
    np.testing.assert_allclose(block[2], expected[2 * M:3 * M, 2 * M:3 * M], atol=1e-10)
