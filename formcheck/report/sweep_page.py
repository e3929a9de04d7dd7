"""A ShadeSweep as one page: the strip of swatches, the curves of L*, a*, b*, the spectra, the table."""

from __future__ import annotations

from formcheck.check.record_sweep import ShadeSweep, SweptShade
from formcheck.report.html import Column, Markup, definitions, section, table, tag
from formcheck.report.numbers import plain
from formcheck.report.plot import Axis, Series, line_plot, visible_spectrum
from formcheck.report.sheet import at_both_widths, document
from formcheck.report.swatches import chip, chips, curve_hex
from formcheck.report.sweep import cells_of, columns_of, detail_rows, head_rows, hiding_text
from formcheck.report.words import one_line

COORDINATES = ("L*", "a*", "b*")


def sweep_html(sweep: ShadeSweep) -> str:
    """One ShadeSweep as a whole HTML page."""
    title = one_line(sweep.title)
    head = tag("header", tag("h1", title), tag("p", one_line(sweep.geometry), class_="counts"), class_="head")
    asked = section(2, "What was asked", definitions(head_rows(sweep)), id="asked")
    grounds = [_ground(sweep, name, id=f"g{place}") for place, name in enumerate(sweep.grounds, 1)]
    main = tag("main", head, asked, grounds, _list("Left out", sweep.left_out, id="left-out"),
               _list("Notes", sweep.notes, id="notes"))
    made_by = tag("p", f"Predicted by formcheck {one_line(sweep.formcheck_version)}.")
    footer = tag("footer", tag("p", one_line(sweep.deferral)), made_by)
    return document(f"{title} – formcheck shade", main, footer)


def _ground(sweep: ShadeSweep, ground: str, *, id: str) -> Markup:
    shades = [one for one in sweep.shades if one.ground == ground]
    cells = [chip(one.swatch, _label(sweep, one)) for one in shades]
    drawn = tag("figure", chips(cells, id=f"{id}-strip", title=f"Shades on {one_line(ground)}", height=110),
                tag("figcaption", _caption(sweep)))
    curves = [_coordinates(sweep, shades, id=id)] if len(shades) > 1 else []
    kinds: list[Column] = [(name, "number") for name in columns_of(sweep)]
    rows = [cells_of(sweep, one) for one in shades]
    details = [definitions(detail_rows(shades[0]))] if len(shades) == 1 else [_details(sweep, shades, ground)]
    return section(2, one_line(ground), drawn, curves, _spectra(sweep, shades, id=id),
                   table(f"Shades on {one_line(ground)}", kinds, rows), details, id=id)


def _details(sweep: ShadeSweep, shades: list[SweptShade], ground: str) -> Markup:
    """Munsell notation, other difference formulas and hiding of every amount."""
    formulas = [other.formula for other in shades[0].differences[1:]]
    kinds: list[Column] = [(f"{one_line(sweep.varied)}, {sweep.unit}", "number"), ("Munsell", "text"),
                           *((name, "number") for name in formulas), ("hiding", "text")]
    rows = [[plain(one.amount), one.munsell, *(plain(other.value) for other in one.differences[1:]),
             hiding_text(one.hiding) if one.hiding else ""] for one in shades]
    return table(f"More of the shades on {one_line(ground)}", kinds, rows)


def _label(sweep: ShadeSweep, one: SweptShade) -> str:
    return f"{plain(one.amount)} {sweep.unit}" if sweep.varied else "as written"


def _caption(sweep: ShadeSweep) -> str:
    if not sweep.varied:
        return "The shade as written. A screen only resembles it."
    return (f"From {plain(sweep.amounts[0])} on the left to {plain(sweep.amounts[-1])} {sweep.unit} of "
            f"{one_line(sweep.varied)} on the right. A screen only resembles them.")


def _coordinates(sweep: ShadeSweep, shades: list[SweptShade], *, id: str) -> Markup:
    """L*, a* and b* against the amount, with one standard deviation to each side."""
    x = [one.amount or 0.0 for one in shades]
    series = []
    for n, name in enumerate(COORDINATES):
        y, sd = [one.swatch.lab[n] for one in shades], [one.lab_sd[n] for one in shades]
        series.append(Series(x, y, label=name, low=[a - b for a, b in zip(y, sd, strict=True)],
                             high=[a + b for a, b in zip(y, sd, strict=True)]))
    words = "; ".join(f"{name} from {plain(one.y[0])} to {plain(one.y[-1])}"
                      for name, one in zip(COORDINATES, series, strict=True))
    plotted = at_both_widths(lambda width, height, end: line_plot(
        series, id=f"{id}-lab-{end}", title=f"Shade against {one_line(sweep.varied)}", description=words,
        x=Axis(f"{one_line(sweep.varied)}, {sweep.unit}"), y=Axis("CIELAB"), width=width, height=height))
    return tag("figure", plotted, tag("figcaption", "Bands: one standard deviation to each side."))


def _spectra(sweep: ShadeSweep, shades: list[SweptShade], *, id: str) -> Markup:
    """Every spectrum of the row, drawn in its own colour."""
    series = [Series(sweep.wavelength_nm, one.value, label=_label(sweep, one), hex=curve_hex(one.swatch))
              for one in shades]
    words = f"{len(shades)} spectra from {plain(sweep.wavelength_nm[0])} to {plain(sweep.wavelength_nm[-1])} nm."
    plotted = at_both_widths(lambda width, height, end: line_plot(
        series, id=f"{id}-spectra-{end}", title=f"Predicted {sweep.quantity}", description=words,
        x=Axis("wavelength, nm", 380.0, 730.0), y=Axis(sweep.quantity, low=0.0), strip=visible_spectrum(),
        width=width, height=height))
    caption = f"Predicted {sweep.quantity}, in the colour of each where that shows."
    return tag("figure", plotted, tag("figcaption", caption))


def _list(title: str, lines: list[str], *, id: str) -> Markup | None:
    if not lines:
        return None
    return section(2, title, tag("ul", [tag("li", one_line(line)) for line in lines]), id=id)
