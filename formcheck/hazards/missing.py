"""Which datum would settle what cannot be told, in words a maker can act on."""

from __future__ import annotations

from dataclasses import dataclass

from formcheck.hazards.matching import Matcher, is_identified
from formcheck.hazards.selector import Selector
from formcheck.materials.record import Material

RECIPE = -1  # a datum of the recipe itself, not of an ingredient


@dataclass(frozen=True, order=True)
class Missing:
    """A datum that is not there: of the ingredient with this index, or of the recipe."""

    ingredient: int
    datum: str

    def said(self, names: tuple[str, ...]) -> str:
        return self.datum if self.ingredient == RECIPE else f"{self.datum} of {names[self.ingredient]}"


def data_missing(matcher: Matcher, selector: Selector, material: Material, *, content: bool) -> list[str]:
    """The data without which nobody can tell whether the material agrees with the selector."""
    if material.composition:
        return _missing_inside(matcher, selector, material, content=content)
    return _missing_of_record(selector, material, content=content)


def _missing_inside(matcher: Matcher, selector: Selector, material: Material, *, content: bool) -> list[str]:
    parts = matcher.knowledge.composition(material)
    found = []
    for one in parts.constituents:
        if one.material is None:
            found.append(f"a record of the part {one.name!r}")
        elif _open(matcher.of_constituent(selector, one.material, content=content)):
            data = _missing_of_record(selector, one.material, content=content)
            found += [f"{datum} of the part {one.material.names[0]!r}" for datum in data]
    if parts.undeclared > 0 and not selector.physical_form:
        found.append(f"the undeclared {100 * parts.undeclared:.3g} %")
    return found or _missing_of_record(selector, material, content=content)


def _missing_of_record(selector: Selector, material: Material, *, content: bool) -> list[str]:
    """By facet; what the record does not say. Falls back to the composition of a product."""
    found: list[str] = []
    if selector.group and not set(selector.group) & set(material.groups):
        told = "groups" in material.model_fields_set
        found.append("the CAS number or composition" if told else "the families (groups)")
    if selector.charge and material.charge is None:
        found.append("the ionic charge")
    if selector.cas and material.cas is None:
        found.append("the CAS number or composition")
    if selector.ci_name and material.ci_generic_name is None:
        found.append("the Colour Index name")
    if selector.hazard_class or selector.hazard_code:
        if material.hazards is None:
            found.append("the hazard classification")
        elif content and not is_identified(material):
            found.append("the composition")
    if selector.physical_form and material.physical_form is None:
        found.append("the physical form")
    for one in selector.any_of:
        found += _missing_of_record(one, material, content=content)
    return list(dict.fromkeys(found)) or ["the composition"]


def _open(pair: tuple[float, float]) -> bool:
    return pair[0] < pair[1]
