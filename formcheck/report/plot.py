"""Line plots as inline SVG: curves with bands, markers, a strip of colours along the axis.

One module for page, report and PDF. Text is text, so it can be selected and read aloud; curves differ by
dashes before colour, so they print in black and white; everything without a colour of its own takes the
colour of the text about it, so light and dark pages share one drawing. Colours come in as hex values:
nothing is reckoned here.
"""

from __future__ import annotations

import json
import math
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from functools import lru_cache
from itertools import pairwise
from pathlib import Path

from formcheck.report.html import Markup, tag
from formcheck.report.ticks import no_span, round_range, round_ticks, tick_labels

DASHES = (None, "7 4", "2 3", "10 3 2 3", "14 5", "1 4")
CHARACTER_PX = 6.4  # a mean width at the font size below; labels are spaced by it
FONT_PX = 12
LEGEND_ROW_PX = 18
STRIP_PX = 10
LONGEST_LEGEND = 8  # beyond so many curves, names help nobody; the table does


@dataclass(frozen=True)
class Axis:
    """What an axis shows; its ends are found from the data where they are not given.

    Given ends of x cut the data; given ends of y give way to data beyond them.
    """

    label: str
    low: float | None = None
    high: float | None = None


@dataclass(frozen=True)
class TopAxis:
    """A second scale along the top: texts at places of the lower axis, such as volumes along a pH axis."""

    label: str
    marks: Sequence[tuple[float, str]]


@dataclass(frozen=True)
class Series:
    """A curve; `low` and `high` draw a band about it. Gaps stand where y is not finite."""

    x: Sequence[float]
    y: Sequence[float]
    label: str = ""
    low: Sequence[float] | None = None
    high: Sequence[float] | None = None
    hex: str | None = None
    dots: bool = False  # show the points themselves, such as measured ones


@dataclass(frozen=True)
class Marker:
    """A dashed line up from x, or with `y` a dot there."""

    x: float
    label: str
    y: float | None = None


@dataclass(frozen=True)
class StripCell:
    """One colour of the strip along the x axis, from `low` to `high` of that axis."""

    low: float
    high: float
    hex: str


@dataclass(frozen=True)
class Frame:
    """Where the data area lies in the drawing, and what it spans."""

    left: float
    right: float
    top: float
    bottom: float
    x: tuple[float, float]
    y: tuple[float, float]

    def px(self, x: float) -> float:
        return self.left + (x - self.x[0]) / (self.x[1] - self.x[0]) * (self.right - self.left)

    def py(self, y: float) -> float:
        return self.bottom - (y - self.y[0]) / (self.y[1] - self.y[0]) * (self.bottom - self.top)


def line_plot(series: Sequence[Series], *, id: str, title: str, description: str, x: Axis, y: Axis,
              markers: Sequence[Marker] = (), strip: Sequence[StripCell] = (), top: TopAxis | None = None,
              width: int = 720, height: int = 300) -> Markup:
    """An SVG of the curves, `width` by `height` and a legend below that where several curves are named.

    `id` must be the only one of its kind in the document; `title` and `description` are its text alternative.
    """
    named = [(place, one.label) for place, one in enumerate(series) if one.label]
    legend = named if 1 < len(series) <= LONGEST_LEGEND else []
    frame = _frame(series, x, y, strip=bool(strip), top=top is not None, width=width, height=height)
    total = height + LEGEND_ROW_PX * len(legend)
    return tag(
        "svg", tag("title", title, id=f"{id}-t"), tag("desc", description, id=f"{id}-d"),
        _grid(frame, x, y), _strip(frame, strip), _top_axis(frame, top) if top else None,
        [_band(frame, one) for one in series if one.low is not None and one.high is not None],
        [_curve(frame, one, DASHES[place % len(DASHES)]) for place, one in enumerate(series)],
        _markers(frame, markers), _legend(legend, series, left=frame.left, top=height),
        class_="plot", viewBox=f"0 0 {width} {total}", width=width, height=total, role="img",
        aria_labelledby=f"{id}-t {id}-d", font_size=FONT_PX, fill="currentColor",
    )


def standalone(svg: str) -> str:
    """The same drawing as a file of its own."""
    return svg.replace("<svg ", '<svg xmlns="http://www.w3.org/2000/svg" ', 1)


@lru_cache(maxsize=1)
def visible_spectrum() -> tuple[StripCell, ...]:
    """The look of the wavelengths of light, in nm, for the axis of a spectrum (data/spectrum_strip.json)."""
    file = Path(__file__).with_name("data") / "spectrum_strip.json"
    data = json.loads(file.read_text(encoding="utf-8"))
    edges = pairwise(data["edges_nm"])
    return tuple(StripCell(low, high, hex) for (low, high), hex in zip(edges, data["hexes"], strict=True))


