"""A bad rule file is refused with its place and what would be right: one broken file for each refusal."""

from __future__ import annotations

from pathlib import Path

import pytest

from formcheck.hazards.book import load_book, read_rule
from formcheck.hazards.try_examples import failed_examples
from formcheck.hazards.vocabulary import Vocabulary, read_vocabulary
from formcheck.trouble import InputError

GOOD = """\
id: shop-lead-in-ink
title: Lead in ink
kind: limit_on_sum
jurisdiction: EU
applies_when: {what: [ink]}
quantity:
  of: [{element: Pb}]
  name: lead
  unit: mg/kg
comparison: more_than
limit:
  - {from: 2020-01-01, value: 90, source: list}
grade: {exceeds: stop, cannot_tell: hold}
sources:
  list: {instrument: Restricted list of a customer, edition: 2020-01, kind: user}
review_by: 2027-01-01
why: The customer asks for it.
what_to_do: Take another colourant.
who_decides: The customer.
examples:
  - {as_of: 2020-06-01, ingredients: [{percent: 1, elements_percent: {Pb: 1}}], expect: exceeds}
  - {as_of: 2020-06-01, ingredients: [{percent: 1, elements_percent: {Pb: 0.8}}], expect: within}
"""
PAIR = """\
id: shop-lead-in-ink
title: A pair
kind: must_not_meet
jurisdiction: any
first: {name: acid, where: {kind: [acid]}}
second: {name: carbonate, where: {group: [carbonate]}}
consequence: gas
in_force: {source: list}
grade: {applies: stop, cannot_tell: unknown}
sources:
  list: {instrument: Restricted list of a customer, kind: user}
review_by: 2027-01-01
why: w
what_to_do: d
who_decides: d
examples:
  - {ingredients: [{percent: 1, kind: acid}, {percent: 1, groups: [carbonate]}], expect: applies}
  - {ingredients: [{percent: 1, kind: acid}], expect: no_flag}
"""
WINDOW = PAIR.replace("kind: must_not_meet", "kind: ph_window").replace(
    "first: {name: acid, where: {kind: [acid]}}\nsecond: {name: carbonate, where: {group: [carbonate]}}\n"
    "consequence: gas\nin_force: {source: list}\ngrade: {applies: stop, cannot_tell: unknown}\n",
    "where: {kind: [dye]}\nwindow: [{low: 4, high: 9, source: list}]\nbelow: it fades\nabove: it fades\n"
    "grade: {exceeds: stop, cannot_tell: unknown}\n").replace("expect: applies", "expect: exceeds")


WORDS = load_book().words


def pack(tmp_path: Path, text: str, name="lead_in_ink.yaml") -> Path:
    (tmp_path / name).write_text(text, encoding="utf-8")
    return tmp_path


def test_a_users_pack_is_read_beside_the_shipped_ones(tmp_path):
    shipped = load_book()
    book = load_book([pack(tmp_path, GOOD)])
    assert len(book.rules) == len(shipped.rules) + 1
    written = book.written["shop-lead-in-ink"]
    assert (written.own, written.pack) == (False, tmp_path.name)
    assert failed_examples(written.rule, book.words) == []


def test_the_other_kinds_of_this_test_are_good_too(tmp_path):
    for text in (PAIR, WINDOW):
        read_rule(pack(tmp_path, text) / "lead_in_ink.yaml", WORDS)


