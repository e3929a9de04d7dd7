"""`formcheck learn` in the terminal: how far off, of what, and what the ladder does not settle."""

from __future__ import annotations

from rich.console import Console
from rich.text import Text

from formcheck.check.record_learned import Learned
from formcheck.report.learned_words import (
    CONSTANT_COLUMNS,
    PANEL_COLUMNS,
    SOLUTION_COLUMNS,
    constant_texts,
    head_rows,
    panel_texts,
    solution_texts,
    untold,
)
from formcheck.report.terminal_parts import heading, labelled, paragraph, speaking, table
from formcheck.report.words import cited_text, clean, one_line


def show_learned(learned: Learned, console: Console | None = None) -> None:
    """Print one Learned to a rich Console (standard output when none is given)."""
    with speaking(console) as out:
        out.print(Text(one_line(learned.title), style="bold"))
        labelled(out, head_rows(learned), indent=0)
        _doubts(out, learned)
        if learned.colourants:
            heading(out, "K and S", "one standard deviation, used together and with the surface constants above")
            table(out, _columns(CONSTANT_COLUMNS), [constant_texts(one) for one in learned.colourants])
        if learned.panels:
            heading(out, "Panels", "as fitted, and each reckoned from the others")
            table(out, _columns(PANEL_COLUMNS), [row for panel in learned.panels for row in panel_texts(panel)])
        if learned.solutions:
            heading(out, "Solutions")
            table(out, _columns(SOLUTION_COLUMNS), [solution_texts(one) for one in learned.solutions])
        _list(out, "Notes", [*learned.notes, *untold(learned)])
        _list(out, "Sources", [cited_text(source) for source in learned.sources])
        out.print()
        out.print(Text(clean(learned.deferral)))


def _doubts(out: Console, learned: Learned) -> None:
    if not learned.doubts:
        return
    heading(out, "Not settled")
    for doubt in learned.doubts:
        paragraph(out, one_line(doubt.kind), style="bold")
        paragraph(out, one_line(doubt.said), indent=4)
        if doubt.what_to_do:
            paragraph(out, one_line(doubt.what_to_do), indent=4)


def _columns(names: tuple[str, ...]) -> list[str | tuple[str, str]]:
    return [names[0], *((name, "left" if name in ("ground", "measured") else "right") for name in names[1:])]


def _list(out: Console, title: str, lines: list[str]) -> None:
    if lines:
        heading(out, title)
    for line in lines:
        paragraph(out, one_line(line))
