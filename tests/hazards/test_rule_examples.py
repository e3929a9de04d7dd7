"""Every rule answers its own examples, and notices when one of its figures is moved."""

from __future__ import annotations

import pytest

from formcheck.hazards.book import load_book
from formcheck.hazards.try_examples import answer_to, failed_examples

BOOK = load_book()
RULES = {rule.id: rule for rule in BOOK.rules}
LIMITS = [(rule.id, n) for rule in BOOK.rules if rule.kind == "limit_on_sum"
          for n, limit in enumerate(rule.limit) if limit.value > 0]
WINDOW_ENDS = [(rule.id, n, end) for rule in BOOK.rules if rule.kind == "ph_window"
               for n, window in enumerate(rule.window) for end in ("low", "high")
               if getattr(window, end) is not None]
CONDITIONS = [(rule.id, end) for rule in BOOK.rules if rule.kind == "must_not_meet"
              for end in ("ph_below", "ph_above") if getattr(rule.when, end) is not None]


def is_noticed(rule) -> bool:
    """Whether an example of the rule gets another answer than it expects."""
    return any(answer_to(rule, example, BOOK.words) != example.expect for example in rule.examples)


@pytest.mark.parametrize("rule_id", sorted(RULES))
def test_a_rule_answers_its_examples(rule_id):
    assert [str(one) for one in failed_examples(RULES[rule_id], BOOK.words)] == []


@pytest.mark.parametrize("factor", [0.9, 1.1])
@pytest.mark.parametrize("rule_id, n", LIMITS)
def test_a_moved_limit_is_noticed(rule_id, n, factor):
    rule = RULES[rule_id]
    moved = [one.model_copy(update={"value": one.value * factor}) if i == n else one
             for i, one in enumerate(rule.limit)]
    assert is_noticed(rule.model_copy(update={"limit": moved}))


@pytest.mark.parametrize("factor", [0.9, 1.1])
@pytest.mark.parametrize("rule_id, n, end", WINDOW_ENDS)
def test_a_moved_end_of_a_window_is_noticed(rule_id, n, end, factor):
    rule = RULES[rule_id]
    moved = [one.model_copy(update={end: getattr(one, end) * factor}) if i == n else one
             for i, one in enumerate(rule.window)]
    assert is_noticed(rule.model_copy(update={"window": moved}))


@pytest.mark.parametrize("factor", [0.9, 1.1])
@pytest.mark.parametrize("rule_id, end", CONDITIONS)
def test_a_moved_condition_of_a_pair_is_noticed(rule_id, end, factor):
    rule = RULES[rule_id]
    when = rule.when.model_copy(update={end: getattr(rule.when, end) * factor})
    assert is_noticed(rule.model_copy(update={"when": when}))


def test_the_book_is_large_and_of_many_issuers():
    packs = {written.pack for written in BOOK.written.values()}
    assert len(RULES) >= 200
    assert packs >= {"un_ghs", "eu", "us_federal", "canada", "common_practice"}


@pytest.mark.parametrize("rule_id", sorted(RULES))
def test_a_rule_speaks_plainly_and_gives_no_verdict(rule_id):
    rule = RULES[rule_id]
    text = " ".join([rule.title, rule.why, rule.what_to_do, rule.who_decides]).lower()
    for word in (" is safe", "are safe", "compliant", "approved", "harmless mixture", "http"):
        assert word not in text
    assert rule.review_by.year >= 2027
