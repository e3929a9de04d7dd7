"""Stacks of films: one film is layer.py, nesting and splitting change nothing, the ends are met without a step."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from formcheck.colour.composition import compose, film_optics, over_ground
from formcheck.colour.geometry import DIRECTIONAL, GLOSS_IN, GLOSS_OUT, surface_of_constants
from formcheck.colour.kubelka_munk import r_infinity
from formcheck.colour.layer import layer_reflectance
from formcheck.colour.layers import effective_k_x, stack_optics, stack_reflectance

index = st.sampled_from([1.0, 1.33, 1.5, 1.52, 2.1])
amount = st.one_of(st.just(0.0), st.floats(1e-12, 1e4))
fraction = st.floats(0, 1)
film = st.tuples(amount, amount, st.one_of(st.just(0.0), st.floats(1e-9, 5)))
films = st.lists(film, min_size=1, max_size=4)


def stacked(layers, **more):
    """Reflectance of one wavelength; layers as (k_x, s_x, absorbance), the one at the air first."""
    k, s, A = (np.array(column)[:, None] for column in zip(*layers, strict=True))
    return float(stack_reflectance(k_x=k, s_x=s, dye_absorbance=A, **more)[0])


@given(film, fraction, index, st.booleans(), st.sampled_from([None, 1.0, 1.4, 1.7]), st.booleans())
def test_a_stack_of_one_is_the_layer_to_the_last_digit(one, ground, n, included, ground_n, in_air):
    geometry = GLOSS_IN if included else GLOSS_OUT
    k, s, A = one
    alone = layer_reflectance(  # the index as an array: NumPy's logarithm of a bare number may differ in the last digit
        ground=[ground], k_x=[k], s_x=[s], dye_absorbance=[A], n=[n], specular_included=included,
        ground_in_air=in_air, ground_n=ground_n, ground_specular_included=included,
    )  # fmt: skip
    found = stacked([one], ground=[ground], n=n, geometry=geometry, ground_in_air=in_air, ground_n=ground_n,
                    ground_geometry=geometry)
    assert found == alone[0]


@given(film, films, fraction)
def test_what_lies_below_is_the_ground_of_what_lies_above(top, below, ground):
    under = stacked(below, ground=[ground], n=1.0, ground_in_air=False)
    k, s, A = top
    if s == 0:  # scattering above would make the light in the dyes below diffuse
        nested = layer_reflectance(
            ground=[under], k_x=[k], s_x=[s], dye_absorbance=[A], n=1.0, ground_in_air=False
        )
        assert stacked([top, *below], ground=[ground], n=1.0, ground_in_air=False) == pytest.approx(
            float(nested[0]), abs=1e-12
        )


@given(films, st.integers(0, 3), fraction, st.sampled_from([1.0, 1.5]))
def test_an_empty_film_changes_nothing(layers, place, ground, n):
    with_empty = [*layers[:place], (0.0, 0.0, 0.0), *layers[place:]]
    assert stacked(with_empty, ground=[ground], n=n) == pytest.approx(
        stacked(layers, ground=[ground], n=n), abs=1e-12
    )


@given(amount, amount, st.floats(0.01, 0.99), fraction)
def test_a_film_in_two_parts_is_the_film(k, s, share, ground):
    parts = [(k * share, s * share, 0.0), (k * (1 - share), s * (1 - share), 0.0)]
    assert stacked(parts, ground=[ground]) == pytest.approx(stacked([(k, s, 0.0)], ground=[ground]), abs=1e-9)


@given(st.lists(st.tuples(amount, st.floats(0, 5)), min_size=1, max_size=4), st.floats(0.01, 0.99))
def test_dyes_take_the_same_in_two_parts(scattering_and_dye, share):
    """K X over all films hangs on where dye lies between scatterers, not on how a film is divided."""
    s, A = (np.array(column)[:, None] for column in zip(*scattering_and_dye, strict=True))
    whole = effective_k_x(k_x=np.zeros_like(s), s_x=s, dye_absorbance=A)
    parts = np.stack([[share], [1 - share]])
    s_parts, A_parts = ((row[:, None, :] * parts).reshape(-1, 1) for row in (s, A))
    divided = effective_k_x(k_x=np.zeros_like(s_parts), s_x=s_parts, dye_absorbance=A_parts)
    np.testing.assert_allclose(divided.sum(), whole.sum(), rtol=1e-9)


def test_dye_below_a_scattering_film_counts_double_and_above_it_single():
    """Kubelka-Munk (diffuse light, 2) and Beer-Lambert (straight light, 1) as the two ends."""
    A, s = np.array([[0.2], [0.0]]), np.array([[0.0], [1e9]])
    above = effective_k_x(k_x=0 * s, s_x=s, dye_absorbance=A)
    below = effective_k_x(k_x=0 * s, s_x=s[::-1], dye_absorbance=A[::-1])
    np.testing.assert_allclose(above[:, 0], [0.2 * np.log(10), 0], rtol=1e-8)
    np.testing.assert_allclose(below[:, 0], [0, 0.4 * np.log(10)], rtol=1e-8)


@given(films, fraction, st.integers(0, 3), st.integers(0, 2), st.sampled_from([1.0, 1.5]))
def test_no_step_anywhere(layers, ground, which, what, n):
    """A little more of anything, also of what was not there, changes the reading little."""
    which = min(which, len(layers) - 1)
    nudged = [list(one) for one in layers]
    nudged[which][what] = nudged[which][what] * (1 + 1e-7) + 1e-9
    assert stacked(nudged, ground=[ground], n=n) == pytest.approx(
        stacked(layers, ground=[ground], n=n), abs=1e-6
    )


@given(films, st.lists(st.sampled_from([1.33, 1.5, 2.1]), min_size=4, max_size=4), fraction)
def test_no_stack_gives_back_more_than_it_gets(layers, n, ground):
    reading = stacked(layers, ground=[ground], n=n[: len(layers)], geometry=GLOSS_IN, ground_in_air=False)
    assert 0 <= reading <= 1 + 1e-12


@given(st.lists(st.sampled_from([1.33, 1.5, 2.1]), min_size=3, max_size=3))
def test_an_ideal_white_under_clear_films_stays_white(n):
    clear = [(0.0, 0.0, 0.0)] * 3
    white = stacked(clear, ground=[1.0], n=n, geometry=GLOSS_IN, ground_geometry=GLOSS_IN)
    assert white == pytest.approx(1, abs=1e-12)


def test_a_film_that_hides_shows_nothing_below():
    expected = float(r_infinity(0.3, 1.0))
    for ground in (0.0, 1.0):
        found = stacked([(0.3e6, 1e6, 0), (5.0, 0, 0)], ground=[ground], n=1.0, ground_in_air=False)
        assert found == pytest.approx(expected, abs=1e-9)


def test_a_boundary_of_indices_between_films_shows_and_can_be_left_out():
    layers = [(0.1, 0.0, 0.0), (0.2, 3.0, 0.0)]
    met = stacked(layers, ground=[0.5], n=[1.4, 1.7])
    unmet = stacked(layers, ground=[0.5], n=[1.4, 1.7], boundaries=False, ground_n=1.0)
    same = stacked(layers, ground=[0.5], n=1.4, ground_n=1.0)
    assert unmet == same and met != pytest.approx(same, abs=1e-3)


@given(films, fraction, st.lists(st.sampled_from([1.0, 1.33, 1.5, 2.1]), min_size=4, max_size=4))
def test_films_alone_laid_on_a_ground_are_the_stack(layers, ground, n):
    """composition.py, with both reflectances and transmittances, says the same as the climb of layers.py."""
    n = n[: len(layers)]
    k, s, A = (np.array(column)[:, None] for column in zip(*layers, strict=True))
    pile = stack_optics(k_x=k, s_x=s, dye_absorbance=A, n=n)
    bare = surface_of_constants(k1=0.0, k2=0.0, specular_included=False)
    under = stacked(layers, ground=[ground], n=n, ground_in_air=False, air_surface=bare)
    assert over_ground(pile, [ground])[0] == pytest.approx(under, abs=1e-9)


def test_two_white_films_laid_together():
    """Kubelka 1948: T_12 = T_1 T_2/(1 - R_1 R_2), R_12 = R_1 + T_1**2 R_2/(1 - R_1 R_2), by hand for
    S X = 1 and 3 without absorption: T = 1/2 and 1/4, together S X = 4, T = 1/5."""
    both = compose(film_optics([0.0], [1.0]), film_optics([0.0], [3.0]))
    np.testing.assert_allclose([both.transmittance[0], both.reflectance[0]], [0.2, 0.8], rtol=1e-12)
    np.testing.assert_allclose([both.transmittance_below[0], both.reflectance_below[0]], [0.2, 0.8], rtol=1e-12)


def test_many_stacks_at_once():
    rng = np.random.default_rng(0)
    k, s, A = rng.random((3, 5, 2, 3, 7))
    n = rng.uniform(1.3, 1.7, (5, 2, 3))
    together = stack_reflectance(ground=np.full(7, 0.8), k_x=k, s_x=s, dye_absorbance=A, n=n)
    assert together.shape == (5, 2, 7)
    alone = stack_reflectance(
        ground=np.full(7, 0.8), k_x=k[3, 1], s_x=s[3, 1], dye_absorbance=A[3, 1], n=n[3, 1]
    )
    np.testing.assert_allclose(together[3, 1], alone, rtol=1e-13)


@pytest.mark.parametrize("geometry", [DIRECTIONAL, GLOSS_IN, GLOSS_OUT])
def test_a_ground_read_as_the_answer_is_comes_back_through_empty_films(geometry):
    found = stacked([(0.0, 0.0, 0.0)] * 2, ground=[0.6], geometry=geometry, ground_geometry=geometry)
    assert found == pytest.approx(0.6, abs=1e-12)


@pytest.mark.parametrize(
    "wrong, told",
    [
        ({"k_x": [[0.1], [-0.1]]}, r"k_x\[1, 0\] is -0.1; expected at least 0"),
        ({"k_x": [0.1]}, "expected films on the last axis but one"),
        ({"k_x": np.zeros((0, 3))}, "at least one"),
        ({"k_x": [[0.1], [0.1]], "n": [1.5, 1.5, 1.5]}, "3 indices for 2 films"),
        ({"k_x": [[0.1]], "n": [0.9]}, "refractive index of at least 1"),
        ({"k_x": [[0.1]], "geometry": "d:8 specular"}, "did you mean 'd:8 specular"),
        ({"k_x": [[0.1]], "ground_in_air": False, "ground": [1.2]}, "a reflectance from 0 to 1"),
    ],
)
def test_what_cannot_be_is_refused(wrong, told):
    with pytest.raises(ValueError, match=told):
        stack_reflectance(**{"ground": [0.5], **wrong})
