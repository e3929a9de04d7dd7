"""Weights on grids and lights that no table knows, and what they refuse."""

import colour
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from formcheck.colour.lights import light_name, light_names
from formcheck.colour.tristimulus import weights, white_point, xyz
from formcheck.spectra.grid import WAVELENGTH_NM

ONE_NM = np.arange(360, 781, 1.0)


def planck(temperature_k, wavelength_nm):
    """Planck's law relative to 560 nm, with the second radiation constant that goes with 2848 K."""
    c2_nm_k = 1.435e7
    at_560, at = (np.expm1(c2_nm_k / (temperature_k * nm)) for nm in (560, wavelength_nm))
    return (560 / wavelength_nm) ** 5 * at_560 / at


@pytest.mark.parametrize("wavelength_nm", [WAVELENGTH_NM, ONE_NM, np.arange(360, 781, 10.0)], ids=len)
def test_light_given_as_a_spectrum(wavelength_nm):
    """The formula of illuminant A (ISO/CIE 11664-2) given as a user's light acts as the built-in A."""
    own = (ONE_NM, 100 * planck(2848, ONE_NM))
    spectrum = np.linspace(0.1, 0.9, len(wavelength_nm))
    np.testing.assert_allclose(
        xyz(spectrum, own, 10, wavelength_nm), xyz(spectrum, "A", 10, wavelength_nm), atol=2e-3
    )


def test_lines_of_a_users_light_are_not_stepped_over():
    """A light in a line of 1 nm between the points of a 5 nm grid still has its colour."""
    power = np.full(421, 1e-9)
    power[ONE_NM == 543] = 1.0
    white = white_point((ONE_NM, power), 2)
    observer = colour.MSDS_CMFS["CIE 1931 2 Degree Standard Observer"][543.0]
    np.testing.assert_allclose(white, 100 * observer / observer[1], rtol=0.001)


@settings(max_examples=40, deadline=None)
@given(st.lists(st.floats(1, 20), min_size=30, max_size=60), st.sampled_from(["D65", "A", "LED-B3"]))
def test_uneven_wavelengths_meet_a_smooth_spectrum(steps, light):
    """Local interpolation is exact for a parabola, whatever the steps."""
    wavelength_nm = 360 + 420 * np.cumsum([0.0, *steps]) / sum(steps)
    wavelength_nm[-1] = 780
    coarse, fine = (xyz(0.2 + ((nm - 600) / 300) ** 2, light, 10, nm) for nm in (wavelength_nm, ONE_NM))
    np.testing.assert_allclose(coarse, fine, atol=0.02)


@pytest.mark.parametrize(
    "grid", [(400, 700, 10), (365, 775, 10), (380, 780, 4), (300, 830, 5), (350, 850, 20)]
)
def test_perfect_white_is_the_white_point_on_every_grid(grid):
    wavelength_nm = np.arange(grid[0], grid[1] + 1, grid[2], dtype=float)
    for light in light_names():
        # steep bands summed at 5 nm instead of 1 nm move the white most
        rtol = 0.004 if light.startswith("LED") else 0.002
        white = xyz(np.ones(len(wavelength_nm)), light, 2, wavelength_nm)
        np.testing.assert_allclose(white, white_point(light, 2), rtol=rtol)
        assert (weights(light, 2, wavelength_nm)[(wavelength_nm < 360) | (wavelength_nm > 780)] == 0).all()


def test_recipes_lead():
    spectra = np.random.default_rng(0).random((3, 4, 85))
    assert xyz(spectra).shape == (3, 4, 3)
    np.testing.assert_allclose(xyz(spectra)[2, 1], xyz(spectra[2, 1]))


def test_weights_are_kept_and_cannot_be_spoiled():
    assert weights("d65", 10) is weights("D65", 10)
    with pytest.raises(ValueError):
        weights()[0, 0] = 1


def test_names_of_lights_in_any_case():
    assert light_name("led-b3") == "LED-B3" and light_name("F11") == "FL11"
    with pytest.raises(ValueError, match=r"light 'D66' is not built in; did you mean 'D65'\?"):
        light_name("D66")


@pytest.mark.parametrize(
    "call, said",
    [
        (lambda: weights(observer_deg=5), "observer 5; expected 2 or 10"),
        (
            lambda: weights(wavelength_nm=[500, 510, 520, 530]),
            "from 500 to 530 nm; expected at least 420 to 680",
        ),
        (lambda: weights(wavelength_nm=[400, 400, 500, 700]), "do not rise"),
        (lambda: weights(wavelength_nm=[100, 200, 700]), "1 wavelengths from 360 to 780 nm"),
        (lambda: weights(([400, 700], [1, -1])), "negative"),
        (lambda: weights(([400, 700], [1])), "two rows of equal length"),
        (lambda: weights(([400, 700], [1, np.nan])), "not numbers"),
        (lambda: weights(([700, 400], [1, 1])), "do not rise"),
        (lambda: weights(([450, 700], [1, 1])), "expected at least 400 to 700"),
        (lambda: xyz(np.ones(31)), "expected 85 values on its last axis"),
    ],
)
def test_what_cannot_be_weighed_is_refused(call, said):
    with pytest.raises(ValueError, match=said):
        call()
