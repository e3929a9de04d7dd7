"""Rules made from the bundle without validation are the rules that validation makes."""

from formcheck.hazards.book import load_book
from formcheck.hazards.bundle import read_bundle
from formcheck.hazards.rule import KINDS
from formcheck.hazards.trusted import trusted


def test_every_rule_of_the_bundle_is_the_validated_rule():
    validated = {rule.id: rule for rule in load_book(bundle={}).rules}
    made = [trusted(KINDS[data["kind"]], data) for data in read_bundle().values() if "kind" in data]
    assert {rule.id for rule in made} == set(validated)
    for rule in made:
        assert rule == validated[rule.id]
        assert rule.model_fields_set == validated[rule.id].model_fields_set
        assert repr(rule) == repr(validated[rule.id])


def test_a_book_without_examples_differs_in_nothing_else():
    whole, bare = load_book(), load_book(with_examples=False)
    assert [rule.model_copy(update={"examples": []}) for rule in whole.rules] == bare.rules
    assert whole.words == bare.words
