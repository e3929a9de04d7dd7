"""Layers in air: what must hold at the ends (no layer, clear dye, thick pigment) and between them."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from formcheck.colour.kubelka_munk import film, r_infinity
from formcheck.colour.layer import ground_below, k_over_s_of_dye, layer_reflectance, stained_ground
from formcheck.colour.saunderson import k1_from_index, k2_from_index, to_internal, to_measured

index = st.floats(1.0, 2.5)
fraction = st.floats(0, 1)


@given(index, st.booleans(), fraction)
def test_an_empty_layer_gives_back_the_ground(n, included, inside):
    """A reading that the surface can give comes back as read, whatever the index and the geometry."""
    ground = to_measured(inside, k1=k1_from_index(n), k2=k2_from_index(n), specular_included=included)
    found = layer_reflectance(
        ground=[ground], n=n, specular_included=included, ground_specular_included=included
    )
    assert found[0] == pytest.approx(ground, abs=1e-9)


@given(st.floats(0, 5), st.floats(0, 1))
def test_a_clear_dye_layer_is_passed_twice(A, R_g):
    """Beer-Lambert there and back: R = R_g 10**(-2A), no surface counted."""
    found = layer_reflectance(ground=[R_g], dye_absorbance=[A], n=1.0, ground_in_air=False)
    assert found[0] == pytest.approx(R_g * 10 ** (-2 * A), abs=1e-9)


@given(st.floats(0.001, 2))
def test_in_an_opaque_white_the_dye_counts_double(A_per_unit):
    """Kubelka-Munk: diffuse light goes twice as far, K = 2 ln(10) a, where the film hides."""
    s_x = 1e7
    found = layer_reflectance(ground=[0.0], s_x=[s_x], dye_absorbance=[A_per_unit * s_x], n=1.0)
    assert found[0] == pytest.approx(float(r_infinity(2 * np.log(10) * A_per_unit, 1.0)), abs=1e-5)


@given(st.floats(0, 1e3), st.floats(0, 3), fraction)
def test_scattering_changes_the_shade_without_a_step(s_x, A, R_g):
    here, near = (
        layer_reflectance(ground=[R_g], s_x=[value], dye_absorbance=[A], n=1.0, ground_in_air=False)[0]
        for value in (s_x, s_x * (1 + 1e-6) + 1e-9)
    )
    assert abs(here - near) < 1e-5


def test_pigment_film_is_kubelka_then_saunderson():
    k_x, s_x, ground = np.array([0.2, 1.0]), np.array([4.0, 0.5]), np.array([0.8, 0.8])
    k1, k2 = 0.04, 0.59634576  # of n = 1.5, integrated from Fresnel apart from formcheck
    below = ground / ((1 - k1) * (1 - k2) + k2 * ground)
    inside = film(k_x, s_x, thickness_um=1, ground=below)
    expected = (1 - k1) * (1 - k2) * inside / (1 - k2 * inside)
    np.testing.assert_allclose(layer_reflectance(ground=ground, k_x=k_x, s_x=s_x, n=1.5), expected, atol=1e-7)
    with_gloss = layer_reflectance(ground=ground, k_x=k_x, s_x=s_x, n=1.5, specular_included=True)
    np.testing.assert_allclose(with_gloss, expected + 0.04, atol=1e-7)


def test_varnish_deepens_a_matt_ground():
    """Common practice: a clear gloss coat on open paper darkens it, mid-tones most."""
    ground = np.array([0.05, 0.4, 0.9])
    coated = layer_reflectance(ground=ground, ground_n=1.0)
    assert (coated < ground).all()


@given(st.floats(1.3, 1.7), st.floats(1.3, 1.7), st.floats(0.01, 0.95))
def test_boundary_between_layer_and_ground_loses_no_light(n, ground_n, measured):
    """An ideal white stays one behind any boundary, and no ground reflects more than all."""
    white = layer_reflectance(
        ground=[1.0], n=n, ground_n=ground_n, specular_included=True, ground_specular_included=True
    )
    assert white[0] == pytest.approx(1, abs=1e-9)
    assert 0 <= ground_below([measured], n=n, ground_n=ground_n)[0] <= 1


def test_black_below_its_own_gloss_counts_as_ideal_black():
    assert ground_below([0.01], n=1.5, specular_included=True)[0] == 0
    assert ground_below([0.01], n=1.5, in_air=False)[0] == 0.01


@given(st.floats(0.01, 0.99), st.floats(0, 50), st.sampled_from([1.0, 1.5]))
def test_stain_adds_to_k_over_s_of_its_ground(R_g, extra, n):
    """Single constant: (1 - R)**2 / 2R of the stained ground is that of the ground plus the dye's."""
    k1, k2 = k1_from_index(n), k2_from_index(n)
    bare, stained = (
        to_internal(R, k1=k1, k2=k2, specular_included=False)
        for R in (R_g, stained_ground([R_g], extra_k_over_s=[extra], n=n)[0])
    )
    if 0 < bare < 1:
        assert (1 - stained) ** 2 / (2 * stained) == pytest.approx(
            (1 - bare) ** 2 / (2 * bare) + extra, rel=1e-6
        )
    assert stained_ground([R_g], extra_k_over_s=[0.0], n=1.0)[0] == pytest.approx(R_g)


def test_stain_of_a_dissolved_dye():
    assert k_over_s_of_dye(0.01, ground_scattering_per_um=0.05) == pytest.approx(2 * np.log(10) * 0.2)
    assert stained_ground([0.0], extra_k_over_s=[1.0])[0] == 0  # black stays black, without a warning


def test_stain_cannot_bleach():
    with pytest.raises(ValueError, match="extra_k_over_s"):
        stained_ground([0.5], extra_k_over_s=[-0.1])


def test_many_recipes_at_once():
    rng = np.random.default_rng(0)
    arrays = {name: rng.random((5, 85)) for name in ("k_x", "s_x", "dye_absorbance")}
    together = layer_reflectance(ground=np.full(85, 0.8), n=1.5, **arrays)
    assert together.shape == (5, 85)
    alone = layer_reflectance(ground=np.full(85, 0.8), n=1.5, **{name: a[3] for name, a in arrays.items()})
    np.testing.assert_allclose(together[3], alone, rtol=1e-13)


def test_negative_absorbance_is_refused():
    with pytest.raises(ValueError, match=r"dye_absorbance\[0\] is -0.1; expected"):
        layer_reflectance(ground=[0.5], dye_absorbance=[-0.1])
