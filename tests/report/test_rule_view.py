"""`formcheck why RULE` in the terminal, on invented rules of each kind."""

from __future__ import annotations

import io
from datetime import date

import pytest
from rich.console import Console

from formcheck.hazards.rule import KINDS, RuleBase
from formcheck.report.rule import show_rule

COMMON = {
    "id": "xx-invented", "title": "An invented rule", "jurisdiction": "XX", "review_by": "2026-06-01",
    "applies_when": {"sold_in": ["XX"], "use": ["consumer_coating"]},
    "why": "Because it was invented.", "what_to_do": "Nothing at all.", "who_decides": "nobody yet",
    "sources": {
        "act": {"instrument": "Invented Act", "clause": "s. 1", "kind": "law", "edition": "2000-01-01",
                "read_on": "2026-01-05"},
    },
}
DYE = {"percent": 5, "kind": "dye", "charge": "anionic"}


def rule(kind: str, **fields) -> RuleBase:
    return KINDS[kind].model_validate({**COMMON, "kind": kind, **fields})


def limit() -> RuleBase:
    return rule(
        "limit_on_sum", grade={"exceeds": "stop", "cannot_tell": "hold"}, comparison="more_than",
        quantity={"of": [{"element": "Pb"}, {"element": "Cd", "times": 2.5}], "name": "lead and cadmium",
                  "basis": "dry_film", "unit": "mg/kg"},
        limit=[{"from": "2001-01-01", "until": "2008-12-31", "value": 600, "source": "act"},
               {"from": "2009-01-01", "value": 90, "source": "act"}],
        examples=[{"as_of": "2015-06-01", "ingredients": [{"percent": 2, "elements_percent": {"Pb": 60}}],
                   "expect": "exceeds"}, {"ingredients": [DYE], "expect": "within"}])


def window() -> RuleBase:
    return rule("ph_window", grade={"exceeds": "care", "cannot_tell": "hold"}, where={"kind": ["dye"]},
                window=[{"low": 6, "high": 9.5, "source": "act"}], below="it fades", above="it browns",
                examples=[{"ph": 3, "ingredients": [DYE], "expect": "exceeds"},
                          {"ph": 7, "ingredients": [DYE], "expect": "within"}])


def pair() -> RuleBase:
    return rule("must_not_meet", grade={"applies": "stop", "cannot_tell": "hold"},
                first={"name": "anionic dye", "where": {"charge": ["anionic"]}},
                second={"name": "cationic partner", "where": {"charge": ["cationic"]}},
                consequence="they clot", in_force={"from": "2010-01-01", "source": "act"},
                examples=[{"ingredients": [DYE, {**DYE, "charge": "cationic"}], "expect": "applies"},
                          {"ingredients": [DYE, DYE], "expect": "no_flag"}])


def caution() -> RuleBase:
    return rule("caution", grade={"applies": "note", "cannot_tell": "unknown"}, where={"kind": ["dye"]},
                at_least_percent=0.1, in_force={"source": "act"},
                examples=[{"ingredients": [DYE], "expect": "applies"},
                          {"ingredients": [{**DYE, "kind": "salt"}], "expect": "no_flag"}])


def printed(one: RuleBase, day: date = date(2026, 12, 1)) -> str:
    out = io.StringIO()
    show_rule(one, as_of=day, console=Console(file=out, width=150, highlight=False))
    return out.getvalue()


@pytest.mark.parametrize("make", [limit, window, pair, caution])
def test_a_rule_is_shown_whole(make):
    text = " ".join(printed(make()).split())
    for said in ("xx-invented", "An invented rule", "use consumer coating; sold in XX",
                 "Because it was invented.", "Nothing at all.", "nobody yet",
                 "Invented Act, s. 1, edition 2000-01-01, law, read 2026-01-05",
                 "to review by 2026-06-01; overdue on 2026-12-01"):
        assert said in text


def in_force(text: str) -> list[str]:
    return [line for line in text.splitlines() if line.strip().startswith("→")]


def test_the_limit_of_the_day_is_marked():
    assert "90 mg/kg" in in_force(printed(limit()))[0]
    assert "600 mg/kg" in in_force(printed(limit(), date(2008, 12, 31)))[0]
    assert in_force(printed(limit(), date(2000, 12, 31))) == []
    assert "600 mg/kg" in printed(limit())


def test_what_is_summed_is_told():
    text = printed(limit())
    for said in ("lead and cadmium", "element Pb", "element Cd, times 2.5", "dry film", "more than"):
        assert said in text


def test_windows_pairs_and_cautions_tell_their_terms():
    assert "pH 6 to 9.5" in printed(window()) and "it browns" in printed(window())
    for said in ("anionic dye", "cationic partner", "they clot", "2010-01-01"):
        assert said in printed(pair())
    assert "0.1 %" in printed(caution())


def test_examples_and_grades_are_shown():
    text = " ".join(printed(limit()).split())
    assert "exceeds: percent 2, elements percent Pb 60; as of 2015-06-01" in text
    assert "within: percent 5, kind dye, charge anionic" in text
    assert "■ stop" in text and "◆ hold" in text
