"""The levels of a box as a drawing: energy upwards, two arrows for two electrons."""

from __future__ import annotations

from formcheck.check.record_estimate import BoxLevel, BoxLevels
from formcheck.report.estimate_words import box_text, level_text
from formcheck.report.html import Markup, tag
from formcheck.report.numbers import plain

WIDTH, HEIGHT, EDGE, LABEL_GAP = 300, 300, 22, 13
BAR_LEFT, BAR_RIGHT, BAR_GAP = 74, 214, 8
MOST_BARS = 6  # orbitals drawn apart on one level


def level_diagram(box: BoxLevels, *, id: str) -> Markup:
    """An SVG of the levels; energies too close for their labels keep the bar and lose the label."""
    energies = [level.energy_ev for level in box.levels]
    low, high = min(energies, default=0.0), max(energies, default=1.0)
    span = (high - low) or 1.0
    drawn, labelled_at = [], float("inf")
    for level in sorted(box.levels, key=lambda one: one.energy_ev):
        y = HEIGHT - EDGE - (level.energy_ev - low) / span * (HEIGHT - 2 * EDGE)
        roomy = labelled_at - y >= LABEL_GAP
        labelled_at = y if roomy else labelled_at
        drawn.append(_level(level, y, labelled=roomy))
    said = "; ".join(f"{plain(one.energy_ev)} eV {one.label}: {level_text(one)}" for one in box.levels)
    return tag("svg", tag("title", f"Levels of {box_text(box)}", id=f"{id}-t"),
               tag("desc", said, id=f"{id}-d"), drawn, class_="levels", viewBox=f"0 0 {WIDTH} {HEIGHT}",
               width=WIDTH, height=HEIGHT, role="img", aria_labelledby=f"{id}-t {id}-d", font_size=12,
               fill="currentColor")


def _level(level: BoxLevel, y: float, *, labelled: bool) -> Markup:
    """The bars of one level, its electrons, its energy to the left and its quantum numbers to the right."""
    bars = min(level.orbitals, MOST_BARS)
    each = (BAR_RIGHT - BAR_LEFT - BAR_GAP * (bars - 1)) / bars
    drawn = []
    for place in range(bars):
        left = BAR_LEFT + place * (each + BAR_GAP)
        drawn.append(tag("path", d=f"M{left:.1f} {y:.1f}h{each:.1f}", stroke="currentColor",
                         stroke_width="2", stroke_dasharray=None if level.electrons else "4 3"))
        drawn += _electrons(level.electrons / max(level.orbitals, 1), left + each / 2, y)
    texts = [tag("text", f"{level.energy_ev:.2f} eV", x=BAR_LEFT - 8, y=f"{y + 4:.1f}", text_anchor="end"),
             tag("text", level.label, x=BAR_RIGHT + 8, y=f"{y + 4:.1f}")] if labelled else []
    return tag("g", drawn, texts)


def _electrons(in_orbital: float, x: float, y: float) -> list[Markup]:
    """Arrows up and down; half arrows are never drawn, so a shared electron shows as one arrow."""
    arrows = [tag("path", d=f"M{x - 4:.1f} {y + 7:.1f}v-14m-2.5 3.5 2.5-3.5 2.5 3.5", fill="none",
                  stroke="currentColor", stroke_width="1.2"),
              tag("path", d=f"M{x + 4:.1f} {y - 7:.1f}v14m-2.5-3.5 2.5 3.5 2.5-3.5", fill="none",
                  stroke="currentColor", stroke_width="1.2")]
    return arrows[: 0 if in_orbital <= 0 else 1 if in_orbital <= 1 else 2]
