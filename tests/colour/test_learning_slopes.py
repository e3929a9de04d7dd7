"""The film that learning differentiates is the film that predicts, and its slopes are those of differences."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from formcheck.colour import kubelka_munk, saunderson
from formcheck.colour.learning.film_slopes import film_slopes, surface_slopes
from formcheck.colour.learning.residuals import forward, residuals, slopes
from formcheck.colour.learning.start import start_of
from formcheck.colour.learning.unknowns import layout_of
from tests.colour.invented_ladder import LADDER, invented

DEPTHS = st.floats(1e-8, 50)
GROUND = st.floats(0.01, 0.99)


@settings(max_examples=60, deadline=None)
@given(k=DEPTHS, s=DEPTHS, g=GROUND)
def test_value_is_that_of_the_film(k, s, g):
    found = film_slopes(np.array(k), np.array(s), np.array(g)).value
    assert found == pytest.approx(kubelka_munk.film([k], [s], thickness_um=1.0, ground=[g])[0], abs=1e-12)


@settings(max_examples=60, deadline=None)
@given(k=st.floats(1e-3, 20), s=st.floats(1e-3, 20), g=st.floats(0.05, 0.95))
def test_slopes_are_those_of_small_differences(k, s, g):
    at = film_slopes(np.array(k), np.array(s), np.array(g))
    for by, move in ((at.by_k, (1, 0, 0)), (at.by_s, (0, 1, 0)), (at.by_ground, (0, 0, 1))):
        h = 1e-5 * np.array([k, s, g]) * move
        up, down = (film_slopes(*(np.array(v) for v in np.array([k, s, g]) + way * h)).value for way in (1, -1))
        assert by == pytest.approx((up - down) / (2 * h.sum()), rel=2e-4, abs=1e-7)


@pytest.mark.parametrize("specular_included", [True, False])
def test_surface_is_that_of_saunderson(specular_included):
    R = np.linspace(0, 1, 11)
    found = surface_slopes(R, k1=0.03, k2=0.5, specular_included=specular_included)
    expected = saunderson.to_measured(R, k1=0.03, k2=0.5, specular_included=specular_included)
    np.testing.assert_allclose(found.value, expected, atol=1e-14)
    h = 1e-6
    for by, more in ((found.by_k1, {"k1": 0.03 + h, "k2": 0.5}), (found.by_k2, {"k1": 0.03, "k2": 0.5 + h})):
        moved = saunderson.to_measured(R, **more, specular_included=specular_included)
        np.testing.assert_allclose(by, (moved - expected) / h, atol=1e-5)


@pytest.mark.parametrize("specular_included", [True, False])
def test_every_column_of_the_slopes_of_a_ladder(specular_included):
    """Each unknown moved a little: the residuals move as the slopes say."""
    ladder = invented(3, films=LADDER[2:], specular_included=specular_included).ladder
    layout = layout_of(ladder)
    start = start_of(ladder, layout)
    shared = start.shared + 0.01 * np.random.default_rng(0).standard_normal(layout.shared)
    J, B = slopes(ladder, layout, forward(ladder, layout, start.each, shared))

    def at(each, shared):
        return residuals(ladder, forward(ladder, layout, each, shared))

    h = 1e-6
    for m in range(layout.each):
        move = np.zeros_like(start.each)
        move[:, m] = h
        numeric = (at(start.each + move, shared) - at(start.each - move, shared)) / (2 * h)
        np.testing.assert_allclose(J[:, :, m], numeric, atol=1e-8)
    for o in range(layout.shared):
        move = np.zeros(layout.shared)
        move[o] = h
        numeric = (at(start.each, shared + move) - at(start.each, shared - move)) / (2 * h)
        np.testing.assert_allclose(B[:, :, o], numeric, atol=1e-8)
