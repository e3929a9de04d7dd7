"""Strength of a batch against a standard, on reductions made with known amounts of colour."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from formcheck.colour.cielab import lab_of_spectrum
from formcheck.colour.difference import delta_e_2000, difference_words
from formcheck.colour.geometry import GLOSS_IN, seen_in_air, surface
from formcheck.colour.kubelka_munk import r_infinity
from formcheck.colour.strength import (
    added_k_over_s,
    shades_at_equal_strength,
    strength_at_maximum,
    strength_by_weights,
)
from formcheck.spectra.grid import WAVELENGTH_NM

WHITE = np.full(85, 0.002)  # K/S of the reduction white
BLUE = 0.8 * np.exp(-(((WAVELENGTH_NM - 620) / 60) ** 2))
PAINT = surface(1.5, GLOSS_IN)


def reduction(k_over_s, *, seen=PAINT):
    inside = r_infinity(WHITE + k_over_s, 1.0)
    return inside if seen is None else seen_in_air(inside, seen)


@given(st.floats(0.2, 3))
def test_a_weaker_batch_by_both_ways(strength):
    white = seen_in_air(r_infinity(WHITE, 1.0), PAINT)
    standard, batch = (added_k_over_s(reduction(f * BLUE), white=white, surface=PAINT) for f in (1, strength))
    assert strength_at_maximum(batch, standard) == pytest.approx(strength, rel=1e-6)
    assert strength_by_weights(batch, standard) == pytest.approx(strength, rel=1e-6)


def test_by_hand():
    """Opaque reductions of 0.36 and 0.25 at one wavelength: K/S = 0.64**2/0.72 = 0.568889 and
    0.75**2/0.5 = 1.125; without a white of its own the strength is 1.977539."""
    standard, batch = added_k_over_s([0.36, 0.9]), added_k_over_s([0.25, 0.9])
    assert strength_at_maximum(batch, standard, [500, 600]) == pytest.approx(1.125 / 0.568889, rel=1e-5)


def test_the_maximum_is_looked_for_where_the_eye_sees():
    """A band that rises into the ultraviolet is not the one that tints."""
    ultraviolet = np.where(WAVELENGTH_NM < 395, 5.0, 0.0)
    assert strength_at_maximum(0.5 * BLUE + ultraviolet, BLUE + ultraviolet) == pytest.approx(0.5)


def test_a_batch_of_the_same_hue_is_the_standard_once_adjusted():
    seen = shades_at_equal_strength(
        0.7 * BLUE, BLUE, strength=strength_by_weights(0.7 * BLUE, BLUE), white_k_over_s=WHITE, surface=PAINT
    )
    assert delta_e_2000(*seen) == pytest.approx(0, abs=1e-9)
    np.testing.assert_allclose(seen[0], lab_of_spectrum(reduction(BLUE)), atol=1e-9)


def test_a_redder_batch_stays_redder():
    """A blue whose band lies 10 nm further to the green, 20 % strong besides, keeps its shift alone."""
    shifted = 1.2 * np.interp(WAVELENGTH_NM, WAVELENGTH_NM - 10, BLUE)
    strength = strength_by_weights(shifted, BLUE)
    seen = shades_at_equal_strength(shifted, BLUE, strength=strength, white_k_over_s=WHITE, surface=PAINT)
    raw = [lab_of_spectrum(reduction(amount)) for amount in (BLUE, shifted)]
    assert difference_words(*seen).split(", ")[0].endswith("redder")
    assert 0.5 < delta_e_2000(*seen) < delta_e_2000(*raw)


def test_many_batches_at_once_and_a_standard_of_no_colour():
    batches = np.array([[0.5], [1.0], [2.0]]) * BLUE
    np.testing.assert_allclose(strength_at_maximum(batches, BLUE), [0.5, 1, 2])
    np.testing.assert_allclose(strength_by_weights(batches, BLUE), [0.5, 1, 2])
    assert np.isnan(strength_at_maximum(BLUE, 0 * BLUE)) and np.isnan(strength_by_weights(BLUE, 0 * BLUE))
    with pytest.raises(ValueError, match=r"strength is 0\.0; expected a strength above 0"):
        shades_at_equal_strength(BLUE, BLUE, strength=0.0)
