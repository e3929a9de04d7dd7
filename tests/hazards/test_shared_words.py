"""The vocabulary agrees with what recipes and material records say, and the bundle with the files."""

from __future__ import annotations

import json
from pathlib import Path
from typing import get_args

import pytest

from formcheck.hazards.book import built_in_folder, load_book, rule_files
from formcheck.hazards.bundle import BUNDLE, bundle_of, read_bundle, read_document
from formcheck.hazards.matching import class_of
from formcheck.hazards.vocabulary import FILE_NAME, selectors_of
from formcheck.materials import builtin
from formcheck.recipe.model import ActWord, UseWord, WhatWord

BOOK = load_book()
RECORDS = [builtin.built_in(one) for one in sorted(builtin.index()["records"])]


def test_recipes_and_rules_speak_of_the_same_things():
    assert sorted(BOOK.words.what) == sorted(get_args(WhatWord))
    assert sorted(BOOK.words.uses) == sorted(get_args(UseWord))
    assert sorted(BOOK.words.acts) == sorted(get_args(ActWord))


@pytest.mark.parametrize("record", RECORDS, ids=lambda one: one.id)
def test_a_built_in_record_uses_families_of_the_vocabulary(record):
    assert set(record.groups) <= set(BOOK.words.groups)


def test_hazard_classes_of_the_shelf_that_limits_ask_for_are_written_as_the_vocabulary_writes_them():
    """A class that differs from a known one by blanks, dots or case alone would slip through a limit."""
    squeezed = {name.lower().replace(" ", "").replace(".", ""): name for name in BOOK.words.hazard_classes}
    for record in RECORDS:
        for entry in record.hazards.entries if record.hazards else []:
            written = class_of(entry)
            known = squeezed.get(written.lower().replace(" ", "").replace(".", ""))
            assert known in (None, written), (record.id, written)


def test_every_family_a_rule_asks_for_has_a_meaning():
    for rule in BOOK.rules:
        for _, selector in selectors_of(rule):
            for name in selector.group:
                assert BOOK.words.groups[name].meaning


def test_the_bundle_is_fresh():
    """`python scripts/build_rule_book.py` makes it anew."""
    folder = built_in_folder()
    assert json.loads(BUNDLE.read_text(encoding="utf-8")) == bundle_of([folder / FILE_NAME, *rule_files(folder)])


def test_the_book_is_the_same_with_and_without_the_bundle():
    assert load_book(bundle={}).rules == BOOK.rules


def test_a_file_that_differs_from_the_bundle_is_read_itself(tmp_path: Path):
    original = next(iter(rule_files(built_in_folder())))
    changed = tmp_path / original.name
    text = original.read_text(encoding="utf-8")
    changed.write_text(text.replace("title: ", "title: Changed, ", 1), encoding="utf-8")
    document = read_document(changed, read_bundle(), most_bytes=10**6, what="a rule")
    assert document.data["title"].startswith("Changed, ")
    assert document.places  # it was parsed, so that mistakes have their line
