"""Films and stacks against photons followed one by one, over the range that colour/layers.py states."""

import numpy as np
import pytest

from formcheck.colour.layers import stack_reflectance
from tests.colour.photon_walk import reflected

PHOTONS = 15_000  # a standard error of at most 0.004
SIGMAS = 3.5


def two_flux(absorption, scattering, ground):
    """K = 2 sigma_a, S = 3/4 sigma_s (1 - g) with g = 0 [Mudgett & Richards 1971]."""
    k_x, s_x = 2 * np.asarray(absorption, float), 0.75 * np.asarray(scattering, float)
    return stack_reflectance(
        ground=[ground], k_x=k_x[:, None], s_x=s_x[:, None], n=1.0, ground_in_air=False
    )[0]


# sigma_a X and sigma_s X of each film, R_g: thickness from 4 to 40 mean free paths, absorption up to 3 %
WITHIN_THE_RANGE = [
    ([0.0], [4.0], 0.9),
    ([0.04], [4.0], 0.0),
    ([0.12], [4.0], 0.5),
    ([0.16], [8.0], 0.05),
    ([0.02], [20.0], 0.8),
    ([0.4], [40.0], 0.0),
    ([0.01, 0.15], [4.0, 5.0], 0.1),
    ([0.15, 0.0, 0.1], [5.0, 8.0, 4.0], 0.8),
]


@pytest.mark.parametrize("absorption, scattering, ground", WITHIN_THE_RANGE)
def test_agrees_within_the_noise_of_the_photons(absorption, scattering, ground):
    mean, error = reflected(absorption, scattering, ground=ground, photons=PHOTONS)
    assert error < 0.004
    assert two_flux(absorption, scattering, ground) == pytest.approx(mean, abs=SIGMAS * error)


# beyond it, with how far low the reflectance may come out (docstring of layers.py)
BEYOND = [
    ([0.8], [8.0], 0.0, 0.012),
    ([4.0], [4.0], 0.5, 0.012),
    ([0.003], [0.3], 0.0, 0.025),
    ([0.01], [1.0], 0.0, 0.025),
    ([0.3], [0.3], 0.9, 0.04),
]


@pytest.mark.parametrize("absorption, scattering, ground, low", BEYOND)
def test_beyond_its_range_it_is_off_as_far_as_stated(absorption, scattering, ground, low):
    mean, error = reflected(absorption, scattering, ground=ground, photons=PHOTONS)
    off = mean - two_flux(absorption, scattering, ground)
    assert -SIGMAS * error < off < low + SIGMAS * error


@pytest.mark.parametrize("tau, exact", [(1.0, 0.4466), (2.0, 0.6099)])
def test_the_photons_themselves_are_right(tau, exact):
    """A film that only scatters, under diffuse light on black: 1 - T of the exact slab.

    T = 0.5534 and 0.3901 from the integral equation of radiative equilibrium between diffuse walls, as
    M. A. Heaslet & R. F. Warming, Int. J. Heat Mass Transfer 8 (1965) 979 solve it.
    """
    mean, error = reflected([0.0], [tau], ground=0.0, photons=60_000)
    assert mean == pytest.approx(exact, abs=SIGMAS * error + 1e-4)
