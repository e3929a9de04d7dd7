"""Shares of the forms of a dye, and their uncertainty."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from formcheck.acid_base.forms import form_fraction_sd, form_fraction_slopes, form_fractions

NAN = np.nan


def test_published_shares():
    # Henderson-Hasselbalch worked for bromocresol green at pH 2 (pKa 4.9): base 0.0013, acid 0.9987.
    assert form_fractions([[4.9]], 2.0)[0, 0] == pytest.approx([0.9987, 0.0013], abs=5e-5)
    # Common practice: ten to one at pKa - 1.
    assert form_fractions([[7.1]], 6.1)[0, 0, 0] == pytest.approx(10 / 11, abs=1e-9)


@settings(max_examples=60, deadline=None)
@given(st.lists(st.floats(-2, 14), min_size=1, max_size=4).map(sorted), st.floats(-2, 16), st.integers(-3, 3),
       st.floats(0, 2))
def test_shares_sum_to_one_and_follow_each_step(pka, ph, charge, strength):
    fraction = form_fractions([pka], ph, charge_fully_protonated=[charge],
                              ionic_strength_mol_kg=strength)[0, 0]
    assert fraction.sum() == pytest.approx(1.0, abs=1e-12)
    ideal = form_fractions([pka], ph)[0, 0]
    for i, step in enumerate(pka):
        if min(ideal[i], ideal[i + 1]) > 1e-6:
            assert np.log10(ideal[i + 1] / ideal[i]) == pytest.approx(ph - step, abs=1e-6)


def test_ionic_strength_pulls_a_neutral_acid_apart_and_holds_an_anion_of_a_cation_together():
    # Bates 1973: pKa' = pKa + (2 z - 1) D for acid charge z; D = 0.1067 at I = 0.1 and 25 C (Davies).
    for z in (-1, 0, 1, 2):
        acid, base = form_fractions([[5.0]], 5.0, charge_fully_protonated=[z],
                                    ionic_strength_mol_kg=0.1)[0, 0]
        assert np.log10(base / acid) == pytest.approx(-(2 * z - 1) * 0.107, abs=1e-3 * abs(2 * z - 1))


def test_dyes_with_fewer_steps_have_none_of_the_further_forms():
    fraction = form_fractions([[4.0, 9.0], [7.0, NAN], [NAN, NAN]], [3.0, 7.0, 12.0])
    assert fraction.shape == (3, 3, 3)
    assert (fraction[:, 1, 2] == 0).all() and (fraction[:, 2, 1:] == 0).all()
    assert fraction[1, 1, :2] == pytest.approx([0.5, 0.5])


def test_an_unknown_ph_gives_unknown_shares():
    fraction = form_fractions([[7.0]], [NAN, 7.0])
    assert np.isnan(fraction[0]).all() and fraction[1, 0] == pytest.approx([0.5, 0.5])
    unknown_strength = form_fractions([[7.0]], 7.0, charge_fully_protonated=[0], ionic_strength_mol_kg=NAN)
    assert np.isnan(unknown_strength).all()


def test_ionic_strength_without_charges_is_refused():
    with pytest.raises(ValueError, match="charge_fully_protonated"):
        form_fractions([[7.0]], 7.0, ionic_strength_mol_kg=0.1)


def test_pka_out_of_order_is_refused():
    with pytest.raises(ValueError, match=r"pka\[0, 1\] is 4.0"):
        form_fractions([[7.0, 4.0]], 7.0)


def test_slopes_and_standard_deviation_agree_with_differences_and_chance():
    pka, ph = np.array([[5.0, 6.2, NAN]]), np.array([5.7])
    fraction = form_fractions(pka, ph)
    by_ph, by_pka = form_fraction_slopes(fraction)
    step = 1e-6
    assert by_ph == pytest.approx((form_fractions(pka, ph + step) - fraction) / step, abs=1e-5)
    for i in range(2):
        moved = pka.copy()
        moved[0, i] += step
        assert by_pka[..., i] == pytest.approx((form_fractions(moved, ph) - fraction) / step, abs=1e-5)
    rng = np.random.default_rng(5)
    drawn_pka = pka + rng.normal(0, [0.02, 0.03, 0.0], (20000, 1, 3))
    drawn = form_fractions(drawn_pka, ph + rng.normal(0, 0.02, 20000))
    sd = form_fraction_sd(fraction, ph_sd=0.02, pka_sd=[[0.02, 0.03, NAN]])
    assert sd[0, 0] == pytest.approx(drawn[:, 0].std(axis=0), rel=0.03, abs=1e-12)
