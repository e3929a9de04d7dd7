"""Plots and swatches: well-formed whatever the numbers, ticks round and within their axis."""

from __future__ import annotations

import json
import math
import re
import xml.etree.ElementTree as ET
from pathlib import Path

from hypothesis import given
from hypothesis import strategies as st

from formcheck.report.limit_bar import limit_bar
from formcheck.report.plot import (
    Axis,
    Marker,
    Series,
    StripCell,
    TopAxis,
    line_plot,
    standalone,
    visible_spectrum,
)
from formcheck.report.swatches import Chip, chips, pair
from formcheck.report.ticks import round_range, round_ticks, tick_labels
from tests.report.sample_check import sample_check

SVG = "{http://www.w3.org/2000/svg}"
NUMBER = st.floats(min_value=-1e9, max_value=1e9, allow_nan=False) | st.just(math.nan)


def drawn(series, **others) -> ET.Element:
    settings = {"id": "p", "title": "A plot", "description": "Of something", "x": Axis("x"), "y": Axis("y")}
    return ET.fromstring(standalone(line_plot(series, **{**settings, **others})))


def curves(root: ET.Element) -> list[ET.Element]:
    return [one for one in root.iter(f"{SVG}path") if one.get("class") == "plot-curve"]


@given(st.lists(st.tuples(NUMBER, NUMBER), min_size=1, max_size=12))
def test_any_numbers_make_a_drawing_within_its_frame(points):
    x, y = [one for one, _ in points], [one for _, one in points]
    root = drawn([Series(x, y, low=y, high=y)])
    for path in root.iter(f"{SVG}path"):
        for px, py in re.findall(r"(-?[\d.]+) (-?[\d.]+)", path.get("d")):
            assert 0 <= float(px) <= 720 and 0 <= float(py) <= 300


def test_the_curve_runs_where_the_axis_says():
    """A point at the middle of both axes lies in the middle between the outermost ticks."""
    root = drawn([Series([0, 5, 10], [0, 0.5, 1])], x=Axis("x", 0, 10), y=Axis("y", 0, 1))
    (curve,) = curves(root)
    (x0, y0), (x1, y1), (x2, y2) = [tuple(map(float, pair)) for pair in
                                    re.findall(r"([\d.]+) ([\d.]+)", curve.get("d"))]
    assert abs((x1 - x0) - (x2 - x1)) <= 0.11 and abs((y0 - y1) - (y1 - y2)) <= 0.11
    assert x0 < x1 and y0 > y2
    labels = {one.text: one for one in root.iter(f"{SVG}text")}
    assert float(labels["10"].get("x")) == x2


def test_given_ends_cut_x_and_give_way_in_y():
    curve = Series([0, 5, 10, 15, 20], [0.2, 0.5, 1.3, -0.2, 9.0])
    root = drawn([curve], x=Axis("x", 0, 15), y=Axis("y", 0, 1))
    (curve,) = curves(root)
    points = re.findall(r"([\d.]+) ([\d.]+)", curve.get("d"))
    assert len(points) == 4
    height = {one.text: float(one.get("y")) for one in root.iter(f"{SVG}text")}
    assert float(points[2][1]) < height["1.0"] and float(points[3][1]) > height["0.0"]
    assert all(0 <= float(py) <= 300 for _, py in points)


def test_gaps_stay_gaps():
    root = drawn([Series([1, 2, 3, 4, 5], [1, 2, math.nan, 2, 1])])
    assert len(curves(root)) == 2


def test_curves_differ_by_dashes_and_are_named():
    root = drawn([Series([0, 1], [n, n], label=f"curve {n}") for n in range(4)])
    assert len({one.get("stroke-dasharray") for one in curves(root)}) == 4
    assert {f"curve {n}" for n in range(4)} <= {one.text for one in root.iter(f"{SVG}text")}


def test_markers_strip_and_top_axis_are_drawn():
    root = drawn([Series([0, 14], [40, 60])], markers=[Marker(7, "this mixture"), Marker(99, "outside")],
                 strip=[StripCell(0, 7, "#ff0000"), StripCell(7, 20, "#0000ff")],
                 top=TopAxis("mL of base", [(4, "10"), (30, "never")]))
    texts = {one.text for one in root.iter(f"{SVG}text")}
    assert {"this mixture", "mL of base", "10"} <= texts
    assert not {"outside", "never"} & texts
    assert [one.get("fill") for one in root.iter(f"{SVG}rect")] == ["#ff0000", "#0000ff"]


