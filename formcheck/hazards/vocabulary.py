"""The words that rules and material records share: families, hazard classes, markets, uses, acts.

`hazard_rules/vocabulary.yaml` holds formcheck's own; a user's pack may add its own file of that name.
A rule that uses a word the vocabulary does not hold is refused, so that no rule is dead by a slip.
"""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path
from typing import Annotated, Any

from pydantic import Field

from formcheck.documents import MOST_BYTES, Document, FieldPath, path_text, validate
from formcheck.hazards.bundle import read_document
from formcheck.hazards.rule import Caution, LimitOnSum, MustNotMeet, PhWindow, Rule
from formcheck.hazards.selector import Selector
from formcheck.materials.record import MaterialKind
from formcheck.strict import Strict
from formcheck.trouble import InputError, Problem, shown, suggestion

FILE_NAME = "vocabulary.yaml"


class Family(Strict):
    """A family of materials. An ingredient of which too little is known may belong to it only when its
    kind is one of `kinds`; an empty list means any kind."""

    meaning: str
    kinds: list[MaterialKind] = Field(default_factory=list)


class HazardClass(Strict):
    """A hazard class. `generic_limit_percent`: the largest generic limit of any scheme, above which a
    product would carry the class; a product classified without it holds less of each such substance."""

    codes: list[str]
    generic_limit_percent: Annotated[float, Field(gt=0, le=100)] | None = None


class Market(Strict):
    meaning: str
    members: list[str] = Field(default_factory=list)


class Vocabulary(Strict):
    groups: dict[str, Family] = Field(default_factory=dict)
    hazard_classes: dict[str, HazardClass] = Field(default_factory=dict)
    markets: dict[str, Market] = Field(default_factory=dict)
    what: dict[str, str] = Field(default_factory=dict)
    uses: dict[str, str] = Field(default_factory=dict)
    acts: dict[str, str] = Field(default_factory=dict)

    def with_more(self, other: Vocabulary) -> Vocabulary:
        """Both together; a word of `self` keeps its meaning."""
        return Vocabulary(**{name: {**getattr(other, name), **getattr(self, name)}
                             for name in type(self).model_fields})

    def market_of(self, code: str) -> list[str]:
        """The markets a code belongs to: `DE` is in `DE` and `EU`."""
        return [code, *(name for name, market in self.markets.items() if code in market.members)]


def read_vocabulary(folder: Path, bundle: dict[str, Any] | None = None) -> Vocabulary:
    """The vocabulary of one pack; empty where the folder has none."""
    path = folder / FILE_NAME
    if not path.is_file():
        return Vocabulary()
    what = "a vocabulary of rules"
    return validate(Vocabulary, read_document(path, bundle or {}, most_bytes=MOST_BYTES, what=what))


def refuse_unknown_words(rule: Rule, words: Vocabulary, document: Document) -> None:
    """Raise InputError for every word of the rule that the vocabulary does not hold."""
    problems = []
    for path, word, known in _words_used(rule, words):
        if word not in known:
            found = f"{shown(word)}, which the vocabulary does not hold"
            right = suggestion(word, list(known))
            problems.append(Problem(document.place(path), found, right, path_text(path)))
    if problems:
        raise InputError(problems)


def _words_used(rule: Rule, words: Vocabulary) -> Iterator[tuple[FieldPath, str, list[str]]]:
    markets = [*words.markets, *(m for market in words.markets.values() for m in market.members)]
    yield ("jurisdiction",), rule.jurisdiction, [*words.markets, "any"]
    for field in ("applies_when", "unless"):
        where = getattr(rule, field)
        for name, known in (("what", list(words.what)), ("use", list(words.uses)), ("sold_in", markets),
                            ("acts", list(words.acts))):
            for i, word in enumerate(getattr(where, name)):
                yield (field, name, i), word, known
    for path, selector in selectors_of(rule):
        yield from _words_selected(path, selector, words)


def selectors_of(rule: Rule) -> Iterator[tuple[FieldPath, Selector]]:
    """Every selector of a rule with its path in the file."""
    if isinstance(rule, LimitOnSum):
        for i, term in enumerate(rule.quantity.of):
            if term.share is not None:
                yield ("quantity", "of", i, "share"), term.share
        for k, condition in enumerate(rule.only_if):
            for i, term in enumerate(condition.of):
                if term.share is not None:
                    yield ("only_if", k, "of", i, "share"), term.share
    elif isinstance(rule, MustNotMeet):
        yield ("first", "where"), rule.first.where
        yield ("second", "where"), rule.second.where
    elif isinstance(rule, (PhWindow, Caution)):
        yield ("where",), rule.where


def _words_selected(path: FieldPath, selector: Selector, words: Vocabulary
                    ) -> Iterator[tuple[FieldPath, str, list[str]]]:
    for name, known in (("group", words.groups), ("hazard_class", words.hazard_classes),
                        ("shown_by_class", words.hazard_classes)):
        for i, word in enumerate(getattr(selector, name)):
            yield (*path, name, i), word, list(known)
    for i, inner in enumerate(selector.any_of):
        yield from _words_selected((*path, "any_of", i), inner, words)
