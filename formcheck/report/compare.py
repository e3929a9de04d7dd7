"""`formcheck compare`: standard and sample side by side, in the terminal and as a page."""

from __future__ import annotations

from rich.console import Console
from rich.text import Text

from formcheck.check.record_compare import Comparison, UnderOneLight
from formcheck.report.html import Column, Markup, definitions, section, table, tag
from formcheck.report.numbers import plain
from formcheck.report.plot import Axis, Series, line_plot, visible_spectrum
from formcheck.report.shade_words import lab_text, observer_text
from formcheck.report.sheet import at_both_widths, document
from formcheck.report.swatches import chip, curve_hex, pair
from formcheck.report.terminal_parts import heading, labelled, paragraph, speaking, strip
from formcheck.report.words import clean, hex_colour, one_line

BLOCK_WIDTH, BLOCK_HEIGHT = 40, 3
DIFFERENCE_COLUMNS: list[Column] = ["formula", *((name, "number") for name in ("in all", "lightness", "chroma", "hue")),
                                    "in words"]


def show_comparison(comparison: Comparison, console: Console | None = None) -> None:
    """Print one Comparison to a rich Console (standard output when none is given)."""
    with speaking(console) as out:
        out.print(Text("Standard and sample", style="bold"))
        labelled(out, head_rows(comparison), indent=0)
        for under in comparison.lights:
            heading(out, f"Under {one_line(under.light)}", observer_text(under.light, comparison.observer_deg))
            strip(out, [hex_colour(under.standard), hex_colour(under.sample)], width=BLOCK_WIDTH, height=BLOCK_HEIGHT)
            labelled(out, light_rows(under))
        heading(out, "The spectra")
        labelled(out, match_rows(comparison))
        if comparison.strength:
            heading(out, "Strength")
            labelled(out, strength_rows(comparison))
        if comparison.notes:
            heading(out, "Notes")
            for note in comparison.notes:
                paragraph(out, one_line(note))
        out.print()
        out.print(Text(clean(comparison.deferral)))


def head_rows(comparison: Comparison) -> list[tuple[str, str]]:
    return [("standard", f"{one_line(comparison.standard_name)} ({one_line(comparison.standard_file)})"),
            ("sample", f"{one_line(comparison.sample_name)} ({one_line(comparison.sample_file)})")]


def light_rows(under: UnderOneLight) -> list[tuple[str, str]]:
    """Both shades under one light, and how they differ by each formula."""
    rows = [("standard", f"{hex_colour(under.standard) or 'none'}, {lab_text(under.standard.lab)}"),
            ("sample", f"{hex_colour(under.sample) or 'none'}, {lab_text(under.sample.lab)}")]
    for one in under.differences:
        parts = f"lightness {plain(one.lightness)}, chroma {plain(one.chroma)}, hue {plain(one.hue)}"
        rows.append((one.formula, f"{plain(one.value)}: {parts}; {one_line(one.words)}"))
    return rows


def match_rows(comparison: Comparison) -> list[tuple[str, str]]:
    """How alike the spectra are, and how the match holds when the light changes."""
    match = comparison.match
    rows = [("RMS", plain(match.rms)), ("goodness of fit", f"{match.goodness_of_fit:.5f}, {match.word}")]
    rows += [("metamerism", f"to {index.light}: ΔE00 {plain(index.index_de00)}") for index in match.metamerism]
    munsell = [("Munsell, standard", comparison.munsell_standard), ("Munsell, sample", comparison.munsell_sample)]
    return rows + [row for row in munsell if row[1]]


def strength_rows(comparison: Comparison) -> list[tuple[str, str]]:
    strength = comparison.strength
    assert strength is not None
    rows = [("by weights", _times(strength.by_weights)), ("at the maximum", _times(strength.at_maximum))]
    if strength.de00_at_equal_strength is not None:
        rows.append(("at equal strength",
                     f"ΔE00 {plain(strength.de00_at_equal_strength)}; {one_line(strength.words_at_equal_strength)}"))
    return rows


def _times(strength: float | None) -> str:
    return "unknown: the standard shows no colour" if strength is None else f"{100 * strength:.1f} % of the standard"


def comparison_html(comparison: Comparison) -> str:
    """One Comparison as a whole HTML page."""
    head = tag("header", tag("h1", "Standard and sample"), definitions(head_rows(comparison)), class_="head")
    lights = [_light(under, comparison, id=f"l{n}") for n, under in enumerate(comparison.lights, 1)]
    spectra = section(2, "The spectra", _spectra(comparison), definitions(match_rows(comparison)), id="spectra")
    strength = section(2, "Strength", definitions(strength_rows(comparison)), id="strength") if comparison.strength \
        else None
    notes = section(2, "Notes", tag("ul", [tag("li", one_line(note)) for note in comparison.notes]), id="notes") \
        if comparison.notes else None
    footer = tag("footer", tag("p", one_line(comparison.deferral)),
                 tag("p", f"Compared by formcheck {one_line(comparison.formcheck_version)}."))
    main = tag("main", head, lights, spectra, strength, notes)
    return document("Standard and sample – formcheck compare", main, footer)


def _light(under: UnderOneLight, comparison: Comparison, *, id: str) -> Markup:
    drawn = tag("figure", pair(chip(under.standard, "standard"), chip(under.sample, "sample"), id=f"{id}-pair"),
                tag("figcaption", "Standard on the left, sample on the right. A screen only resembles them."))
    rows = [[one.formula, *(plain(part) for part in (one.value, one.lightness, one.chroma, one.hue)),
             one_line(one.words)] for one in under.differences]
    apart = table(f"Differences under {one_line(under.light)}", DIFFERENCE_COLUMNS, rows)
    return section(2, f"Under {one_line(under.light)}", drawn, definitions(light_rows(under)[:2]), apart, id=id)


def _spectra(comparison: Comparison) -> Markup:
    first = comparison.lights[0]
    series = [Series(one.wavelength_nm, one.value, label=name, hex=curve_hex(swatch)) for name, one, swatch in (
        ("standard", comparison.standard, first.standard), ("sample", comparison.sample, first.sample))]
    plotted = at_both_widths(lambda width, height, end: line_plot(
        series, id=f"plot-{end}", title="Spectra of standard and sample",
        description=f"Root mean square difference {plain(comparison.match.rms)}.",
        x=Axis("wavelength, nm", 380.0, 730.0), y=Axis(comparison.standard.quantity, low=0.0),
        strip=visible_spectrum(), width=width, height=height))
    return tag("figure", plotted, tag("figcaption", "Each in its own colour where that shows."))
