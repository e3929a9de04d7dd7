"""Whether a mixture holds water: only then has it a pH."""

from __future__ import annotations

import numpy as np

from formcheck.hazards.columns import Materials
from formcheck.hazards.matching import DRY_FORMS, NO, UNKNOWN, YES, Matcher, Pair
from formcheck.hazards.mixture import MixtureFacts
from formcheck.hazards.verdict import Kleene
from formcheck.materials.record import Material

WET_FORMS = ("solution", "paste")
DRY_KINDS = ("pigment", "extender", "metal_powder")  # unless their form says else
WATER_FREE_KINDS = ("solvent", "plasticiser")


def water_bearing(materials: Materials, matcher: Matcher) -> np.ndarray:
    """(2, I) bool: the material surely, and possibly, holds water."""
    return np.array([_bears_water(material, matcher) for material in materials]).reshape(-1, 2).T > 0


def _bears_water(material: Material, matcher: Matcher) -> Pair:
    if material.kind == "water":
        return YES
    if material.composition:
        parts = matcher.knowledge.composition(material)
        if any(one.material is not None and one.material.kind == "water" for one in parts.constituents):
            return YES
        open_ones = parts.undeclared > 0 or any(one.material is None for one in parts.constituents)
        return UNKNOWN if open_ones else NO
    form = material.physical_form
    if form in DRY_FORMS or (form not in WET_FORMS and material.kind in WATER_FREE_KINDS):
        return NO
    return NO if form is None and material.kind in DRY_KINDS else UNKNOWN


def water_present(facts: MixtureFacts, bearing: np.ndarray) -> Kleene:
    """(R,) bool twice: some ingredient surely, possibly, brings water."""
    return (facts.present & bearing[0]).any(axis=1), (facts.present & bearing[1]).any(axis=1)


def water_in(facts: MixtureFacts, water: Kleene) -> Kleene:
    """The same; a known pH tells that there is water where there may be, and contradicts records that say
    there is none: then nobody can tell."""
    ph_known = ~np.isnan(np.asarray(facts.ph[0], float)) & ~np.isnan(np.asarray(facts.ph[1], float))
    return water[0] | (ph_known & water[1]), water[1] | ph_known
