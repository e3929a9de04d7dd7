"""Lights of one's own, and the geometry a film is measured in, as a recipe states them."""

import numpy as np
import pytest
from recipes import DEMO, demo_data, shade

from formcheck.check.sweep import sweep_shades
from formcheck.colour.lights import power
from formcheck.trouble import InputError

NM = np.arange(360.0, 781.0, 5.0)


def lamp(tmp_path, values, name="lamp.csv", nm=NM):
    rows = "".join(f"{x:g},{y!r}\n" for x, y in zip(nm, values, strict=True))
    (tmp_path / name).write_text("wavelength_nm,relative power\n" + rows, encoding="utf-8")
    return str(tmp_path / name)


def ink(**changed):
    return {**demo_data("harbour_blue_screen_ink.yaml"), **changed}


def test_a_built_in_light_given_as_a_file_is_that_light(tmp_path):
    given = lamp(tmp_path, power("A", NM).tolist(), "tungsten.csv")
    named = shade(ink(lights=["D65", "A", {"spectrum": given}])).lights
    assert [one.light for one in named] == ["D65", "A", "tungsten"]
    assert named[2].swatch.lab == pytest.approx(named[1].swatch.lab, abs=0.02)


def test_the_wanted_shade_may_be_meant_under_a_light_of_ones_own(tmp_path):
    given = lamp(tmp_path, power("D50", NM).tolist(), "booth.csv")
    wanted = {"lab": [37, -9, -32], "light": "booth", "tolerance": 4}
    found = shade(ink(lights=[{"spectrum": given}], wanted=wanted))
    under_d50 = shade(ink(lights=["D50"], wanted={**wanted, "light": "D50"}))
    assert found.light == "booth"
    assert found.swatch.lab == pytest.approx(under_d50.swatch.lab, abs=0.02)


@pytest.mark.parametrize("values, nm, right", [
    (np.ones(11), np.arange(500.0, 611.0, 10.0)[:11], "400 to 700 nm"), (-np.ones(85), NM, "at least 0"),
    (np.zeros(85), NM, "not all 0"),
])
def test_a_light_that_is_none_is_refused(tmp_path, values, nm, right):
    given = lamp(tmp_path, values.tolist(), nm=nm)
    with pytest.raises(InputError, match=r"test.yaml") as caught:
        shade(ink(lights=[{"spectrum": given}]))
    assert right in str(caught.value) and "lights[0]" in str(caught.value)


def test_45_0_is_darker_by_the_mirror_reflection_and_near_the_excluded_one():
    """45:0 keeps the mirror reflection out [CIE 015:2018]; a dark film shows it most."""
    included, excluded = shade(ink()), shade(ink(specular="excluded"))
    directional = shade(ink(geometry="45:0"))
    assert "45:0" in directional.geometry and "d:8" in included.geometry
    assert directional.xyz[1] < included.xyz[1] - 2
    assert directional.xyz[1] == pytest.approx(excluded.xyz[1], rel=0.1)


def test_the_command_takes_a_light_by_its_file(tmp_path):
    given = lamp(tmp_path, power("A", NM).tolist(), "tungsten.csv")
    sweep = sweep_shades(DEMO / "tide_mark_indicator_ink.yaml", lights=[given, "A"])
    assert sweep.lights == ["tungsten", "A"]
    assert sweep.shades[0].lights[1].de00_from_first < 0.02
