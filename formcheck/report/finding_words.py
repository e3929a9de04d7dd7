"""What a finding says, label by label: the one place that terminal and page take it from."""

from __future__ import annotations

from formcheck.check.record import Contribution, Finding
from formcheck.report.numbers import beside_limit, exact, interval, plain
from formcheck.report.words import ANSWER_WORDS, cited_text, day_text, one_line, spelled, with_unit


def facts(finding: Finding) -> list[tuple[str, str]]:
    """Label and text of everything a finding holds beyond its title and its sentence, in reading order."""
    said = [
        ("answer", ANSWER_WORDS[finding.answer]),
        ("value", value_text(finding)),
        ("limit", limit_text(finding)),
        ("parts", "; ".join(map(contribution_text, finding.contributions))),
        ("needed", "; ".join(map(one_line, finding.would_settle))),
        ("to do", one_line(finding.what_to_do)),
        ("source", cited_text(finding.source) if finding.source else ""),
        ("decides", one_line(finding.who_decides)),
        ("at", one_line(finding.place)),
    ]
    return [(label, text) for label, text in said if text]


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
    """The limit as its text sets it, since when, and where."""
    number = "" if finding.limit is None else with_unit(exact(finding.limit), finding.unit)
    since = f"in force from {day_text(finding.in_force_from)}" if finding.in_force_from else ""
    return ", ".join(part for part in (number, one_line(finding.jurisdiction), since) if part)


def contribution_text(part: Contribution) -> str:
    where = f" ({one_line(part.place)})" if part.place else ""
    amount = "unknown" if part.value is None else with_unit(plain(part.value), part.unit)
    return f"{one_line(part.ingredient)} {amount}{where}"
