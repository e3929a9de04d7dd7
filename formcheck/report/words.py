"""The words that terminal and page share: grades and their marks, sources, figures, clean text.

Everything a user wrote passes through `clean` before it is shown: a recipe may come from anyone.
"""

from __future__ import annotations

import re
from collections.abc import Iterable
from datetime import date

from formcheck.check.record import GRADES, Check, Cited, Finding, Grade, Swatch
from formcheck.report.numbers import MINUS, plain

GRADE_MARKS: dict[Grade, str] = {"stop": "■", "hold": "◆", "care": "▲", "note": "●", "unknown": "?"}
GRADE_MEANINGS: dict[Grade, str] = {
    "stop": "not to be made as written",
    "hold": "wait until whoever may decide has decided",
    "care": "mind this when making and using it",
    "note": "for information",
    "unknown": "could not be told",
}
ANSWER_WORDS = {"within": "within", "exceeds": "exceeds", "cannot_tell": "cannot tell", "applies": "applies"}
NOTHING_FOUND = ("No rule that was applied has anything to say. That is not a clearance: what could not be "
                 "told is listed, and what no rule asks nobody checked.")
NOTHING_TO_NAME = "nothing that formcheck could name"
NOWHERE_SOLD = "not stated, so no jurisdiction's limits were asked"
UNITS_IN_FRONT = {"pH", "ΔE00"}
FROM_MEMORY = "from memory, not confirmed"
UNIT_WORDS = {
    "1": "", "fraction": "", "um": "µm", "um2": "µm²", "g/cm3": "g/cm³", "g/m2": "g/m²", "mg/m3": "mg/m³",
    "m2/L": "m²/L", "m2/l": "m²/L", "degC": "°C", "deg C": "°C", "deg": "°", "l/(mol cm)": "L/(mol cm)",
    "DE00": "ΔE00",
}
# Control characters, halves of surrogate pairs, and the marks that turn the direction of writing:
# each could make a terminal obey, a file unreadable or a line read otherwise than it is.
UNFIT = re.compile("[\x00-\x08\x0b-\x1f\x7f-\x9f\ud800-\udfff\u061c\u200e\u200f\u202a-\u202e\u2028\u2029"
                   "\u2066-\u2069\ufeff\ufffe\uffff]")
HEX_COLOUR = re.compile(r"#[0-9a-fA-F]{6}")


def clean(text: object) -> str:
    """Text fit to be shown: what could command a terminal or mislead a reader becomes U+FFFD."""
    return UNFIT.sub("\ufffd", str(text))


def one_line(text: object) -> str:
    return " ".join(clean(text).split())


def hex_colour(swatch: Swatch) -> str | None:
    """The swatch's hex, or None where the record holds something that is no colour."""
    return swatch.srgb_hex.lower() if HEX_COLOUR.fullmatch(swatch.srgb_hex) else None


def spelled(word: str) -> str:
    """An identifier as a reader would write it: `dye_bath` is `dye bath`."""
    return word.replace("_", " ")


def unit_text(unit: str) -> str:
    return UNIT_WORDS.get(unit, unit)


def with_unit(number: str, unit: str) -> str:
    """`12 g/L`; but `pH 8.4` and `ΔE00 2`, as the field writes them. `unknown` stays in front."""
    text = unit_text(unit)
    if text not in UNITS_IN_FRONT:
        return f"{number} {text}".rstrip()
    unknown, comma, bounds = number.rpartition(", ")
    return f"{unknown}{comma}{text} {bounds}" if bounds[:1].isdigit() or bounds[:1] == MINUS else number


def day_text(day: date) -> str:
    return day.isoformat()


def cited_text(source: Cited) -> str:
    """`Act 2000 s. 1, edition 2000-12-01 (law)`, and whether it stands on memory alone."""
    edition = f", edition {one_line(source.edition)}" if source.edition else ""
    return f"{one_line(source.cite)}{edition} ({cited_kind(source)})"


def cited_kind(source: Cited) -> str:
    if source.kind == "memory":
        return FROM_MEMORY
    return spelled(source.kind) if source.verified else f"{spelled(source.kind)}; {FROM_MEMORY}"


def by_grade(findings: Iterable[Finding]) -> list[tuple[Grade, list[Finding]]]:
    """Findings in the order of their grades; grades that nothing has are left out."""
    groups: dict[Grade, list[Finding]] = {grade: [] for grade in GRADES}
    for finding in findings:
        groups[finding.grade].append(finding)
    return [(grade, found) for grade, found in groups.items() if found]


def counts_text(check: Check) -> str:
    """`2 stop, 1 hold, 3 care; 4 could not be told`."""
    groups = [(grade, found) for grade, found in by_grade(check.findings) if grade != "unknown"]
    told = ", ".join(f"{len(found)} {grade}" for grade, found in groups) or "no finding"
    untold = len(untold_findings(check)) + len(check.unknowns)
    return f"{told}; {untold} could not be told" if untold else told


def untold_findings(check: Check) -> list[Finding]:
    """Findings graded unknown: they stand under what could not be told."""
    return [finding for finding in check.findings if finding.grade == "unknown"]


def rules_text(check: Check) -> str:
    """How much was asked. It never reads as a clearance."""
    applied = f"{check.rules_applied} {'rule' if check.rules_applied == 1 else 'rules'} applied"
    return f"{applied}, {check.rules_not_applicable} did not; {len(check.within)} answered within"


def all_sources(check: Check) -> list[Cited]:
    """Every source that stands behind the check, once each, in the order of its first use."""
    used: dict[tuple[str, str], Cited] = {}
    shade_sources = [colourant.source for colourant in check.shade.basis] if check.shade else []
    figures = [check.ph, *([check.ph_computed] if check.ph_computed else []), *check.figures]
    for source in [*(finding.source for finding in check.findings), *shade_sources,
                   *(figure.source for figure in figures), *check.sources]:
        if source is not None:
            used.setdefault((source.cite, source.edition), source)
    return list(used.values())


def count(number: int, thing: str) -> str:
    return f"{plain(number)} {thing}" if number == 1 else f"{plain(number)} {thing}s"
