"""`formcheck shade` in the terminal: a strip of swatches and a table for every ground."""

from __future__ import annotations

from rich.console import Console
from rich.text import Text

from formcheck.check.record_sweep import Hiding, ShadeSweep, SweptShade
from formcheck.report.numbers import plain, probability, with_sd
from formcheck.report.shade_words import coordinate, observer_text
from formcheck.report.terminal_parts import colour_warning, heading, labelled, paragraph, speaking, strip, table
from formcheck.report.words import clean, hex_colour, one_line, unit_text

STRIP_WIDTH, STRIP_HEIGHT = 60, 3


def show_sweep(sweep: ShadeSweep, console: Console | None = None) -> None:
    """Print one ShadeSweep to a rich Console (standard output when none is given)."""
    with speaking(console) as out:
        out.print(Text(one_line(sweep.title), style="bold"))
        labelled(out, head_rows(sweep), indent=0)
        for ground in sweep.grounds:
            _show_ground(out, sweep, ground)
        _show_list(out, "Left out", sweep.left_out)
        _show_list(out, "Notes", sweep.notes)
        warning = colour_warning(out)
        if warning:
            paragraph(out, warning, indent=0)
        out.print()
        out.print(Text(clean(sweep.deferral)))


def head_rows(sweep: ShadeSweep) -> list[tuple[str, str]]:
    """What was asked, as label and text; the page shows the same."""
    rows = [("file", one_line(sweep.file)), ("seen under", observer_text(sweep.lights[0], sweep.observer_deg))]
    if sweep.varied:
        span = f"{plain(sweep.amounts[0])} to {plain(sweep.amounts[-1])} {sweep.unit}"
        rows.append(("varied", f"{one_line(sweep.varied)}, {span} in {len(sweep.amounts)} steps"))
    rows.append(("uncertainty", one_line(sweep.uncertainty)))
    if sweep.wanted:
        lab = ", ".join(coordinate(value) for value in sweep.wanted.swatch.lab)
        rows.append(("wanted", f"{hex_colour(sweep.wanted.swatch) or 'no colour'}, L*a*b* {lab}"))
    return rows


def columns_of(sweep: ShadeSweep) -> list[str]:
    """Headings of the table; those that no shade fills are left out."""
    names = [f"{one_line(sweep.varied)}, {sweep.unit}"] if sweep.varied else []
    names += ["hex", "L*", "a*", "b*"]
    if sweep.wanted:
        names += ["ΔE00", "within"] if sweep.wanted.tolerance_de00 is not None else ["ΔE00"]
    if any(one.contrast_ratio is not None for one in sweep.shades):
        names.append("contrast")
    return names + [f"ΔE00 to {light}" for light in sweep.lights[1:]]


def cells_of(sweep: ShadeSweep, one: SweptShade) -> list[str]:
    """One shade as texts under `columns_of`."""
    cells = [plain(one.amount)] if sweep.varied else []
    cells.append(hex_colour(one.swatch) or "none")
    cells += [with_sd(value, sd) for value, sd in zip(one.swatch.lab, one.lab_sd, strict=True)]
    if sweep.wanted:
        cells.append(with_sd(one.de00, one.de00_sd))
        if sweep.wanted.tolerance_de00 is not None:
            cells.append("" if one.probability_within is None else probability(one.probability_within))
    if any(other.contrast_ratio is not None for other in sweep.shades):
        cells.append(plain(one.contrast_ratio))
    return cells + [plain(light.de00_from_first, 2) for light in one.lights[1:]]


def brief_columns(sweep: ShadeSweep) -> list[str]:
    """What 80 columns hold beside the hex value; JSON and page hold the rest."""
    names = [unit_text(sweep.unit)] if sweep.varied else []
    names += ["L*", "a*", "b*", "±"]
    if sweep.wanted:
        names += ["ΔE00", "within"] if sweep.wanted.tolerance_de00 is not None else ["ΔE00"]
    return names + (["contrast"] if any(one.contrast_ratio is not None for one in sweep.shades) else [])


def brief_cells(sweep: ShadeSweep, one: SweptShade) -> list[str]:
    """One shade under the hex value and `brief_columns`; ± is the largest of the three deviations."""
    cells = [hex_colour(one.swatch) or "none", *([plain(one.amount)] if sweep.varied else [])]
    cells += [f"{value:.1f}".replace("-", "−") for value in one.swatch.lab]
    cells.append(plain(max(one.lab_sd), 2))
    if sweep.wanted:
        cells.append(plain(one.de00, 2))
        if sweep.wanted.tolerance_de00 is not None:
            cells.append("" if one.probability_within is None else probability(one.probability_within))
    if any(other.contrast_ratio is not None for other in sweep.shades):
        cells.append(plain(one.contrast_ratio))
    return cells


def _show_ground(console: Console, sweep: ShadeSweep, ground: str) -> None:
    shades = [one for one in sweep.shades if one.ground == ground]
    heading(console, one_line(ground))
    strip(console, [hex_colour(one.swatch) for one in shades], width=STRIP_WIDTH, height=STRIP_HEIGHT)
    columns: list[str | tuple[str, str]] = [("hex", "whole"), *((name, "right") for name in brief_columns(sweep))]
    table(console, columns, [brief_cells(sweep, one) for one in shades])
    if len(shades) == 1:
        labelled(console, detail_rows(shades[0]))
    surest = max(shades, key=lambda one: sum(one.lab_sd))
    if surest.dominated_by:
        labelled(console, [("least sure of", one_line(surest.dominated_by))])


def detail_rows(one: SweptShade) -> list[tuple[str, str]]:
    """What a table has no room for, of one shade; the page shows the same."""
    rows = [("Munsell", one.munsell)] if one.munsell else []
    for other in one.differences:
        parts = f"lightness {plain(other.lightness)}, chroma {plain(other.chroma)}, hue {plain(other.hue)}"
        rows.append((other.formula, f"{plain(other.value)}: {parts}; {one_line(other.words)}"))
    rows += [(f"to light {light.light}", f"ΔE00 {plain(light.de00_from_first)}") for light in one.lights[1:]]
    if one.match:
        rows.append(("spectra", f"RMS {plain(one.match.rms)}, goodness of fit {one.match.goodness_of_fit:.4f}, "
                                f"{one.match.word}"))
        rows += [("metamerism", f"{index.light}: ΔE00 {plain(index.index_de00)}") for index in one.match.metamerism]
    if one.hiding:
        rows.append(("hiding", hiding_text(one.hiding)))
        if one.hiding.transparency_um is not None:
            clear = plain(one.hiding.transparency_um)
            rows.append(("transparency", f"{clear} µm of wet film for one ΔE*ab over black"))
    return rows


def hiding_text(hiding: Hiding) -> str:
    """The film that hides, in words, or why none does."""
    if hiding.wet_um is None:
        return f"contrast {hiding.contrast:g}: {hiding.reason}"
    dry = f", {plain(hiding.dry_um)} µm dry" if hiding.dry_um is not None else ""
    rate = f", {plain(hiding.spreading_m2_l)} m²/L" if hiding.spreading_m2_l is not None else ""
    return f"contrast {hiding.contrast:g} at {plain(hiding.wet_um)} µm wet{dry}{rate}"


def _show_list(console: Console, title: str, lines: list[str]) -> None:
    if lines:
        heading(console, title)
        for line in lines:
            paragraph(console, one_line(line))
