"""Film thickness and spreading rate for a contrast ratio: by hand, by the closed form, by scipy."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.optimize import brentq

from formcheck.colour.hiding import (
    contrast_of_film,
    scattering_power_for_contrast,
    thickness_for_contrast,
)
from formcheck.colour.hiding_from_panels import panel_scattering_power, spreading_rate_for_contrast
from formcheck.colour.kubelka_munk import film, r_infinity
from formcheck.film.bounds import exact
from formcheck.film.spreading import spreading_rate_m2_l

IDEAL = {"black": np.zeros(85), "white": np.full(85, 0.8), "n": 1.0, "ground_in_air": False}


def test_white_without_absorption_by_hand():
    """K = 0 (Kubelka 1948): R_b = u/(1 + u), R_w = (g + u (1 - g))/(1 + u (1 - g)), u = SX, g = 0.8.

    R_b/R_w = 0.98 gives u + 0.2 u**2 = 0.98 x 0.8/0.02 = 39.2, so u = (-1 + sqrt(1 + 0.8 x 39.2))/0.4
    = (-1 + 5.688585)/0.4 = 11.72146. With S = 0.25 /um: 46.886 um dry. At 40 % solids by volume 117.2 um wet,
    1000/117.2 = 8.531 m2/L.
    """
    assert scattering_power_for_contrast(0.0, white=0.8) == pytest.approx(11.72146, abs=1e-5)
    dry_um = float(thickness_for_contrast(k=np.zeros(85), s=np.full(85, 0.25), **IDEAL))
    assert dry_um == pytest.approx(46.8858, abs=1e-3)
    rate = spreading_rate_m2_l(np.array([dry_um]), exact(np.array([0.40])))
    assert rate.value[0] == pytest.approx(8.5314, abs=1e-3)


def test_grey_by_hand():
    """K/S = 0.5: a = 1.5, b = sqrt(1.25) = 1.118034, g = 0.8, C = 0.98. In u = b coth(bSX)

    0.784 u**2 - 0.02 u - 0.406 = 0 (0.98 x 1.5 x (1 - 1.2) - 1.5 + 0.8 = -0.994: under the root
    0.0004 + 4 x 0.784 x 0.994 = 3.117584), u = (0.02 + 1.765668)/1.568 = 1.138819,
    b/u = 0.9817486, arctanh 2.343747, S X = 2.096312.
    """
    assert scattering_power_for_contrast(0.5, white=0.8) == pytest.approx(2.09631, abs=1e-5)


def test_a_panel_by_hand():
    """ASTM D2805: R_0 = 0.60 at 10 m2/L, R_inf = 0.85: a = 1.013235, b = 0.163235.

    u = 1/0.6 - a = 0.653431, b/u = 0.249813, arctanh 0.255215, S X = 1.56348; for C = 0.98 over 0.80
    u = 0.192334, b/u = 0.848709, arctanh 1.251520, S X = 7.66698; 10 x 1.56348/7.66698 = 2.0392 m2/L.
    """
    assert panel_scattering_power(over_black=0.60, hiding=0.85) == pytest.approx(1.56348, abs=1e-4)
    assert spreading_rate_for_contrast(10.0, over_black=0.60, hiding=0.85) == pytest.approx(2.0392, abs=1e-3)


@given(st.floats(0, 20), st.floats(0.05, 1), st.floats(0.5, 0.999))
def test_closed_form_gives_the_contrast_asked_for(ratio, g, C):
    u = float(scattering_power_for_contrast(ratio, white=g, contrast=C))
    black, white = (film([ratio], [1.0], thickness_um=u, ground=[R_g])[0] for R_g in (0.0, g))
    assert black / white == pytest.approx(C, abs=1e-6)


def test_closed_form_passes_smoothly_to_no_absorption():
    ratios = 10.0 ** np.arange(-16, -2, 0.25)
    found = scattering_power_for_contrast(np.append(0, ratios), white=0.8)
    assert (np.diff(found) < 1e-9).all() and found[1] == pytest.approx(found[0], rel=1e-6)


@given(st.floats(0, 5), st.floats(0.02, 0.95))
def test_a_panel_tells_the_film_it_was_made_from(ratio, share):
    """Forward by kubelka_munk.film, back by the two readings."""
    R_inf = float(r_infinity(ratio, 1.0))
    s_x = share * 3
    R_0 = film([ratio], [1.0], thickness_um=s_x, ground=[0.0])[0]
    if R_0 / R_inf < 0.999:
        assert panel_scattering_power(over_black=R_0, hiding=R_inf) == pytest.approx(s_x, rel=1e-4)


def test_a_panel_that_hides_already_is_refused():
    with pytest.raises(ValueError, match="below the film that hides"):
        panel_scattering_power(over_black=0.86, hiding=0.85)


def random_paints(count):
    rng, knots = np.random.default_rng(4), np.linspace(360, 780, 9)
    nm = np.arange(360.0, 781, 5)
    k, s = (np.array([np.interp(nm, knots, row) for row in rng.random((count, 9))]) for _ in range(2))
    return k**3, 0.3 * s + 0.01


@pytest.mark.parametrize("seen", [{}, {"n": 1.0}, {"specular_included": True, "ground_specular_included": True}])
def test_many_paints_at_once_against_scipy(seen):
    k, s = random_paints(6)
    grounds = {"black": np.full(85, 0.05), "white": np.full(85, 0.8)}
    found = thickness_for_contrast(k=k, s=s, **grounds, **seen)
    for i in range(len(k)):
        root = brentq(
            lambda X, i=i: contrast_of_film(k=k[i], s=s[i], thickness_um=X, **grounds, **seen) - 0.98, 1e-2, 1e5
        )
        assert found[i] == pytest.approx(root, rel=1e-6)


def test_closed_form_and_search_agree_on_greys():
    ratios = np.array([0.0, 1e-4, 0.05, 1.0, 10.0])
    s = np.full((5, 85), 0.2)
    found = thickness_for_contrast(k=ratios[:, None] * s, s=s, contrast=0.95, **IDEAL)
    np.testing.assert_allclose(
        found, scattering_power_for_contrast(ratios, white=0.8, contrast=0.95) / 0.2, rtol=1e-7
    )


def test_a_dye_alone_never_hides_and_a_grey_ground_needs_no_film():
    clear = {"k": np.zeros((2, 85)), "s": np.zeros((2, 85)), "dye_absorbance_per_um": np.full((2, 85), 0.01)}
    grounds = {"black": np.full(85, 0.05), "white": np.full(85, 0.8)}
    assert np.isinf(thickness_for_contrast(**clear, **grounds)).all()
    assert (thickness_for_contrast(**clear, black=np.full(85, 0.8), white=np.full(85, 0.8)) == 0).all()


@settings(max_examples=25, deadline=None)
@given(st.floats(0.05, 0.97), st.floats(1.01, 3))
def test_more_scattering_hides_thinner(contrast, factor):
    k, s = random_paints(1)
    one, other = thickness_for_contrast(k=k * [[1], [1]], s=s * [[1], [factor]], contrast=contrast, **IDEAL)
    assert other < one


def test_a_contrast_of_one_is_refused():
    with pytest.raises(ValueError, match=r"contrast is 1\.0; expected a ratio above 0 and below 1"):
        thickness_for_contrast(k=np.zeros(85), s=np.ones(85), contrast=1.0, **IDEAL)
