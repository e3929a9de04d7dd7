"""Cautions that follow from what an ingredient is, as it is handled, over arrays of recipes."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

import numpy as np

from formcheck.hazards.columns import Materials
from formcheck.hazards.dated import InForce, in_force
from formcheck.hazards.matching import Matcher
from formcheck.hazards.mixture import MixtureFacts
from formcheck.hazards.rule import Caution
from formcheck.hazards.verdict import Kleene


@dataclass(frozen=True)
class CompiledCaution:
    """Which materials call for the caution: (2, I) bool, surely and possibly."""

    rule: Caution
    force: InForce
    which: np.ndarray


def compile_caution(rule: Caution, materials: Materials, matcher: Matcher, *, as_of: date
                    ) -> CompiledCaution | None:
    force = in_force([rule.in_force], as_of)
    if force is None:
        return None
    pairs = [matcher.as_handled(rule.where, material) for material in materials]
    return CompiledCaution(rule, force, np.array(pairs).reshape(-1, 2).T > 0)


def ingredients_called(compiled: CompiledCaution, facts: MixtureFacts) -> Kleene:
    """(R, I) bool twice: the ingredient surely, possibly, calls for the caution in that recipe."""
    least = compiled.rule.at_least_percent / 100
    unknown = np.isnan(facts.mass_fraction)
    enough = (facts.mass_fraction >= least * (1 - 1e-9)) & facts.present
    known_or_any = enough | (unknown if least == 0 else np.zeros_like(unknown))
    return known_or_any & compiled.which[0], (enough | unknown) & compiled.which[1]
