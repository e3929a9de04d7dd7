import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from formcheck.colour.spectral_match import goodness_of_fit, match_word, rms_difference

curve = st.lists(st.floats(0.01, 1), min_size=5, max_size=5)


def test_by_hand():
    """a = (3, 4), b = (4, 3): 24/25; differences 1 and -1."""
    assert goodness_of_fit([3.0, 4], [4.0, 3]) == pytest.approx(0.96)
    assert rms_difference([3.0, 4], [4.0, 3]) == pytest.approx(1)


@given(curve, st.floats(0.1, 10))
def test_a_taller_copy_has_the_same_shape(a, factor):
    assert goodness_of_fit(a, factor * np.array(a)) == pytest.approx(1)
    assert rms_difference(a, factor * np.array(a)) == pytest.approx(abs(factor - 1) * rms_difference(a, np.zeros(5)))


@given(curve, curve)
def test_symmetric_and_within_bounds(a, b):
    assert 0 <= goodness_of_fit(a, b) <= 1 + 1e-12
    assert goodness_of_fit(a, b) == pytest.approx(goodness_of_fit(b, a))
    assert rms_difference(a, b) <= np.max(np.abs(np.subtract(a, b))) + 1e-12


def test_thresholds_of_hernandez_andres_2001():
    """0.995, 0.999, 0.9999 (from memory)."""
    words = [match_word(value) for value in (0.99, 0.995, 0.999, 0.9999, 1.0, np.nan)]
    assert words == ["poor", "acceptable", "good", "excellent", "excellent", "poor"]


def test_nothing_matches_darkness():
    assert np.isnan(goodness_of_fit(np.zeros(4), np.ones(4)))
    assert goodness_of_fit(np.ones((2, 3, 4)), np.ones(4)).shape == (2, 3)
