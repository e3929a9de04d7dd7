import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from formcheck.colour.transparency import transparency_number, transparency_of_film

BLACK = np.full(85, 0.03)


def test_by_hand():
    """DE*ab of 2, 5 and 8 at 1, 2 and 3 um: slope 3, so a third of a um for each unit (DIN 55988)."""
    assert transparency_number([1.0, 2.0, 3.0], [2.0, 5.0, 8.0]) == pytest.approx(1 / 3)
    assert transparency_number([1.0, 2.0], [2.0, 2.0]) == np.inf


def test_slope_is_that_of_least_squares():
    X, E = np.array([0.7, 1.0, 1.1, 1.4]), np.array([1.0, 2.1, 1.9, 3.2])
    assert transparency_number(X, E) == pytest.approx(1 / np.polyfit(X, E, 1)[0])


def test_a_faint_white_film_by_hand():
    """n = 1, ideal black, S X = 0.002 and 0.004: R = SX/(1 + SX) is grey, Y = 0.1996 and 0.3984 %.

    There L* = 903.2963 Y/100 (ISO/CIE 11664-4): 1.80299 and 3.59879; slope 1.79580 for S = 0.002 /um per um.
    """
    found = transparency_of_film(
        k=np.zeros(85), s=np.full(85, 0.002), thickness_um=[1, 2], black=np.zeros(85), n=1.0, ground_in_air=False
    )
    assert found == pytest.approx(1 / 1.79580, rel=1e-4)


@given(st.floats(1.5, 10))
def test_more_scattering_is_less_transparent(factor):
    s = np.array([[1.0], [factor]]) * np.full(85, 0.002)
    one, other = transparency_of_film(k=np.zeros((2, 85)), s=s, thickness_um=[0.7, 1.0, 1.3], black=BLACK)
    assert other < one


def test_a_clear_film_is_wholly_transparent():
    assert transparency_of_film(k=0.0, s=0.0, thickness_um=[1, 2], black=BLACK) == np.inf


def test_one_thickness_tells_nothing():
    with pytest.raises(ValueError, match="films of at least two thicknesses"):
        transparency_number([1.0, 1.0], [2.0, 2.0])
