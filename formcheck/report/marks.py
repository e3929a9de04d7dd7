"""A shape for each grade, so that a finding is known by shape and word before any colour."""

from __future__ import annotations

from formcheck.check.record import Grade
from formcheck.report.html import Markup, tag

SIZE = 16
OUTLINED = {"fill": "none", "stroke": "currentColor", "stroke_width": "1.6"}


def mark(grade: Grade) -> Markup:
    """The mark alone: the word always stands beside it, so it is hidden from readers aloud."""
    return tag("svg", SHAPES[grade], class_="mark", viewBox=f"0 0 {SIZE} {SIZE}", width=SIZE, height=SIZE,
               aria_hidden="true", focusable="false", fill="currentColor")


SHAPES: dict[Grade, list[Markup]] = {
    "stop": [tag("rect", x="1", y="1", width="14", height="14")],
    "hold": [tag("path", d="M8 .5 15.5 8 8 15.5 .5 8Z", **OUTLINED), tag("path", d="M8 .5 8 15.5 .5 8Z")],
    "care": [tag("path", d="M8 2 15 14.2H1Z", stroke_linejoin="round", **OUTLINED),
             tag("path", d="M8 6.4V10.4", **OUTLINED)],
    "note": [tag("circle", cx="8", cy="8", r="3.6")],
    "unknown": [tag("circle", cx="8", cy="8", r="6.6", stroke_dasharray="2.6 2.2", **OUTLINED)],
}
