"""Element bounds: what they rest on, and that taking data away only widens them."""

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from formcheck.materials.elements import element_bounds, molar_mass, molar_mass_of
from formcheck.materials.record import Material
from formcheck.materials.shelf import find, open_shelf

BARE = open_shelf()


def material(id: str, **more) -> Material:
    return Material.model_validate({"id": id, "names": [id], "kind": "additive", **more})


def formula(text: str) -> dict:
    return {"value": text, "source": "given"}


def assay(**more) -> dict:
    return {"mg_kg": {"Pb": {"source": "given", **more}}}


def bounds(record: Material, symbol: str, *others: Material) -> tuple[float, float]:
    return element_bounds(open_shelf(own=[record, *others]), record, symbol)[:2]


def test_a_formula_fixes_the_content():
    low, high, why = element_bounds(BARE, find(BARE, "lead chromate").material, "Pb")
    # PbCrO4: 207.2 of 323.2, standard atomic weights
    assert low == high == pytest.approx(207.2 / 323.2, rel=1e-3)
    assert "PbCrO4" in why and "traces not counted" in why
    assert element_bounds(BARE, find(BARE, "water").material, "Pb")[:2] == (0, 0)


def test_without_data_anything_is_possible():
    assert element_bounds(BARE, material("x"), "Pb") == (0.0, 1.0, "no composition on record")


@pytest.mark.parametrize("given_, expected", [
    ({"value": 200.0}, (200e-6, 200e-6)),
    ({"value": 200.0, "high": 500.0}, (0, 500e-6)),
    ({"value": 200.0, "low": 100.0, "high": 500.0}, (100e-6, 500e-6)),
    ({"value": 200.0, "sd": 20.0}, (160e-6, 240e-6)),
    ({"value": 20.0, "sd": 20.0}, (0, 60e-6)),
    ({"value": 2e6}, (1, 1)),
])
def test_an_assay_comes_before_all_else(given_, expected):
    record = material("x", elements=assay(**given_), formula=formula("TiO2"))
    assert bounds(record, "Pb") == pytest.approx(expected)


def test_a_closed_list_leaves_out_every_other_element():
    record = material("x", elements={"only": ["C", "H", "O"]})
    assert bounds(record, "Pb") == (0, 0)
    assert bounds(record, "C") == (0, 1)


def test_a_composition_weighs_its_parts_and_its_undeclared_rest_may_be_anything():
    parts = [{"material": "lead chromate", "mass_fraction": 0.3, "low": 0.25, "high": 0.35,
              "source": "given"},
             {"material": "water", "mass_fraction": 0.5, "source": "given"}]
    lead = 207.2 / molar_mass("PbCrO4")
    assert bounds(material("x", composition=parts), "Pb") == pytest.approx((0.25 * lead, 0.35 * lead + 0.2))


def test_an_assay_of_a_part_counts_in_the_whole():
    paste = material("paste", elements=assay(value=1000.0),
                     composition=[{"material": "water", "mass_fraction": 1.0, "source": "given"}])
    whole = material("whole", composition=[{"material": "paste", "mass_fraction": 0.5, "source": "given"},
                                           {"material": "water", "mass_fraction": 0.5, "source": "given"}])
    assert bounds(whole, "Pb", paste) == pytest.approx((500e-6, 500e-6))


def test_a_part_that_no_shelf_holds_may_be_anything():
    parts = [{"material": "secret", "mass_fraction": 0.1, "source": "given"},
             {"material": "water", "mass_fraction": 0.9, "source": "given"}]
    low, high, why = element_bounds(BARE, material("x", composition=parts), "Pb")
    assert (low, high) == pytest.approx((0, 0.1)) and "secret" in why


def test_cadmium_and_lead_pigments_of_unstated_make_still_show_their_metal():
    for name, symbol in (("cadmium red", "Cd"), ("cadmium zinc yellow", "Cd"), ("chrome yellow", "Pb")):
        assert element_bounds(BARE, find(BARE, name).material, symbol).low > 0.4
    assert element_bounds(BARE, find(BARE, "yellow ochre").material, "Pb")[:2] == (0, 1)


def test_molar_mass_is_the_record_s_else_the_formula_s_else_unknown():
    assert molar_mass_of(material("x", formula=formula("H2O"))).value == pytest.approx(18.015, abs=1e-3)
    given_ = material("x", molar_mass_g_mol={"value": 20.0, "source": "given"}, formula=formula("H2O"))
    assert molar_mass_of(given_).value == 20
    assert not molar_mass_of(material("x")).known and molar_mass_of(material("x")).reason


leaves = st.one_of(
    st.sampled_from(["PbO", "H2O", "TiO2", "PbCrO4"]).map(lambda text: {"formula": formula(text)}),
    st.just({"elements": {"only": ["C", "H"]}}),
    st.just({"elements": {"only": ["Pb", "O"]}}),
    st.floats(0, 900_000).map(lambda value: {"elements": assay(value=value)}),
    st.just({}),
)
mixtures = st.lists(st.tuples(leaves, st.floats(0.01, 1)), min_size=1, max_size=4)


@settings(max_examples=60, deadline=None)
@given(mixtures, st.floats(0, 0.5), st.data())
def test_taking_a_datum_away_only_widens(parts, undeclared, data):
    total = sum(weight for _, weight in parts) / (1 - undeclared)
    inner = [material(f"p{n}", **leaf) for n, (leaf, _) in enumerate(parts)]
    share = [{"material": f"p{n}", "mass_fraction": weight / total, "source": "given"}
             for n, (_, weight) in enumerate(parts)]
    low, high = bounds(material("whole", composition=share), "Pb", *inner)
    assert 0 <= low <= high <= 1
    gone = data.draw(st.integers(0, len(parts) - 1))
    blank = [material(one.id) if n == gone else one for n, one in enumerate(inner)]
    fewer = share[:gone] + share[gone + 1:]
    for less_low, less_high in (
        bounds(material("whole", composition=share), "Pb", *blank),         # nothing known of a part
        bounds(material("whole", composition=fewer), "Pb", *inner),         # a part left out
        bounds(material("whole", composition=share), "Pb", *inner[:gone], *inner[gone + 1:]),  # no record
        bounds(material("whole"), "Pb", *inner),                            # no composition at all
    ):
        assert less_low <= low + 1e-12 and less_high >= high - 1e-12
