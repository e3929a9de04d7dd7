"""What a rule says of the ingredients it means: families, kinds, charges, numbers, hazard classes."""

from typing import Annotated, Self

from pydantic import Field, model_validator

from formcheck.materials.record import Charge, MaterialKind, PhysicalForm
from formcheck.strict import Strict, wrong

Cas = Annotated[str, Field(pattern=r"^[1-9][0-9]{1,6}-[0-9]{2}-[0-9]$")]
HazardCode = Annotated[str, Field(pattern=r"^(EUH|H)[0-9]{3}[A-Za-z]*$")]

FACETS = ("group", "kind", "charge", "cas", "ci_name", "hazard_class", "hazard_code", "physical_form",
          "any_of")


class Selector(Strict):
    """Ingredients that agree with every facet named; within one facet, with any of its values.

    `any_of` holds whole selectors of which one must agree. The last four fields do not select: they
    say where an ingredient of which too little is known may be left aside (see hazard_rules/README.md).
    """

    group: list[str] = Field(default_factory=list)
    kind: list[MaterialKind] = Field(default_factory=list)
    charge: list[Charge] = Field(default_factory=list)
    cas: list[Cas] = Field(default_factory=list)
    ci_name: list[str] = Field(default_factory=list)
    hazard_class: list[str] = Field(default_factory=list)
    hazard_code: list[HazardCode] = Field(default_factory=list)
    physical_form: list[PhysicalForm] = Field(default_factory=list)
    any_of: list["Selector"] = Field(default_factory=list)
    hides_in: list[MaterialKind] = Field(default_factory=list)
    shown_by_class: list[str] = Field(default_factory=list)
    shown_by_element: str | None = None
    volatile: bool = False

    @model_validator(mode="after")
    def _selects_something(self) -> Self:
        if not any(getattr(self, facet) for facet in FACETS):
            raise wrong("a selector that names nothing", f"one of {', '.join(FACETS)}")
        return self

    @property
    def asks_of_hazards(self) -> bool:
        """Whether a hazard class or code decides."""
        return bool(self.hazard_class or self.hazard_code) or any(one.asks_of_hazards for one in self.any_of)
