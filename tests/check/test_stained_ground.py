"""A dye that goes into its ground: the single-constant form through a whole recipe."""

import numpy as np
import pytest
import yaml
from recipes import DEMO, demo_data, shade

from formcheck.check.sweep import sweep_shades

STAIN = demo_data("oak_amber_wood_stain.yaml")


def stained(depth="80 um", scattering=0.05, **changed):
    ground = {"spectrum": str(DEMO / "spectra" / "pale_oak.csv"),
              "takes_in": {"depth": depth, "scattering_per_um": scattering}}
    return shade({**STAIN, "ground": ground, "specular": "excluded", **changed})


def test_k_over_s_of_the_dye_is_added_to_that_of_the_ground():
    """(K/S) = (K/S)_ground + 2 ln(10) a / S, a per um of dyed depth; the layer on the ground tells A alone."""
    bare = shade({**STAIN, "ground": {"spectrum": str(DEMO / "spectra" / "pale_oak.csv"),
                                      "takes_in": {"depth": "80 um", "scattering_per_um": 0.05}},
                  "specular": "excluded", "ingredients": [{"material": "water", "amount": "1 L"}]})
    one, half = stained(), stained(film={"wet": "30 um"})

    def k_over_s(found):
        R = np.array(found.spectrum.value)
        return (1 - R) ** 2 / (2 * R)

    whole, part = k_over_s(one) - k_over_s(bare), k_over_s(half) - k_over_s(bare)
    assert whole == pytest.approx(2 * part, rel=1e-6, abs=1e-9)
    assert (whole >= -1e-9).all() and whole.max() > 0.1


def test_deeper_and_whiter_grounds_take_the_same_dye_paler():
    plain = stained().swatch.lab[0]
    assert stained(depth="160 um").swatch.lab[0] > plain
    assert stained(scattering=0.1).swatch.lab[0] > plain
    assert "taken in" in stained().geometry and stained().contrast_ratio is None


def test_a_pigment_is_left_to_other_models():
    text = sweep_shades(DEMO / "harbour_blue_screen_ink.yaml").geometry
    assert "taken in" not in text


def test_an_ink_with_white_in_it_is_less_transparent(tmp_path):
    ink = demo_data("harbour_blue_screen_ink.yaml")
    ink["shelf"], ink["ground"] = str(DEMO / "shelf"), "chart_white"
    whitened = {**ink, "ingredients": [*ink["ingredients"],
                                       {"material": "titanium dioxide rutile", "amount": "60 g"}]}
    found = []
    for name, data in (("a.yaml", ink), ("b.yaml", whitened)):
        (tmp_path / name).write_text(yaml.safe_dump(data), encoding="utf-8")
        found.append(sweep_shades(tmp_path / name).shades[0].hiding.transparency_um)
    assert found[1] < found[0] / 2
    assert sweep_shades(DEMO / "quarry_white_wall_coating.yaml").shades[0].hiding.transparency_um is None
