"""`formcheck why RULE` in the terminal: a rule whole, with its limits by date, its texts and its examples."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from datetime import date
from typing import Any

from pydantic import BaseModel
from rich.console import Console
from rich.text import Text

from formcheck.report.numbers import exact
from formcheck.report.record_rows import plain_text, record_rows
from formcheck.report.terminal_parts import heading, labelled, paragraph, speaking, table
from formcheck.report.words import FROM_MEMORY, GRADE_MARKS, GRADE_MEANINGS, one_line, spelled, with_unit

# Told at the head, under their own headings, or in their own tables; every other field is shown as it comes.
TOLD_APART = frozenset({
    "id", "title", "kind", "jurisdiction", "grade", "applies_when", "unless", "sources", "review_by", "why",
    "what_to_do", "who_decides", "examples", "limit", "window", "in_force",
})
ASKED_OF_NOBODY = "every recipe"


def show_rule(rule: Any, *, as_of: date, console: Console | None = None) -> None:
    """Print one rule of the book as it stands on a day."""
    with speaking(console) as out:
        show_head(out, rule, as_of)
        heading(out, "What it asks")
        rows = record_rows(rule, lambda key: source_text(rule, key), skip=TOLD_APART)
        labelled(out, [("  " * depth + label, text) for depth, label, text in rows])
        show_dated(out, rule, as_of)
        for title, text in (("Why", rule.why), ("What to do", rule.what_to_do),
                            ("Who decides", rule.who_decides)):
            heading(out, title)
            paragraph(out, one_line(text))
        heading(out, "Sources")
        labelled(out, [(one_line(key), source_text(rule, key)) for key in rule.sources])
        show_examples(out, rule.examples)


def show_head(console: Console, rule: Any, as_of: date) -> None:
    overdue = f"; overdue on {as_of.isoformat()}" if as_of > rule.review_by else ""
    console.print(Text(one_line(rule.title), style="bold"))
    rows = [("rule", rule.id), ("kind", spelled(rule.kind)), ("jurisdiction", one_line(rule.jurisdiction)),
            ("asked of", where_text(rule.applies_when) or ASKED_OF_NOBODY),
            ("not of", where_text(rule.unless)), ("to review by", rule.review_by.isoformat() + overdue)]
    labelled(console, [row for row in rows if row[1]], indent=0)
    heading(console, "Grades")
    labelled(console, [(spelled(answer), f"{GRADE_MARKS[grade]} {grade}: {GRADE_MEANINGS[grade]}")
                       for answer, grade in rule.grade if grade])


def show_dated(console: Console, rule: Any, as_of: date) -> None:
    """Each dated value with its days and text, the one in force on the day marked."""
    dated = [*getattr(rule, "limit", []), *getattr(rule, "window", [])]
    dated += [rule.in_force] if hasattr(rule, "in_force") else []
    if not dated:
        return
    unit = getattr(getattr(rule, "quantity", None), "unit", "")
    heading(console, "In force", f"as of {as_of.isoformat()}")
    rows = [["→" if _holds(one, dated, as_of) else "", _day(one.starts, "always"),
             _day(one.ends, "further notice"), dated_value(one, unit), source_text(rule, one.source)]
            for one in dated]
    table(console, ["", "from", "until", "value", "text"], rows)


def dated_value(one: Any, unit: str) -> str:
    """`90 mg/kg`, `pH 6 to 9`, or nothing for a rule without a number."""
    if hasattr(one, "value"):
        return with_unit(exact(one.value), unit)
    if not hasattr(one, "low"):
        return ""
    if one.low is None or one.high is None:
        return f"pH at most {exact(one.high)}" if one.low is None else f"pH at least {exact(one.low)}"
    return f"pH {exact(one.low)} to {exact(one.high)}"


def source_text(rule: Any, key: str) -> str:
    source = rule.sources[key]
    parts = [one_line(source.cite), f"edition {one_line(source.edition)}" if source.edition else "",
             spelled(source.kind), f"read {source.read_on.isoformat()}" if source.read_on else "",
             "" if source.verified else FROM_MEMORY]
    return ", ".join(part for part in parts if part)


def show_examples(console: Console, examples: Sequence[Any]) -> None:
    """The mixtures that the rule itself says how to answer."""
    heading(console, "Examples", "each is run by the tests")
    for example in examples:
        paragraph(console, f"{spelled(example.expect)}: {example_text(example)}")


def example_text(example: BaseModel) -> str:
    """`percent 2, elements percent Pb 60; as of 2015-06-01`: what an example states, and no more."""
    stated = example.model_dump(exclude_unset=True)
    ingredients = " + ".join(_stated(one) for one in stated.pop("ingredients", []))
    stated.pop("expect", None)
    rest = "; ".join(f"{spelled(key)} {_stated(value)}" for key, value in stated.items())
    return f"{ingredients}; {rest}" if rest else ingredients


def where_text(where: Any) -> str:
    """`sold in EU; use consumer coating`."""
    return "; ".join(f"{spelled(name)} {', '.join(spelled(one_line(value)) for value in values)}"
                     for name, values in where if values)


def _stated(value: Any) -> str:
    if isinstance(value, Mapping):
        return ", ".join(f"{spelled(one_line(key))} {_stated(one)}" for key, one in value.items())
    return plain_text(value)


def _holds(one: Any, dated: Sequence[Any], as_of: date) -> bool:
    """Whether this entry is the last to have begun by that day, and has not ended."""
    begun = [other for other in dated if other.starts is None or other.starts <= as_of]
    return bool(begun) and begun[-1] is one and (one.ends is None or as_of <= one.ends)


def _day(day: date | None, otherwise: str) -> str:
    return day.isoformat() if day else otherwise
