import colour
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from formcheck.colour.cielab import lch
from formcheck.colour.lights import light_names
from formcheck.colour.srgb import srgb, swatch
from formcheck.colour.tristimulus import white_point

CONDITIONS = [(light, observer_deg) for light in light_names() for observer_deg in (2, 10)]


@pytest.mark.parametrize(
    "light, observer_deg", [("D65", 2), ("D65", 10), ("A", 10), ("D50", 2), ("FL11", 10)]
)
def test_agrees_with_colour_science(light, observer_deg):
    """Lab to XYZ to D65 by Bradford to sRGB (IEC 61966-2-1), within half a step of 255."""
    lab = np.array([[50, 10, 10], [70, -20, 30], [40, 5, -30], [90, 0, 5], [5, 0.5, -0.5]], dtype=float)
    white = white_point(light, observer_deg)
    xy = colour.XYZ_to_xy(white)
    XYZ = colour.Lab_to_XYZ(lab, xy)
    theirs = colour.XYZ_to_sRGB(XYZ, xy, chromatic_adaptation_transform="Bradford")
    ours, inside = srgb(lab, light, observer_deg)
    assert inside.all()
    np.testing.assert_allclose(ours, theirs, atol=0.5 / 255)


@pytest.mark.parametrize("light, observer_deg", CONDITIONS)
def test_white_grey_and_black_look_so_under_every_light(light, observer_deg):
    assert swatch([100, 0, 0], light, observer_deg) == ("#ffffff", True)
    assert swatch([0, 0, 0], light, observer_deg) == ("#000000", True)
    assert swatch([53.585, 0, 0], light, observer_deg) == ("#808080", True)  # L* of sRGB 128, IEC 61966-2-1


@given(st.tuples(st.floats(1, 99), st.floats(-150, 150), st.floats(-150, 150)))
@settings(max_examples=60, deadline=None)
def test_a_colour_outside_is_drawn_in_along_its_hue(lab):
    rgb, inside = srgb(lab)
    assert ((rgb >= 0) & (rgb <= 1)).all()
    xyz = colour.sRGB_to_XYZ(
        rgb, chromatic_adaptation_transform="Bradford", illuminant=colour.XYZ_to_xy(white_point("D65", 10))
    )
    shown = lch(colour.XYZ_to_Lab(xyz, colour.XYZ_to_xy(white_point("D65", 10))))
    asked = lch(lab)
    assert shown[0] == pytest.approx(asked[0], abs=1.0)
    assert shown[1] <= asked[1] + 1.0
    if shown[1] > 10:
        assert abs((shown[2] - asked[2] + 180) % 360 - 180) < 3
    if inside:
        assert shown[1] == pytest.approx(asked[1], abs=1.0)


def test_out_of_gamut_is_flagged():
    assert swatch([50, 20, 30])[1] and not swatch([50, 120, 30])[1] and not swatch([120, 0, 0])[1]


def test_many_at_once():
    lab = np.random.default_rng(0).uniform([0, -90, -90], [100, 90, 90], (2, 5, 3))
    rgb, inside = srgb(lab)
    assert rgb.shape == (2, 5, 3) and inside.shape == (2, 5)
    np.testing.assert_allclose(rgb[1, 3], srgb(lab[1, 3])[0])
