"""The findings on the page by grade, each with its arithmetic and source; then what could not be told."""

from __future__ import annotations

from formcheck.check.record import Check, Contribution, Finding, Grade, Unknown
from formcheck.report.finding_words import facts
from formcheck.report.html import Markup, definitions, section, table, tag
from formcheck.report.limit_bar import limit_bar
from formcheck.report.marks import mark
from formcheck.report.numbers import plain
from formcheck.report.words import (
    GRADE_MEANINGS,
    NOTHING_FOUND,
    by_grade,
    one_line,
    rules_text,
    untold_findings,
    with_unit,
)

LABELS = {"parts": "made up of", "needed": "would settle it", "to do": "what to do", "decides": "who decides",
          "at": "where"}


def findings_section(check: Check, *, level: int, id: str) -> Markup:
    """Findings that have a grade, the gravest first, and the ids of the rules answered within."""
    told = [(grade, found) for grade, found in by_grade(check.findings) if grade != "unknown"]
    groups = [_group(grade, found, level=level + 1, id=f"{id}-{grade}") for grade, found in told]
    within = tag("p", "Answered within their limits: ", ", ".join(map(one_line, check.within)), ".",
                 class_="within") if check.within else None
    return section(level, "Findings", tag("p", f"{rules_text(check)}."),
                   groups or tag("p", NOTHING_FOUND), within, id=f"{id}-findings")


def untold_section(check: Check, *, level: int, id: str) -> Markup | None:
    """What formcheck could not tell, and the datum that would settle each."""
    untold = untold_findings(check)
    if not untold and not check.unknowns:
        return None
    findings = [_finding(one, level=level + 1, id=f"{id}-untold-{place}") for place, one in enumerate(untold)]
    unknowns = [_unknown(one, level=level + 1) for one in check.unknowns]
    return section(level, "Could not be told", findings, unknowns, id=f"{id}-untold")


def _group(grade: Grade, found: list[Finding], *, level: int, id: str) -> Markup:
    title = [grade.capitalize(), tag("span", f" {GRADE_MEANINGS[grade]}", class_="meaning")]
    findings = [_finding(one, level=level + 1, id=f"{id}-{place}") for place, one in enumerate(found)]
    return section(level, title, findings, id=id, class_=f"grade {grade}")


def _finding(finding: Finding, *, level: int, id: str) -> Markup:
    """One finding: grade and rule on the left, what was found and why on the right."""
    side = tag("div", mark(finding.grade), tag("span", finding.grade, class_="word"),
               tag("code", one_line(finding.rule_id)), class_="side")
    said = [(LABELS.get(label, label), text) for label, text in facts(finding)
            if label != "parts" or len(finding.contributions) == 1]
    body = tag("div", tag(f"h{level}", one_line(finding.title)), tag("p", one_line(finding.said)),
               limit_bar(finding, id=f"{id}-bar"), definitions(said),
               _contributions(finding) if len(finding.contributions) > 1 else None)
    return tag("article", side, body, class_=f"finding {finding.grade}")


def _contributions(finding: Finding) -> Markup:
    return table(f"What makes up the value of {one_line(finding.rule_id)}",
                 ["ingredient", ("part", "number"), "where"],
                 [[one_line(part.ingredient), _amount(part), one_line(part.place)]
                  for part in finding.contributions])


def _amount(part: Contribution) -> str:
    return "unknown" if part.value is None else with_unit(plain(part.value), part.unit)


def _unknown(unknown: Unknown, *, level: int) -> Markup:
    rows = [("why", one_line(unknown.why)), ("would settle it", one_line(unknown.would_settle))]
    side = tag("div", mark("unknown"), tag("span", "unknown", class_="word"), class_="side")
    body = tag("div", tag(f"h{level}", one_line(unknown.what)),
               definitions([(label, text) for label, text in rows if text]))
    return tag("article", side, body, class_="finding unknown")
