"""The examples of a rule, tried: each becomes a mixture of records and goes the way of every recipe."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

import numpy as np

from formcheck.hazards.book import Book, Written
from formcheck.hazards.compiled import answer_codes, compile_book
from formcheck.hazards.example import Example, ExampleIngredient
from formcheck.hazards.matching import COLOURANT_KINDS
from formcheck.hazards.mixture import Bounds, MixtureFacts, Scope, knowledge_of
from formcheck.hazards.rule import Rule
from formcheck.hazards.verdict import WORDS
from formcheck.hazards.vocabulary import Vocabulary
from formcheck.materials.record import Material
from formcheck.materials.shelf import open_shelf
from formcheck.trouble import trouble

HAZARD = re.compile(r"(?P<cls>.+?) (?P<code>(?:EUH|H)\d{3}[A-Za-z]*)(?: at (?P<percent>[\d.]+) ?%)?")
WATER = ExampleIngredient(percent=0.0, kind="water", nonvolatile_percent=0.0)


@dataclass(frozen=True)
class Failed:
    """An example that did not get the answer it expects."""

    rule: Rule
    number: int  # from 1, in the order of the file
    expected: str
    got: str

    def __str__(self) -> str:
        return f"{self.rule.id}, example {self.number}: expects {self.expected}, got {self.got}"


def failed_examples(rule: Rule, words: Vocabulary) -> list[Failed]:
    """The examples of the rule that get another answer than they expect."""
    found = []
    for number, example in enumerate(rule.examples, start=1):
        got = answer_to(rule, example, words)
        if got != example.expect:
            found.append(Failed(rule, number, example.expect, got))
    return found


def answer_to(rule: Rule, example: Example, words: Vocabulary) -> str:
    """The word the rule answers an example with."""
    facts = facts_of(rule, example, words)
    knowledge = knowledge_of(open_shelf(own=[]))
    book = Book({rule.id: Written(rule, rule.id, "", True)}, words)
    compiled = compile_book(book, facts.materials, knowledge, as_of=example.as_of or rule.review_by)
    return WORDS[int(answer_codes(compiled, facts)[0, 0])]


def facts_of(rule: Rule, example: Example, words: Vocabulary) -> MixtureFacts:
    """The example as facts of one recipe."""
    lines = [*example.ingredients, _rest(example)]
    fractions = [np.nan if one.percent is None else one.percent / 100 for one in lines]
    stays = [np.nan if "nonvolatile" in one.unknown else one.nonvolatile_percent / 100 for one in lines]
    ph = example.ph if isinstance(example.ph, list) else [example.ph, example.ph]
    voc = _exactly(example.voc_g_l)
    return MixtureFacts(
        materials=tuple(material_of(one, i) for i, one in enumerate(lines)),
        names=tuple(one.name or f"ingredient {i + 1}" for i, one in enumerate(lines)),
        places=("",) * len(lines), mass_fraction=np.array([fractions]),
        scopes=(_scope(rule, example, words),),
        nonvolatile_fraction=np.array(stays), ph=(_array(ph[0]), _array(ph[1])),
        voc_g_l={"ready_to_use": voc, "less_water": voc}, density_g_ml=_exactly(example.density_g_ml))


def _rest(example: Example) -> ExampleIngredient:
    """What makes up 100 %; nothing when an amount is unknown, for then nobody knows what is left."""
    told = [one.percent for one in example.ingredients if one.percent is not None]
    left = max(0.0, 100.0 - sum(told)) if len(told) == len(example.ingredients) else 0.0
    kind = example.rest or WATER
    return kind.model_copy(update={"percent": left, "name": kind.name or "the rest"})


def _array(value: float | None) -> np.ndarray:
    return np.array([np.nan if value is None else value])


def _exactly(value: float | None) -> Bounds:
    return _array(value), _array(value)


def _scope(rule: Rule, example: Example, words: Vocabulary) -> Scope:
    """The first thing of each list the rule asks for, unless the example says else."""
    when = rule.applies_when
    market = [rule.jurisdiction] if rule.jurisdiction != "any" else []
    lifted = rule.unless

    def chosen(given: Sequence[str] | None, wanted: Sequence[str], all_words: Sequence[str],
               lifting: Sequence[str]) -> tuple[str, ...]:
        if given is not None:
            return tuple(given)
        return tuple(word for word in (wanted or all_words) if word not in lifting)[:1]

    what = example.what or (when.what or list(words.what) or ["solution"])[0]
    return Scope(
        what=what, use=chosen(example.use, when.use, list(words.uses), lifted.use),
        sold_in=chosen(example.sold_in, when.sold_in or market, list(words.markets), lifted.sold_in),
        acts=chosen(example.acts, when.acts, list(words.acts), lifted.acts))


def material_of(one: ExampleIngredient, number: int) -> Material:
    """The ingredient of an example as a material record. What it does not tell is recorded as absent."""
    record: dict[str, Any] = {"id": f"ingredient_{number + 1}", "kind": one.kind,
                              "names": [one.name or f"ingredient {number + 1}"],
                              "sources": {"example": {"cite": "example of a rule", "kind": "invented_demo"}}}
    if "groups" not in one.unknown:
        record["groups"] = one.groups
    if "cas" not in one.unknown:
        record["cas"] = _text(one.cas or f"999{number}-00-0")
    if one.ci_name or ("cas" not in one.unknown and one.kind in COLOURANT_KINDS):
        record["ci_generic_name"] = _text(one.ci_name or f"Nameless {number}")
    if "charge" not in one.unknown:
        record["charge"] = _text(one.charge or "nonionic")
    if "physical_form" not in one.unknown:
        record["physical_form"] = one.physical_form or "liquid"
    if "hazards" not in one.unknown:
        record["hazards"] = _hazards(one)
    if "elements" not in one.unknown:
        record["elements"] = {"only": list(one.elements_percent), "source": "example", "mg_kg": {
            symbol: {"value": percent * 1e4, "source": "example"}
            for symbol, percent in one.elements_percent.items()}}
    if one.ph_window:
        record["ph_window"] = _window(one.ph_window)
    return Material.model_validate(record)


def _window(ends: list[float | None]) -> dict[str, Any]:
    """A window of the record: each end that is told with a consequence."""
    low = {} if ends[0] is None else {"low": ends[0], "below": "it changes"}
    high = {} if ends[1] is None else {"high": ends[1], "above": "it changes"}
    return {**low, **high, "source": "example"}


def _text(value: str) -> dict[str, str]:
    return {"value": value, "source": "example"}


def _hazards(one: ExampleIngredient) -> dict[str, Any]:
    if not one.hazards:
        return {"status": "not_classified", "source": "example"}
    entries = []
    for line in one.hazards:
        match = HAZARD.fullmatch(line.strip())
        if not match:
            raise trouble("examples", f"the hazard {line[:40]!r}",
                          "a class and a code, such as 'Carc. 1B H350'")
        percent = match["percent"]
        entries.append({"hazard_class": match["cls"], "code": match["code"], "source": "example",
                        "specific_limit_percent": float(percent) if percent else None})
    return {"status": "classified", "entries": entries, "source": "example"}
