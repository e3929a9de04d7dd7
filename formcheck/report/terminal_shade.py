"""The shade in the terminal: a swatch beside the wanted one, and what it stands on."""

from __future__ import annotations

from rich.console import Console

from formcheck.check.record import Check, Shade
from formcheck.report.shade_words import (
    COLOUR_COLUMNS,
    colour_rows,
    colourant_basis,
    colourant_name,
    shade_rows,
)
from formcheck.report.terminal_parts import (
    colour_warning,
    heading,
    labelled,
    paragraph,
    strip,
    table,
)
from formcheck.report.words import (
    hex_colour,
    one_line,
)

SWATCH_WIDTH, SWATCH_HEIGHT = 16, 4


def show_shade(console: Console, check: Check) -> None:
    shade = check.shade
    if shade is None:
        heading(console, "Shade", "unknown")
        paragraph(console, check.shade_reason or "no reason was recorded")
        return
    heading(console, "Shade", "CIELAB; ΔE00 counted from the predicted colour")
    show_swatches(console, shade)
    table(console, [COLOUR_COLUMNS[0], COLOUR_COLUMNS[1], *((name, "right") for name in COLOUR_COLUMNS[2:])],
          [texts for _, texts in colour_rows(shade)])
    labelled(console, shade_rows(shade))
    show_basis(console, shade)


def show_swatches(console: Console, shade: Shade) -> None:
    """Predicted and wanted edge to edge; below, shades that lie within the uncertainty."""
    swatches = [hex_colour(shade.swatch), *([hex_colour(shade.wanted.swatch)] if shade.wanted else [])]
    beside = ["", f"{'left: ' if shade.wanted else ''}predicted {swatches[0] or ''}",
              f"right: wanted {swatches[1] or ''}" if shade.wanted else ""]
    strip(console, swatches, width=SWATCH_WIDTH, height=SWATCH_HEIGHT, beside=beside)
    if len(shade.region) > 1:
        each = SWATCH_WIDTH * len(swatches) // len(shade.region)
        strip(console, [hex_colour(swatch) for swatch in shade.region], width=each,
              beside=["predicted, within its uncertainty"])
    if warning := colour_warning(console):
        paragraph(console, warning)


def show_basis(console: Console, shade: Shade) -> None:
    if shade.basis:
        heading(console, "What the shade stands on")
        labelled(console, [(colourant_name(one), colourant_basis(one)) for one in shade.basis],
                 width=min(26, max(len(colourant_name(one)) for one in shade.basis)))
    for left_out in shade.left_out:
        paragraph(console, f"left out: {one_line(left_out)}")
