"""First-order spreads and chances against closed forms and scipy's distributions."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.stats import ncx2

from formcheck.colour import uncertainty
from formcheck.colour.difference import delta_e_2000
from formcheck.colour.uncertainty import difference_spread, probability_within, propagate

MATRIX = np.array([[1.0, 2.0, 0.0], [0.5, -1.0, 3.0]])


def test_a_linear_response_is_met_exactly():
    """JCGM 100:2008, 5.1: covariance J V J^T."""
    sd = np.array([0.1, 0.2, 0.3])
    found = propagate(lambda rows: rows @ MATRIX.T, [1, 2, 3], sd)
    covariance = MATRIX @ np.diag(sd**2) @ MATRIX.T
    np.testing.assert_allclose(found.value, MATRIX @ [1, 2, 3])
    np.testing.assert_allclose(found.jacobian, MATRIX, atol=1e-12)
    np.testing.assert_allclose(found.covariance, covariance, atol=1e-12)
    np.testing.assert_allclose(found.sd, np.sqrt(np.diag(covariance)))
    np.testing.assert_allclose(found.share, MATRIX**2 * sd**2 / np.diag(covariance)[:, None])
    np.testing.assert_allclose(found.share_total.sum(), 1)
    np.testing.assert_allclose(found.share_total, (MATRIX**2 * sd**2).sum(0) / np.trace(covariance))


def test_gum_example_of_a_product():
    """JCGM 100:2008, 5.1.6: for a product of powers, relative variances add with the powers squared."""
    found = propagate(lambda rows: rows[:, 0] * rows[:, 1] ** 2, [3.0, 5.0], [0.03, 0.1])
    relative = np.sqrt(0.01**2 + (2 * 0.02) ** 2)
    assert found.sd[0] / found.value[0] == pytest.approx(relative, rel=1e-3)


def test_one_call_holds_every_row():
    calls = []

    def function(rows):
        calls.append(rows.shape)
        return rows**2

    propagate(function, np.ones((4, 3)), np.full(3, 0.1))
    assert calls == [(4 * 7, 3)]


def test_recipes_lead():
    x, sd = np.random.default_rng(0).random((2, 4, 3))
    together = propagate(lambda rows: np.sin(rows) @ MATRIX.T, x, sd)
    alone = propagate(lambda rows: np.sin(rows) @ MATRIX.T, x[2], sd[2])
    assert together.covariance.shape == (4, 2, 2) and together.share.shape == (4, 2, 3)
    np.testing.assert_allclose(together.covariance[2], alone.covariance)
    np.testing.assert_allclose(together.share_total[2], alone.share_total)


def test_a_sure_input_adds_nothing_and_a_bound_is_kept():
    rows_seen = []

    def function(rows):
        rows_seen.append(rows)
        return 3 * rows

    found = propagate(function, [0.1, 1.0], [0.5, 0.0], lower=0.0)
    assert (rows_seen[0] >= 0).all()
    np.testing.assert_allclose(found.sd, [1.5, 0], atol=1e-12)
    np.testing.assert_allclose(found.share, [[1, 0], [0, 0]])


@pytest.mark.parametrize(
    "arguments, said",
    [
        ({"x": [1.0], "sd": [-1.0]}, r"sd\[0\] is -1.0; expected a finite standard deviation"),
        ({"x": [1.0], "sd": [np.nan]}, r"sd\[0\] is nan"),
        ({"x": [-1.0], "sd": [1.0], "lower": 0.0}, r"x\[0\] is -1.0; expected a value within its bounds"),
    ],
)
def test_unusable_spreads_are_refused(arguments, said):
    with pytest.raises(ValueError, match=said):
        propagate(lambda rows: rows, **arguments)


@pytest.mark.parametrize(
    "distance, sd, tolerance", [(0, 1, 1), (1, 1, 2), (3, 1, 2), (2, 0.3, 2), (0.5, 5, 2), (4, 2, 1)]
)
def test_chance_against_the_noncentral_chi_square(monkeypatch, distance, sd, tolerance):
    """With a plain distance in place of CIEDE2000 the chance has a closed form (scipy.stats.ncx2)."""
    monkeypatch.setattr(uncertainty, "delta_e_2000", lambda one, other: np.linalg.norm(one - other, axis=-1))
    found = probability_within([50 + distance / np.sqrt(3)] * 3, np.eye(3) * sd**2, [50.0] * 3, tolerance)
    exact = ncx2.cdf((tolerance / sd) ** 2, 3, max((distance / sd) ** 2, 1e-12))
    assert found == pytest.approx(exact, abs=0.01)


lab = st.tuples(st.floats(20, 90), st.floats(-60, 60), st.floats(-60, 60))


@given(lab, st.tuples(*[st.floats(-3, 3)] * 9), st.tuples(*[st.floats(-4, 4)] * 3), st.floats(0.5, 4))
@settings(max_examples=25, deadline=None)
def test_chance_against_random_sampling(mean, root, off, tolerance):
    root = np.array(root).reshape(3, 3)
    covariance = root @ root.T
    rng = np.random.default_rng(7)
    drawn = np.array(mean) + rng.standard_normal((20_000, 3)) @ root.T
    sampled = delta_e_2000(drawn, np.array(mean) + off)
    wanted = np.array(mean) + off
    assert probability_within(mean, covariance, wanted, tolerance) == pytest.approx(
        (sampled <= tolerance).mean(),
        abs=0.01 + 0.016,  # ours, and four sigma of 20,000 draws
    )
    average, spread = difference_spread(mean, covariance, wanted)
    assert average == pytest.approx(sampled.mean(), abs=0.02 + 0.03 * sampled.std())
    assert spread == pytest.approx(sampled.std(), abs=0.02 + 0.05 * sampled.std())


def test_a_shade_known_exactly_is_within_or_not():
    nothing = np.zeros((3, 3))
    assert probability_within([50, 0, 0], nothing, [50, 0, 0], 0.0) == 1
    assert probability_within([50, 0, 0], nothing, [60, 0, 0], 1.0) == 0


def test_a_wider_tolerance_is_never_less_likely():
    chances = probability_within([50, 10, 10], np.eye(3), [51, 10, 12], np.linspace(0, 8, 30))
    assert chances.shape == (30,) and (np.diff(chances) >= 0).all() and chances[-1] > 0.99
    assert probability_within([50, 10, 10], np.eye(3), [51, 10, 12], 2.0) == probability_within(
        [50, 10, 10], np.eye(3), [51, 10, 12], 2.0
    )


def test_many_recipes_at_once():
    mean = np.array([[50.0, 0, 0], [60, 10, 0]])
    chances = probability_within(mean, np.stack([np.eye(3), 4 * np.eye(3)]), [50, 0, 0], 2.0)
    assert chances.shape == (2,) and chances[0] > chances[1]


@pytest.mark.parametrize("covariance", [[[1, 2, 0], [0, 1, 0], [0, 0, 1]], -np.eye(3)])
def test_what_is_no_covariance_is_refused(covariance):
    with pytest.raises(ValueError, match="lab_cov"):
        probability_within([50, 0, 0], covariance, [50, 0, 0], 1.0)


def test_a_tolerance_below_zero_is_refused():
    with pytest.raises(ValueError, match=r"tolerance is -1\.0; expected a colour difference of at least 0"):
        probability_within([50, 0, 0], np.eye(3), [50, 0, 0], -1.0)
