"""The findings in the terminal, by grade; then what could not be told."""

from __future__ import annotations

from rich.console import Console
from rich.text import Text

from formcheck.check.record import Check, Finding, Grade, Unknown
from formcheck.report.finding_words import facts
from formcheck.report.terminal_parts import GRADE_STYLES, heading, labelled, paragraph
from formcheck.report.words import (
    GRADE_MARKS,
    GRADE_MEANINGS,
    NOTHING_FOUND,
    by_grade,
    clean,
    one_line,
    rules_text,
    untold_findings,
)

LABEL_WIDTH = 8


def show_findings(console: Console, check: Check) -> None:
    """Every finding that has a grade, the gravest first."""
    heading(console, "Findings", rules_text(check))
    told = [(grade, found) for grade, found in by_grade(check.findings) if grade != "unknown"]
    if not told:
        paragraph(console, NOTHING_FOUND)
    for grade, found in told:
        for finding in found:
            show_finding(console, finding, grade)


def show_finding(console: Console, finding: Finding, grade: Grade) -> None:
    console.print()
    line = Text(f"{GRADE_MARKS[grade]} {grade}", style=GRADE_STYLES[grade])
    line.append(f"  {clean(finding.rule_id)}", style="not bold default")
    console.print(line)
    paragraph(console, one_line(finding.title), style="bold")
    paragraph(console, one_line(finding.said))
    labelled(console, facts(finding), width=LABEL_WIDTH)


def show_untold(console: Console, check: Check) -> None:
    """What formcheck could not tell, and the datum that would settle each."""
    untold = untold_findings(check)
    if not untold and not check.unknowns:
        return
    heading(console, "Could not be told", GRADE_MEANINGS["unknown"] if not check.unknowns else "")
    for finding in untold:
        show_finding(console, finding, "unknown")
    if check.unknowns:
        console.print()
    for unknown in check.unknowns:
        show_unknown(console, unknown)


def show_unknown(console: Console, unknown: Unknown) -> None:
    console.print(Text(f"{GRADE_MARKS['unknown']} {one_line(unknown.what)}", style="bold"))
    rows = [("why", one_line(unknown.why)), ("needed", one_line(unknown.would_settle))]
    labelled(console, [(label, text) for label, text in rows if text], width=LABEL_WIDTH)
