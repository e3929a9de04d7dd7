"""A Check in the terminal: complete, within its columns, and deaf to what a recipe might try."""

from __future__ import annotations

import io
import re

import pytest
from rich.cells import cell_len
from rich.console import Console

from formcheck.check.record import Contribution
from formcheck.report.finding_words import facts
from formcheck.report.terminal import show_check, show_checks
from formcheck.report.words import all_sources, cited_text, with_unit
from tests.report.sample_check import bare_check, hostile_check, sample_check

ESCAPE = "\x1b"


def printed(check, **console) -> str:
    out = io.StringIO()
    show_check(check, Console(file=out, highlight=False, **{"width": 80, **console}))
    return out.getvalue()


def unwrapped(text: str) -> str:
    return " ".join(text.split())


def test_a_pipe_gets_no_colour_codes():
    assert ESCAPE not in printed(sample_check())


def test_no_color_keeps_hex_and_drops_colour(monkeypatch):
    monkeypatch.setenv("NO_COLOR", "1")
    text = printed(sample_check(), force_terminal=True)
    assert "#006fa3" in text
    assert not re.search(r"\x1b\[[0-9;]*[34]8;", text)


def test_truecolor_swatches_are_the_hex_they_are_called():
    text = printed(sample_check(), force_terminal=True, color_system="truecolor")
    for red, green, blue, hex_text in [(0, 0x6F, 0xA3, "#006fa3"), (0, 0x72, 0xA8, "#0072a8")]:
        assert f"48;2;{red};{green};{blue}m" in text
        assert hex_text in text


def test_few_colours_are_said_to_be_off():
    text = printed(sample_check(), force_terminal=True, color_system="256")
    assert "swatches are visibly off" in unwrapped(text)


@pytest.mark.parametrize("width", [40, 60, 80, 132])
def test_no_line_is_wider_than_the_terminal(width):
    for check in (sample_check(), bare_check(), hostile_check()):
        assert max(cell_len(line) for line in printed(check, width=width).splitlines()) <= width


def test_every_finding_is_there_with_all_that_it_says():
    text = printed(sample_check(), width=400)
    for finding in sample_check().findings:
        assert all(said in text for said in (finding.rule_id, finding.title, finding.place))
        assert cited_text(finding.source) in text
        if finding.grade != "unknown":
            assert f"{finding.grade}  {finding.rule_id}" in text and finding.said in text
            assert all(fact in text for _, fact in facts(finding, brief=True))


def test_rules_left_open_stand_under_the_data_that_would_settle_most():
    check = sample_check()
    (untold,) = [one for one in check.findings if one.grade == "unknown"]
    several = [untold.model_copy(update={"rule_id": f"demo-{n}", "would_settle": [f"datum {n > 0}"]})
               for n in range(4)]
    text = printed(check.model_copy(update={"findings": several}))
    places = [text.index(word) for word in ("3 rules would be settled", "datum True", "demo-1", "demo-3",
                                            "1 rule would be settled", "datum False", "demo-0")]
    assert places == sorted(places)


def test_parts_that_add_nothing_are_left_to_the_page():
    (finding,) = [one for one in sample_check().findings if one.grade == "stop"]
    nought = Contribution(ingredient="water", value=0.0, unit="mg/kg", place="sea_blue.yaml:15:5")
    finding = finding.model_copy(update={"contributions": [*finding.contributions, nought]})
    brief, whole = dict(facts(finding, brief=True)), dict(facts(finding))
    assert brief["parts"] == "chrome_yellow_demo 640 mg/kg; harbour_blue_paste unknown"
    assert "water 0 mg/kg (sea_blue.yaml:15:5)" in whole["parts"]


def test_ph_and_difference_stand_before_their_numbers():
    facts_of = {one.rule_id: dict(facts(one)) for one in sample_check().findings}
    assert facts_of["DEMO-PH-WINDOW-BLUE"]["value"] == "pH 10.02"
    assert with_unit("unknown, 8.2 to 8.6", "pH") == "unknown, pH 8.2 to 8.6"
    assert with_unit("9.1", "DE00") == "ΔE00 9.1"
    assert with_unit("unknown", "pH") == "unknown"


def test_a_caution_has_no_limit_and_law_that_holds_anywhere_is_not_named():
    facts_of = {one.rule_id: dict(facts(one)) for one in sample_check().findings}
    assert "limit" not in facts_of["DEMO-KEEP-COOL"] and "law of" not in facts_of["DEMO-KEEP-COOL"]
    (stop,) = [one for one in sample_check().findings if one.grade == "stop"]
    anywhere = stop.model_copy(update={"jurisdiction": "any"})
    assert dict(facts(anywhere))["limit"] == "90 mg/kg, in force from 2024-01-01"
    bare = stop.model_copy(update={"limit": None})
    assert dict(facts(bare))["law of"] == "XX, in force from 2024-01-01"


def test_findings_stand_by_grade_and_the_untold_after_them():
    text = printed(sample_check())
    places = [text.index(word) for word in ("■ stop", "◆ hold", "▲ care", "● note", "Could not be told",
                                            "would be settled by", "formcheck does not judge")]
    assert places == sorted(places)


def test_memory_is_said_wherever_it_is_the_source():
    text = unwrapped(printed(sample_check()))
    assert text.count("from memory, not confirmed") == 2  # a finding and a colourant stand on it
    assert [one.cite for one in all_sources(sample_check()) if not one.verified] == [
        "Invented Handbook of Dyes, table 9"]


def test_unknown_figures_say_why():
    text = unwrapped(printed(sample_check()))
    assert "PVC unknown, 4 to 19 % no density of sea_latex" in text
    assert "latex (sea_latex) 300 mL unknown unknown unknown built in" in text


def test_nothing_found_is_no_clearance():
    text = unwrapped(printed(bare_check()))
    assert "not a clearance" in text
    assert "no colourant has a spectrum" in text
    assert "the recipe states no water" in text
    assert not re.search(r"\b(safe to|compliant with|approved)\b", text.replace(bare_check().deferral, ""))


def test_a_hostile_recipe_commands_nothing():
    text = printed(hostile_check())
    assert ESCAPE not in text and "\x07" not in text and "\u202e" not in text
    assert "[bold red]x[/]" in text.replace("\n", "")  # shown as written, not obeyed
    text.encode("utf-8")


@pytest.mark.parametrize("encoding", ["ascii", "latin-1", "cp1252"])
def test_narrow_encodings_get_plain_signs(encoding):
    raw = io.BytesIO()
    out = io.TextIOWrapper(raw, encoding=encoding)
    show_check(sample_check(), Console(file=out, width=80))
    out.flush()
    text = raw.getvalue().decode(encoding)
    assert "45.3 +- 0.8" in text
    assert "-8.4" in text


def test_several_checks_end_in_a_line_for_each():
    out = io.StringIO()
    show_checks([sample_check(), bare_check()], Console(file=out, width=100))
    last = out.getvalue().split("2 recipes")[-1]
    assert "#006fa3" in last and "recipes/sea_blue.yaml" in last
    assert "shade unknown" in last and "bare.yaml" in last
