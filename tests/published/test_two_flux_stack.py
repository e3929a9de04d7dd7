"""Stacks against the two-flux differential equations solved apart from formcheck, for 1,000 random stacks.

Kubelka & Munk 1931, depth z downwards: di/dz = -(K + S) i + S j, dj/dz = (K + S) j - S i, with i
downwards and j upwards.
"""

import numpy as np
import pytest
from scipy.integrate import solve_bvp, solve_ivp
from scipy.linalg import expm

from formcheck.colour.layers import stack_optics, stack_reflectance
from tests.published.diffuse_fresnel import thrown_back

STACKS = 1000


def random_stacks(rng, films, *, most):
    """K X and S X (STACKS, films), one in eight of each exactly 0, and a ground (STACKS,)."""
    k, s = (10 ** rng.uniform(-6, np.log10(most), (STACKS, films)) for _ in range(2))
    return k * (rng.random(k.shape) > 1 / 8), s * (rng.random(s.shape) > 1 / 8), rng.random(STACKS)


def ours(k, s, ground, **more):
    """With one wavelength for each stack."""
    return stack_reflectance(
        ground=ground[:, None], k_x=k[..., None], s_x=s[..., None], ground_in_air=False, **more
    )[:, 0]


@pytest.mark.parametrize("films", [2, 4])
def test_a_thousand_stacks_climbing_from_the_ground(films):
    """The equation of the ratio R = j/i, dR/dx = S - 2 (K + S) R + S R**2, integrated film by film."""
    k, s, R = random_stacks(np.random.default_rng(films), films, most=20.0)
    expected = R
    for i in reversed(range(films)):
        a, b = k[:, i], s[:, i]
        end = solve_ivp(
            lambda _, y, a=a, b=b: b - 2 * (a + b) * y + b * y**2,
            (0, 1), expected, method="DOP853", rtol=1e-10, atol=1e-12,
        )  # fmt: skip
        expected = end.y[:, -1]
    np.testing.assert_allclose(ours(k, s, R, n=1.0), expected, atol=1e-6)


def fluxes(k, s, ground, n, *, light_from_above):
    """Both fluxes at the top and foot of every film, all conditions at once in one linear system per stack.

    Unknowns i_top, j_top, i_foot, j_foot of each film. Films by the matrix exponential, boundaries by
    diffuse Fresnel reflection integrated in diffuse_fresnel.py.
    """
    stacks, films = k.shape
    slope = np.stack([np.stack([-(k + s), s], -1), np.stack([-s, k + s], -1)], -2)
    through = expm(slope)
    system, right = np.zeros((stacks, 4 * films, 4 * films)), np.zeros((stacks, 4 * films))
    system[:, 0, 0], right[:, 0] = 1, light_from_above
    for f in range(films):
        top, foot, row = 4 * f, 4 * f + 2, 4 * f + 1
        system[:, row : row + 2, foot : foot + 2] = np.eye(2)
        system[:, row : row + 2, top : top + 2] = -through[:, f]
        i, j = foot, foot + 1
        if f == films - 1:  # what the ground throws back; and shines, where the light comes from below
            system[:, row + 2, j], system[:, row + 2, i] = 1, -ground
            right[:, row + 2] = 1 - light_from_above
            continue
        down = thrown_back(n_from=n[f], n_to=n[f + 1])
        up = thrown_back(n_from=n[f + 1], n_to=n[f])
        i_next, j_next = 4 * f + 4, 4 * f + 5
        system[:, row + 2, [j, i, j_next]] = 1, -down, -(1 - up)
        system[:, row + 3, [i_next, i, j_next]] = 1, -(1 - down), -up
    return np.linalg.solve(system, right[..., None])[..., 0]


@pytest.mark.parametrize("n", [(1.5, 1.5, 1.5), (1.48, 1.56, 1.5), (1.6, 1.4, 1.55)])
def test_a_thousand_stacks_as_linear_systems(n):
    k, s, R_g = random_stacks(np.random.default_rng(7), 3, most=2.0)
    y = fluxes(k, s, R_g, n, light_from_above=1)
    np.testing.assert_allclose(ours(k, s, R_g, n=n), _in_air(y[:, 1], n[0]), atol=1e-6)


def _in_air(R, n):
    """Saunderson 1942, specular excluded, with an integrated k2."""
    k1, k2 = ((n - 1) / (n + 1)) ** 2, thrown_back(n_from=n, n_to=1.0)
    return (1 - k1) * (1 - k2) * R / (1 - k2 * R)


def test_transmittance_of_a_thousand_stacks():
    """Both ways through films alone: light from above onto black, and from a black ground that shines."""
    n = (1.48, 1.56, 1.5)
    k, s, _ = random_stacks(np.random.default_rng(8), 3, most=2.0)
    black = np.zeros(STACKS)
    pile = stack_optics(k_x=k[..., None], s_x=s[..., None], n=n)
    lit, shining = (fluxes(k, s, black, n, light_from_above=on) for on in (1, 0))
    np.testing.assert_allclose(pile.transmittance[:, 0], lit[:, -2], atol=1e-6)
    np.testing.assert_allclose(pile.transmittance_below[:, 0], shining[:, 1], atol=1e-6)
    np.testing.assert_allclose(pile.reflectance_below[:, 0], shining[:, -2], atol=1e-6)


def test_a_stack_as_a_boundary_value_problem():
    """All films side by side on one depth, by collocation; light in at the top, thrown back at the ground."""
    k, s, R_g = np.array([0.2, 0.05, 1.5]), np.array([0.1, 3.0, 0.4]), 0.7

    def slope(z, y):
        i, j, K, S = y[:3], y[3:], k[:, None], s[:, None]
        return np.concatenate([-(K + S) * i + S * j, (K + S) * j - S * i])

    def ends(top, foot):
        met = [top[1] - foot[0], top[2] - foot[1], top[4] - foot[3], top[5] - foot[4]]
        return np.array([top[0] - 1, foot[5] - R_g * foot[2], *met])

    found = solve_bvp(slope, ends, np.linspace(0, 1, 50), np.ones((6, 50)), tol=1e-9)
    assert found.success
    assert ours(k[None], s[None], np.array([R_g]), n=1.0)[0] == pytest.approx(found.y[3, 0], abs=1e-7)
