"""A Check in the terminal: shade, figures, composition, findings, what could not be told, who decides.

Reads well in 80 columns, in a pipe (no colour codes there) and with NO_COLOR set.
"""

from __future__ import annotations

from collections.abc import Sequence

from rich.console import Console
from rich.text import Text

from formcheck.check.record import Check, Line
from formcheck.report.recipe_words import (
    composition_columns,
    figure_basis,
    figure_text,
    forms_text,
    ingredient_text,
)
from formcheck.report.terminal_findings import show_findings, show_untold
from formcheck.report.terminal_parts import block, heading, labelled, shows_colour, speaking, table
from formcheck.report.terminal_shade import show_shade
from formcheck.report.words import (
    NOWHERE_SOLD,
    clean,
    counts_text,
    day_text,
    hex_colour,
    one_line,
    spelled,
)


def show_checks(checks: Sequence[Check], console: Console | None = None) -> None:
    """Each check in turn; after several, one line for each."""
    for place, check in enumerate(checks):
        if place:
            with speaking(console) as out:
                out.print()
        show_check(check, console)
    if len(checks) > 1:
        with speaking(console) as out:
            show_overview(out, checks)


def show_check(check: Check, console: Console | None = None) -> None:
    """Print one Check to a rich Console (standard output when none is given)."""
    with speaking(console) as out:
        show_head(out, check)
        show_shade(out, check)
        show_figures(out, check)
        show_composition(out, check.composition)
        show_findings(out, check)
        show_untold(out, check)
        out.print()
        out.print(Text(clean(check.deferral)))


def show_head(console: Console, check: Check) -> None:
    console.print(Text(one_line(check.title), style="bold"))
    console.print(Text(counts_text(check), style="bold"))
    labelled(console, [
        ("file", one_line(check.file)),
        ("kind", ", ".join(spelled(one_line(word)) for word in [check.what, *check.use])),
        ("sold in", ", ".join(map(one_line, check.sold_in)) or NOWHERE_SOLD),
        ("as of", f"{day_text(check.as_of)}; formcheck {one_line(check.formcheck_version)}, "
                  f"recipe {one_line(check.recipe_digest)[:12]}"),
    ], indent=0)


def show_figures(console: Console, check: Check) -> None:
    """pH, forms of the dyes, and every other figure with how it was come by."""
    heading(console, "Figures")
    ph = [check.ph, *([check.ph_computed] if check.ph_computed else [])]
    table(console, ["figure", "value", "how"],
          [[one_line(one.name), figure_text(one), figure_basis(one)] for one in [*ph, *check.figures]])
    if check.dye_forms:
        heading(console, "Forms of the dyes at this pH")
        labelled(console, [(one_line(forms.material), forms_text(forms)) for forms in check.dye_forms])


def show_composition(console: Console, lines: Sequence[Line]) -> None:
    heading(console, "Composition")
    dry = any(line.dry_volume_fraction is not None for line in lines)
    columns: list[str | tuple[str, str]] = ["ingredient", "as written", ("g", "right"), ("% w/w", "right")]
    table(console, [*columns, *([("% of dry volume", "right")] if dry else []), "record from"],
          [[ingredient_text(line), one_line(line.written), mass, share, *([dry_share] if dry else []),
            one_line(line.record_from)]
           for line, mass, share, dry_share in zip(lines, *composition_columns(lines), strict=True)])


def show_overview(console: Console, checks: Sequence[Check]) -> None:
    """One line for each recipe: its swatch, how many findings of each grade."""
    heading(console, f"{len(checks)} recipes")
    rows: list[list[str | Text]] = []
    for check in checks:
        hex_text = hex_colour(check.shade.swatch) if check.shade else None
        swatch = block(hex_text, 4) if shows_colour(console) and hex_text else Text("")
        rows.append([swatch, hex_text or "shade unknown", one_line(check.file), counts_text(check)])
    table(console, ["", "shade", "file", "findings"], rows)
