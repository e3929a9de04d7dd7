"""CAS numbers in rules: their check digit, and the elements a chemistry library finds in them.

Check digit: Chemical Abstracts Service, the sum of the digits times their place from the right, modulo 10.
Library: `chemicals` (general purpose), identifiers by CAS number.
"""

from __future__ import annotations

import re
from collections.abc import Iterator

import pytest

from formcheck.hazards.book import load_book
from formcheck.hazards.selector import Selector
from formcheck.hazards.vocabulary import selectors_of

BOOK = load_book()


def inner(selector: Selector) -> Iterator[Selector]:
    yield selector
    for one in selector.any_of:
        yield from inner(one)


ASKED = [(rule.id, number, one.shown_by_element) for rule in BOOK.rules for _, selector in selectors_of(rule)
         for one in inner(selector) for number in one.cas]
# Not in the library, or there under another substance: mixtures of isomers, distillates, polymers.
NAMED = {"71-43-2": "benzene", "108-88-3": "toluene", "67-56-1": "methanol", "107-21-1": "ethylene glycol",
         "111-46-6": "diethylene glycol", "872-50-4": "1-methyl-2-pyrrolidinone", "2634-33-5": "benzisothiazol",
         "112-34-5": "butoxyethoxy", "111-77-3": "methoxyethoxy", "75-09-2": "dichloromethane",
         "84-74-2": "dibutyl phthalate", "7758-97-6": "lead chromate", "598-63-0": "lead carbonate"}


def test_there_is_something_to_ask():
    assert len({number for _, number, _ in ASKED}) > 40


@pytest.mark.parametrize("number", sorted({number for _, number, _ in ASKED}))
def test_the_check_digit(number):
    *digits, check = (int(c) for c in number.replace("-", ""))
    assert sum(place * digit for place, digit in enumerate(reversed(digits), start=1)) % 10 == check


@pytest.mark.parametrize("number, name", sorted(NAMED.items()))
def test_the_substance_of_a_number(number, name):
    from chemicals.identifiers import search_chemical

    found = search_chemical(number)
    names = [found.common_name, found.iupac_name, *(found.synonyms or [])]
    assert any(name in one.lower() for one in names if one)


def test_what_an_element_shows_holds_it():
    """A rule that leaves aside what holds none of an element asks for substances that hold it."""
    from chemicals.identifiers import search_chemical

    asked = 0
    for rule_id, number, symbol in ASKED:
        if symbol is None:
            continue
        try:
            formula = search_chemical(number).formula
        except ValueError:
            continue
        asked += 1
        assert symbol in re.findall(r"[A-Z][a-z]?", formula), (rule_id, number, formula)
    assert asked > 10
