"""K and S of a film over two grounds: the way back from kubelka_munk.film, its limits and its spread."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from formcheck.colour import kubelka_munk, saunderson
from formcheck.colour.learning.two_grounds import k_and_s_over_two_grounds

SURFACE = {"k1": 0.04, "k2": 0.596, "specular_included": True}
WHITE, BLACK = 0.85, 0.06


def over(K, S, thickness_um, ground, surface=SURFACE):
    below = saunderson.to_internal(np.array([ground]), **surface)
    return saunderson.to_measured(kubelka_munk.film([K], [S], thickness_um=thickness_um, ground=below), **surface)


def back(white, black, thickness_um, surface=SURFACE, **more):
    return k_and_s_over_two_grounds(over_white=white, over_black=black, white=[WHITE], black=[BLACK],
                                    thickness_um=thickness_um, repeatability=0.001, **surface, **more)


@settings(max_examples=100, deadline=None)
@given(K=st.floats(0, 0.1), S=st.floats(0, 0.1), um=st.floats(5, 60), gloss=st.booleans())
def test_comes_back_to_k_and_s(K, S, um, gloss):
    surface = {**SURFACE, "specular_included": gloss}
    white, black = over(K, S, um, WHITE, surface), over(K, S, um, BLACK, surface)
    assume(white - black > 1e-3)  # else it hides, to rounding
    found = back(white, black, um, surface)
    assert found.K[0] == pytest.approx(K, abs=1e-6)
    assert found.S[0] == pytest.approx(S, abs=1e-6)
    assert not found.hiding[0]


def test_a_film_that_hides_says_so():
    found = back([0.4], [0.4], 1000.0)
    assert found.hiding[0] and np.isnan(found.K[0]) and np.isnan(found.S_sd[0])


def test_the_spread_is_that_of_drawn_readings():
    """1,000 readings with noise, against the standard deviation told for one."""
    rng = np.random.default_rng(4)
    K, S, um = 0.01, 0.05, 40.0
    white, black = over(K, S, um, WHITE), over(K, S, um, BLACK)
    noise = 0.001 * rng.standard_normal((4, 1000, 1))
    drawn = k_and_s_over_two_grounds(over_white=white + noise[0], over_black=black + noise[1], white=WHITE + noise[2],
                                     black=BLACK + noise[3], thickness_um=um * (1 + 0.02 * rng.standard_normal(1000)),
                                     repeatability=0.001, **SURFACE)
    told = back(white, black, um, thickness_sd_um=0.02 * um)
    assert drawn.K.std() == pytest.approx(told.K_sd[0], rel=0.08)
    assert drawn.S.std() == pytest.approx(told.S_sd[0], rel=0.08)


@pytest.mark.parametrize("wrong", [{"thickness_um": 0.0}, {"white": [BLACK]}, {"over_white": [1.2]}])
def test_refuses_what_cannot_be(wrong):
    given_ = {"over_white": [0.5], "over_black": [0.3], "white": [WHITE], "black": [BLACK], "thickness_um": 20.0}
    with pytest.raises(ValueError, match="expected"):
        k_and_s_over_two_grounds(**{**given_, **wrong}, repeatability=0.001, **SURFACE)
