"""What a finding says, label by label: the one place that terminal and page take it from."""

from __future__ import annotations

from collections.abc import Iterable

from formcheck.check.record import Contribution, Finding
from formcheck.report.numbers import beside_limit, exact, interval, plain
from formcheck.report.words import ANSWER_WORDS, cited_text, day_text, one_line, spelled, with_unit

EVERYWHERE = "any"


def facts(finding: Finding, *, brief: bool = False) -> list[tuple[str, str]]:
    """Label and text of everything a finding holds beyond its title and its sentence, in reading order.

    `brief` leaves out the parts that add nothing known, and the places of the others.
    """
    parts = [part for part in finding.contributions if not brief or part.value != 0]
    said = [
        ("answer", ANSWER_WORDS[finding.answer]),
        ("value", value_text(finding)),
        ("limit", limit_text(finding) if finding.limit is not None else ""),
        ("law of", "" if finding.limit is not None else in_force_text(finding)),
        ("parts", "; ".join(contribution_text(part, placed=not brief) for part in parts)),
        ("needed", "; ".join(map(one_line, finding.would_settle))),
        ("to do", one_line(finding.what_to_do)),
        ("source", cited_text(finding.source) if finding.source else ""),
        ("decides", one_line(finding.who_decides)),
        ("at", one_line(finding.place)),
    ]
    return [(label, text) for label, text in said if text]


def by_what_would_settle(findings: Iterable[Finding]) -> list[tuple[list[str], list[Finding]]]:
    """Findings that the same data would settle, together; the data that would settle most first."""
    groups: dict[frozenset[str], list[Finding]] = {}
    for finding in findings:
        groups.setdefault(frozenset(finding.would_settle), []).append(finding)
    ordered = sorted(groups.values(), key=lambda group: -len(group))
    return [(list(map(one_line, group[0].would_settle)), group) for group in ordered]


def value_text(finding: Finding) -> str:
    """The value as far as it is known, with its bounds, its basis, and enough digits to face its limit."""
    bounds = interval(finding.value_low, finding.value_high)
    if finding.value is None:
        number = f"unknown, {bounds}" if bounds else "unknown" if finding.limit is not None else ""
    elif finding.limit is None:
        number = plain(finding.value)
    else:
        number = beside_limit(finding.value, finding.limit)
    if not number:
        return ""
    text = with_unit(number, finding.unit)
    if finding.value is not None and bounds and finding.value_low != finding.value_high:
        text = f"{text} ({bounds})"
    return f"{text}, basis {spelled(one_line(finding.basis))}" if finding.basis else text


def limit_text(finding: Finding) -> str:
    """The limit as its text sets it, where, and since when."""
    number = "" if finding.limit is None else with_unit(exact(finding.limit), finding.unit)
    return ", ".join(part for part in (number, in_force_text(finding)) if part)


def in_force_text(finding: Finding) -> str:
    """`EU, in force from 2015-06-01`; nothing for what holds anywhere and always."""
    where = "" if finding.jurisdiction == EVERYWHERE else one_line(finding.jurisdiction)
    since = f"in force from {day_text(finding.in_force_from)}" if finding.in_force_from else ""
    return ", ".join(part for part in (where, since) if part)


def contribution_text(part: Contribution, *, placed: bool = True) -> str:
    amount = "unknown" if part.value is None else with_unit(plain(part.value), part.unit)
    where = f" ({one_line(part.place)})" if placed and part.place else ""
    return f"{one_line(part.ingredient)} {amount}{where}"
