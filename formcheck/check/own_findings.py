"""Findings that follow from formcheck's own reckoning, not from a rule of the book."""

from __future__ import annotations

import numpy as np

from formcheck.check.acid import AcidState
from formcheck.check.parts import Parts
from formcheck.check.record import Cited, Finding, Shade, Unknown
from formcheck.check.volumes import FilmState
from formcheck.recipe.batch import Batch
from formcheck.recipe.read import WrittenRecipe

PH_GAP = 0.5  # measured from computed: beyond it one of the two is not to be trusted
DISSOLVED_KINDS = ("dye", "indicator", "salt")
OWN = Cited(cite="formcheck's own reckoning", kind="computed")
MAKER = "the maker, by a drawdown or a sample"


def own_findings(written: WrittenRecipe, batch: Batch, parts: Parts, *, shade: Shade | None, acid: AcidState,
                 film: FilmState, r: int = 0) -> list[Finding]:
    """Off shade, beyond solubility, porous film, a pH that does not add up."""
    found = [_off_shade(written, shade), _ph_gap(written, acid), _porous(written, film, r),
             *_beyond_solubility(batch, parts, r)]
    return [one for one in found if one]


def _off_shade(written: WrittenRecipe, shade: Shade | None) -> Finding | None:
    if shade is None or shade.wanted is None or shade.de00 is None or shade.wanted.tolerance_de00 is None:
        return None
    tolerance = shade.wanted.tolerance_de00
    within = shade.probability_within or 0.0
    if shade.de00 <= tolerance and within >= 0.5:
        return None
    return Finding(
        grade="care", rule_id="formcheck-off-shade", title="The shade misses what is wanted",
        answer="exceeds" if shade.de00 > tolerance else "cannot_tell", value=shade.de00, limit=tolerance, unit="DE00",
        said=f"The predicted shade is DE00 {shade.de00:.1f} from the wanted one ({shade.difference_words}), the "
             f"tolerance is {tolerance:g}; the chance to be within it is {within:.0%}.",
        what_to_do="Change the loadings or the film, or measure the colourants: "
                   f"the doubt comes mostly from {shade.dominated_by or 'nothing known'}.",
        who_decides=MAKER, source=OWN, place=str(written.document.place(("wanted",))))


def _ph_gap(written: WrittenRecipe, acid: AcidState) -> Finding | None:
    measured = written.recipe.measured
    if measured is None or measured.ph is None or acid.computed is None:
        return None
    gap = measured.ph - acid.computed
    if abs(gap) <= PH_GAP:
        return None
    return Finding(
        grade="note", rule_id="formcheck-ph-gap", title="Measured and computed pH differ", answer="applies",
        value=abs(gap), limit=PH_GAP, unit="pH",
        said=f"The measured pH {measured.ph:.2f} and the computed {acid.computed:.2f} differ by {abs(gap):.2f}.",
        what_to_do="Check the meter, the amounts of acids and bases, and whether the mixture took up carbon dioxide; "
                   "the measured value is used.",
        who_decides="the maker, by measuring again", source=OWN,
        place=str(written.document.place(("measured", "ph"))))


def _porous(written: WrittenRecipe, film: FilmState, r: int) -> Finding | None:
    if written.recipe.film is None:
        return None
    pvc, cpvc = film.pvc, film.cpvc
    if not pvc.low[r] > cpvc.high[r]:
        return None
    return Finding(
        grade="note", rule_id="formcheck-porous-film", title="More pigment than the binder can wet", answer="applies",
        value=_percent(pvc.value[r]), value_low=_percent(pvc.low[r]), value_high=_percent(pvc.high[r]),
        limit=_percent(cpvc.value[r]) or _percent(cpvc.high[r]), unit="%", basis="by volume of the dry film",
        said=f"The pigment volume concentration is {_share(pvc.value[r], pvc.low[r], 'at least')}, the critical one "
             f"{_share(cpvc.value[r], cpvc.high[r], 'at most')}: air takes the place of binder, which hides and scrubs "
             "off, and which the shade does not hold.",
        what_to_do="Expect a matt, porous, lighter film than predicted; test scrub and adhesion.",
        who_decides=MAKER, source=Cited(cite="Asbeck & Van Loo, Ind. Eng. Chem. 41 (1949) 1470", kind="paper"),
        place=str(written.document.place(("ingredients",))))


def _percent(fraction: float) -> float | None:
    return float(fraction) * 100 if np.isfinite(fraction) else None


def _share(value: float, bound: float, words: str) -> str:
    """A fraction, or where it is not known its bound: at least 60%."""
    return f"{value:.0%}" if np.isfinite(value) else f"{words} {bound:.0%}"


def _beyond_solubility(batch: Batch, parts: Parts, r: int) -> list[Finding]:
    """Dissolved ingredients of which there is more than the water of the mixture takes up."""
    fractions = parts.fractions(batch.mass_fraction)[r]
    water = sum(fractions[c] for c, m in enumerate(parts.materials) if m is not None and m.kind == "water")
    found = []
    for c, material in enumerate(parts.materials):
        if material is None or material.kind not in DISSOLVED_KINDS or material.solubility_water_g_l is None:
            continue
        if not water > 0 or not fractions[c] > 0:
            continue
        per_litre, most = fractions[c] / water * 997.0, material.solubility_water_g_l
        if per_litre <= most.value:
            continue
        source = material.provenance(most.source)
        found.append(Finding(
            grade="care", rule_id="formcheck-beyond-solubility", title="More than the water dissolves",
            answer="exceeds", value=float(per_litre), limit=most.value, unit="g/L of water",
            said=f"{parts.names[c]}: {per_litre:.3g} g per litre of water, and water dissolves {most.value:g} g/L.",
            what_to_do="Use less, warm it, or expect undissolved matter and a weaker shade.",
            who_decides=MAKER,
            source=Cited(cite=source.cite, kind=source.kind, edition=source.edition, verified=source.verified)))
    return found


def unknowns_of(written: WrittenRecipe, batch: Batch, *, shade_reason: str, acid: AcidState, film: FilmState,
                r: int = 0) -> list[Unknown]:
    """What could not be told, why, and what would settle it."""
    told = [Unknown(what=one.what, why=one.why, would_settle=one.would_settle) for one in batch.reasons[r]]
    if shade_reason:
        told.append(Unknown(what="the shade", why=shade_reason,
                            would_settle="a measured spectrum or drawdown of what lacks one"))
    if acid.ph is None and _has_water(batch, r):
        told.append(Unknown(what="the pH", why=acid.reason, would_settle="a measured pH: `measured: {ph: ...}`"))
    if written.recipe.film is not None:
        for what, figure in (("the solids by volume", film.solids_volume), ("the VOC", film.voc_ready)):
            if figure.reasons[r]:
                told.append(Unknown(what=what, why=figure.reasons[r],
                                    would_settle="the density, solids and boiling point of what is named"))
    return told


def _has_water(batch: Batch, r: int) -> bool:
    present = batch.mass_fraction[r] != 0
    return any(is_in and (m.kind == "water" or m.composition)
               for is_in, m in zip(present, batch.materials, strict=True))
