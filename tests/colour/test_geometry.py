"""What each measuring geometry takes in of a surface, against Fresnel's equations and published relations."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.integrate import quad

from formcheck.colour.geometry import (
    DIRECTIONAL,
    GEOMETRIES,
    GLOSS_IN,
    GLOSS_OUT,
    met_inside,
    seen_in_air,
    surface,
    surface_of_constants,
)
from formcheck.colour.saunderson import to_measured
from tests.published.diffuse_fresnel import fresnel, thrown_back

INDICES = [1.33, 1.5, 1.7]


@given(st.floats(1.0, 2.5), st.floats(0, 1), st.sampled_from(GEOMETRIES))
def test_there_and_back(n, inside, geometry):
    assert met_inside(seen_in_air(inside, surface(n, geometry)), surface(n, geometry)) == pytest.approx(
        inside, abs=1e-9
    )


@pytest.mark.parametrize("geometry", GEOMETRIES)
def test_without_a_surface_all_read_alike(geometry):
    assert seen_in_air(0.37, surface(1.0, geometry)) == pytest.approx(0.37, abs=1e-15)
    assert seen_in_air(0.37, surface(1.0 + 1e-9, geometry)) == pytest.approx(0.37, abs=1e-8)


@pytest.mark.parametrize("n", INDICES)
def test_sphere_is_the_light_of_all_directions_seen_upright(n):
    """d:8 worked out the other way about: diffuse light in, 1 - r_diffuse; upright out, (1 - r(0))/n**2."""
    enters, leaves = 1 - thrown_back(n_from=1.0, n_to=n), (1 - fresnel(0.0, 1.0, n)) / n**2
    assert surface(n, GLOSS_OUT).through == pytest.approx(enters * leaves, rel=1e-9)
    assert surface(n, GLOSS_OUT).gloss == 0
    assert surface(n, GLOSS_IN).gloss == pytest.approx(fresnel(0.0, 1.0, n))
    # 8 degrees instead of upright changes the gloss by less than 1e-4
    assert fresnel(np.radians(8), 1.0, n) == pytest.approx(float(surface(n, GLOSS_IN).gloss), abs=1e-4)


@pytest.mark.parametrize("n", INDICES)
def test_directional_is_fresnel_at_45_degrees_in_and_upright_out(n):
    """Williams & Clapper 1953, a clear layer on white: (1 - r(45)) (1 - r(0)) / n**2 before the inner rounds."""
    expected = (1 - fresnel(np.radians(45), 1.0, n)) * (1 - fresnel(0.0, 1.0, n)) / n**2
    assert surface(n, DIRECTIONAL).through == pytest.approx(expected, rel=1e-12)
    assert surface(n, DIRECTIONAL).gloss == 0


@pytest.mark.parametrize("n", INDICES)
def test_an_ideal_white_seen_from_every_side_sends_out_all_that_entered(n):
    """The upright reading is one of all directions; over the half-sphere they sum to the light let in."""
    light_in = 1 - fresnel(np.radians(45), 1.0, n)
    outward = quad(lambda v: (1 - fresnel(v, 1.0, n)) * np.sin(2 * v), 0, np.pi / 2)[0] / n**2
    total = light_in * outward / (1 - thrown_back(n_from=n, n_to=1.0))
    assert total == pytest.approx(light_in, rel=1e-6)
    upright = seen_in_air(1.0, surface(n, DIRECTIONAL))
    assert upright == pytest.approx(total * (1 - fresnel(0.0, 1.0, n)) / (n**2 * outward), rel=1e-6)


def test_readings_of_one_white_tile_in_three_geometries():
    """n = 1.5: gloss in 1, gloss out 0.96, 45:0 a little above 1 (docstring of geometry.py)."""
    readings = [float(seen_in_air(1.0, surface(1.5, geometry))) for geometry in (GLOSS_IN, GLOSS_OUT, DIRECTIONAL)]
    assert readings == pytest.approx([1.0, 0.96, 1.0039], abs=5e-5)


@given(st.floats(0, 1), st.floats(0, 0.1), st.floats(0, 0.7), st.booleans())
def test_fitted_constants_are_saunderson(inside, k1, k2, included):
    fitted = surface_of_constants(k1=k1, k2=k2, specular_included=included)
    assert seen_in_air(inside, fitted) == to_measured(inside, k1=k1, k2=k2, specular_included=included)


def test_darker_than_its_own_gloss_counts_as_black():
    assert met_inside(0.01, surface(1.5, GLOSS_IN)) == 0


def test_unknown_geometry_is_refused_with_a_suggestion():
    with pytest.raises(ValueError, match="did you mean 'd:8 specular included'"):
        surface(1.5, "d/8 specular included")
