"""The rule book put to a batch: what the hazards room is handed, and its answers as findings."""

from __future__ import annotations

from collections.abc import Sequence
from datetime import date
from pathlib import Path

import numpy as np

from formcheck.check.acid import AcidState
from formcheck.check.parts import Parts
from formcheck.check.record import Cited, Contribution, Finding
from formcheck.check.volumes import FilmState, nonvolatile_of
from formcheck.film.bounds import Bounded
from formcheck.hazards.answer import Answer, Share
from formcheck.hazards.book import Book, Written, load_book
from formcheck.hazards.compiled import compile_book
from formcheck.hazards.judge import judge
from formcheck.hazards.mixture import MixtureFacts, Scope, knowledge_of
from formcheck.hazards.rule import RuleSource
from formcheck.materials.record import Material
from formcheck.materials.shelf import Shelf
from formcheck.recipe.batch import Batch
from formcheck.recipe.markets import markets_reached
from formcheck.trouble import suggestion, trouble

GRADE_ORDER = {"stop": 0, "hold": 1, "care": 2, "note": 3, "unknown": 4}


def judged(batch: Batch, parts: Parts, shelf: Shelf, *, film: FilmState, acid: AcidState, book: Book,
           as_of: date, r: int = 0) -> list[Answer]:
    """Answers of every rule of the book to one recipe."""
    facts = mixture_facts(batch, parts, film, acid, r)
    compiled = compile_book(book, facts.materials, knowledge_of(shelf), as_of=as_of)
    return judge(compiled, facts, recipe=0)


def mixture_facts(batch: Batch, parts: Parts, film: FilmState, acid: AcidState, r: int = 0) -> MixtureFacts:
    """One recipe as the hazards room asks for it; the impure rest of an ingredient is an ingredient of its own."""
    recipe = batch.recipes[r].recipe
    fraction, rests = _with_impure_rests(batch, r)
    materials = batch.materials + tuple(material for material, _, _ in rests)
    nonvolatile = np.concatenate([nonvolatile_of(batch.materials, parts), np.full(len(rests), np.nan)])
    names, places = _names_and_places(batch, r)
    return MixtureFacts(
        materials=materials,
        names=(*names, *(material.names[0] for material, _, _ in rests)),
        places=(*places, *(place for _, _, place in rests)),
        mass_fraction=fraction[None, :],
        scopes=(Scope(recipe.what, tuple(recipe.use), markets_reached(recipe.sold_in), tuple(recipe.acts)),),
        nonvolatile_fraction=nonvolatile,
        ph=(np.array([acid.bounds[0]]), np.array([acid.bounds[1]])),
        voc_g_l={"ready_to_use": _bounds(film.voc_ready, r), "less_water": _bounds(film.voc_less_water, r)},
        density_g_ml=_bounds(film.density_g_ml, r),
    )


def _with_impure_rests(batch: Batch, r: int):
    """Mass fractions (I + rests,), and (material, fraction, place) of what a stated purity leaves undeclared."""
    fraction = batch.mass_fraction[r].copy()
    total = batch.total_mass_g[r]
    rests: list[tuple[Material, float, str]] = []
    for n, line in enumerate(batch.lines[r]):
        if line.purity is None or line.purity >= 1:
            continue
        rest = batch.line_mass_g[r, n] * (1 - line.purity) / total
        fraction[line.material] -= rest
        name = f"rest of {line.name}"
        rests.append((Material(id=f"rest_of_line_{n + 1}", names=[name], kind="additive"), rest, str(line.place)))
    return np.concatenate([np.maximum(fraction, 0.0), [rest for _, rest, _ in rests]]), rests


def _names_and_places(batch: Batch, r: int) -> tuple[list[str], list[str]]:
    names = [material.names[0] for material in batch.materials]
    places = [""] * len(names)
    for line in reversed(batch.lines[r]):
        names[line.material], places[line.material] = line.name, str(line.place)
    return names, places


def _bounds(of: Bounded, r: int):
    return of.low[r:r + 1], of.high[r:r + 1]


def findings_of(answers: Sequence[Answer]) -> list[Finding]:
    """Answers that say something, the gravest first."""
    told = [finding_of(answer) for answer in answers if answer.answer in ("exceeds", "applies", "cannot_tell")]
    return sorted(told, key=lambda finding: (GRADE_ORDER[finding.grade], finding.rule_id))


def finding_of(answer: Answer) -> Finding:
    rule = answer.rule
    shares = sorted(answer.contributions, key=lambda share: -(share.low or 0.0))
    heaviest = shares[0].place if shares and (shares[0].low or 0.0) > 0 else ""
    return Finding(
        grade=answer.grade or "note", rule_id=rule.id, title=rule.title, answer=_word(answer.answer),
        value=answer.value, value_low=answer.value_low, value_high=answer.value_high, limit=answer.limit,
        unit=answer.unit, basis=answer.basis, said=answer.said, what_to_do=rule.what_to_do,
        who_decides=rule.who_decides, jurisdiction=rule.jurisdiction, in_force_from=answer.in_force_from,
        source=cited_rule(answer.source), contributions=[_contribution(share) for share in shares],
        would_settle=list(answer.would_settle),
        faint=answer.faint, place=heaviest or answer.place)


def _word(answer: str):
    return {"exceeds": "exceeds", "applies": "applies", "cannot_tell": "cannot_tell"}[answer]


def _contribution(share: Share) -> Contribution:
    return Contribution(ingredient=share.name, value=share.low, unit=share.unit, place=share.place)


def cited_rule(source: RuleSource) -> Cited:
    return Cited(cite=source.cite, kind=source.kind, edition=source.edition, verified=source.verified)


def find_rule(rule_id: str, folders: Sequence[Path]) -> Written:
    """A rule by its id; InputError with the closest ids where there is none."""
    book = load_book(folders)
    if rule_id not in book.written:
        raise trouble("--rules" if folders else "the rule book", f"no rule {rule_id[:60]!r}",
                      suggestion(rule_id[:60], list(book.written)))
    return book.written[rule_id]
