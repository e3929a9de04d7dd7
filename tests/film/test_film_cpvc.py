"""Critical pigment volume concentration of blends, and how a film stands to it."""

from __future__ import annotations

import numpy as np
import pytest
from film_cases import NAN
from hypothesis import given, settings
from hypothesis import strategies as st

from formcheck.film.bounds import exact
from formcheck.film.cpvc import critical_pvc, reduced_pvc


def blend(mass, density, oil, **more):
    return critical_pvc([mass], density_g_cm3=density, oil_absorption_g_100g=oil,
                        names=[f"pigment {i}" for i in range(len(mass))], **more)


@settings(max_examples=60, deadline=None)
@given(st.floats(0.01, 1), st.floats(0.01, 1), st.floats(1, 8), st.floats(1, 8), st.floats(5, 100),
       st.floats(5, 100))
def test_a_blend_follows_the_mass_weighted_oil_absorption(m1, m2, rho1, rho2, oa1, oa2):
    # Patton 1979 for blends: the same formula with OA averaged by mass and the density of the blend.
    oa = (m1 * oa1 + m2 * oa2) / (m1 + m2)
    rho = (m1 + m2) / (m1 / rho1 + m2 / rho2)
    assert blend([m1, m2], [rho1, rho2], [oa1, oa2]).value[0] == pytest.approx(1 / (1 + oa * rho / 93.5))


def test_an_unknown_oil_absorption_of_a_present_pigment_is_unknown():
    found = blend([0.5, 0.5], [4.2, 2.7], [20.0, NAN])
    assert np.isnan([found.value[0], found.low[0], found.high[0]]).all() and "pigment 1" in found.reasons[0]
    assert blend([0.5, 0.0], [4.2, 2.7], [20.0, NAN]).value[0] == pytest.approx(0.5268, abs=1e-4)


def test_the_spread_of_oil_absorption_gives_the_bounds():
    # Two standard deviations of 10 % either way, through the formula.
    found = blend([1.0], [4.2], [20.0])
    assert found.low[0] == pytest.approx(1 / (1 + 24 * 4.2 / 93.5))
    assert found.high[0] == pytest.approx(1 / (1 + 16 * 4.2 / 93.5))
    exactly = blend([1.0], [4.2], [20.0], oil_absorption_sd=[0.0])
    assert exactly.low[0] == exactly.high[0] == exactly.value[0]


def test_where_a_film_stands():
    cpvc = blend([1.0], [4.2], [20.0])
    assert reduced_pvc(exact(np.array([0.30])), cpvc).high[0] < 1
    assert reduced_pvc(exact(np.array([0.75])), cpvc).low[0] > 1
    near = reduced_pvc(exact(np.array([0.53])), cpvc)
    assert near.low[0] < 1 < near.high[0]


def test_no_pigment_has_no_critical_concentration():
    assert np.isnan(blend([0.0], [4.2], [20.0]).value[0])


def test_negative_oil_absorption_is_refused():
    with pytest.raises(ValueError, match="oil_absorption"):
        blend([1.0], [4.2], [-5.0])
