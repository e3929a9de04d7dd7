"""Whether an ingredient agrees with a selector: surely, surely not, or nobody can tell.

Every answer is a pair (low, high) of 0 and 1; (0, 1) is unknown. As a content, `high` may be a small
fraction: the most of the matching substances that a product can hold without its classification saying so.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from formcheck.hazards.mixture import Knowledge
from formcheck.hazards.selector import Selector
from formcheck.hazards.vocabulary import Vocabulary
from formcheck.materials.record import HazardEntry, Material, MaterialKind, name_key

Pair = tuple[float, float]
NO: Pair = (0.0, 0.0)
YES: Pair = (1.0, 1.0)
UNKNOWN: Pair = (0.0, 1.0)

ANYTHING_KINDS = ("dispersion", "additive")  # products by trade: nothing is ruled out by their kind
PURE_KINDS = ("water", "pigment", "dye", "indicator", "extender", "salt", "mordant", "metal_powder")
DRY_FORMS = ("powder", "granules", "flake", "crystals", "gas")
COLOURANT_KINDS = ("pigment", "dye", "indicator", "dispersion", "additive")


@dataclass(frozen=True)
class Matcher:
    """What matching needs besides the selector and the material: the vocabulary and a look inside."""

    words: Vocabulary
    knowledge: Knowledge

    def presence(self, selector: Selector, material: Material) -> Pair:
        """Whether the ingredient, or anything in it, agrees."""
        if not material.composition:
            return self.of_pure(selector, material, content=False)
        own = self.own(selector, material, delegates=True, content=False)
        return _any([own, *(pair for _, _, pair in self._inside(selector, material, content=False))])

    def as_handled(self, selector: Selector, material: Material) -> Pair:
        """Whether the ingredient as it is handled agrees: its own classification speaks before its parts'."""
        if selector.asks_of_hazards and material.hazards is not None:
            return self.own(selector, material, delegates=bool(material.composition), content=False)
        return self.presence(selector, material)

    def content(self, selector: Selector, material: Material) -> Pair:
        """Mass fraction of the ingredient made of what agrees."""
        if not material.composition:
            return self.of_pure(selector, material, content=True)
        inside = self._inside(selector, material, content=True)
        low = sum(least * pair[0] for least, _, pair in inside)
        high = min(1.0, sum(most * pair[1] for _, most, pair in inside))
        if low == 0 and self.own(selector, material, delegates=True, content=True)[0] == 1:
            # The record says so of the whole, no part does: which part it is, or how much, is not told.
            return (0.0, high) if high > 0 else YES
        return low, max(low, min(high, self.cap(selector, material)))

    def _inside(self, selector: Selector, material: Material, *, content: bool
                ) -> list[tuple[float, float, Pair]]:
        """Least and largest mass fraction of each constituent, and of what is undeclared, with its pair."""
        parts = self.knowledge.composition(material)
        inside = [(one.low, one.high, self.of_constituent(selector, one.material, content=content))
                  for one in parts.constituents]
        if parts.undeclared > 0:
            pair = self.of_undeclared(selector, material, content=content)
            inside.append((parts.undeclared, parts.undeclared, pair))
        return inside

    def of_constituent(self, selector: Selector, material: Material | None, *, content: bool) -> Pair:
        if selector.physical_form:
            return NO  # what lies inside a product is not handled in its own form
        return UNKNOWN if material is None else self.of_pure(selector, material, content=content)

    def of_pure(self, selector: Selector, material: Material, *, content: bool) -> Pair:
        """A material without declared parts; one that may be a mixture may hold anything besides."""
        own = self.own(selector, material, delegates=False, content=content)
        if not may_be_mixture(material):
            return own
        return _any([own, self.of_undeclared(selector, material, content=content)])

    def of_undeclared(self, selector: Selector, material: Material, *, content: bool) -> Pair:
        """What a record leaves unnamed may be anything that the record as a whole does not rule out."""
        if selector.physical_form:
            return NO
        if selector.charge and material.charge and material.charge.value not in selector.charge:
            return NO
        if selector.shown_by_element and self._has_none_of(material, selector.shown_by_element):
            return NO
        return (0.0, self.cap(selector, material)) if content else UNKNOWN

    def own(self, selector: Selector, material: Material, *, delegates: bool, content: bool) -> Pair:
        """By the record alone. `delegates`: its parts are declared and speak for what it does not say."""
        low = high = 1.0
        for pair in self._facets(selector, material, delegates=delegates, content=content):
            low, high = min(low, pair[0]), min(high, pair[1])
            if high == 0:
                return NO
        if low < high:
            high = self._narrowed(selector, material, high, content=content)
        return low, high

    def _facets(self, selector: Selector, material: Material, *, delegates: bool, content: bool
                ) -> Iterator[Pair]:
        """The pair of each facet the selector names, the quick ones first."""
        unknown = NO if delegates else UNKNOWN
        if selector.kind:
            yield YES if material.kind in selector.kind else NO
        if selector.group:
            yield self._group(selector, material, unknown)
        if selector.charge:
            yield _charge(selector, material, unknown)
        if selector.cas:
            yield _cas(selector, material, unknown)
        if selector.ci_name:
            yield _ci_name(selector, material, unknown)
        if selector.hazard_class or selector.hazard_code:
            yield _hazards(selector, material, unknown, content)
        if selector.physical_form:
            yield _physical_form(selector, material)
        if selector.any_of:
            yield _any([self.own(one, material, delegates=delegates, content=content)
                        for one in selector.any_of])

    def _group(self, selector: Selector, material: Material, unknown: Pair) -> Pair:
        if set(selector.group) & set(material.groups):
            return YES
        if families_are_told(material) or unknown == NO:
            return NO
        families = [self.words.groups[name] for name in selector.group if name in self.words.groups]
        return unknown if any(_may_hide_in(material, one.kinds) for one in families) else NO

    def _narrowed(self, selector: Selector, material: Material, high: float, *, content: bool) -> float:
        """The upper bound of an unknown, where kind, element or classification rule the match out."""
        if not _may_hide_in(material, selector.hides_in):
            return 0.0
        if selector.shown_by_element and self._has_none_of(material, selector.shown_by_element):
            return 0.0
        return min(high, self.cap(selector, material)) if content else high

    def cap(self, selector: Selector, material: Material) -> float:
        """The most a product can hold of what agrees, by its classification and by what of it dries off."""
        volatile = most_volatile(material) if selector.volatile else 1.0
        return min(volatile, self._cap_by_class(selector, material))

    def _cap_by_class(self, selector: Selector, material: Material) -> float:
        """The most a product can hold of substances whose hazard class its classification does not list."""
        classes = selector.hazard_class or selector.shown_by_class
        if not classes or material.hazards is None:
            return 1.0
        if {class_of(entry) for entry in material.hazards.entries} & set(classes):
            return 1.0
        limits = [self.words.hazard_classes[name].generic_limit_percent
                  for name in classes if name in self.words.hazard_classes]
        return max(1.0 if limit is None else limit / 100 for limit in limits) if limits else 1.0

    def _has_none_of(self, material: Material, symbol: str) -> bool:
        return self.knowledge.element_bounds(material, symbol)[1] == 0


