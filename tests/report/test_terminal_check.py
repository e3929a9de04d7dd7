"""A Check in the terminal: complete, within its columns, and deaf to what a recipe might try."""

from __future__ import annotations

import io
import re

import pytest
from rich.cells import cell_len
from rich.console import Console

from formcheck.report.finding_words import facts
from formcheck.report.terminal import show_check, show_checks
from formcheck.report.words import all_sources
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
        for said in (finding.grade, finding.rule_id, finding.title, finding.said, finding.source.cite,
                     *(fact for _, fact in facts(finding))):
            assert said in text


def test_findings_stand_by_grade_and_the_untold_after_them():
    text = printed(sample_check())
    places = [text.index(word) for word in ("■ stop", "◆ hold", "▲ care", "● note", "Could not be told",
                                            "? unknown", "formcheck does not judge")]
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