BROKEN = [
    ("kind: limit_on_sum", "kind: limit_on_sums", 3, "did you mean 'limit_on_sum'?"),
    ("kind: limit_on_sum\n", "", 1, "`kind:` with one of"),
    ("title: Lead in ink\n", "", 1, "a line `title: ...`"),
    ("title: Lead in ink", "titel: Lead in ink", 2, "title"),
    ("title: Lead in ink", "title: Lead in ink\ntitle: again", 3, "each key once"),
    ("id: shop-lead-in-ink", "id: shop-mercury", 1, "a file named as the end of the id"),
    ("id: shop-lead-in-ink", "id: Shop Lead", 1, ""),
    ("jurisdiction: EU", "jurisdiction: EUU", 4, "EU"),
    ("{what: [ink]}", "{what: [inks]}", 5, "ink"),
    ("{what: [ink]}", "{use: [toys]}", 5, "toy"),
    ("{what: [ink]}", "{where: [ink]}", 5, "what"),
    ("{element: Pb}", "{element: lead}", 7, ""),
    ("{element: Pb}", "{element: Pb, voc: less_water}", 7, "one of `element`, `share`, `voc`"),
    ("{element: Pb}", "{share: {}}", 7, "one of group"),
    ("{element: Pb}", "{share: {group: [carbonat]}}", 7, "carbonate"),
    ("{element: Pb}", "{share: {hazard_class: [Carc. 9]}}", 7, "Carc."),
    ("{element: Pb}", "{share: {cas: [not-a-cas]}}", 7, ""),
    ("{element: Pb}", "{voc: less_water}", 6, "basis as_used"),
    ("{element: Pb}", "{element: Pb, times: -1}", 6, "a factor above 0"),
    ("unit: mg/kg", "unit: ppm", 6, "one of % w/w"),
    ("unit: mg/kg", "unit: g/L", 6, "bases"),
    ("unit: mg/kg", "unit: mg/kg\n  each: true", 6, "one term with `share`"),
    ("comparison: more_than", "comparison: above", 10, "more_than"),
    ("value: 90", "value: ninety", 12, "a number"),
    ("value: 90", "value: -1", 12, ""),
    ("from: 2020-01-01", "from: 2020-13-01", 12, "a date"),
    ("value: 90, source: list}", "value: 90, source: list}\n  - {from: 2019-01-01, value: 1, source: list}", 1,
     "days in rising order"),
    ("value: 90, source: list", "value: 90, until: 2019-01-01, source: list", 1, "on or after"),
    ("value: 90, source: list", "value: 90, source: liszt", 1, "a key of `sources`"),
    ("  list: {inst", "  other: {instrument: x, kind: law}\n  list: {inst", 1, "only sources that are cited"),
    ("kind: user}", "kind: user, verified: false}", 1, "a limit read in its source"),
    ("kind: user}", "kind: hearsay}", 15, "law"),
    ("kind: user}", "kind: law}", None, None),  # a law with `hold` is right
    ("exceeds: stop, cannot_tell: hold", "exceeds: stop, cannot_tell: hold, applies: note", 1, "exceeds"),
    ("exceeds: stop, cannot_tell: hold", "applies: stop, cannot_tell: hold", 1, "no grade for 'exceeds'"),
    ("exceeds: stop, cannot_tell: hold", "exceeds: halt, cannot_tell: hold", 13, "stop"),
    ("exceeds: stop,", "", 1, ""),
    ("expect: exceeds", "expect: within", 1, "one that expects exceeds"),
    ("expect: within", "expect: exceeds", 1, "one that expects within"),
    ("expect: within", "expect: perhaps", 22, "within"),
    ("{percent: 1, elements_percent: {Pb: 0.8}}", "{elements_percent: {Pb: 0.8}}", 22, "unknown: [percent]"),
    ("{percent: 1, elements_percent: {Pb: 0.8}}", "{percent: 1, element: {Pb: 1}}", 22, "elements_percent"),
    ("review_by: 2027-01-01", "review_by: soon", 16, "a date"),
    ("why: The", "why: &anchor The", 17, "without"),
    ("why: The customer asks for it.", "why: !!python/object:os.system x", 17, "the plain value"),
]