def _may_hide_in(material: Material, kinds: list[MaterialKind]) -> bool:
    return not kinds or material.kind in kinds or material.kind in ANYTHING_KINDS


def most_volatile(material: Material) -> float:
    """The largest mass fraction that can leave the film; 1 where the record does not tell."""
    stays = material.nonvolatile_fraction
    if stays is None:
        return 1.0
    return min(1.0, max(0.0, 1.0 - (stays.value if stays.low is None else stays.low)))


def is_identified(material: Material) -> bool:
    """Whether the record says which substance it is: by CAS number, formula or Colour Index, or as water."""
    return bool(material.cas or material.formula or material.ci_generic_name
                or material.ci_constitution_number or material.kind == "water")


def may_be_mixture(material: Material) -> bool:
    """Whether a record without declared parts may be of a mixture: not identified, and neither dry nor of a
    kind that is one substance."""
    if is_identified(material):
        return False
    if material.kind in ANYTHING_KINDS:
        return True
    return material.kind not in PURE_KINDS and material.physical_form not in DRY_FORMS


def families_are_told(material: Material) -> bool:
    """Whether the record's list of families is complete: given, if only as empty, for a known substance."""
    return "groups" in material.model_fields_set and is_identified(material)


def class_of(entry: HazardEntry) -> str:
    """The class as the vocabulary writes it: without a route or organ in brackets, without asterisks."""
    return entry.hazard_class.split("(")[0].replace("*", "").strip()


def substance_key(material: Material) -> str:
    """One word for one substance, so that two lines or two products of it are summed."""
    return material.cas.value if material.cas else material.id


def _any(pairs: list[Pair]) -> Pair:
    return max(p[0] for p in pairs), max(p[1] for p in pairs)


def _charge(selector: Selector, material: Material, unknown: Pair) -> Pair:
    if material.charge is None:
        return unknown
    return YES if material.charge.value in selector.charge else NO


def _cas(selector: Selector, material: Material, unknown: Pair) -> Pair:
    if material.cas is None:
        return NO if material.kind == "water" else unknown
    return YES if material.cas.value in selector.cas else NO


def _ci_name(selector: Selector, material: Material, unknown: Pair) -> Pair:
    if material.ci_generic_name is None:
        return unknown if material.kind in COLOURANT_KINDS else NO
    wanted = {name_key(name) for name in selector.ci_name}
    return YES if name_key(material.ci_generic_name.value) in wanted else NO


def _hazards(selector: Selector, material: Material, unknown: Pair, content: bool) -> Pair:
    if material.hazards is None:
        return NO if material.kind == "water" else unknown
    codes = tuple(selector.hazard_code)
    for entry in material.hazards.entries:
        if class_of(entry) in selector.hazard_class or entry.code.startswith(codes):
            # A product of unknown composition carries the class for something in it, of unknown amount.
            return YES if is_identified(material) or not content else unknown
    # Nor does a product without the class hold none of it: see Matcher.cap.
    return NO if is_identified(material) or not content else unknown


def _physical_form(selector: Selector, material: Material) -> Pair:
    if material.physical_form is None:
        return NO if material.kind == "water" else UNKNOWN
    return YES if material.physical_form in selector.physical_form else NO
