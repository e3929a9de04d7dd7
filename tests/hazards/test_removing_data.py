"""Taking a datum away never turns a flag into a pass, nor lets it fall silent: over the whole book."""

from __future__ import annotations

from dataclasses import replace
from datetime import date

import numpy as np
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from formcheck.hazards.book import load_book
from formcheck.hazards.compiled import answer_codes, compile_book
from formcheck.hazards.mixture import knowledge_of
from formcheck.hazards.verdict import APPLIES, CANNOT_TELL, EXCEEDS
from formcheck.materials import builtin
from formcheck.materials.record import Material
from formcheck.materials.shelf import open_shelf
from tests.hazards.mixtures import SOURCES, facts

BOOK = load_book()
DAY = date(2026, 12, 1)
SHELF = sorted(builtin.index()["records"])
# What a record may lose without ceasing to be a record.
FIELDS = ["physical_form", "ci_generic_name", "ci_constitution_number", "cas", "formula", "composition",
          "elements", "groups", "charge", "ph_window", "hazards", "nonvolatile_fraction", "molar_mass_g_mol"]
USES = st.lists(st.sampled_from(sorted(BOOK.words.uses)), min_size=1, max_size=3, unique=True)
ACTS = st.lists(st.sampled_from(sorted(BOOK.words.acts)), min_size=1, max_size=3, unique=True)
MARKETS = st.lists(st.sampled_from(["EU", "US", "CA", "DE"]), min_size=1, max_size=3, unique=True)
PASTES = st.sampled_from(SHELF)


@st.composite
def own_records(draw) -> list[dict]:
    """Products of a workshop: a composition of built-in materials, declared in part or in whole."""
    parts = draw(st.lists(PASTES, min_size=1, max_size=3, unique=True))
    share = draw(st.floats(0.05, 1.0)) / len(parts)
    return [{"id": "paste", "names": ["paste"], "kind": draw(st.sampled_from(["dispersion", "additive"])),
             "sources": SOURCES, "groups": [],
             "composition": [{"material": p, "mass_fraction": share, "source": "test"} for p in parts]}]


@st.composite
def recipes(draw):
    """Ingredients by id, their shares, and what is known of the whole."""
    own = draw(own_records())
    ids = ["paste", *draw(st.lists(st.sampled_from(SHELF), min_size=1, max_size=4, unique=True))]
    weights = np.array([draw(st.floats(0.001, 1.0)) for _ in ids])
    ph = draw(st.sampled_from([1.0, 4.0, 7.0, 9.5, 13.0]))
    whole = {"what": draw(st.sampled_from(sorted(BOOK.words.what))), "use": draw(USES), "sold_in": draw(MARKETS),
                 "acts": draw(ACTS), "ph": (ph, ph + 0.2), "voc": draw(st.floats(0, 900)), "density": 1.1,
                 "nonvolatile": [draw(st.sampled_from([0.0, 0.4, 1.0])) for _ in ids]}
    return own, ids, weights / weights.sum(), whole


def codes_of(own, records, fractions, whole):
    """Answers of the whole book; `records` are data or ready records."""
    mine = [Material.model_validate(one) for one in own]
    materials = [next((m for m in mine if m.id == one), None) or builtin.built_in(one)
                 if isinstance(one, str) else one for one in records]
    knowledge = knowledge_of(open_shelf(own=mine))
    given_facts = facts(materials, [fractions], **whole)
    compiled = compile_book(BOOK, given_facts.materials, knowledge, as_of=DAY)
    return answer_codes(compiled, given_facts)[0]


def assert_no_flag_is_lost(before, after, what):
    flagged = (before == EXCEEDS) | (before == APPLIES)
    kept = (after == EXCEEDS) | (after == APPLIES) | (after == CANNOT_TELL)
    lost = [BOOK.rules[q].id for q in np.flatnonzero(flagged & ~kept)]
    assert not lost, f"{what}: {lost}"