@pytest.mark.parametrize("old, new, line, right", BROKEN, ids=range(len(BROKEN)))
def test_a_broken_limit_is_refused_with_its_place(tmp_path, old, new, line, right):
    assert old in GOOD
    file = pack(tmp_path, GOOD.replace(old, new, 1)) / "lead_in_ink.yaml"
    if line is None:
        read_rule(file, WORDS)
        return
    with pytest.raises(InputError) as caught:
        read_rule(file, WORDS)
    problem = caught.value.problems[0]
    assert problem.place.file.endswith("lead_in_ink.yaml")
    assert problem.place.line == line, str(problem)
    assert right in str(problem)


@pytest.mark.parametrize("text, old, new, right", [
    (GOOD, "kind: user}", "kind: law}", "hold"),
    (PAIR, "consequence: gas\n", "", "consequence"),
    (PAIR, "applies: stop", "exceeds: stop", "no grade for 'applies'"),
    (PAIR, "{kind: [acid]}}\nsecond", "{kind: [acids]}}\nsecond", "acid"),
    (WINDOW, "low: 4, high: 9", "low: 9, high: 4", "`low` below `high`"),
    (WINDOW, "low: 4, high: 9, ", "", "`low`, `high` or both"),
    (WINDOW, "below: it fades\n", "", "`below` with `low`"),
    (WINDOW, "window: [{low: 4, high: 9, source: list}]\n", "source: list\n", "from_records"),
])
def test_other_refusals(tmp_path, text, old, new, right):
    broken = text.replace(old, new, 1)
    if text is GOOD:
        broken = broken.replace("cannot_tell: hold", "cannot_tell: unknown")
    with pytest.raises(InputError) as caught:
        read_rule(pack(tmp_path, broken) / "lead_in_ink.yaml", WORDS)
    assert right in str(caught.value)


def test_an_id_twice_is_refused(tmp_path):
    pack(tmp_path, GOOD)
    (tmp_path / "more").mkdir()
    pack(tmp_path / "more", GOOD)
    with pytest.raises(InputError, match="already in"):
        load_book([tmp_path])


def test_every_bad_file_is_told_at_once(tmp_path):
    pack(tmp_path, GOOD.replace("value: 90", "value: x"))
    pack(tmp_path, "nothing", "other.yaml")
    with pytest.raises(InputError) as caught:
        load_book([tmp_path])
    assert {Path(p.place.file).name for p in caught.value.problems} == {"lead_in_ink.yaml", "other.yaml"}


@pytest.mark.parametrize("text", ["", "- a\n- b\n", "a: &x [1]\nb: *x\n", "[" * 200, "\x00\x01", "on: 1\n"])
def test_files_that_are_no_rules(tmp_path, text):
    with pytest.raises(InputError):
        read_rule(pack(tmp_path, text) / "lead_in_ink.yaml", WORDS)


def test_a_huge_file_and_a_missing_folder(tmp_path):
    with pytest.raises(InputError, match="no folder"):
        load_book([tmp_path / "none"])
    with pytest.raises(InputError, match="at most"):
        load_book([pack(tmp_path, GOOD + "#" * 300_000)])


def test_a_pack_brings_words_of_its_own(tmp_path):
    text = PAIR.replace("carbonate", "house_blue")
    with pytest.raises(InputError):
        load_book([pack(tmp_path, text)])
    (tmp_path / "vocabulary.yaml").write_text("groups: {house_blue: {meaning: our blues}}\n", encoding="utf-8")
    book = load_book([tmp_path])
    assert failed_examples(book.written["shop-lead-in-ink"].rule, book.words) == []
    assert "carbonate" in book.words.groups


def test_overdue_rules_are_told(tmp_path):
    from datetime import date

    book = load_book([pack(tmp_path, GOOD)])
    assert "shop-lead-in-ink" not in book.overdue(date(2027, 1, 1))
    assert "shop-lead-in-ink" in book.overdue(date(2027, 1, 2))


def test_reading_one_rule_needs_no_book(tmp_path):
    words = read_vocabulary(tmp_path)
    assert words == Vocabulary()
