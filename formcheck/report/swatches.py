"""Swatches as SVG: a pair edge to edge, a region, a strip. Fills are attributes: the page allows no style=.

Every swatch carries its hex and its words in a title.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from formcheck.check.record import Swatch
from formcheck.report.html import Markup, tag
from formcheck.report.shade_words import lab_text
from formcheck.report.words import hex_colour

SHOWS_FROM, SHOWS_TO = 30, 70  # L* of a line that stands out from both pages
PAIR_WIDTH, PAIR_HEIGHT, REGION_HEIGHT = 320, 220, 48


@dataclass(frozen=True)
class Chip:
    """One colour of a strip: its hex (None draws an empty frame) and what it is."""

    hex: str | None
    label: str


def chip(swatch: Swatch, label: str) -> Chip:
    return Chip(hex_colour(swatch), f"{label}: {hex_colour(swatch) or 'no colour'}, {lab_text(swatch.lab)}")


def curve_hex(swatch: Swatch) -> str | None:
    """The colour to draw a curve in, or None where it would not show on a light or a dark page."""
    return hex_colour(swatch) if SHOWS_FROM <= swatch.lab[0] <= SHOWS_TO else None


def pair(predicted: Chip, wanted: Chip | None, region: Sequence[Chip] = (), *, id: str) -> Markup:
    """Predicted and wanted meeting edge to edge; under the predicted, shades within its uncertainty."""
    half = PAIR_WIDTH / (2 if wanted else 1)
    upper = PAIR_HEIGHT - (REGION_HEIGHT if len(region) > 1 else 0)
    drawn = [_rect(predicted, 0, 0, half, upper)]
    if wanted:
        drawn.append(_rect(wanted, half, 0, half, PAIR_HEIGHT))
    if len(region) > 1:
        each = half / len(region)
        drawn += [_rect(one, place * each, upper, each, REGION_HEIGHT) for place, one in enumerate(region)]
    words = [predicted.label, wanted.label if wanted else "", *(one.label for one in region)]
    return _svg(drawn, id=id, title="; ".join(word for word in words if word), width=PAIR_WIDTH,
                height=PAIR_HEIGHT, class_="pair")


def chips(cells: Sequence[Chip], *, id: str, title: str, width: int = 640, height: int = 64) -> Markup:
    """Colours side by side without a gap, such as a sweep of loadings or a scale of pH."""
    each = width / max(len(cells), 1)
    drawn = [_rect(cell, place * each, 0, each, height) for place, cell in enumerate(cells)]
    return _svg(drawn, id=id, title=title, width=width, height=height, class_="chips")


def dot(hex: str | None, label: str, *, id: str) -> Markup:
    """A small swatch to stand in a table."""
    drawn = [_rect(Chip(hex, label), 0, 0, 36, 20)]
    return _svg(drawn, id=id, title=label, width=36, height=20, class_="dot")


def _svg(drawn: Sequence[Markup], *, id: str, title: str, width: int, height: int, class_: str) -> Markup:
    outline = tag("rect", x="0.5", y="0.5", width=width - 1, height=height - 1, fill="none",
                  stroke="currentColor", stroke_opacity="0.45")
    return tag("svg", tag("title", title, id=f"{id}-t"), drawn, outline, class_=f"swatch {class_}",
               viewBox=f"0 0 {width} {height}", width=width, height=height, role="img",
               aria_labelledby=f"{id}-t")


def _rect(one: Chip, x: float, y: float, width: float, height: float) -> Markup:
    return tag("rect", tag("title", one.label), x=f"{x:.2f}", y=f"{y:.2f}", width=f"{width:.2f}",
               height=f"{height:.2f}", fill=one.hex or "none", shape_rendering="crispEdges")
