"""What the README of the demo workshop says of each recipe is what comes out of its check."""

from __future__ import annotations

import re

import pytest
from recipes import DEMO, chroma, demo

from formcheck.check.record import Check

README = (DEMO / "README.md").read_text(encoding="utf-8")
PROMISED = dict(re.findall(r"^\| `([^`]+)` \| (.+) \|$", README, flags=re.MULTILINE))


def rules(check: Check, *grades: str, answer: str | None = None) -> set[str]:
    return {finding.rule_id for finding in check.findings
            if (not grades or finding.grade in grades) and answer in (None, finding.answer)}


def figure(check: Check, name: str) -> float | None:
    return next(one.value for one in check.figures if one.name == name)


def test_the_readme_lists_every_recipe_and_no_other():
    assert set(PROMISED) == {path.name for path in DEMO.glob("*.yaml")}
    assert all((DEMO / name).is_file() for name in PROMISED)


@pytest.mark.parametrize("name", sorted(PROMISED))
def test_every_recipe_is_checked_with_every_number_traceable(name):
    check = demo(name)
    assert check.findings and check.rules_applied > 100
    for finding in check.findings:
        assert finding.said and finding.what_to_do and finding.who_decides and finding.source
        assert finding.answer != "exceeds" or finding.limit is not None
    for one in (*check.figures, check.ph):
        assert one.value is not None or one.reason
    for line in check.composition:
        assert line.mass_g is not None and line.place.startswith(str(DEMO / name))


def test_screen_ink_with_a_wanted_shade_measured_colourant_measured_ph():
    check = demo("harbour_blue_screen_ink.yaml")
    assert check.shade and check.shade.wanted and check.shade.de00 is not None
    assert check.shade.de00 <= check.shade.wanted.tolerance_de00 and check.shade.probability_within > 0.9
    assert "measured" in {one.basis for one in check.shade.basis}
    assert check.ph.how == "measured" and check.ph.value == 8.4
    assert figure(check, "VOC, ready to use") is not None and not check.held


def test_gravure_ink_with_its_vapours_and_cautions():
    check = demo("ember_red_gravure_ink.yaml")
    assert {"ghs-flammable-liquid", "cp-nitrocellulose-kept-damp", "ghs-drowsiness"} <= rules(check, answer="applies")
    assert figure(check, "VOC, ready to use") > 600
    assert check.ph.value is None and "no water" in check.ph.reason
    assert check.shade.geometry.startswith("film of 7 um wet") and "formcheck-off-shade" not in rules(check)


def test_wall_coating_from_optical_constants_hides_and_knows_its_voc():
    check = demo("quarry_white_wall_coating.yaml")
    assert {one.basis for one in check.shade.basis} == {"optical constants"}
    assert check.shade.contrast_ratio > 0.98  # the usual demand on one coat of wall paint (common practice)
    assert 0 < figure(check, "VOC, ready to use") < 30
    assert {"eu-voc-interior-wall-matt", "us-voc-flat-coating", "ca-voc-flat-coating"} <= set(check.within)
    assert figure(check, "pigment volume concentration") < figure(check, "critical pigment volume concentration")


def test_red_iron_oxide_over_its_voc_limit():
    check = demo("brick_red_masonry_coating.yaml")
    over = {one.rule_id: one for one in check.findings if "-voc-" in one.rule_id and one.answer == "exceeds"}
    assert {"eu-voc-exterior-wall-solventborne", "us-voc-non-flat-coating"} <= set(over)
    assert over["eu-voc-exterior-wall-solventborne"].grade == "stop" and check.held
    assert over["eu-voc-exterior-wall-solventborne"].value > over["eu-voc-exterior-wall-solventborne"].limit == 430
    assert 20 < check.shade.swatch.lab[0] < 50 and check.shade.swatch.lab[1] > 5  # a dark red


def test_wood_stain_that_misses_its_shade():
    check = demo("oak_amber_wood_stain.yaml")
    off = next(one for one in check.findings if one.rule_id == "formcheck-off-shade")
    assert off.answer == "exceeds" and off.value > off.limit and off.grade == "care"
    assert check.shade.ground == "the ground of spectra/pale_oak.csv" and "darker" in check.shade.difference_words


