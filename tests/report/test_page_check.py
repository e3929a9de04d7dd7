"""The page: one file, no outside request, every finding, hostile texts shown and not obeyed."""

from __future__ import annotations

import base64
import hashlib
import re
import xml.etree.ElementTree as ET
from itertools import pairwise

import pytest

from formcheck.report.finding_words import facts
from formcheck.report.page import page_html, pages_html
from formcheck.report.plot import standalone
from formcheck.report.sheet import style_sheet
from formcheck.report.words import all_sources, clean, one_line
from tests.report.reading_html import read, words
from tests.report.sample_check import HOSTILE, bare_check, hostile_check, sample_check

PAGES = {
    "one": lambda: page_html(sample_check()),
    "bare": lambda: page_html(bare_check()),
    "hostile": lambda: page_html(hostile_check()),
    "several": lambda: pages_html([sample_check(), bare_check(), hostile_check(), sample_check()]),
    "none": lambda: pages_html([]),
}


@pytest.fixture(scope="module", params=PAGES)
def page(request) -> str:
    return PAGES[request.param]()


def test_nothing_is_asked_of_any_other_place(page):
    read_page = read(page)
    for element in read_page.all():
        for name, value in element.attributes.items():
            assert name not in {"src", "srcset", "xlink:href", "action", "style", "data", "poster"}
            assert not name.startswith("on")
            if name == "href":
                assert value.startswith("#")
            if name in {"fill", "stroke"}:
                assert re.fullmatch(r"none|currentColor|#[0-9a-f]{6}", value)
    assert not read_page.all("script", "img", "iframe", "object", "embed", "link", "base", "form",
                             "foreignobject")
    assert "url(" not in page and "@import" not in page


def test_the_policy_lets_in_the_style_sheet_and_nothing_else(page):
    """W3C Content Security Policy Level 3, 6.7.3: the hash of a style element is that of its text."""
    read_page = read(page)
    (policy,) = [one.attributes["content"] for one in read_page.all("meta")
                 if one.attributes.get("http-equiv") == "Content-Security-Policy"]
    (style,) = read_page.all("style")
    digest = base64.b64encode(hashlib.sha256(style.own_text.encode()).digest()).decode()
    directives = dict(part.split(" ", 1) for part in policy.split("; "))
    assert directives == {"default-src": "'none'", "style-src": f"'sha256-{digest}'", "base-uri": "'none'",
                          "form-action": "'none'"}


def test_headings_step_down_one_at_a_time(page):
    levels = [int(one.name[1]) for one in read(page).all("h1", "h2", "h3", "h4", "h5", "h6")]
    assert levels[0] == 1 and levels.count(1) == 1
    assert all(after <= before + 1 for before, after in pairwise(levels))


def test_ids_are_the_only_ones_and_every_reference_meets_one(page):
    elements = read(page).all()
    ids = [one.attributes["id"] for one in elements if "id" in one.attributes]
    assert len(ids) == len(set(ids))
    for one in elements:
        named = one.attributes.get("aria-labelledby", "").split()
        named += [one.attributes["href"][1:]] if "href" in one.attributes else []
        assert set(named) <= set(ids)


def test_tables_have_captions_and_scopes(page):
    for table in read(page).all("table"):
        assert table.children[0].name == "caption" and words(table.children[0])
        assert all(one.attributes.get("scope") in {"col", "row"} for one in table.all("th"))
        columns = len(table.all("thead")[0].all("th"))
        for row in table.all("tbody")[0].all("tr"):
            assert len(row.all("th", "td")) == columns


def test_every_drawing_is_well_formed_and_named(page):
    drawings = re.findall(r"<svg .*?</svg>", page, re.S)
    for drawing in drawings:
        root = ET.fromstring(standalone(drawing))
        assert root.tag == "{http://www.w3.org/2000/svg}svg"
        hidden = root.get("aria-hidden") == "true"
        title = root.find("{http://www.w3.org/2000/svg}title")
        assert hidden or (title is not None and title.text)


def test_every_finding_is_there_with_all_that_it_says():
    text = words(read(page_html(sample_check())))
    for finding in sample_check().findings:
        for said in (finding.title, finding.said, finding.rule_id,
                     *(fact for label, fact in facts(finding) if label not in ("parts", "answer")),
                     *(part.place for part in finding.contributions)):
            assert said in text
    for unknown in sample_check().unknowns:
        assert unknown.what in text and unknown.why in text and unknown.would_settle in text