def test_a_drawing_tells_what_it_is():
    root = drawn([Series([0, 1], [0, 1])], title="Reflectance <of> a film")
    assert root.find(f"{SVG}title").text == "Reflectance <of> a film"
    assert root.find(f"{SVG}desc").text == "Of something"
    assert root.get("role") == "img" and root.get("aria-labelledby") == "p-t p-d"


@given(st.floats(min_value=-1e9, max_value=1e9), st.floats(min_value=1e-6, max_value=1e9))
def test_ticks_are_even_and_within(low, span):
    high = low + span
    ticks = round_ticks(low, high)
    slack = 1e-6 * span + 1e-9 * abs(low)
    if high - low > 1e-9 * abs(low):
        assert 1 <= len(ticks) <= 8
        assert all(low - slack <= one <= high + slack for one in ticks)
        wide_low, wide_high = round_range(low, high)
        assert wide_low <= low + slack and wide_high >= high - slack


def test_tick_labels_share_their_decimals():
    assert tick_labels([0.0, 0.25, 0.5]) == ["0.00", "0.25", "0.50"]
    assert tick_labels([-20.0, 0.0, 20.0]) == ["−20", "0", "20"]
    assert tick_labels(round_ticks(0, 1)) == ["0.0", "0.2", "0.4", "0.6", "0.8", "1.0"]


def test_the_visible_strip_runs_from_violet_to_red():
    cells = visible_spectrum()
    assert (cells[0].low, cells[-1].high) == (380, 740)
    colour = {cell.low: [int(cell.hex[at:at + 2], 16) for at in (1, 3, 5)] for cell in cells}
    assert max(range(3), key=colour[450].__getitem__) == 2
    assert max(range(3), key=colour[530].__getitem__) == 1
    assert max(range(3), key=colour[650].__getitem__) == 0


def test_the_visible_strip_is_what_its_script_makes():
    """Against colour-science: the data file is what scripts/bake_spectrum_strip.py gives today."""
    import importlib.util

    top = Path(__file__).resolve().parents[2]
    spec = importlib.util.spec_from_file_location("bake_strip", top / "scripts" / "bake_spectrum_strip.py")
    script = importlib.util.module_from_spec(spec)
    spec.loader.exec_module(script)
    kept = json.loads((top / "formcheck" / "report" / "data" / "spectrum_strip.json").read_text("utf-8"))
    assert kept["hexes"] == script.strip_hexes()


def test_swatches_meet_without_a_gap():
    root = ET.fromstring(standalone(pair(Chip("#112233", "a"), Chip("#445566", "b"), id="s")))
    left, right = [one for one in root.iter(f"{SVG}rect") if one.get("fill", "").startswith("#")]
    assert float(left.get("x")) + float(left.get("width")) == float(right.get("x"))


@given(st.integers(min_value=1, max_value=200))
def test_a_strip_fills_its_width(number):
    cells = [Chip("#101010", str(n)) for n in range(number)]
    root = ET.fromstring(standalone(chips(cells, id="s", title="t")))
    rects = [one for one in root.iter(f"{SVG}rect") if one.get("fill") != "none"]
    assert len(rects) == number
    assert abs(sum(float(one.get("width")) for one in rects) - 640) < 0.01 * number


def test_the_limit_bar_crosses_its_limit_only_when_exceeded():
    findings = {one.rule_id: one for one in sample_check().findings}
    root = ET.fromstring(standalone(limit_bar(findings["XX-LEAD-DRY-FILM"], id="b")))
    known, possible = list(root.iter(f"{SVG}rect"))
    limit = float(list(root.iter(f"{SVG}line"))[-1].get("x1"))
    assert float(known.get("width")) > limit
    assert float(possible.get("x")) == float(known.get("width"))
    assert limit_bar(findings["DEMO-PH-WINDOW-BLUE"], id="b") is None
    assert limit_bar(findings["DEMO-KEEP-COOL"], id="b") is None


def test_an_unknown_value_has_no_known_part():
    (finding,) = [one for one in sample_check().findings if one.rule_id == "XX-PRESERVATIVE"]
    known, possible = list(ET.fromstring(standalone(limit_bar(finding, id="b"))).iter(f"{SVG}rect"))
    assert float(known.get("width")) == 0 and float(possible.get("width")) > 0
