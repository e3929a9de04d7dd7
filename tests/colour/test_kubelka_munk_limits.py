"""Properties and limits that the two-flux film must keep; none of them comes from formcheck's own figures."""

import warnings

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from formcheck.colour.kubelka_munk import film, film_transmittance, k_over_s, mix, r_infinity

coefficient = st.one_of(st.just(0.0), st.floats(1e-12, 1e3))
thickness = st.one_of(st.just(0.0), st.floats(1e-9, 1e5), st.just(np.inf))
fraction = st.floats(0, 1)


@pytest.fixture(autouse=True)
def no_warning():
    with warnings.catch_warnings():
        warnings.simplefilter("error")
        yield


def one(K, S, X, R_g):
    return float(film([K], [S], thickness_um=X, ground=[R_g])[0])


@given(coefficient, coefficient, thickness, fraction)
def test_reflectance_and_transmittance_share_the_light(K, S, X, R_g):
    R, T = one(K, S, X, R_g), float(film_transmittance([K], [S], thickness_um=X)[0])
    assert 0 <= R <= 1 and 0 <= T <= 1
    assert one(K, S, X, 0.0) + T <= 1 + 1e-9
    if K == 0 and np.isfinite(X):  # nothing is absorbed, so nothing is lost
        assert one(0.0, S, X, 0.0) + T == pytest.approx(1, abs=1e-9)


@given(coefficient, coefficient, thickness, fraction, st.floats(1.001, 100))
def test_more_absorption_never_brightens(K, S, X, R_g, times):
    assert one(K * times, S, X, R_g) <= one(K, S, X, R_g) + 1e-9


@given(coefficient, coefficient, thickness, fraction, fraction)
def test_a_brighter_ground_never_darkens(K, S, X, R_1, R_2):
    dark, bright = sorted([R_1, R_2])
    assert one(K, S, X, dark) <= one(K, S, X, bright) + 1e-9


@given(coefficient, coefficient, st.floats(0, 1e4), st.floats(0, 1e4), fraction)
def test_two_films_of_one_paint_are_one_thicker_film(K, S, X_1, X_2, R_g):
    assert one(K, S, X_1 + X_2, R_g) == pytest.approx(one(K, S, X_1, one(K, S, X_2, R_g)), abs=1e-7)


@given(coefficient, coefficient, thickness, fraction)
def test_film_over_ground_is_kubelkas_sum_over_reflections(K, S, X, R_g):
    """R = R_0 + T**2 R_g / (1 - R_0 R_g), Kubelka 1948."""
    R_0, T = one(K, S, X, 0.0), float(film_transmittance([K], [S], thickness_um=X)[0])
    if R_0 * R_g < 1 - 1e-6:
        assert one(K, S, X, R_g) == pytest.approx(R_0 + T**2 * R_g / (1 - R_0 * R_g), abs=1e-7)


@given(coefficient, st.floats(1e-6, 1e3), fraction)
def test_a_film_without_end_hides(K, S, R_g):
    assert one(K, S, np.inf, R_g) == pytest.approx(float(r_infinity(K, S)), abs=1e-9)


@pytest.mark.parametrize("K, X", [(0.3, 2.0), (5.0, 40.0), (1e-14, 3.0)])
def test_no_scattering_is_beer_lambert_twice(K, X):
    for S in (0.0, 1e-12):
        assert one(K, S, X, 0.7) == pytest.approx(0.7 * np.exp(-2 * K * X), abs=1e-10)
        assert film_transmittance([K], [S], thickness_um=X)[0] == pytest.approx(np.exp(-K * X), abs=1e-10)


@pytest.mark.parametrize("S, X", [(0.5, 10.0), (3.0, 1e4), (1e-9, 1.0)])
def test_no_absorption_is_the_rational_limit(S, X):
    """R_0 = SX/(1 + SX), T = 1/(1 + SX), Kubelka 1948."""
    for K in (0.0, 1e-22):
        assert one(K, S, X, 0.0) == pytest.approx(S * X / (1 + S * X), abs=1e-9)
        assert film_transmittance([K], [S], thickness_um=X)[0] == pytest.approx(1 / (1 + S * X), abs=1e-9)


def test_no_film_shows_its_ground():
    assert one(2.0, 3.0, 0.0, 0.37) == 0.37
    assert one(0.0, 0.0, 1e9, 0.37) == 0.37
    assert one(0.0, 0.0, np.inf, 0.37) == 0.37


@given(st.floats(0, 0.999))
def test_k_over_s_is_the_inverse_of_r_infinity(R):
    assert float(r_infinity(k_over_s(R), 1.0)) == pytest.approx(R, abs=1e-9)


def test_nothing_that_scatters_returns_nothing():
    assert r_infinity(0.0, 0.0) == 0 and r_infinity(1.0, 0.0) == 0 and r_infinity(0.0, 1.0) == 1


def test_recipes_lead_and_wavelength_is_last():
    rng = np.random.default_rng(0)
    K, S = mix(rng.random((3, 4, 2)), rng.random((2, 7))), rng.random(7)
    X, ground = rng.random((3, 4)), rng.random(7)
    together = film(K, S, thickness_um=X, ground=ground)
    assert together.shape == (3, 4, 7)
    for i in np.ndindex(3, 4):
        np.testing.assert_array_equal(together[i], film(K[i], S, thickness_um=X[i], ground=ground))


def test_inputs_are_left_as_they_were():
    K, S = np.ones((2, 3)), np.ones((2, 3))
    film(K, S, thickness_um=2.0, ground=0.5)
    assert (K == 1).all() and (S == 1).all()


@pytest.mark.parametrize(
    "arguments, said",
    [
        (
            {"K": [0.1, -0.1], "S": [1, 1], "thickness_um": 1, "ground": 0.5},
            r"K\[1\] is -0.1; expected an absorption",
        ),
        (
            {"K": [0.1], "S": [np.nan], "thickness_um": 1, "ground": 0.5},
            r"S\[0\] is nan; expected a scattering",
        ),
        (
            {"K": [0.1], "S": [1], "thickness_um": -1, "ground": 0.5},
            r"thickness_um is -1.0; expected a thickness",
        ),
        (
            {"K": [0.1], "S": [1], "thickness_um": 1, "ground": 80},
            r"ground is 80.0; expected a reflectance from 0 to 1",
        ),
    ],
)
def test_what_a_film_cannot_be_is_refused(arguments, said):
    with pytest.raises(ValueError, match=said):
        film(**arguments)