def _frame(series: Sequence[Series], x: Axis, y: Axis, *, strip: bool, top: bool, width: int,
           height: int) -> Frame:
    spans_x = _x_span(x, series)
    spans_y = _y_span(y, series, within=spans_x)
    widest = max(map(len, tick_labels(round_ticks(*spans_y))), default=1)
    above = 24 + (36 if top else 0)
    return Frame(left=14 + CHARACTER_PX * widest, right=width - 18, top=above,
                 bottom=height - 40 - (STRIP_PX if strip else 0), x=spans_x, y=spans_y)


def _x_span(axis: Axis, series: Sequence[Series]) -> tuple[float, float]:
    """The ends as given, else those of the data; points beyond given ends are not drawn."""
    low, high = _ends(one.x for one in series)
    low = low if axis.low is None else axis.low
    high = high if axis.high is None else axis.high
    return round_range(low, high) if no_span(low, high) else (low, high)


def _y_span(axis: Axis, series: Sequence[Series], *, within: tuple[float, float]) -> tuple[float, float]:
    """The ends as given, widened where data `within` the x axis go beyond, else round numbers about them."""
    low, high = _ends([y for x, y in zip(one.x, values, strict=True) if within[0] <= x <= within[1]]
                      for one in series for values in (one.y, one.low, one.high) if values is not None)
    given_low = axis.low if axis.low is not None and axis.low <= low else None
    given_high = axis.high if axis.high is not None and axis.high >= high else None
    low, high = (low if given_low is None else given_low, high if given_high is None else given_high)
    rounded = round_range(low, high)
    if no_span(low, high):
        return rounded
    return (rounded[0] if given_low is None else given_low, rounded[1] if given_high is None else given_high)


def _ends(rows: Iterable[Sequence[float]]) -> tuple[float, float]:
    finite = [value for row in rows for value in row if math.isfinite(value)]
    return min(finite, default=0.0), max(finite, default=1.0)


def _grid(frame: Frame, x: Axis, y: Axis) -> list[Markup]:
    """Hairlines at the round values, the numbers beside them, the names of the axes."""
    xs = round_ticks(*frame.x, about=max(2, int((frame.right - frame.left) / 60)))
    ys = round_ticks(*frame.y, about=max(2, int((frame.bottom - frame.top) / 35)))
    below = frame.bottom + 18
    return [
        *(_line(frame.left, frame.right, frame.py(tick), frame.py(tick), opacity=0.14) for tick in ys),
        _line(frame.left, frame.right, frame.bottom, frame.bottom, opacity=0.6),
        *(_text(frame.left - 6, frame.py(tick) + 4, label, anchor="end")
          for tick, label in zip(ys, tick_labels(ys), strict=True)),
        *(_line(frame.px(tick), frame.px(tick), frame.bottom, frame.bottom + 4, opacity=0.6) for tick in xs),
        *(_text(frame.px(tick), below + 2, label, anchor="middle", class_="plot-x")
          for tick, label in zip(xs, tick_labels(xs), strict=True)),
        _text(frame.left, frame.top - 10, y.label),
        _text(frame.right, below + 18, x.label, anchor="end", class_="plot-x"),
    ]


def _strip(frame: Frame, cells: Sequence[StripCell]) -> Markup | None:
    """Colours along the lower edge of the data area, cut to the ends of the axis."""
    drawn = []
    for cell in cells:
        low, high = max(cell.low, frame.x[0]), min(cell.high, frame.x[1])
        if high > low:
            left, right = frame.px(low), frame.px(high)
            drawn.append(tag("rect", x=_n(left), y=_n(frame.bottom), width=_n(right - left + 0.3),
                             height=STRIP_PX, fill=cell.hex))
    return tag("g", drawn, shape_rendering="crispEdges") if drawn else None


def _top_axis(frame: Frame, top: TopAxis) -> Markup:
    at = frame.top - 26
    marks = [(frame.px(place), text) for place, text in top.marks if frame.x[0] <= place <= frame.x[1]]
    return tag("g", _line(frame.left, frame.right, at, at, opacity=0.6),
               [_line(x, x, at, at - 4, opacity=0.6) for x, _ in marks],
               [_text(x, at - 8, text, anchor="middle") for x, text in marks],
               _text(frame.right, at - 22, top.label, anchor="end"))


