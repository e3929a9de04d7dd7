"""The film against the two-flux differential equations, integrated by scipy, and published identities."""

import numpy as np
import pytest
from scipy.integrate import solve_ivp

from formcheck.colour.kubelka_munk import film, film_transmittance, k_over_s, r_infinity
from tests.published.colorimetry_values import VALUES

# Columns K (1/um), S (1/um), X (um), R_g: ordinary films, then the corners where formulas break.
FILMS = [
    (0.1, 1, 1, 0),
    (0.02, 0.5, 25, 0.8),
    (1, 0.2, 3, 0.9),
    (0.003, 0.08, 40, 0.05),
    (0, 0.7, 5, 0.3),
    (0.4, 0, 2, 0.8),
    (0, 0, 10, 0.6),
    (1e-9, 0.5, 10, 0.1),
    (0.5, 1e-9, 2, 0.7),
    (2, 2, 1e-6, 0.4),
    (0.05, 1.5, 0.5, 1),
]


def integrated(K, S, X, R_g):
    """Kubelka & Munk 1931: di/dx = -(K+S) i + S j, dj/dx = (K+S) j - S i, up from the ground (j upward).

    As one equation for R = j/i climbing from the ground: dR/dx = S - 2 (K + S) R + S R**2; and for the
    light that gets down, d(ln T)/dx = S R - (K + S), over a black ground.
    """

    def climb(_, y):
        R, _, R_0 = y
        return [S - 2 * (K + S) * R + S * R**2, S * R_0 - (K + S), S - 2 * (K + S) * R_0 + S * R_0**2]

    end = solve_ivp(climb, (0, X), [R_g, 0.0, 0.0], method="DOP853", rtol=1e-11, atol=1e-13).y[:, -1]
    return end[0], np.exp(end[1])


@pytest.mark.parametrize("K, S, X, R_g", FILMS)
def test_film_solves_the_differential_equations(K, S, X, R_g):
    R, T = integrated(K, S, X, R_g)
    assert film([K], [S], thickness_um=X, ground=[R_g])[0] == pytest.approx(R, abs=1e-8)
    assert film_transmittance([K], [S], thickness_um=X)[0] == pytest.approx(T, abs=1e-8)


def test_random_films_solve_the_differential_equations():
    rng = np.random.default_rng(3)
    for _ in range(60):
        K, S = 10 ** rng.uniform(-5, 0.5, 2)
        X, R_g = 10 ** rng.uniform(-1, 1.3), rng.random()
        assert film([K], [S], thickness_um=X, ground=[R_g])[0] == pytest.approx(
            integrated(K, S, X, R_g)[0], abs=1e-7
        )


@pytest.mark.parametrize("ratio, R_inf", VALUES["kubelka_munk"]["opaque"])
def test_reflectance_of_the_film_that_hides(ratio, R_inf):
    assert r_infinity(ratio, 1.0) == pytest.approx(R_inf, abs=0.6e-6)
    assert k_over_s(R_inf) == pytest.approx(ratio, rel=1e-3)
    assert film([ratio], [1.0], thickness_um=np.inf, ground=[0.5])[0] == pytest.approx(R_inf, abs=0.6e-6)


@pytest.mark.parametrize("K, S, X, R_g, R", VALUES["kubelka_munk"]["film"])
def test_published_form_of_the_film(K, S, X, R_g, R):
    assert film([K], [S], thickness_um=X, ground=[R_g])[0] == pytest.approx(R, abs=0.6e-6)