def assert_nothing_unknown_passes(before, after, what):
    """More strictly: what could not be told is not told by knowing less."""
    fallen = (before == CANNOT_TELL) & ((after != EXCEEDS) & (after != APPLIES) & (after != CANNOT_TELL))
    lost = [BOOK.rules[q].id for q in np.flatnonzero(fallen)]
    assert not lost, f"{what}: {lost}"


def without(record: Material, field: str) -> Material:
    data = {name: value for name, value in record.model_dump().items()
            if name in record.model_fields_set and name != field}
    return Material.model_validate(data)


@settings(max_examples=12, deadline=None, suppress_health_check=list(HealthCheck))
@given(recipes(), st.data())
def test_a_record_loses_a_datum(recipe, data):
    own, ids, fractions, whole = recipe
    before = codes_of(own, ids, fractions, whole)
    mine = {one["id"]: Material.model_validate(one) for one in own}
    records = [mine.get(one) or builtin.built_in(one) for one in ids]
    which = data.draw(st.integers(0, len(ids) - 1))
    losable = [name for name in FIELDS if name in records[which].model_fields_set]
    field = data.draw(st.sampled_from(losable or ["note"]))
    records[which] = without(records[which], field)
    after = codes_of(own, records, fractions, whole)
    assert_no_flag_is_lost(before, after, f"{ids[which]} without {field}")


@settings(max_examples=12, deadline=None, suppress_health_check=list(HealthCheck))
@given(recipes(), st.data())
def test_a_recipe_loses_a_datum(recipe, data):
    own, ids, fractions, whole = recipe
    before = codes_of(own, ids, fractions, whole)
    lost = data.draw(st.sampled_from(["use", "sold_in", "acts", "ph", "voc", "density", "amount", "stays"]))
    poorer, amounts = dict(whole), fractions.copy()
    if lost == "amount":
        amounts[data.draw(st.integers(0, len(ids) - 1))] = np.nan
    elif lost == "stays":
        stays = list(whole["nonvolatile"])
        stays[data.draw(st.integers(0, len(ids) - 1))] = np.nan
        poorer["nonvolatile"] = stays
    else:
        poorer[lost] = () if lost in ("use", "sold_in", "acts") else None
    after = codes_of(own, ids, amounts, poorer)
    assert_no_flag_is_lost(before, after, f"recipe without {lost}")
    if lost != "ph":  # a pH without water contradicts the records; without the pH nothing does any more
        assert_nothing_unknown_passes(before, after, f"recipe without {lost}")


@settings(max_examples=6, deadline=None, suppress_health_check=list(HealthCheck))
@given(recipes())
def test_nothing_is_known_any_more(recipe):
    """Every datum taken away at once: nothing that was flagged falls silent."""
    own, ids, fractions, whole = recipe
    before = codes_of(own, ids, fractions, whole)
    kinds = [(builtin.built_in(one).kind if one != "paste" else own[0]["kind"]) for one in ids]
    bare = [Material(id=one, names=[one], kind=kind) for one, kind in zip(ids, kinds, strict=True)]
    nothing = {"what": whole["what"], "use": (), "sold_in": (), "acts": (), "density": None}
    after = codes_of(own, bare, np.full(len(ids), np.nan), nothing)
    assert_no_flag_is_lost(before, after, "nothing known")


def test_an_ingredient_that_is_not_there_flags_nothing():
    own = [{"id": "paste", "names": ["paste"], "kind": "binder", "sources": SOURCES}]
    whole = {"use": ("consumer",), "sold_in": ("EU",), "ph": (7.0, 7.0), "voc": 0.0, "nonvolatile": [0, 1]}
    with_it = codes_of(own, ["water", "lead_chromate" if "lead_chromate" in SHELF else SHELF[0]],
                       np.array([1.0, 0.0]), whole)
    alone = codes_of(own, ["water"], np.array([1.0]), replace_last(whole))
    assert (with_it == alone).all()


def replace_last(whole):
    return {**whole, "nonvolatile": [0]}


def test_facts_of_one_recipe_of_many_are_its_own():
    water = builtin.built_in("water")
    many = facts([water], [[1.0], [0.5]], ph=7.0)
    assert replace(many.only(1), scopes=()).mass_fraction.tolist() == [[0.5]]