def test_dye_bath_in_a_cell_from_published_bands():
    check = demo("madder_rose_dye_bath.yaml")
    assert check.shade.spectrum.quantity == "transmittance" and "cell of 10 mm" in check.shade.geometry
    assert {one.basis for one in check.shade.basis} == {"handbook bands"}
    assert check.ph.value == pytest.approx(4.8, abs=0.1)  # acetic acid and acetate: pKa 4.76, log(24.4/16.7) above it


def test_indicator_ink_whose_shade_hangs_on_its_ph():
    check = demo("tide_mark_indicator_ink.yaml")
    forms = check.dye_forms[0]
    assert forms.shares and 0.02 < forms.shares[-2] < 0.98 and sum(forms.shares) == pytest.approx(1)
    assert check.ph_computed and abs(check.ph_computed.value - check.ph.value) < 0.5


def test_near_black_from_several_chromophores():
    check = demo("midnight_black_ink.yaml")
    assert check.shade.swatch.lab[0] < 20 and chroma(check.shade) < 8
    assert len({one.material for one in check.shade.basis}) >= 4


def test_dye_with_no_spectrum_described_as_a_box():
    check = demo("estimated_cyanine_ink.yaml")
    assert {one.basis for one in check.shade.basis} == {"box model"}
    assert len(check.shade.region) > 2 and max(check.shade.lab_sd) > 10, "a region, not a colour"
    assert not check.held


def test_lead_chromate_over_several_limits():
    check = demo("heritage_sign_yellow.yaml")
    over = rules(check, "stop", "hold", answer="exceeds")
    assert {"us-lead-in-dry-film", "ca-lead-in-surface-coating", "eu-label-lead-in-paint"} <= over
    assert len([rule for rule in over if "lead" in rule]) >= 4 and check.held
    assert check.shade is None and "lead chromate" in check.shade_reason


def test_iron_blue_in_an_alkaline_wash():
    check = demo("nursery_blue_limewash.yaml")
    assert {"cp-iron-blue-in-alkali", "cp-ph-window-of-the-record"} <= rules(check, "hold", answer="exceeds")
    assert "cp-iron-blue-with-alkaline-pigment" in rules(check, answer="applies") and check.held


def test_hypochlorite_with_an_acid():
    check = demo("discharge_bleach_paste.yaml")
    assert "cp-hypochlorite-with-acid" in rules(check, "stop", answer="applies") and check.held
    said = next(one for one in check.findings if one.rule_id == "cp-hypochlorite-with-acid")
    assert "chlorine" in said.said and "citric acid" in said.said


def test_aluminium_flake_in_an_alkaline_waterborne_paint():
    check = demo("silver_lantern_paint.yaml")
    assert "cp-aluminium-powder-with-alkali" in rules(check, "stop", answer="applies")
    assert "cp-aluminium-flake-ph" in rules(check, "stop", answer="exceeds") and check.held
    assert check.shade is None and any(one.what == "the shade" and one.would_settle for one in check.unknowns)


def test_jar_with_no_label():
    check = demo("gift_jar_green.yaml")
    open_ones = [one for one in check.findings if one.answer == "cannot_tell"]
    assert len([one for one in open_ones if one.grade == "hold"]) > 15 and check.held
    assert not rules(check, answer="exceeds"), "what is unknown is not accused"
    assert {"the shade", "the pH"} <= {one.what for one in check.unknowns}
    assert all(one.would_settle for one in open_ones)
    assert figure(check, "density") is None


def test_every_kind_of_trouble_is_in_the_workshop():
    """Over a limit, wrong pH, must not meet, off shade, missing data."""
    checks = [demo(name) for name in PROMISED]
    found = {(one.rule_id, one.answer) for check in checks for one in check.findings}
    for expected in (("us-lead-in-dry-film", "exceeds"), ("cp-iron-blue-in-alkali", "exceeds"),
                     ("cp-hypochlorite-with-acid", "applies"), ("formcheck-off-shade", "exceeds"),
                     ("us-lead-in-dry-film", "cannot_tell")):
        assert expected in found
    assert {check.held for check in checks} == {True, False}
    assert {check.what for check in checks} == {"ink", "coating", "stain", "dye_bath", "solution"}
