"""Taking any single datum away from any demo recipe, or from any record it uses, never turns a flag into a pass.

Every datum is taken in turn: each optional field of the recipe, each field and list item of every record from
the ingredients down to their constituents. A recipe or record that is then refused lets nothing pass either.
"""

from __future__ import annotations

from functools import cache
from pathlib import Path

import pytest
from edge_recipes import EDGE_RECIPES
from lessened import DAY, Told, answers, is_item_of_complete_list, lessened, told_whole

from formcheck.check.record import Check
from formcheck.check.run import check_recipe
from formcheck.documents import Document
from formcheck.hazards.answer import Answer
from formcheck.hazards.book import Book, load_book
from formcheck.recipe.read import written_recipe
from formcheck.trouble import InputError

DEMO = Path(__file__).resolve().parents[2] / "demo_formulations"
RECIPES = sorted(DEMO.glob("*.yaml"))
BOOK = load_book()
FLAGS, OPEN = ("exceeds", "applies"), ("exceeds", "applies", "cannot_tell")
WHOLE_CHECK_EACH = 41  # of so many data one goes through the whole check, shade included


@cache
def told(path: Path) -> Told:
    return told_whole(path)


def by_rule(found: list[Answer]) -> dict[str, list[Answer]]:
    """A rule on pH windows answers once for each ingredient outside of its own."""
    grouped: dict[str, list[Answer]] = {}
    for answer in found:
        grouped.setdefault(answer.rule.id, []).append(answer)
    return grouped


def flagged(found: list[Answer]) -> bool:
    return any(answer.answer in FLAGS for answer in found)


def held(found: list[Answer]) -> bool:
    return any(answer.answer in OPEN and answer.grade in ("stop", "hold") for answer in found)


def still_open(found: list[Answer]) -> bool:
    return any(answer.answer in OPEN for answer in found)


def assert_no_flag_is_lost(recipe: Told) -> None:
    """Every datum taken away in turn; what must stay open is what flags, or what a hold cannot tell."""
    before = {rule: found for rule, found in by_rule(answers(recipe, BOOK)).items() if flagged(found) or held(found)}
    asked = Book({rule: BOOK.written[rule] for rule in before}, BOOK.words)
    must_stay = {rule for rule, found in before.items()
                 if held(found) or any(answer.answer == "exceeds" for answer in found)}
    lost, judged = [], 0
    for said, less in lessened(recipe):
        try:
            after = by_rule(answers(less, asked))
        except InputError:
            continue
        judged += 1
        rules = must_stay if is_item_of_complete_list(said) else before
        lost += [f"{rule}: {[a.answer for a in before[rule]]} -> {[a.answer for a in after[rule]]}, {said}"
                 for rule in rules if not still_open(after[rule])]
    assert judged > 10, "too little was taken away to show anything"
    assert not lost, "\n".join(lost)


@pytest.mark.parametrize("path", RECIPES, ids=lambda path: path.stem)
def test_no_flag_of_the_demo_becomes_a_pass(path):
    assert_no_flag_is_lost(told(path))


@pytest.mark.parametrize("name", EDGE_RECIPES)
def test_no_flag_of_a_recipe_just_over_a_limit_becomes_a_pass(name):
    recipe = EDGE_RECIPES[name]()
    assert any(answer.answer == "exceeds" for answer in answers(recipe, BOOK))
    assert_no_flag_is_lost(recipe)


def whole_check(recipe: Told) -> Check:
    written = written_recipe(Document(recipe.file, recipe.data, {}), folder=recipe.folder)
    return check_recipe(written, as_of=DAY, book=BOOK)


def with_file_names_whole(recipe: Told) -> Told:
    """Spectrum files by their full names, as the records now stand in the recipe."""
    from formcheck.materials.shelf import data_file, find
    from formcheck.recipe.batch import build_batch
    from formcheck.recipe.read import read_recipe

    shelf = build_batch([read_recipe(Path(recipe.file))]).shelves[0]
    for one in recipe.data["materials"]:
        found = find(shelf, one["id"])
        if found and (k_and_s := one.get("optical", {}).get("k_and_s")):
            k_and_s["file"] = str(data_file(found, k_and_s["file"]).resolve())
    return recipe


@pytest.mark.parametrize("path", RECIPES, ids=lambda path: path.stem)
def test_what_was_held_stays_held(path):
    """Through the whole check, shade included: of every 41 data one."""
    recipe = with_file_names_whole(told_whole(path))
    before = whole_check(recipe)
    as_read = answers(told(path), BOOK)
    assert before.held == held(as_read), "the records inside the recipe say the same as those on the shelf"
    for n, (said, less) in enumerate(lessened(recipe)):
        if n % WHOLE_CHECK_EACH:
            continue
        try:
            after = whole_check(less)
        except InputError:
            continue
        assert after.held or not before.held, said
        assert_shade_is_told_or_missed(before, after, said)


def assert_shade_is_told_or_missed(before: Check, after: Check, said: str) -> None:
    """An off shade stays off, or the shade is told to be unknown; unless nothing is wanted any more."""
    off = {finding.rule_id for finding in before.findings} & {"formcheck-off-shade"}
    if not off or "wanted" in said:
        return
    unknown = any(one.what == "the shade" for one in after.unknowns) and after.shade is None
    assert unknown or off <= {finding.rule_id for finding in after.findings}, said


def test_the_demo_flags_enough_to_lose():
    """Otherwise the tests above would pass on a workshop without a flag."""
    flags = [answer for path in RECIPES for answer in answers(told(path), BOOK) if answer.answer in FLAGS]
    assert sum(answer.answer == "exceeds" for answer in flags) > 20
    assert len({answer.rule.id for answer in flags if answer.grade in ("stop", "hold")}) > 12
    assert {type(answer.rule).__name__ for answer in flags} == {
        "LimitOnSum", "PhWindow", "MustNotMeet", "Caution"}
