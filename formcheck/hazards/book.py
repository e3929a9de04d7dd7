"""The rule book: every rule of formcheck's own packs and of the folders a user names beside them."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from datetime import date
from importlib.util import find_spec
from pathlib import Path
from typing import Any

from formcheck.documents import Document, validate
from formcheck.hazards.bundle import read_bundle, read_document
from formcheck.hazards.rule import KINDS, Rule
from formcheck.hazards.trusted import trusted
from formcheck.hazards.vocabulary import FILE_NAME, Vocabulary, read_vocabulary, refuse_unknown_words
from formcheck.trouble import InputError, Problem, shown, suggestion, trouble

MOST_FILES = 5000
MOST_BYTES_OF_A_RULE = 200_000


@dataclass(frozen=True)
class Written:
    """A rule with the file it stands in and the pack (the folder inside hazard_rules/, or the user's)."""

    rule: Rule
    file: str
    pack: str
    own: bool  # of formcheck's own packs, not of a user's folder


@dataclass(frozen=True)
class Book:
    """The rules by id, in order of their files, and the words they share."""

    written: dict[str, Written]
    words: Vocabulary

    @property
    def rules(self) -> list[Rule]:
        return [one.rule for one in self.written.values()]

    def overdue(self, as_of: date) -> list[str]:
        """Ids of the rules whose day of review is past."""
        return [rule.id for rule in self.rules if rule.review_by < as_of]


def built_in_folder() -> Path:
    """Where formcheck's own packs are installed."""
    spec = find_spec("hazard_rules")
    if spec is None or not spec.submodule_search_locations:
        raise trouble("hazard_rules", "no installed package of this name",
                      "formcheck installed with its rules")
    return Path(next(iter(spec.submodule_search_locations)))


def load_book(folders: Iterable[Path | str] = (), *, own: Path | None = None,
              bundle: dict[str, Any] | None = None, with_examples: bool = True) -> Book:
    """Read formcheck's own packs (or the folder `own` in their stead), then the user's `folders`.

    `bundle` spares the parsing of files that are in it to the byte; by default the one that is shipped.
    Judging a recipe asks for no examples: without them, rules of the bundle are not validated anew.

    Raises
    ------
    InputError
        every file that is not a rule, with its place; two rules of one id; a folder that is not there.
    """
    sources = [(own or built_in_folder(), True), *((Path(folder), False) for folder in folders)]
    bundle = read_bundle() if bundle is None else bundle
    words = Vocabulary()
    for folder, _ in sources:
        words = words.with_more(read_vocabulary(folder, bundle))
    written: dict[str, Written] = {}
    problems: list[Problem] = []
    for folder, is_own in sources:
        for path in rule_files(folder):
            try:
                one = read_rule(path, words, pack=_pack_name(folder, path), own=is_own, bundle=bundle,
                                with_examples=with_examples)
                _refuse_second_id(one, written)
            except InputError as error:
                problems.extend(error.problems)
            else:
                written[one.rule.id] = one
    if problems:
        raise InputError(problems)
    return Book(written, words)


def rule_files(folder: Path) -> list[Path]:
    """The rule files of a folder and its sub-folders, in order of their names."""
    if not folder.is_dir():
        raise trouble(str(folder), "no folder of this name", "a folder of rule files (.yaml)")
    files = sorted(path for path in folder.rglob("*.yaml") if path.name != FILE_NAME)
    if len(files) > MOST_FILES:
        raise trouble(str(folder), f"{len(files):,} files", f"at most {MOST_FILES:,} rule files")
    return files


def read_rule(path: Path, words: Vocabulary, *, pack: str = "", own: bool = False,
              bundle: dict[str, Any] | None = None, with_examples: bool = True) -> Written:
    """One rule from its file; InputError with the place of everything that is wrong."""
    document = read_document(path, bundle or {}, most_bytes=MOST_BYTES_OF_A_RULE, what="a rule file")
    if own and not with_examples and not document.places:  # out of the bundle, where only valid rules are
        data = {**document.data, "examples": []}
        return Written(trusted(KINDS[data["kind"]], data), document.file, pack, own)
    rule: Rule = validate(_model_for(document), document)
    if not rule.id.endswith(path.stem.replace("_", "-")):
        raise trouble(document.file, f"the id {shown(rule.id)} in a file named {path.name}",
                      f"a file named as the end of the id, such as {rule.id.replace('-', '_')}.yaml",
                      line=document.place(("id",)).line, field="id")
    refuse_unknown_words(rule, words, document)
    return Written(rule, document.file, pack, own)


def _model_for(document: Document):
    """The model of the kind the document names."""
    kind = document.data.get("kind") if isinstance(document.data, dict) else None
    if isinstance(kind, str) and kind in KINDS:
        return KINDS[kind]
    place = document.place(("kind",))
    found = "no `kind` here" if kind is None else f"the kind {shown(kind)}"
    line = f"`kind:` with one of {', '.join(KINDS)}"
    expected = suggestion(kind, list(KINDS)) if isinstance(kind, str) else line
    raise trouble(document.file, found, expected, line=place.line, column=place.column, field="kind")


def _pack_name(folder: Path, path: Path) -> str:
    inside = path.relative_to(folder).parts[:-1]
    return inside[0] if inside else folder.name


def _refuse_second_id(one: Written, written: dict[str, Written]) -> None:
    if one.rule.id in written:
        raise trouble(one.file, f"the id {shown(one.rule.id)}, already in {written[one.rule.id].file}",
                      "an id of its own; a rule withdrawn keeps its id and gains `until`", field="id")
