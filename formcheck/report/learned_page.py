"""A Learned as one page: K and S with their bands, the panels, what the ladder does not settle."""

from __future__ import annotations

from collections.abc import Sequence

from formcheck.check.record_learned import Learned, LearnedColourant, LearnedSpectrum
from formcheck.report.html import Column, Markup, definitions, section, table, tag
from formcheck.report.learned_words import (
    CONSTANT_COLUMNS,
    PANEL_COLUMNS,
    SOLUTION_COLUMNS,
    constant_texts,
    head_rows,
    left_out_text,
    panel_texts,
    solution_texts,
    untold,
)
from formcheck.report.numbers import plain
from formcheck.report.plot import Axis, Series, line_plot, visible_spectrum
from formcheck.report.sheet import at_both_widths, document
from formcheck.report.swatches import chip, chips
from formcheck.report.words import cited_text, one_line

BAND = "Line: as learned. Band: one standard deviation to each side."


def learned_html(learned: Learned) -> str:
    """One Learned as a whole HTML page."""
    title = one_line(learned.title)
    head = tag("header", tag("h1", title), tag("p", left_out_text(learned), class_="counts"), class_="head")
    main = tag("main", head, section(2, "What was learned", definitions(head_rows(learned)), id="learned"),
               _doubts(learned), [_constants(one, id=f"c{n}") for n, one in enumerate(learned.colourants, 1)],
               _absorptivity(learned.dye) if learned.dye else None, _panels(learned), _solutions(learned),
               _list("Notes", [*learned.notes, *untold(learned)], id="notes"),
               _list("Sources", [cited_text(source) for source in learned.sources], id="sources"))
    made_by = tag("p", f"Learned by formcheck {one_line(learned.formcheck_version)}.")
    footer = tag("footer", tag("p", one_line(learned.deferral)), made_by)
    return document(f"{title} – formcheck learn", main, footer)


def _doubts(learned: Learned) -> Markup | None:
    if not learned.doubts:
        return None
    rows = [(one_line(doubt.kind), f"{one_line(doubt.said)} {one_line(doubt.what_to_do)}".strip())
            for doubt in learned.doubts]
    return section(2, "Not settled", definitions(rows), id="doubts")


def _constants(one: LearnedColourant, *, id: str) -> Markup:
    """K and S of one colourant, each in a plot of its own: they differ by orders of magnitude."""
    name = one_line(one.names[0])
    plots = [_plot(one.wavelength_nm, values, sd, id=f"{id}-{symbol}", title=f"{symbol} of {name}",
                   label=f"{symbol}, 1/µm") for symbol, values, sd in
             (("K", one.K_per_um, one.K_sd), ("S", one.S_per_um, one.S_sd))]
    kinds: list[Column] = [CONSTANT_COLUMNS[0], *((column, "number") for column in CONSTANT_COLUMNS[1:])]
    return section(2, name, [tag("figure", plotted, tag("figcaption", BAND)) for plotted in plots],
                   table(f"K and S of {name}", kinds, [constant_texts(one)]), id=id)


def _absorptivity(dye: LearnedSpectrum) -> Markup:
    plotted = _plot(dye.wavelength_nm, dye.absorptivity_l_g_cm, dye.sd, id="dye-a",
                    title=f"Absorptivity of {one_line(dye.names[0])}", label="absorptivity, L/(g cm)")
    return section(2, one_line(dye.names[0]), tag("figure", plotted, tag("figcaption", BAND)), id="dye")


def _plot(nm: Sequence[float], values: Sequence[float], sd: Sequence[float], *, id: str, title: str, label: str
          ) -> Markup:
    curve = Series(nm, values, low=[max(v - s, 0.0) for v, s in zip(values, sd, strict=True)],
                   high=[v + s for v, s in zip(values, sd, strict=True)])
    most, where = max(zip(values, nm, strict=True))
    words = f"From {plain(nm[0])} to {plain(nm[-1])} nm: highest {plain(most)} at {plain(where)} nm."
    return at_both_widths(lambda width, height, end: line_plot(
        [curve], id=f"{id}-{end}", title=title, description=words, x=Axis("wavelength, nm"), y=Axis(label, low=0.0),
        strip=visible_spectrum(), width=width, height=height))


def _panels(learned: Learned) -> Markup | None:
    if not learned.panels:
        return None
    cells = [chip(reading.measured, f"{one_line(panel.name)} over {one_line(reading.ground)}")
             for panel in learned.panels for reading in panel.readings]
    drawn = tag("figure", chips(cells, id="panels-strip", title="The panels as measured", height=72),
                tag("figcaption", "The panels as measured, in the order of the table. A screen only resembles them."))
    kinds: list[Column] = [*PANEL_COLUMNS[:3], *((name, "number") for name in PANEL_COLUMNS[3:])]
    rows = [row for panel in learned.panels for row in panel_texts(panel)]
    return section(2, "Panels", drawn, table("As fitted, and each reckoned from the others", kinds, rows), id="panels")


def _solutions(learned: Learned) -> Markup | None:
    if not learned.solutions:
        return None
    kinds: list[Column] = [SOLUTION_COLUMNS[0], *((name, "number") for name in SOLUTION_COLUMNS[1:])]
    return section(2, "Solutions", table("As fitted, and each reckoned from the others", kinds,
                                         [solution_texts(one) for one in learned.solutions]), id="solutions")


def _list(title: str, lines: list[str], *, id: str) -> Markup | None:
    return section(2, title, tag("ul", [tag("li", one_line(line)) for line in lines]), id=id) if lines else None
