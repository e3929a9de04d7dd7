"""Formulas: what is read, what is refused, and that masses add up."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from formcheck.materials.formula import atomic_weights, element_mass_fractions, molar_mass, parse_formula

READ = [
    ("H2O", {"H": 2, "O": 1}),
    ("CuSO4.5H2O", {"Cu": 1, "S": 1, "O": 9, "H": 10}),
    ("CuSO4·5H2O", {"Cu": 1, "S": 1, "O": 9, "H": 10}),
    ("CuSO4 * 5 H2O", {"Cu": 1, "S": 1, "O": 9, "H": 10}),
    ("CaSO4.0.5H2O", {"Ca": 1, "S": 1, "O": 4.5, "H": 1}),
    ("KAl(SO4)2.12H2O", {"K": 1, "Al": 1, "S": 2, "O": 20, "H": 24}),
    ("2PbCO3.Pb(OH)2", {"Pb": 3, "C": 2, "O": 8, "H": 2}),
    ("Fe4[Fe(CN)6]3", {"Fe": 7, "C": 18, "N": 18}),
    ("Mg5(CO3)4(OH)2.4H2O", {"Mg": 5, "C": 4, "O": 18, "H": 10}),
    ("CoCl2.6NH3", {"Co": 1, "Cl": 2, "N": 6, "H": 18}),
    ("Fe0.95O", {"Fe": 0.95, "O": 1}),
    ("CdS0.6Se0.4", {"Cd": 1, "S": 0.6, "Se": 0.4}),
    ("Zn1.2Fe1.8O4", {"Zn": 1.2, "Fe": 1.8, "O": 4}),
    ("C₃₂H₁₆CuN₈", {"C": 32, "H": 16, "Cu": 1, "N": 8}),
]
REFUSED = ["", "   ", "Xx", "h2o", "H2O-", "Na+", "(H2O", "H2O)", "(H]2", "H0", "12", "H2O.", "CuSO4..5H2O",
           "C" * 201, "(" * 13 + "H" + ")" * 13, "H9999999", "H2|O", "D2O", "Tc"]


@pytest.mark.parametrize("text, atoms", READ)
def test_reads(text, atoms):
    assert parse_formula(text) == atoms


@pytest.mark.parametrize("text", REFUSED)
def test_refuses_and_says_what_is_wrong(text):
    with pytest.raises(ValueError, match=r".+\|.+"):
        parse_formula(text)


symbols = st.sampled_from(sorted(atomic_weights()))
units = st.dictionaries(symbols, st.integers(1, 30), min_size=1, max_size=5)


def written(unit: dict[str, int]) -> str:
    return "".join(symbol + (str(n) if n > 1 else "") for symbol, n in unit.items())


@given(units, units, st.integers(1, 12))
def test_a_bracket_multiplies_and_a_hydrate_adds(inner, outer, n):
    text = f"{written(outer)}({written(inner)}){n}·{n}H2O"
    assert molar_mass(text) == pytest.approx(
        molar_mass(written(outer)) + n * molar_mass(written(inner)) + n * molar_mass("H2O"), rel=1e-12)


@given(units)
def test_fractions_sum_to_one(unit):
    fractions = element_mass_fractions(written(unit))
    assert set(fractions) == set(unit)
    assert sum(fractions.values()) == pytest.approx(1, rel=1e-12)


@given(st.text(max_size=40))
def test_any_text_is_read_or_refused(text):
    try:
        atoms = parse_formula(text)
    except ValueError as error:
        found, expected = str(error).rsplit("|", 1)
        assert found and expected
    else:
        assert all(n > 0 for n in atoms.values())
