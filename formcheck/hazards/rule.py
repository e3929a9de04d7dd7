"""A rule as a file of hazard_rules/ says it: what it asks, of whom, since when, by which text.

One model for each kind of rule. `load_book` reads files into them; nothing here judges.
"""

from typing import Annotated, Literal, Self

from pydantic import Field, model_validator

from formcheck.hazards.dated import DatedWindow, InForce, Limit, refuse_disorder
from formcheck.hazards.example import NOT_TRIPPED, TRIPPED, Example
from formcheck.hazards.selector import Selector
from formcheck.hazards.summed import Comparison, Condition, NonEmpty, RuleQuantity
from formcheck.quantity import SourceKind
from formcheck.strict import Day, Strict, wrong

Grade = Literal["stop", "hold", "care", "note", "unknown"]


class Grading(Strict):
    """The grade of each answer. `exceeds` belongs to limits and windows, `applies` to the others."""

    exceeds: Grade | None = None
    applies: Grade | None = None
    cannot_tell: Grade


class Where(Strict):
    """The recipes a rule speaks of. An empty list asks nothing; each list named must meet the recipe's."""

    what: list[str] = Field(default_factory=list)
    use: list[str] = Field(default_factory=list)
    sold_in: list[str] = Field(default_factory=list)
    acts: list[str] = Field(default_factory=list)


class RuleSource(Strict):
    """A citation. `verified: false`: from memory, not confirmed; such a source lets nothing pass."""

    instrument: NonEmpty
    clause: str = ""
    edition: str = ""
    kind: SourceKind
    verified: bool = True
    read_on: Day | None = None

    @property
    def cite(self) -> str:
        return f"{self.instrument}, {self.clause}" if self.clause else self.instrument


class RuleBase(Strict):
    """What every kind of rule says."""

    id: Annotated[str, Field(pattern=r"^[a-z0-9]+(-[a-z0-9]+)*$")]
    title: NonEmpty
    jurisdiction: NonEmpty  # a market of the vocabulary, or `any`
    grade: Grading
    applies_when: Where = Field(default_factory=Where)
    unless: Where = Field(default_factory=Where)  # each list named here lifts the rule
    sources: Annotated[dict[str, RuleSource], Field(min_length=1)]
    review_by: Day
    why: NonEmpty
    what_to_do: NonEmpty
    who_decides: NonEmpty
    examples: Annotated[list[Example], Field(min_length=2)]

    @model_validator(mode="after")
    def _every_source_is_cited_once_and_listed(self) -> Self:
        cited, listed = set(self.source_keys()), set(self.sources)
        if cited - listed:
            raise wrong(f"the source {min(cited - listed)!r}, which `sources` does not list",
                        "a key of `sources`")
        if listed - cited:
            raise wrong(f"the source {min(listed - cited)!r}, which nothing cites",
                        "only sources that are cited")
        return self

    @model_validator(mode="after")
    def _examples_show_both_answers(self) -> Self:
        expected = {example.expect for example in self.examples}
        if not expected & self.tripped_as():
            raise wrong("no example that trips the rule", "one that expects exceeds or applies")
        if not expected & NOT_TRIPPED:
            raise wrong("no example that does not trip the rule", "one that expects within or no_flag")
        return self

    @model_validator(mode="after")
    def _unknowns_of_law_hold(self) -> Self:
        of_law = any(source.kind == "law" for source in self.sources.values())
        halts = self.grade.exceeds in ("stop", "hold")
        if of_law and halts and self.grade.cannot_tell not in ("hold", "stop"):
            raise wrong(f"cannot_tell graded {self.grade.cannot_tell!r} on a legal limit", "hold")
        return self

    def source_keys(self) -> list[str]:
        raise AssertionError("every kind of rule names its sources")

    def tripped_as(self) -> set[str]:
        """The answers that show the rule tripped."""
        return TRIPPED

    @property
    def confirmed(self) -> bool:
        """Whether every source was read; a rule from memory lets nothing pass."""
        return all(source.verified for source in self.sources.values())


