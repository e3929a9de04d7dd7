"""The order of the rooms: from a recipe file to its Check. The only place that knows it."""

from __future__ import annotations

from collections.abc import Sequence
from datetime import date
from pathlib import Path

import numpy as np

from formcheck import __version__
from formcheck.check.acid import acid_state, dye_forms, form_shares, ph_figures
from formcheck.check.own_findings import own_findings, unknowns_of
from formcheck.check.parts import Parts, parts_of, with_impure_rests
from formcheck.check.record import Check, Cited, Finding, Line
from formcheck.check.rules import GRADE_ORDER, findings_of, judged
from formcheck.check.setting import viewing_of
from formcheck.check.shade import shade_of
from formcheck.check.volumes import FilmState, dry_fraction_of_lines, film_figures, film_state
from formcheck.hazards.book import Book, load_book
from formcheck.recipe.batch import Batch, build_batch
from formcheck.recipe.read import WrittenRecipe, read_recipe


def check_file(path: Path, *, as_of: date, shelf_folder: Path | None = None,
               rule_folders: Sequence[Path] = (), book: Book | None = None) -> Check:
    """Read one recipe file and check it as of a day.

    Raises
    ------
    InputError
        the recipe, a material record, a spectrum or a rule cannot be used; with file, line and column.
    """
    return check_recipe(read_recipe(path), as_of=as_of, shelf_folder=shelf_folder,
                        book=book or load_book(rule_folders, with_examples=False))


def check_recipe(written: WrittenRecipe, *, as_of: date, book: Book, shelf_folder: Path | None = None) -> Check:
    """Check a recipe that has been read."""
    batch = build_batch([written], shelf_folder=shelf_folder)
    shelf = batch.shelves[0]
    pure = parts_of(shelf, batch.materials)
    parts = with_impure_rests(pure, batch)
    film = film_state(batch, parts, shelf)
    acid = acid_state(batch, shelf)
    viewing = viewing_of(written, parts, film)
    if written.recipe.under or written.recipe.over:
        from formcheck.check.layers import with_layers

        viewing = with_layers(written, viewing, shelf_folder)
    shares = form_shares(parts, ~(parts.fractions(batch.mass_fraction)[0] == 0), acid)
    shade, shade_reason, _ = shade_of(batch, parts, film=film, acid=acid, viewing=viewing, form_share=shares)
    answers = judged(batch, pure, shelf, film=film, acid=acid, book=book, as_of=as_of)
    findings = findings_of(answers) + own_findings(written, batch, parts, shade=shade, acid=acid, film=film)
    findings.sort(key=lambda finding: (GRADE_ORDER[finding.grade], finding.rule_id))
    measured = written.recipe.measured
    ph, ph_computed = ph_figures(acid, measured is not None and measured.ph is not None)
    recipe = written.recipe
    return Check(
        formcheck_version=__version__, as_of=as_of, file=written.document.file, title=recipe.title, what=recipe.what,
        use=list(recipe.use), sold_in=[str(market) for market in recipe.sold_in], recipe_digest=written.digest,
        composition=_lines(batch, parts, film), figures=film_figures(recipe.film, film, batch),
        ph=ph, ph_computed=ph_computed, dye_forms=dye_forms(parts, shares, acid),
        shade=shade, shade_reason=shade_reason, findings=findings,
        unknowns=unknowns_of(written, batch, shade_reason=shade_reason, acid=acid, film=film),
        rules_applied=sum(one.answer not in ("not_in_force", "not_applicable") for one in answers),
        rules_not_applicable=sum(one.answer in ("not_in_force", "not_applicable") for one in answers),
        within=[one.rule.id for one in answers if one.answer == "within"],
        sources=_sources(findings, shade, parts))


def _lines(batch: Batch, parts: Parts, film: FilmState, r: int = 0) -> list[Line]:
    lines = []
    total = batch.total_mass_g[r]
    dry = dry_fraction_of_lines(batch, parts, film, r)
    for n, line in enumerate(batch.lines[r]):
        mass = batch.line_mass_g[r, n]
        found = batch.found[line.material]
        lines.append(Line(
            ingredient=line.name, material=found.material.id, written=line.written, mass_g=_known(mass),
            mass_fraction=_known(mass / total), dry_volume_fraction=_known(dry[n]), place=str(line.place),
            record_from="the recipe" if found.where == "recipe" else found.where))
    return lines


def _known(number: float) -> float | None:
    return float(number) if np.isfinite(number) else None


def _sources(findings: Sequence[Finding], shade, parts: Parts) -> list[Cited]:
    """Every source named anywhere in the Check, once."""
    named = [one.source for one in findings if one.source]
    if shade:
        named += [one.source for one in shade.basis if one.source]
    unique = {(one.cite, one.edition): one for one in named}
    return list(unique.values())
