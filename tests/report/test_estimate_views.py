"""An Estimate in the terminal and as a page."""

from __future__ import annotations

import io
import re
import xml.etree.ElementTree as ET
from itertools import pairwise

from rich.cells import cell_len
from rich.console import Console

from formcheck.report.estimate import electrons_text, estimate_html, show_estimate
from formcheck.report.level_diagram import level_diagram
from formcheck.report.plot import standalone
from tests.report.reading_html import read, words
from tests.report.sample_estimate import chain, ring, sample_estimate

SVG = "{http://www.w3.org/2000/svg}"


def printed(width: int = 80, **console) -> str:
    out = io.StringIO()
    show_estimate(sample_estimate(), Console(file=out, width=width, highlight=False, **console))
    return out.getvalue()


def test_the_terminal_shows_levels_bands_region_and_error():
    text = " ".join(printed(200).split())
    for said in ("527 ± 31", "61000 ± 24000", "2 × chain of 1.20 nm, 8 pi electrons each",
                 "4.18 eV ─↑↓─ n=4", "6.53 eV ──── n=5",
                 "looks colourless", "#e0a080", "#9f8fd0", "maxima within 31 nm",
                 "Invented J. of Boxes", "does not judge"):
        assert said in text


def test_lines_fit_and_a_pipe_has_no_codes():
    assert max(cell_len(line) for line in printed(80).splitlines()) <= 80
    assert "\x1b" not in printed()


def test_the_terminal_region_is_of_equal_parts():
    text = printed(force_terminal=True, color_system="truecolor")
    runs = re.findall(r"\x1b\[48;2;\d+;\d+;\d+m( +)", text)
    assert len(runs) >= 3 and len(set(map(len, runs))) == 1


def test_electrons_are_arrows():
    assert electrons_text(0, 1) == "────"
    assert electrons_text(2, 1) == "─↑↓─"
    assert electrons_text(2, 2) == "─↑── ─↑──"
    assert electrons_text(4, 2) == "─↑↓─ ─↑↓─"


def test_the_page_shows_a_region_and_never_one_large_point():
    page = read(estimate_html(sample_estimate()))
    (strip,) = [one for one in page.all("svg") if "chips" in one.attributes.get("class", "")]
    widths = {one.attributes["width"] for one in strip.all("rect") if one.attributes["fill"] != "none"}
    assert len(widths) == 1
    assert "somewhere in this strip" in words(page)


def test_the_page_holds_every_band_and_box():
    page = read(estimate_html(sample_estimate()))
    text = words(page)
    for form in sample_estimate().forms:
        assert all(band.label in text for band in form.bands)
    assert len([one for one in page.all("svg") if one.attributes.get("class") == "levels"]) == 3
    levels = [int(one.name[1]) for one in page.all("h1", "h2", "h3")]
    assert all(after <= before + 1 for before, after in pairwise(levels))
    ids = [one.attributes["id"] for one in page.all() if "id" in one.attributes]
    assert len(ids) == len(set(ids))


def test_energy_runs_upwards_and_filled_levels_carry_electrons():
    root = ET.fromstring(standalone(level_diagram(chain(), id="l")))
    height = {one.text: float(one.get("y")) for one in root.iter(f"{SVG}text")}
    assert height["n=6"] < height["n=5"] < height["n=4"]
    arrows = [one for one in root.iter(f"{SVG}path") if one.get("stroke-width") == "1.2"]
    assert len(arrows) == chain().n_pi_electrons


def test_degenerate_levels_are_drawn_apart():
    root = ET.fromstring(standalone(level_diagram(ring(), id="l")))
    bars = [one.get("d") for one in root.iter(f"{SVG}path") if one.get("stroke-width") == "2"]
    assert len(bars) == 5
