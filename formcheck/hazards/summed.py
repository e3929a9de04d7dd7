"""What a limit sums: elements, shares of ingredients, VOC; on which basis and in which unit."""

from typing import Annotated, Literal, Self

from pydantic import Field, model_validator

from formcheck.hazards.selector import Selector
from formcheck.strict import Strict, wrong

Basis = Literal["mixture", "dry_film", "as_used"]
Comparison = Literal["more_than", "at_or_above"]
VocKind = Literal["ready_to_use", "less_water"]
NonEmpty = Annotated[str, Field(min_length=1)]

# Unit of a limit -> (bases it fits, the unit in the fraction or g/L that columns carry).
UNITS: dict[str, tuple[tuple[Basis, ...], float]] = {
    "% w/w": (("mixture", "dry_film"), 1e-2),
    "mg/kg": (("mixture", "dry_film"), 1e-6),
    "g/L": (("as_used",), 1.0),
}


class Term(Strict):
    """One summand: an element, the share of some ingredients, or VOC; multiplied by `times`.

    `only_the` says that a part counts of which nobody but a test can tell how much it is: "chromium(VI)",
    "part that migrates". The content is then its upper bound, and 0 its lower.
    """

    element: Annotated[str, Field(pattern=r"^[A-Z][a-z]?$")] | None = None
    share: Selector | None = None
    voc: VocKind | None = None
    times: float = 1.0
    only_the: str = ""

    @model_validator(mode="after")
    def _is_one_thing(self) -> Self:
        if sum(x is not None for x in (self.element, self.share, self.voc)) != 1:
            raise wrong("a term that is not one thing", "one of `element`, `share`, `voc`")
        if not self.times:
            raise wrong("`times: 0`", "a factor other than 0")
        return self


class SpecificLimits(Strict):
    """Use the limits that the classification of a substance sets for itself, where its record has one.

    With `each`, every substance has its own limit; in a sum, each counts by (limit of the rule) / (its own).

    `lowest` is the lowest such limit known of for these classes, in the unit of the rule: below it even
    a substance whose record names none is within; between it and the rule's own limit the record has
    to say (write the rule's own limit there when the classification sets none).
    """

    lowest: Annotated[float, Field(gt=0)]
    source: str


class Summed(Strict):
    """What is summed, of what it is a share, and in which unit."""

    of: Annotated[list[Term], Field(min_length=1)]
    name: NonEmpty  # in a sentence: "lead", "VOC", "phthalates of the list"
    basis: Basis = "mixture"
    unit: str

    @model_validator(mode="after")
    def _unit_fits_basis(self) -> Self:
        if self.unit not in UNITS:
            raise wrong(f"the unit {self.unit!r}", f"one of {', '.join(UNITS)}")
        if self.basis not in UNITS[self.unit][0]:
            raise wrong(f"the unit {self.unit!r} with the basis {self.basis}",
                        f"one of the bases {', '.join(UNITS[self.unit][0])}")
        if any(term.voc for term in self.of) and (self.basis != "as_used" or len(self.of) > 1):
            raise wrong("VOC with other terms or another basis", "VOC alone, with the basis as_used")
        if any(term.times < 0 for term in self.of) and not (
                isinstance(self, Condition) and self.basis == "mixture"):
            raise wrong("a negative `times`", "a factor above 0 (below 0 only in `only_if`, of the mixture)")
        return self


class Condition(Summed):
    """A further quantity that must be so for the rule to speak: zinc above 10 %, more water than solvent."""

    comparison: Comparison
    value: float


class RuleQuantity(Summed):
    """The quantity a limit speaks of."""

    each: bool = False  # one substance at a time, instead of their sum
    specific_limits: SpecificLimits | None = None

    @model_validator(mode="after")
    def _each_is_a_share(self) -> Self:
        if self.each and (self.of[0].times != 1 or len(self.of) > 1 or self.of[0].share is None):
            raise wrong("`each` over something other than one `share`", "one term with `share`")
        if self.specific_limits and (len(self.of) > 1 or self.of[0].share is None or self.basis != "mixture"):
            raise wrong("`specific_limits` of other than one `share` of the mixture", "one term with `share`")
        return self
