"""The findings in the terminal, by grade; then what could not be told."""

from __future__ import annotations

from rich.console import Console
from rich.text import Text

from formcheck.check.record import Check, Finding, Grade, Unknown
from formcheck.report.finding_words import by_what_would_settle, facts, limit_text, value_text
from formcheck.report.terminal_parts import GRADE_STYLES, heading, labelled, paragraph
from formcheck.report.words import (
    GRADE_MARKS,
    NOTHING_FOUND,
    NOTHING_TO_NAME,
    by_grade,
    cited_text,
    clean,
    count,
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
    labelled(console, facts(finding, brief=True), width=LABEL_WIDTH)


def show_untold(console: Console, check: Check) -> None:
    """What formcheck could not tell: first what its own reckoning lacks, then the rules left open."""
    untold = untold_findings(check)
    if not untold and not check.unknowns:
        return
    heading(console, "Could not be told")
    for unknown in check.unknowns:
        show_unknown(console, unknown)
    for needed, found in by_what_would_settle(untold):
        show_open(console, needed, found)
    if untold:
        console.print()
        paragraph(console, "the whole of each: --page FILE or --json; the rule: formcheck why RULE", indent=0)


def show_open(console: Console, needed: list[str], found: list[Finding]) -> None:
    """The rules that the same data would settle: three lines or so for each that something known points to,
    the id alone of those that are open only because too little is known."""
    console.print()
    title = f"{GRADE_MARKS['unknown']} {count(len(found), 'rule')} would be settled by"
    console.print(Text(title, style="bold"))
    labelled(console, [("-", one) for one in needed or [NOTHING_TO_NAME]])
    for finding in found:
        if not finding.faint:
            paragraph(console, f"{one_line(finding.rule_id)}  {one_line(finding.place)}".rstrip(), indent=4)
            paragraph(console, open_text(finding), indent=6)
    faint = [one_line(finding.rule_id) for finding in found if finding.faint]
    if faint:
        paragraph(console, f"nothing points to these, nothing rules them out: {', '.join(faint)}", indent=4)


def open_text(finding: Finding) -> str:
    """Title, value against limit, and source, in one sentence."""
    against = f"{value_text(finding)}, limit {limit_text(finding)}" if finding.limit is not None else ""
    source = cited_text(finding.source) if finding.source else ""
    return "; ".join(part for part in (one_line(finding.title), against, source) if part)


def show_unknown(console: Console, unknown: Unknown) -> None:
    console.print(Text(f"{GRADE_MARKS['unknown']} {one_line(unknown.what)}", style="bold"))
    rows = [("why", one_line(unknown.why)), ("needed", one_line(unknown.would_settle))]
    labelled(console, [(label, text) for label, text in rows if text], width=LABEL_WIDTH)