def test_every_source_is_listed_and_memory_is_said():
    (section,) = [one for one in read(page_html(sample_check())).all("section")
                  if one.attributes.get("id") == "r1-sources"]
    items = [words(one) for one in section.all("li")]
    assert len(items) == len(all_sources(sample_check()))
    for source, item in zip(all_sources(sample_check()), items, strict=True):
        assert source.cite in item
        assert ("from memory" in item) is (not source.verified)


def test_everything_of_the_record_is_on_the_page():
    check = sample_check()
    text = words(read(page_html(check)))
    said = [check.title, check.file, check.recipe_digest, check.as_of.isoformat(), check.deferral,
            *check.within, *check.sold_in, *(line.place for line in check.composition),
            *(line.written for line in check.composition),
            *(figure.name for figure in check.figures), check.shade.geometry, check.shade.ground,
            check.shade.dominated_by, check.shade.difference_words, *check.shade.left_out,
            *(one.swatch.srgb_hex for one in check.shade.lights), *(one.error for one in check.shade.basis),
            *(one.material for one in check.dye_forms), "71 %", "1.4 ± 0.4", "45.3 ± 0.8", "9.61 ± 0.30"]
    assert [one for one in said if one not in text] == []


def test_several_checks_are_led_by_a_table_of_links():
    page = read(pages_html([sample_check(), bare_check()]))
    assert [one.attributes["href"] for one in page.all("a")] == ["#r1", "#r2"]
    assert [words(one) for one in page.all("h2") if one.attributes["id"] in ("r1-title", "r2-title")] == [
        sample_check().title, "Bare"]


def test_hostile_texts_are_shown_as_text():
    page = page_html(hostile_check())
    read_page = read(page)
    assert not read_page.all("script")
    assert "<script" not in page
    (heading,) = read_page.all("h1")
    assert words(heading) == one_line(HOSTILE)
    assert "<script>alert(1)</script>" in one_line(HOSTILE)
    assert not re.search("[\x00-\x08\x0b-\x1f\x7f\u202e\ud800-\udfff]", page)


@pytest.mark.parametrize("unfit", ["\x00", "\x1b", "\x9b", "\u202e", "\u2066", "\ud800", "\u2028", "\x7f"])
def test_clean_leaves_no_unfit_character(unfit):
    assert clean(f"a{unfit}b") == "a\ufffdb"


def test_clean_keeps_what_people_write():
    for text in ("Grünspan", "群青", "ΔE00 ± 2 µm", "naïve – “quoted”", "tab\tand\nline"):
        assert clean(text) == text


def luminance(hex_text: str) -> float:
    """Relative luminance, W3C Web Content Accessibility Guidelines 2.2, section 1.4.3 and its glossary."""
    digits = hex_text.lstrip("#")
    digits = "".join(2 * one for one in digits) if len(digits) == 3 else digits
    channels = [int(digits[at:at + 2], 16) / 255 for at in (0, 2, 4)]
    linear = [one / 12.92 if one <= 0.04045 else ((one + 0.055) / 1.055) ** 2.4 for one in channels]
    return 0.2126 * linear[0] + 0.7152 * linear[1] + 0.0722 * linear[2]


@pytest.mark.parametrize("scheme", ["light", "dark", "print"])
def test_text_stands_out_at_the_ratio_of_level_aa(scheme):
    """WCAG 2.2, success criterion 1.4.3: 4.5 to 1 for text."""
    roots = re.findall(r":root\s*{(.*?)}", style_sheet(), re.S)
    blocks = dict(zip(("light", "dark", "print"), roots, strict=True))
    colours = dict(re.findall(r"--([a-z]+):\s*(#[0-9a-f]{3,6})", blocks[scheme]))
    for name in ("ink", "soft", "stop", "hold", "care", "note", "unknown"):
        bright, dim = sorted((luminance(colours[name]), luminance(colours["sheet"])), reverse=True)
        assert (bright + 0.05) / (dim + 0.05) >= 4.5, name


def test_the_sheet_is_neutral_so_that_it_does_not_tint_the_swatches():
    for name, value in re.findall(r"--(sheet|ink|soft|hair|panel):\s*#([0-9a-f]{6})", style_sheet()):
        assert value[:2] == value[2:4] == value[4:], name
