"""Saunderson's correction and its two constants against published values and the Fresnel equations."""

import numpy as np
import pytest
from scipy.integrate import quad

from formcheck.colour.saunderson import (
    diffuse_reflection,
    k1_from_index,
    k2_from_index,
    to_internal,
    to_measured,
)
from tests.published.colorimetry_values import VALUES


def fresnel_over_the_half_sphere(m):
    """Reflection of diffuse unpolarised light coming onto a medium of relative index m."""

    def reflected(angle):
        inside = np.arcsin(np.sin(angle) / m) if np.sin(angle) < m else None
        if inside is None:
            return np.sin(2 * angle)  # total reflection
        c, d = np.cos(angle), np.cos(inside)
        s, p = (c - m * d) / (c + m * d), (m * c - d) / (m * c + d)
        return (s**2 + p**2) / 2 * np.sin(2 * angle)

    edge = [np.arcsin(m)] if m < 1 else None
    return quad(reflected, 0, np.pi / 2, points=edge, limit=400, epsabs=1e-11)[0]


@pytest.mark.parametrize("n, normal, outside, inside", VALUES["fresnel"]["rows"])
def test_constants_of_published_indices(n, normal, outside, inside):
    assert k1_from_index(n) == pytest.approx(normal, abs=0.6e-5)
    assert k2_from_index(n) == pytest.approx(inside, abs=0.6e-5)
    assert diffuse_reflection(n_from=1.0, n_to=n) == pytest.approx(outside, abs=0.6e-5)


def test_constants_printed_for_index_one_and_a_half():
    """Judd 1942 prints 0.596 for n = 1.5 (from memory); Saunderson 1942 takes 0.04 outside."""
    assert k1_from_index(1.5) == pytest.approx(0.04, abs=1e-12)
    assert k2_from_index(1.5) == pytest.approx(0.596, abs=0.0005)


@pytest.mark.parametrize("n", [1.0005, 1.02, 1.2, 1.7, 2.4])
def test_closed_form_is_the_integral_of_fresnel(n):
    assert diffuse_reflection(n_from=1.0, n_to=n) == pytest.approx(fresnel_over_the_half_sphere(n), abs=1e-7)
    assert k2_from_index(n) == pytest.approx(fresnel_over_the_half_sphere(1 / n), abs=1e-7)
    assert diffuse_reflection(n_from=1.4 * n, n_to=1.4) == pytest.approx(k2_from_index(n), abs=1e-9)


def test_no_surface_between_equal_indices():
    assert k1_from_index(1.0) == 0 and k2_from_index(1.0) == 0
    near = k2_from_index(1 + np.array([0.99e-4, 1.01e-4]))
    assert abs(near[1] - near[0]) < 1e-5  # no step where the closed form takes over


@pytest.mark.parametrize("k1, k2, inside, measured, included", VALUES["saunderson"]["rows"])
def test_published_constants_and_back(k1, k2, inside, measured, included):
    assert to_measured(inside, k1=k1, k2=k2, specular_included=included) == pytest.approx(
        measured, abs=0.6e-6
    )
    assert to_internal(measured, k1=k1, k2=k2, specular_included=included) == pytest.approx(inside, abs=2e-6)


def test_an_index_below_that_of_air_is_refused():
    with pytest.raises(ValueError, match=r"n\[1\] is 0.9; expected a refractive index of at least 1"):
        k1_from_index([1.5, 0.9])