class LimitOnSum(RuleBase):
    """`exceeds` when the quantity passes the limit of the day."""

    kind: Literal["limit_on_sum"]
    quantity: RuleQuantity
    comparison: Comparison
    limit: Annotated[list[Limit], Field(min_length=1)]
    only_if: list[Condition] = Field(default_factory=list)

    def tripped_as(self) -> set[str]:
        """Where only a part counts that a test must tell, the content alone never surely exceeds."""
        return TRIPPED if any(not term.only_the for term in self.quantity.of) else {"cannot_tell"}

    def source_keys(self) -> list[str]:
        specific = self.quantity.specific_limits
        return [one.source for one in self.limit] + ([specific.source] if specific else [])

    @model_validator(mode="after")
    def _is_a_limit(self) -> Self:
        _refuse_grades(self, needs="exceeds", other="applies")
        refuse_disorder(self.limit)
        if self.comparison == "at_or_above" and any(one.value == 0 for one in self.limit):
            raise wrong("a limit of 0 that counts as exceeded when reached", "`comparison: more_than`")
        if not self.confirmed:
            raise wrong("a limit from memory (verified: false)",
                        "a limit read in its source, or another kind of rule")
        return self


class PhWindow(RuleBase):
    """`exceeds` when the pH of a water-bearing mixture leaves the window of an ingredient.

    With `from_records: true` each material's own `ph_window` is the window, asked of the kinds named.
    """

    kind: Literal["ph_window"]
    where: Selector
    from_records: bool = False
    window: list[DatedWindow] = Field(default_factory=list)
    below: str = ""  # what happens below the low end, in a sentence: "it loses its colour"
    above: str = ""
    whose: str = ""  # who stands it, when it is not the ingredient: "skin and eyes"
    source: str | None = None  # of a rule that takes the windows of the records

    def source_keys(self) -> list[str]:
        return [one.source for one in self.window] + ([self.source] if self.source else [])

    @model_validator(mode="after")
    def _is_a_window(self) -> Self:
        _refuse_grades(self, needs="exceeds", other="applies")
        if self.from_records == bool(self.window):
            raise wrong("a window both in the rule and from the records, or neither",
                        "`window` or `from_records: true`")
        for one in self.window:
            if (one.low is not None and not self.below) or (one.high is not None and not self.above):
                raise wrong("an end of the window without its consequence",
                            "`below` with `low`, `above` with `high`")
        return self


class Company(Strict):
    """What must be so for two parties to do each other harm, besides meeting."""

    ph_below: float | None = None
    ph_above: float | None = None
    in_water: bool = False


class Party(Strict):
    """One side of a pair that must not meet, and how to call it in a sentence."""

    name: NonEmpty
    where: Selector


class MustNotMeet(RuleBase):
    """`applies` when an ingredient of each party is in the mixture, under the conditions of `when`."""

    kind: Literal["must_not_meet"]
    first: Party
    second: Party
    when: Company = Field(default_factory=Company)
    consequence: NonEmpty  # in a sentence: "chlorine gas is set free"
    in_force: InForce

    def source_keys(self) -> list[str]:
        return [self.in_force.source]

    @model_validator(mode="after")
    def _is_a_pair(self) -> Self:
        _refuse_grades(self, needs="applies", other="exceeds")
        return self


class Caution(RuleBase):
    """`applies` when an ingredient, as it is handled, agrees with the selector."""

    kind: Literal["caution"]
    where: Selector
    at_least_percent: Annotated[float, Field(ge=0, le=100)] = 0.0
    in_force: InForce

    def source_keys(self) -> list[str]:
        return [self.in_force.source]

    @model_validator(mode="after")
    def _is_a_caution(self) -> Self:
        _refuse_grades(self, needs="applies", other="exceeds")
        return self


Rule = LimitOnSum | PhWindow | MustNotMeet | Caution
KINDS: dict[str, type[RuleBase]] = {
    "limit_on_sum": LimitOnSum, "ph_window": PhWindow, "must_not_meet": MustNotMeet, "caution": Caution,
}


def _refuse_grades(rule: RuleBase, *, needs: str, other: str) -> None:
    if getattr(rule.grade, needs) is None:
        raise wrong(f"no grade for {needs!r}", f"`grade: {{{needs}: ..., cannot_tell: ...}}`")
    if getattr(rule.grade, other) is not None:
        raise wrong(f"a grade for {other!r}", f"`grade: {{{needs}: ..., cannot_tell: ...}}`")
