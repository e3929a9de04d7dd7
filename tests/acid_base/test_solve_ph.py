"""The pH solver against another route to the same chemistry, and what must hold of every mixture."""

from __future__ import annotations

import numpy as np
import pytest
from acid_base_cases import ph_by_brentq, substances, tables
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from formcheck.acid_base.forms import form_fractions
from formcheck.acid_base.ph import dissolved, solve_ph
from formcheck.acid_base.sensitivity import ph_slopes

NAN = np.nan


def solve(rows, **more):
    total, pka, charge, counter = tables(rows)
    return solve_ph(total, pka, charge_fully_protonated=charge, counter_charge=counter, **more)


@settings(max_examples=120, deadline=None)
@given(substances)
def test_agrees_with_a_root_finder_on_the_mass_action_laws(rows):
    state = solve(rows)
    assert state.ph_ideal[0] == pytest.approx(ph_by_brentq(rows, ideal=True), abs=1e-6)
    assert state.ph[0] == pytest.approx(ph_by_brentq(rows), abs=1e-6)


@settings(max_examples=150, deadline=None)
@given(substances)
def test_charge_and_mass_balance(rows):
    """Summed anew from the fractions of every form at the pH found."""
    total, pka, charge, counter = tables(rows)
    state = solve_ph(total, pka, charge_fully_protonated=charge, counter_charge=counter)
    assert state.settled[0]
    assert abs(state.residual_mol_kg[0]) <= 1e-10
    fraction = form_fractions(pka, state.ph, charge_fully_protonated=charge,
                              ionic_strength_mol_kg=state.ionic_strength_mol_kg)
    assert fraction.sum(axis=-1) == pytest.approx(1.0, abs=1e-12)
    z = charge[:, None] - np.arange(pka.shape[1] + 1)
    d = state.davies_d[0]
    net = (10 ** (d - state.ph[0]) - 10 ** (state.ph[0] - water_pkw() + d)
           + (total[0] * ((fraction[0] * z).sum(axis=1) + counter)).sum())
    assert abs(net) <= 1e-10


def water_pkw():
    from formcheck.acid_base.water import pkw
    return float(pkw(25.0))


@settings(max_examples=80, deadline=None)
@given(substances, st.floats(1e-6, 0.5))
def test_added_base_raises_the_ideal_ph_and_acid_lowers_it(rows, amount):
    plain = solve(rows).ph_ideal[0]
    assert solve([*rows, (amount, [], 0, 1)]).ph_ideal[0] >= plain - 1e-9
    assert solve([*rows, (amount, [], 0, -1)]).ph_ideal[0] <= plain + 1e-9


def test_added_base_raises_the_corrected_ph_along_a_titration():
    base = np.linspace(0, 0.3, 400)
    total = np.column_stack([np.full_like(base, 0.1), base])
    ph = solve_ph(total, [[3.128, 4.761, 6.396], [NAN] * 3], charge_fully_protonated=[0, 0],
                  counter_charge=[0, 1]).ph
    assert (np.diff(ph) > 0).all()


def test_one_recipe_is_a_batch_of_one():
    rng = np.random.default_rng(3)
    total = 10 ** rng.uniform(-5, 0, (5000, 4))
    arguments = {"charge_fully_protonated": [0, 1, 0, -1], "counter_charge": [1, 0, -1, 1]}
    pka = [[2.1, 7.2, 12.3], [9.25, NAN, NAN], [NAN] * 3, [NAN] * 3]
    together = solve_ph(total, pka, **arguments)
    for i in (0, 17, 4095, 4096, 4999):
        alone = solve_ph(total[i:i + 1], pka, **arguments)
        assert together.ph[i] == pytest.approx(alone.ph[0], abs=1e-10)
        assert together.ionic_strength_mol_kg[i] == pytest.approx(alone.ionic_strength_mol_kg[0], rel=1e-9)


def test_no_recipes_give_empty_arrays():
    state = solve_ph(np.zeros((0, 1)), [[4.76]], charge_fully_protonated=[0], counter_charge=[0])
    assert state.ph.shape == (0,)


