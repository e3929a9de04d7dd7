"""From records to pH, and the reasons where it stays unknown."""

from __future__ import annotations

import numpy as np
import pytest
from acid_base_cases import ACETIC, ETHANOL, LATEX, SALT, SODA, TITANIA, UNSAID, WATER, material

from formcheck.acid_base.mixture_ph import mixture_ph
from formcheck.acid_base.water_phase import water_phase

NAN = np.nan


def ph_of(*parts, temperature_c=25.0, **more):
    materials, fractions = [m for m, _ in parts], [[w for _, w in parts]]
    return mixture_ph(water_phase(materials, fractions, **more), temperature_c=temperature_c)


def test_vinegar():
    # CRC Handbook pKa: 0.1 mol/L acetic acid has pH 2.88 (Henderson-Hasselbalch, ideal).
    found = ph_of((WATER, 0.994), (ACETIC, 0.006))
    assert found.ph_ideal[0] == pytest.approx(2.88, abs=0.01)
    assert found.reasons == ("",) and 0.02 < found.ph_sd[0] < 0.1


def test_pigment_and_solids_take_up_no_water():
    plain = ph_of((WATER, 0.99), (SODA, 0.01)).ph[0]
    assert ph_of((WATER, 0.495), (SODA, 0.005), (TITANIA, 0.5)).ph[0] == pytest.approx(plain, abs=1e-9)


def test_salt_enters_through_the_ionic_strength():
    plain, salted = ph_of((WATER, 0.99), (SODA, 0.01)), ph_of((WATER, 0.97), (SODA, 0.01), (SALT, 0.02))
    assert salted.ionic_strength_mol_kg[0] > plain.ionic_strength_mol_kg[0] + 0.3
    as_neutral = material("Common salt", "salt", neutral=True, molar_mass=58.443)
    noted = ph_of((WATER, 0.97), (SODA, 0.01), (as_neutral, 0.02))
    assert noted.ph[0] == pytest.approx(salted.ph[0], abs=0.005)
    assert "ions" in noted.notes[0] and "Common salt" in noted.notes[0]


def test_unbuffered_water_is_unsure_by_the_carbon_dioxide_of_the_air():
    found = ph_of((WATER, 1.0))
    assert found.ph[0] == pytest.approx(7.0, abs=0.01) and found.ph_sd[0] > 0.5
    assert found.ph_with_air_co2[0] == pytest.approx(5.6, abs=0.05)


def test_heat_and_solvent_make_it_less_sure():
    sd = ph_of((WATER, 0.99), (SODA, 0.01)).ph_sd[0]
    assert ph_of((WATER, 0.99), (SODA, 0.01), temperature_c=60.0).ph_sd[0] > sd + 0.1
    assert ph_of((WATER, 0.79), (SODA, 0.01), (ETHANOL, 0.2)).ph_sd[0] > sd + 0.05


@pytest.mark.parametrize("parts, said", [
    ([(WATER, 0.99995), (UNSAID, 0.00005)], ["Basic dye", "not on its record", "0.005 %"]),
    ([(WATER, 0.5), (LATEX, 0.5)], ["Acrylic latex", "buffers"]),
    ([(WATER, 0.99), (material("Odd acid", "acid", pka=[3.0]), 0.01)], ["Odd acid", "no molar mass"]),
    ([(WATER, 0.99), (material("Empty record", molar_mass=50.0, neutral=False), 0.01)], ["Empty record"]),
    ([(ETHANOL, 1.0)], ["no water"]),
    ([(WATER, 0.5), (ETHANOL, 0.5)], ["70% of the liquid"]),
    ([(WATER, 0.1), (TITANIA, 0.9)], ["20% of the mixture"]),
    ([(WATER, 0.9), (SODA, NAN)], ["amount of Soda ash is not known"]),
    ([(WATER, NAN), (SODA, 0.1)], ["amount of Water is not known"]),
    ([(WATER, 0.6), (SODA, 0.4)], ["more than 3 mol"]),
    ([(WATER, 0.8), (SODA, 0.2)], ["ionic strength above 3"]),
    ([(WATER, 0.99), (material("Benzoic acid", "acid", pka=[4.2], molar_mass=122.1, solubility=3.4), 0.01)],
     ["more Benzoic acid than its water dissolves"]),
])
def test_unknown_with_a_reason_that_names_the_ingredient(parts, said):
    found = ph_of(*parts)
    assert np.isnan([found.ph[0], found.ph_sd[0], found.ph_ideal[0], found.ionic_strength_mol_kg[0]]).all()
    for words in said:
        assert words in found.reasons[0]


def test_an_undeclared_part_is_unknown_and_needs_a_name():
    found = ph_of((WATER, 0.9), (None, 0.1), names=["Water", "the rest of Dispersion Q"])
    assert "the rest of Dispersion Q" in found.reasons[0]
    with pytest.raises(ValueError, match="names"):
        ph_of((WATER, 0.9), (None, 0.1))


def test_water_too_hot_is_unknown():
    assert "0 to 100" in ph_of((WATER, 1.0), temperature_c=150.0).reasons[0]


def test_what_is_absent_from_one_recipe_does_not_trouble_it():
    phase = water_phase([WATER, UNSAID, SODA], [[0.99, 0.0, 0.01], [0.98, 0.01, 0.01]])
    found = mixture_ph(phase)
    assert np.isfinite(found.ph[0]) and np.isnan(found.ph[1])
    assert found.reasons[0] == "" and "Basic dye" in found.reasons[1]


@pytest.mark.parametrize("field", ["acid_base", "molar_mass_g_mol"])
def test_taking_a_datum_away_never_leaves_a_number(field):
    bare = SODA.model_copy(update={field: None})
    assert np.isnan(ph_of((WATER, 0.99), (bare, 0.01)).ph[0])


def test_weighing_error_enters():
    phase = water_phase([WATER, ACETIC, SODA], [[0.98, 0.012, 0.008]])
    assert mixture_ph(phase, relative_amount_sd=0.05).ph_sd[0] > mixture_ph(phase).ph_sd[0]


def test_mixtures_without_pka_at_all():
    lye = material("Lye", "base", counter_charge=1, molar_mass=40.0)
    # Strong base, 0.1 mol/kg at 25 C: pH 12.88 with the mean coefficient 0.77 (CRC Handbook, from memory).
    assert ph_of((WATER, 0.996), (lye, 0.004)).ph[0] == pytest.approx(12.88, abs=0.02)
