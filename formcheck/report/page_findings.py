"""The findings on the page by grade, each with its arithmetic and source; then what could not be told."""

from __future__ import annotations

from formcheck.check.record import Check, Contribution, Finding, Grade, Unknown
from formcheck.report.finding_words import by_what_would_settle, facts, limit_text, value_text
from formcheck.report.html import Child, Markup, definitions, section, table, tag
from formcheck.report.limit_bar import limit_bar
from formcheck.report.marks import mark
from formcheck.report.numbers import plain
from formcheck.report.words import (
    GRADE_MEANINGS,
    NOTHING_FOUND,
    NOTHING_TO_NAME,
    by_grade,
    cited_text,
    count,
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
    """What formcheck could not tell: first what its own reckoning lacks, then the rules left open."""
    untold = untold_findings(check)
    if not untold and not check.unknowns:
        return None
    unknowns = [_unknown(one, level=level + 1) for one in check.unknowns]
    still_open = [_open(needed, found, level=level + 1, place=place)
                  for place, (needed, found) in enumerate(by_what_would_settle(untold), 1)]
    return section(level, "Could not be told", unknowns, still_open, id=f"{id}-untold")


def _open(needed: list[str], found: list[Finding], *, level: int, place: int) -> Markup:
    """The rules that the same data would settle, in a table that holds all they say."""
    settled_by = tag("ul", [tag("li", one) for one in needed or [NOTHING_TO_NAME]])
    rules = table(f"Rules left open, group {place}", ["rule", "what is open", "if it applies", "source"],
                  map(_open_row, found), class_="open")
    title = tag(f"h{level}", mark("unknown"), f"{count(len(found), 'rule')} would be settled by")
    return tag("div", title, settled_by, rules, class_="left-open")


def _open_row(one: Finding) -> list[Child]:
    """Rule, title and place; what is open; what to do and who decides; source."""
    return [[tag("code", one_line(one.rule_id)), tag("span", one_line(one.title), class_="under"),
             tag("span", one_line(one.place), class_="place")],
            [one_line(one.said), tag("span", _against(one), class_="under")],
            [one_line(one.what_to_do), tag("span", one_line(one.who_decides), class_="under")],
            cited_text(one.source) if one.source else ""]


def _against(finding: Finding) -> str:
    return f"{value_text(finding)}; limit {limit_text(finding)}" if finding.limit is not None else ""


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
                 [[one_line(part.ingredient), _amount(part, at_least=finding.answer == "cannot_tell"),
                   one_line(part.place)] for part in finding.contributions])


def _amount(part: Contribution, *, at_least: bool) -> str:
    """A part's amount; where the whole could not be told it is what is known of it, so the least."""
    if part.value is None:
        return "unknown"
    return ("at least " if at_least else "") + with_unit(plain(part.value), part.unit)


def _unknown(unknown: Unknown, *, level: int) -> Markup:
    rows = [("why", one_line(unknown.why)), ("would settle it", one_line(unknown.would_settle))]
    side = tag("div", mark("unknown"), tag("span", "unknown", class_="word"), class_="side")
    body = tag("div", tag(f"h{level}", one_line(unknown.what)),
               definitions([(label, text) for label, text in rows if text]))
    return tag("article", side, body, class_="finding unknown")
