"""How much of an element a material may hold: bounds from assays, formulas and compositions."""

from __future__ import annotations

from typing import NamedTuple

from formcheck.materials.formula import element_mass_fractions, molar_mass, parse_formula
from formcheck.materials.record import Material, Number
from formcheck.materials.shelf import Shelf, expand, find
from formcheck.quantity import Provenance, Quantity, known, unknown

__all__ = ["ElementBounds", "element_bounds", "molar_mass", "molar_mass_of", "parse_formula"]

MG_KG = 1e-6
# Made from ores and metals, so that no formula tells what they carry along (common practice): only an assay does.
MINERAL_KINDS = ("pigment", "extender", "metal_powder")
# Elements that such goods are assayed for; carbon, oxygen and the like are told by the formula alone.
TRACED = frozenset(["As", "Ba", "Cd", "Co", "Cr", "Cu", "Hg", "Mn", "Ni", "Pb", "Sb", "Se", "Sn", "Sr", "Zn"])
NOT_KNOWN = "no composition on record"


class ElementBounds(NamedTuple):
    """Mass fraction of an element in a material as supplied; `why` says what the bounds rest on."""

    low: float
    high: float
    why: str


ANYTHING = ElementBounds(0.0, 1.0, NOT_KNOWN)


def element_bounds(shelf: Shelf, material: Material, symbol: str) -> ElementBounds:
    """Least and greatest mass fraction of the element `symbol` in the material as supplied.

    An assay on the record comes first; then a closed list of elements (`elements.only`) that leaves
    the element out; then the composition, whose undeclared rest may be anything; then the formula.
    Lists and formulas count no traces, so in a pigment, extender or metal powder they settle nothing
    about a metal they do not name. With none of these anything from 0 to 1 is possible.

    Raises
    ------
    InputError
        a composition that contains itself or is nested too deep.
    """
    elements = material.elements
    if elements and symbol in elements.mg_kg:
        return _assayed(elements.mg_kg[symbol])
    if elements and elements.only is not None and symbol not in elements.only and not traces_open(material, symbol):
        return ElementBounds(0.0, 0.0, "not among the elements on record; traces not counted")
    if material.composition:
        return _of_composition(shelf, material, symbol)
    return _of_formula(material, symbol)


def traces_open(material: Material, symbol: str) -> bool:
    """Whether only an assay tells if the material carries the element."""
    return material.kind in MINERAL_KINDS and symbol in TRACED


def _assayed(number: Number) -> ElementBounds:
    """A range as given; twice the standard deviation about a value; 0 to an upper bound; the value."""
    either_side = 2 * number.sd if number.sd is not None else 0.0
    high = number.high if number.high is not None else number.value + either_side
    without_low = 0.0 if number.high is not None else number.value - either_side
    low = number.low if number.low is not None else without_low
    return ElementBounds(_fraction(low * MG_KG), _fraction(high * MG_KG), "assay on record")


def _of_composition(shelf: Shelf, material: Material, symbol: str) -> ElementBounds:
    """Weighted sum over the parts; what is undeclared may hold none of the element or be all of it."""
    expand(shelf, material)  # refuses a composition that contains itself
    undeclared = max(0.0, 1.0 - sum(part.mass_fraction for part in material.composition))
    low, high, open_ones = 0.0, undeclared, []
    for part in material.composition:
        found = find(shelf, part.material)
        bounds = element_bounds(shelf, found.material, symbol) if found else ANYTHING
        low += bounds.low * (part.mass_fraction if part.low is None else part.low)
        high += bounds.high * (part.mass_fraction if part.high is None else part.high)
        if bounds.high > bounds.low:
            open_ones.append(part.material)
    why = "by composition"
    if undeclared > 1e-9:
        why += f", {undeclared:.4g} of the mass undeclared"
    if open_ones:
        why += f", not fixed for {', '.join(open_ones)}"
    return ElementBounds(_fraction(low), _fraction(high), why)


def _of_formula(material: Material, symbol: str) -> ElementBounds:
    if material.formula is None:
        return ANYTHING
    share = element_mass_fractions(material.formula.value).get(symbol, 0.0)
    if share == 0.0 and traces_open(material, symbol):
        return ElementBounds(0.0, 1.0, f"no assay of traces of {symbol} on record")
    return ElementBounds(share, share, f"by the formula {material.formula.value}; traces not counted")


def _fraction(value: float) -> float:
    return min(1.0, max(0.0, value))


def molar_mass_of(material: Material) -> Quantity:
    """Molar mass as recorded, else from the formula, else unknown. [g/mol]"""
    if material.molar_mass_g_mol is None and material.formula is not None:
        by_formula = Provenance("computed", f"from the formula {material.formula.value}")
        return known(molar_mass(material.formula.value), "g/mol", provenance=by_formula)
    if material.molar_mass_g_mol is None:
        return unknown("g/mol", f"no molar mass or formula on the record of {material.names[0]}")
    return material.quantity("molar_mass_g_mol", "g/mol")
