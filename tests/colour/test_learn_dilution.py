"""A dilution series teaches the absorptivity it was made from; a bent line and a moved band are told."""

from __future__ import annotations

import numpy as np
import pytest

from formcheck.colour.learning.dilution import learn_dilution

NM = np.arange(400.0, 701.0, 5.0)
ALONE = 40 * np.exp(-(((NM - 540) / 35) ** 2)) + 5 * np.exp(-(((NM - 480) / 40) ** 2))  # L/(g cm)
PAIRED = 0.5 * ALONE + 20 * np.exp(-(((NM - 505) / 30) ** 2))
CONCENTRATION = np.geomspace(0.0025, 0.03, 7)  # g/L


def absorbances(seed: int, *, pairing: float = 0.0, noise: float = 0.001, weighing: float = 0.01) -> np.ndarray:
    """Solutions of a dye of which molecules pair: c = m + 2 q m**2, m alone (law of mass action)."""
    rng = np.random.default_rng(seed)
    true = CONCENTRATION * (1 + weighing * rng.standard_normal(len(CONCENTRATION)))
    alone = (np.sqrt(1 + 8 * pairing * true) - 1) / (4 * pairing) if pairing else true
    exact = np.outer(alone, ALONE) + np.outer(true - alone, PAIRED)
    return exact + noise * rng.standard_normal(exact.shape)


def learned(seed: int, **how):
    return learn_dilution(absorbances(seed, **how), CONCENTRATION, path_length_cm=1.0, repeatability=0.001)


def test_absorptivity_and_its_band():
    found = [learned(seed) for seed in range(40)]
    for one in found[:5]:
        np.testing.assert_allclose(one.absorptivity.max(), ALONE.max(), rtol=0.02)
    within = np.mean([np.abs(one.absorptivity - ALONE) <= 1.645 * one.sd for one in found])
    assert 0.80 <= within <= 0.97
    assert not any(one.bent or one.changes_shape for one in found)


def test_pairing_bends_the_line_and_moves_the_band():
    strong = [learned(seed, pairing=40.0) for seed in range(10)]
    assert all(one.changes_shape for one in strong)
    assert sum(one.bent for one in strong) >= 5 and np.mean([one.bend for one in strong]) < -0.03


def test_a_slip_in_one_concentration_is_no_bend():
    A = absorbances(3)
    A[4] *= 1.08
    found = learn_dilution(A, CONCENTRATION, path_length_cm=1.0, repeatability=0.001)
    assert found.strength[4] == pytest.approx(1.07, abs=0.02)
    assert not found.bent and not found.changes_shape


def test_path_lengths_of_their_own():
    path = np.where(CONCENTRATION > 0.01, 0.5, 1.0)
    found = learn_dilution(absorbances(5) * path[:, None], CONCENTRATION, path_length_cm=path, repeatability=0.001)
    np.testing.assert_allclose(found.absorptivity.max(), ALONE.max(), rtol=0.02)


@pytest.mark.parametrize("concentration", [[0.01, 0.01], [0.01, -0.02], [0.01]])
def test_refuses_what_is_no_series(concentration):
    with pytest.raises(ValueError, match="expected"):
        learn_dilution(absorbances(0)[: len(concentration)], concentration, path_length_cm=1.0, repeatability=0.001)
