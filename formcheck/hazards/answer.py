"""One answer of one rule to one recipe, with all that a finding shows."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from formcheck.hazards.missing import Missing
from formcheck.hazards.rule import Grade, Rule, RuleSource


@dataclass(frozen=True)
class Share:
    """What one ingredient brings to the quantity of a limit; None where its amount is unknown."""

    ingredient: int
    name: str
    low: float | None
    high: float | None
    unit: str
    place: str = ""


@dataclass(frozen=True)
class Answer:
    """`answer` is a word of `verdict.WORDS`; grade is None where there is nothing to grade.

    said
        One plain sentence: what was found against what.
    value_low, value_high
        Bounds of the quantity in `unit`; `value` when they are one number. None where there is none,
        and `value_high` None where nothing bounds it from above.
    faint
        Of a *cannot tell*: nothing known points to the trouble; too little is known to rule it out.
    """

    rule: Rule
    answer: str
    grade: Grade | None
    said: str
    source: RuleSource
    value_low: float | None = None
    value_high: float | None = None
    limit: float | None = None
    unit: str = ""
    basis: str = ""
    in_force_from: date | None = None
    overdue: bool = False
    faint: bool = False
    contributions: tuple[Share, ...] = ()
    ingredients: tuple[int, ...] = ()  # those it hangs on
    missing: tuple[Missing, ...] = ()
    would_settle: tuple[str, ...] = ()
    place: str = ""

    @property
    def value(self) -> float | None:
        low, high = self.value_low, self.value_high
        if low is None or high is None or abs(high - low) > 1e-9 * max(abs(high), 1e-30):
            return None
        return low
