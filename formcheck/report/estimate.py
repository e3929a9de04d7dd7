"""`formcheck estimate` in the terminal: levels, bands and the region of the shade."""

from __future__ import annotations

from collections.abc import Sequence

from rich.console import Console
from rich.text import Text

from formcheck.check.record_estimate import BoxLevels, Estimate, EstimatedForm
from formcheck.report.estimate_page import estimate_html
from formcheck.report.estimate_words import BAND_COLUMNS, band_texts, box_text, shade_rows
from formcheck.report.terminal_parts import (
    colour_warning,
    heading,
    labelled,
    paragraph,
    speaking,
    strip,
    table,
)
from formcheck.report.words import cited_text, clean, hex_colour, one_line

__all__ = ["estimate_html", "show_estimate"]

REGION_WIDTH, REGION_HEIGHT = 48, 3
MOST_LEVELS = 12  # shown of one box: the highest ones, where the light acts


def show_estimate(estimate: Estimate, console: Console | None = None) -> None:
    """Print one Estimate to a rich Console (standard output when none is given)."""
    with speaking(console) as out:
        out.print(Text(one_line(estimate.title), style="bold"))
        labelled(out, [row for row in [("file", one_line(estimate.file)), ("error", one_line(estimate.error))]
                       if row[1]], indent=0)
        for form in estimate.forms:
            show_form(out, form, alone=len(estimate.forms) == 1)
        _tail(out, "Notes", [one_line(note) for note in estimate.notes])
        _tail(out, "Sources", [cited_text(source) for source in estimate.sources])
        out.print()
        out.print(Text(clean(estimate.deferral)))


def show_form(console: Console, form: EstimatedForm, *, alone: bool) -> None:
    heading(console, *(("Shade as a region",) if alone else (one_line(form.name), "shade as a region")))
    show_region(console, form)
    labelled(console, shade_rows(form))
    heading(console, "Bands")
    columns: list[str | tuple[str, str]] = [BAND_COLUMNS[0], *((name, "right") for name in BAND_COLUMNS[1:])]
    table(console, columns, [band_texts(band) for band in form.bands])
    for box in form.boxes:
        heading(console, "Levels", box_text(box))
        show_levels(console, box)
    for note in form.notes:
        paragraph(console, one_line(note))


def show_region(console: Console, form: EstimatedForm) -> None:
    """The shades within the error side by side, none of them first among the others."""
    if form.shade is None:
        return
    hexes = [hex_colour(one) for one in form.shade.region or [form.shade.swatch]]
    strip(console, hexes, width=REGION_WIDTH // len(hexes), height=REGION_HEIGHT,
          beside=["", "anywhere in here"])
    if warning := colour_warning(console):
        paragraph(console, warning)


def show_levels(console: Console, box: BoxLevels) -> None:
    """The highest levels, the uppermost first: energy, electrons as arrows, quantum numbers."""
    levels = sorted(box.levels, key=lambda level: -level.energy_ev)
    rows = [[f"{one.energy_ev:.2f} eV", electrons_text(one.electrons, one.orbitals), one_line(one.label)]
            for one in levels[:MOST_LEVELS]]
    table(console, [("energy", "right"), "electrons", "level"], rows)
    if len(levels) > MOST_LEVELS:
        paragraph(console, f"{len(levels) - MOST_LEVELS} filled levels below these")


def electrons_text(electrons: float, orbitals: int) -> str:
    """`─↑↓─` for each orbital; a level half filled shows single arrows."""
    in_each = electrons / max(orbitals, 1)
    arrows = "──" if in_each <= 0 else "↑─" if in_each <= 1 else "↑↓"
    return " ".join([f"─{arrows}─"] * orbitals)


def _tail(console: Console, title: str, lines: Sequence[str]) -> None:
    if lines:
        heading(console, title)
    for line in lines:
        paragraph(console, line)