def test_buffer_capacity_is_the_slope_of_the_titration():
    # Van Slyke: beta = dC_base/dpH, taken at constant ionic strength; ideal activities by a huge dilution.
    rows = [(1e-4, [4.756], 0, 0), (5e-5, [], 0, 1)]
    step = 1e-8
    more = solve([*rows, (step, [], 0, 1)]).ph_ideal[0] - solve(rows).ph_ideal[0]
    assert solve(rows).buffer_capacity_mol_kg[0] == pytest.approx(step / more, rel=0.02)


def test_pka_may_differ_from_recipe_to_recipe():
    pka = np.array([[[4.0]], [[5.0]]])
    both = solve_ph([[0.1], [0.1]], pka, charge_fully_protonated=[0], counter_charge=[0]).ph
    each = [solve([(0.1, [p], 0, 0)]).ph[0] for p in (4.0, 5.0)]
    assert both == pytest.approx(each, abs=1e-12)


def test_an_unknown_amount_leaves_only_its_own_recipe_unknown():
    state = solve_ph([[NAN, 0.1], [0.1, 0.1]], [[4.76], [9.25]], charge_fully_protonated=[0, 1],
                     counter_charge=[0, 0])
    assert np.isnan(state.ph[0]) and not state.settled[0]
    assert state.ph[1] == pytest.approx(solve([(0.1, [4.76], 0, 0), (0.1, [9.25], 1, 0)]).ph[0], abs=1e-12)


def test_salt_beyond_davies_is_flagged_and_stays_finite():
    state = solve([(1.0, [], -1, 1), (0.01, [4.76], 0, 0)])
    assert state.ionic_strength_mol_kg[0] == pytest.approx(1.0, abs=1e-3)
    assert state.beyond_davies[0] and np.isfinite(state.ph[0])
    assert not solve([(0.4, [], -1, 1)]).beyond_davies[0]


def test_an_acid_stronger_than_the_scale_has_no_ph():
    assert np.isnan(solve([(300.0, [], 0, -1)]).ph[0])


@pytest.mark.parametrize("total, pka, said", [
    ([[-0.1]], [[4.76]], r"total_mol_kg\[0, 0\] is -0.1"),
    ([[np.inf]], [[4.76]], "total_mol_kg"),
    ([[0.1]], [[7.0, 4.0]], "rising order"),
    ([[0.1]], [[NAN, 4.0]], "rising order"),
    ([[0.1, 0.2]], [[4.76]], "expected"),
])
def test_what_cannot_be_meant_is_refused(total, pka, said):
    with pytest.raises(ValueError, match=said):
        solve_ph(total, pka, charge_fully_protonated=[0], counter_charge=[0])


@settings(max_examples=40, deadline=None)
@given(substances)
def test_slopes_agree_with_differences(rows):
    total, pka, charge, counter = tables(rows)
    arguments = {"charge_fully_protonated": charge, "counter_charge": counter}
    solution = dissolved(total, pka, **arguments)
    state = solve_ph(total, pka, **arguments)
    assume(state.buffer_capacity_mol_kg[0] > 1e-4 and state.ionic_strength_mol_kg[0] > 0.51)
    step = 1e-5  # where D is held constant the slopes are exact
    slopes = ph_slopes(solution, state)
    for s, i in np.argwhere(~np.isnan(pka)):
        if i + 1 < pka.shape[1] and pka[s, i + 1] < pka[s, i] + step:
            continue
        moved = pka.copy()
        moved[s, i] += step
        found = (solve_ph(total, moved, **arguments).ph[0] - state.ph[0]) / step
        assert slopes.by_pka[0, s, i] == pytest.approx(found, abs=2e-3)
    for s in range(len(rows)):
        moved = total.copy()
        moved[0, s] += step * 1e-2
        found = (solve_ph(moved, pka, **arguments).ph[0] - state.ph[0]) / (step * 1e-2)
        assert slopes.by_total[0, s] == pytest.approx(found, rel=0.02, abs=1e-3)
