"""The examples a rule carries: small mixtures with the answer each must get."""

from typing import Annotated, Literal, Self

from pydantic import Field, model_validator

from formcheck.materials.record import Charge, MaterialKind, PhysicalForm
from formcheck.strict import Day, Strict, wrong

Expected = Literal["exceeds", "applies", "within", "no_flag", "cannot_tell", "not_in_force", "not_applicable"]
TRIPPED = {"exceeds", "applies"}
NOT_TRIPPED = {"within", "no_flag"}

Percent = Annotated[float, Field(ge=0, le=100)]
Facet = Literal["percent", "groups", "cas", "charge", "hazards", "elements", "physical_form", "nonvolatile"]
Span = Annotated[list[float], Field(min_length=2, max_length=2)]


class ExampleIngredient(Strict):
    """An ingredient told by what the rule asks of it. What is not told is absent, not unknown.

    `unknown` lists what nobody knows of it: `[groups, hazards]` or `[percent]`.
    `hazards` lines read "Carc. 1B H350", with "at 0.5 %" when the classification sets its own limit.
    """

    percent: Percent | None = None
    kind: MaterialKind = "additive"
    name: str = ""
    groups: list[str] = Field(default_factory=list)
    cas: str | None = None
    ci_name: str | None = None
    charge: Charge | None = None
    physical_form: PhysicalForm | None = None
    hazards: list[str] = Field(default_factory=list)
    elements_percent: dict[str, Percent] = Field(default_factory=dict)
    nonvolatile_percent: Percent = 100.0
    ph_window: Annotated[list[float | None], Field(min_length=2, max_length=2)] | None = None
    unknown: list[Facet] = Field(default_factory=list)

    @model_validator(mode="after")
    def _has_an_amount(self) -> Self:
        if (self.percent is None) != ("percent" in self.unknown):
            raise wrong("an ingredient without an amount, or with one said to be unknown",
                        "`percent: ...`, or `unknown: [percent]`")
        return self


class Example(Strict):
    """A mixture and the answer it must get; what is left to 100 % is water unless `rest` says else.

    The recipe is one the rule speaks of, unless `what`, `use`, `sold_in` or `acts` say else.
    """

    as_of: Day | None = None  # none: the day the rule is to be reviewed
    ingredients: Annotated[list[ExampleIngredient], Field(min_length=1)]
    rest: ExampleIngredient | None = None
    ph: float | Span | None = None
    voc_g_l: float | None = None
    density_g_ml: float | None = 1.0
    what: str | None = None
    use: list[str] | None = None
    sold_in: list[str] | None = None
    acts: list[str] | None = None
    expect: Expected
    note: str = ""
