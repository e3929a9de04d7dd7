"""The dose of an acid or base that reaches a wanted pH."""

from __future__ import annotations

import numpy as np
import pytest
from acid_base_cases import substances, tables
from hypothesis import given, settings
from hypothesis import strategies as st

from formcheck.acid_base.buffer import Titrant, dose_for_ph
from formcheck.acid_base.ph import dissolved, solve_ph

LYE = Titrant((), 0, 1)
HYDROCHLORIC = Titrant((), 0, -1)
ACETIC = Titrant((4.756,), 0, 0)


def ph_after(rows, titrant, dose):
    water = 1 + titrant.water_kg_mol * dose
    after = [(c / water, *rest) for c, *rest in rows]
    after.append((dose / water, list(titrant.pka), titrant.charge_fully_protonated, titrant.counter_charge))
    total, pka, charge, counter = tables(after)
    return solve_ph(total, pka, charge_fully_protonated=charge, counter_charge=counter).ph[0]


@settings(max_examples=100, deadline=None)
@given(substances, st.sampled_from([LYE, HYDROCHLORIC, ACETIC, Titrant((9.245,), 1, 0, 0.045),
                                    Titrant((), 0, 1, 0.5)]), st.floats(1.5, 12.5))
def test_the_dose_brings_the_solution_to_the_wanted_ph(rows, titrant, wanted):
    total, pka, charge, counter = tables(rows)
    solution = dissolved(total, pka, charge_fully_protonated=charge, counter_charge=counter)
    dose = dose_for_ph(solution, titrant, wanted)
    if dose.reachable[0] and dose.mol_kg[0] < 10:
        assert ph_after(rows, titrant, dose.mol_kg[0]) == pytest.approx(wanted, abs=1e-6)


def test_handbook_doses():
    # Henderson-Hasselbalch: half of an acid's amount of strong base brings it to pH = pKa (ideal).
    solution = dissolved([[0.1]], [[4.756]], charge_fully_protonated=[0], counter_charge=[0])
    assert dose_for_ph(solution, LYE, 4.756, ideal=True).mol_kg[0] == pytest.approx(0.05, abs=2e-5)
    # and 0.05 mol/kg of strong acid brings plain water to pH 1.30 (ideal)
    pure = dissolved(np.zeros((1, 0)), np.zeros((0, 0)), charge_fully_protonated=[], counter_charge=[])
    assert dose_for_ph(pure, HYDROCHLORIC, -np.log10(0.05), ideal=True).mol_kg[0] == pytest.approx(0.05)


def test_the_wrong_kind_and_a_too_weak_titrant_cannot_reach():
    water = dissolved(np.zeros((1, 0)), np.zeros((0, 0)), charge_fully_protonated=[], counter_charge=[])
    assert not dose_for_ph(water, HYDROCHLORIC, 10.0).reachable[0]
    assert not dose_for_ph(water, Titrant((4.756,), 0, 0), 9.0).reachable[0]
    too_dilute = Titrant((), 0, 1, 1000.0)  # a thousandth molar lye cannot make pH 12
    assert not dose_for_ph(water, too_dilute, 12.0).reachable[0]


def test_recipes_and_targets_go_together():
    solution = dissolved([[0.1], [0.2]], [[4.756]], charge_fully_protonated=[0], counter_charge=[0])
    both = dose_for_ph(solution, LYE, [4.5, 5.0]).mol_kg
    one = dissolved([[0.2]], [[4.756]], charge_fully_protonated=[0], counter_charge=[0])
    assert both[1] == pytest.approx(dose_for_ph(one, LYE, 5.0).mol_kg[0], rel=1e-9)


def test_a_wanted_ph_off_the_scale_is_refused():
    solution = dissolved([[0.1]], [[4.756]], charge_fully_protonated=[0], counter_charge=[0])
    with pytest.raises(ValueError, match="wanted_ph"):
        dose_for_ph(solution, LYE, 20.0)
