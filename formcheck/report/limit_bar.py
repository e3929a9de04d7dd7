"""A value against its limit, drawn on one scale: what is known filled, what is possible hatched by dashes."""

from __future__ import annotations

import math

from formcheck.check.record import Finding
from formcheck.report.finding_words import limit_text, value_text
from formcheck.report.html import Markup, tag
from formcheck.report.numbers import exact

WIDTH, HEIGHT = 320, 34
BAR_TOP, BAR_HEIGHT = 20, 9


def limit_bar(finding: Finding, *, id: str) -> Markup | None:
    """The bar, or None where value or limit is missing or a bar from zero would mean nothing (a pH)."""
    known, possible = _known(finding), _possible(finding)
    if finding.limit is None or finding.limit <= 0 or finding.unit == "pH" or max(known, possible) <= 0:
        return None
    most = 1.15 * max(finding.limit, known, possible)
    limit_x = WIDTH * finding.limit / most
    right_of_middle = limit_x > WIDTH / 2
    label = tag("text", f"limit {exact(finding.limit)}", x=f"{limit_x + (-5 if right_of_middle else 5):.1f}",
                y=12, font_size=12, text_anchor="end" if right_of_middle else None)
    return tag(
        "svg", tag("title", f"Value {value_text(finding)}; limit {limit_text(finding)}", id=f"{id}-t"),
        _bar(0, WIDTH * known / most, fill_opacity="0.75", fill="currentColor"),
        _bar(WIDTH * known / most, WIDTH * possible / most, fill="none", stroke="currentColor",
             stroke_dasharray="3 3") if possible > known else None,
        tag("line", x1=0, x2=WIDTH, y1=BAR_TOP + BAR_HEIGHT, y2=BAR_TOP + BAR_HEIGHT, stroke="currentColor",
            stroke_opacity="0.5"),
        tag("line", x1=f"{limit_x:.1f}", x2=f"{limit_x:.1f}", y1=2, y2=HEIGHT, stroke="currentColor",
            stroke_width=2), label,
        class_="bar", viewBox=f"0 0 {WIDTH} {HEIGHT}", width=WIDTH, height=HEIGHT, role="img",
        aria_labelledby=f"{id}-t", fill="currentColor",
    )


def _known(finding: Finding) -> float:
    """What is there for sure: the lower bound, else the value."""
    values = [one for one in (finding.value_low, finding.value) if one is not None and math.isfinite(one)]
    return max(0.0, values[0]) if values else 0.0


def _possible(finding: Finding) -> float:
    values = [one for one in (finding.value_high, finding.value) if one is not None and math.isfinite(one)]
    return max(0.0, values[0]) if values else 0.0


def _bar(start: float, end: float, **drawn_as: str) -> Markup:
    return tag("rect", x=f"{start:.1f}", y=BAR_TOP, width=f"{end - start:.1f}", height=BAR_HEIGHT, **drawn_as)