def _band(frame: Frame, one: Series) -> list[Markup]:
    """The area between low and high, in pieces where either is not finite."""
    pieces = []
    for run in _runs(frame, zip(one.x, one.low or (), one.high or (), strict=True)):
        upper = [(x, high) for x, _, high in run]
        lower = [(x, low) for x, low, _ in reversed(run)]
        pieces.append(tag("path", d=_path(frame, [*upper, *lower]) + "Z", fill=one.hex or "currentColor",
                          fill_opacity="0.18", class_="plot-band"))
    return pieces


def _curve(frame: Frame, one: Series, dash: str | None) -> list[Markup]:
    """The line itself, with gaps where there is no value; a lone point is a dot."""
    stroke = one.hex or "currentColor"
    drawn = []
    for run in _runs(frame, zip(one.x, one.y, strict=True)):
        if len(run) > 1:
            drawn.append(tag("path", d=_path(frame, run), fill="none", stroke=stroke, stroke_width="1.8",
                             stroke_dasharray=dash, stroke_linejoin="round", class_="plot-curve"))
        if one.dots or len(run) == 1:
            drawn += [_dot(frame, x, y, radius=2.6, fill=stroke) for x, y in run]
    return drawn


def _markers(frame: Frame, markers: Sequence[Marker]) -> list[Markup]:
    """Dashed uprights and dots, their labels stepped down where they would run into each other."""
    drawn: list[Markup] = []
    ends: list[float] = []  # how far right the labels of each row reach
    within = [one for one in markers if frame.x[0] <= one.x <= frame.x[1]]
    for marker in sorted(within, key=lambda one: one.x):
        x, wide = frame.px(marker.x), CHARACTER_PX * len(marker.label) + 8
        leftwards = x + wide > frame.right
        start = x - wide if leftwards else x
        row = next((place for place, end in enumerate(ends) if end <= start), len(ends))
        ends[row:row + 1] = [start + wide]
        y = frame.top + 12 + 15 * row
        if marker.y is None:
            drawn.append(_line(x, x, frame.top, frame.bottom, opacity=0.8, dash="3 3"))
        else:
            y = frame.py(marker.y) - 7
            drawn.append(_dot(frame, marker.x, marker.y, radius=3.4, fill="currentColor"))
        drawn.append(_text(x - 4 if leftwards else x + 4, y, marker.label,
                           anchor="end" if leftwards else None, class_="plot-label"))
    return drawn


def _legend(named: Sequence[tuple[int, str]], series: Sequence[Series], *, left: float,
            top: float) -> list[Markup]:
    """A sample of each curve and its name, one to a row."""
    drawn = []
    for row, (place, label) in enumerate(named):
        y = top + LEGEND_ROW_PX * row + 6
        drawn += [tag("path", d=f"M{_n(left)} {_n(y)}h34", stroke_width="1.8", fill="none",
                      stroke=series[place].hex or "currentColor",
                      stroke_dasharray=DASHES[place % len(DASHES)]),
                  _text(left + 42, y + 4, label)]
    return drawn


def _runs(frame: Frame, points: Iterable[tuple[float, ...]]) -> list[list[tuple[float, ...]]]:
    """Stretches of points with every number finite and x on the axis."""
    runs: list[list[tuple[float, ...]]] = [[]]
    for point in points:
        if all(map(math.isfinite, point)) and frame.x[0] <= point[0] <= frame.x[1]:
            runs[-1].append(point)
        elif runs[-1]:
            runs.append([])
    return [run for run in runs if run]


def _path(frame: Frame, points: Sequence[tuple[float, ...]]) -> str:
    return "M" + "L".join(f"{_n(frame.px(x))} {_n(frame.py(y))}" for x, y in points)


def _line(x1: float, x2: float, y1: float, y2: float, *, opacity: float, dash: str | None = None) -> Markup:
    return tag("line", x1=_n(x1), x2=_n(x2), y1=_n(y1), y2=_n(y2), stroke="currentColor",
               stroke_opacity=f"{opacity:g}", stroke_dasharray=dash)


def _dot(frame: Frame, x: float, y: float, *, radius: float, fill: str) -> Markup:
    return tag("circle", cx=_n(frame.px(x)), cy=_n(frame.py(y)), r=f"{radius:g}", fill=fill)


def _text(x: float, y: float, text: str, *, anchor: str | None = None, class_: str = "plot-text") -> Markup:
    return tag("text", text, x=_n(x), y=_n(y), text_anchor=anchor, class_=class_)


def _n(number: float) -> str:
    return f"{number:.1f}".removesuffix(".0")
