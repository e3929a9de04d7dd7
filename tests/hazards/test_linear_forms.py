"""Quantities as linear forms: one recipe or many, split or scaled, the answer is the same."""

from __future__ import annotations

import re
from datetime import date

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from formcheck.hazards.book import load_book
from formcheck.hazards.compiled import answer_codes, compile_book, limit_values
from formcheck.hazards.judge import judge
from formcheck.hazards.mixture import knowledge_of, sum_bounds
from formcheck.materials import builtin
from formcheck.materials.shelf import open_shelf
from tests.hazards.mixtures import facts

BOOK = load_book()
DAY = date(2026, 12, 1)
IDS = ["water", "acetic_acid", "calcium_carbonate", "lead_chromate", "toluene", "benzisothiazolinone",
       "sodium_hydroxide", "acid_orange_7"]
MATERIALS = tuple(builtin.built_in(one) for one in IDS if one in builtin.index()["records"])
KNOWLEDGE = knowledge_of(open_shelf())
COMPILED = compile_book(BOOK, MATERIALS, KNOWLEDGE, as_of=DAY)
STAYS = [0.0, 0.0, 1.0, 1.0, 0.0, 1.0, 1.0, 1.0][: len(MATERIALS)]
SHARES = st.lists(st.floats(0.0, 1.0), min_size=len(MATERIALS), max_size=len(MATERIALS)).filter(
    lambda weights: sum(weights) > 0.01)


def mixture(rows, materials=MATERIALS, stays=STAYS):
    rows = np.atleast_2d(rows)
    return facts(materials, rows / np.nansum(rows, axis=1, keepdims=True), nonvolatile=stays, ph=(6.0, 6.4),
                 voc=40.0, sold_in=("EU", "US", "CA"), use=("consumer", "toy"))


def test_all_materials_of_this_test_are_on_the_shelf():
    assert len(MATERIALS) == len(IDS)


def test_many_recipes_answer_as_each_alone():
    rows = np.random.default_rng(1).random((40, len(MATERIALS))) ** 3
    rows[rows < 0.05] = 0
    many = mixture(rows)
    together = answer_codes(COMPILED, many)
    for r in range(len(rows)):
        assert (together[r] == answer_codes(COMPILED, many.only(r))[0]).all()


@settings(max_examples=20, deadline=None)
@given(SHARES, st.integers(0, len(IDS) - 1), st.floats(0.01, 0.99))
def test_an_ingredient_in_two_lines_is_one(weights, which, part):
    weights = np.array(weights)
    split = np.append(weights, weights[which] * (1 - part))
    split[which] *= part
    materials = (*MATERIALS, MATERIALS[which])
    twice = compile_book(BOOK, materials, KNOWLEDGE, as_of=DAY)
    one = answer_codes(COMPILED, mixture(weights))[0]
    two = answer_codes(twice, mixture(split, materials, [*STAYS, STAYS[which]]))[0]
    assert [BOOK.rules[q].id for q in np.flatnonzero(one != two)] == []


@settings(max_examples=20, deadline=None)
@given(SHARES, st.floats(0.001, 0.5))
def test_more_of_a_hazard_for_a_harmless_ingredient_never_lowers_a_sum(weights, moved):
    rows = np.array([weights, weights], dtype=float)
    rows[0, 0] += 1.0
    rows[1, 0] += 1.0 - moved
    rows[1, IDS.index("lead_chromate")] += moved
    rows /= rows.sum(axis=1, keepdims=True)
    values = limit_values(COMPILED, mixture(rows))
    lead = next(q for q, rule in enumerate(BOOK.rules) if rule.id == "eu-label-lead-in-paint")
    lower, upper = values[lead][0]
    assert lower[1, 0] >= lower[0, 0] - 1e-12 and upper[1, 0] >= upper[0, 0] - 1e-12


@given(st.lists(st.floats(0, 1), min_size=4, max_size=4), st.data())
def test_bounds_of_a_sum_hold_whatever_the_unknown_amounts_are(shares, data):
    """Second route: any admissible filling of the unknown amounts lies between the bounds."""
    known = np.array(shares) / max(sum(shares), 1e-9) * data.draw(st.floats(0, 1))
    filling = np.array([data.draw(st.floats(0, 1)) for _ in range(2)])
    rest = max(0.0, 1 - known.sum())
    filling = filling / filling.sum() * rest if filling.sum() > 0 else np.array([rest, 0.0])
    low = np.array([data.draw(st.floats(-1, 1)) for _ in range(6)])
    width = np.array([data.draw(st.floats(0, 1)) for _ in range(6)])
    between = low + width * data.draw(st.floats(0, 1))
    lower, upper = sum_bounds(np.append(known, [np.nan, np.nan])[None], low[None], (low + width)[None])
    true = np.append(known, filling) @ between
    assert lower[0, 0] - 1e-9 <= true <= upper[0, 0] + 1e-9


def test_known_amounts_give_bounds_only_as_wide_as_the_columns():
    lower, upper = sum_bounds(np.array([[0.25, 0.75]]), np.array([[0.0, 1.0]]), np.array([[0.4, 1.0]]))
    assert (lower[0, 0], upper[0, 0]) == pytest.approx((0.75, 0.85))


def test_answers_in_full_agree_with_the_codes():
    """`judge` and `answer_codes` are one judgement; a rule of windows may answer more than once."""
    one = mixture(np.ones(len(MATERIALS)))
    codes = dict(zip([rule.id for rule in BOOK.rules], answer_codes(COMPILED, one)[0], strict=True))
    from formcheck.hazards.verdict import WORDS

    worst: dict[str, int] = {}
    for answer in judge(COMPILED, one):
        worst[answer.rule.id] = max(worst.get(answer.rule.id, 0), WORDS.index(answer.answer))
    assert worst == {rule_id: int(code) for rule_id, code in codes.items()}


@pytest.mark.parametrize("known", [True, False])
def test_sentences_are_plain_and_give_no_verdict(known):
    ph = (6.0, 6.4) if known else None
    told = judge(COMPILED, facts(MATERIALS, np.ones((1, len(MATERIALS))) / len(MATERIALS), ph=ph,
                                 nonvolatile=STAYS if known else None, voc=40.0 if known else None))
    assert {"exceeds", "applies"} <= {one.answer for one in told}
    for one in told:
        assert not re.search(r"\b(safe|compliant|approved|nan|inf|None)\b|[{}]", one.said), one.said
        assert (one.answer == "cannot_tell") == bool(one.would_settle), one
        assert (one.grade is not None) == (one.answer in ("exceeds", "applies", "cannot_tell"))
