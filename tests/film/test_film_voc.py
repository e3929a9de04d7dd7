"""VOC columns and figures, and what missing data leave of them."""

from __future__ import annotations

import numpy as np
import pytest
from film_cases import NAN, holds, names, recipes
from hypothesis import given, settings
from hypothesis import strategies as st

from formcheck.film.voc import (
    VolatileFraction,
    voc_by_boiling_point,
    voc_by_evaporation,
    voc_less_water_g_l,
    voc_mass_fraction,
    voc_ready_to_use_g_l,
)
from formcheck.film.volumes import volumes


def column(bp, organic=1.0, nonvolatile=NAN, limit=250.0):
    found = voc_by_boiling_point([bp], highest_boiling_point_c=limit, organic=[organic],
                                 nonvolatile_fraction=[nonvolatile])
    return float(found.low[0]), float(found.high[0])


@pytest.mark.parametrize("what, arguments, expected", [
    ("ethanol, boils at 78 C", (78.0, 1.0, 0.0), (1.0, 1.0)),
    ("butyl diglycol, 231 C, by boiling point alone", (231.0, 1.0, NAN), (1.0, 1.0)),
    ("glycerol, 290 C, though it evaporates in an oven", (290.0, 1.0, 0.1), (0.0, 0.0)),
    ("exactly at the limit", (250.0, 1.0, 0.0), (1.0, 1.0)),
    ("ammonia is not organic", (-33.0, 0.0, 0.0), (0.0, 0.0)),
    ("resin solution, solvent boils at 140 C", (140.0, 1.0, 0.6), (0.4, 0.4)),
    ("no boiling point, half evaporates", (NAN, 1.0, 0.5), (0.0, 0.5)),
    ("a pigment: nothing evaporates", (NAN, 1.0, 1.0), (0.0, 0.0)),
    ("nothing known", (NAN, 1.0, NAN), (0.0, 1.0)),
    ("nothing known, not even whether organic", (NAN, NAN, NAN), (0.0, 1.0)),
    ("camphor-like: boils at 209 C yet nonvolatile by test", (209.0, 1.0, 1.0), (0.0, 1.0)),
])
def test_what_counts_by_boiling_point(what, arguments, expected):
    assert column(*arguments) == pytest.approx(expected), what


def test_the_limit_is_the_callers():
    assert column(231.0, limit=200.0) == (0.0, 0.0)


def test_what_counts_by_evaporation():
    # 40 CFR 51.100(s): acetone is exempt; water and ammonia are not organic.
    found = voc_by_evaporation([0.0, 0.0, 0.0, 1.0, NAN], organic=[1, 1, 0, 1, 1],
                               exempt=[False, True, False, False, False])
    assert found.low.tolist() == [1.0, 0.0, 0.0, 0.0, 0.0]
    assert found.high.tolist() == [1.0, 0.0, 0.0, 0.0, 1.0]


@settings(max_examples=80, deadline=None)
@given(recipes(), st.data())
def test_a_missing_datum_never_lowers_the_upper_bound(recipe, data):
    w, density, nonvolatile = recipe
    n = len(density)
    i = data.draw(st.integers(0, n - 1))
    boiling = np.array(data.draw(st.lists(st.sampled_from([78.0, 231.0, 290.0]), min_size=n, max_size=n)))
    organic = np.array(data.draw(st.lists(st.sampled_from([0.0, 1.0]), min_size=n, max_size=n)))
    boiling = np.where(nonvolatile == 1, 290.0, boiling)  # data that do not contradict each other

    def figure(boiling=boiling, density=density, nonvolatile=nonvolatile, organic=organic):
        volatile = voc_by_boiling_point(boiling, highest_boiling_point_c=250.0, organic=organic,
                                        nonvolatile_fraction=nonvolatile)
        of = volumes(w, density_g_cm3=density, nonvolatile_fraction=nonvolatile, names=names(n))
        return voc_ready_to_use_g_l(voc_mass_fraction(w, volatile, names=names(n)), of)

    def lacking(values):
        return np.where(np.arange(n) == i, NAN, values)

    full = figure()
    for poorer in (figure(boiling=lacking(boiling)), figure(density=lacking(density)),
                   figure(nonvolatile=lacking(nonvolatile)), figure(organic=lacking(organic))):
        assert np.isnan(poorer.high[0]) or poorer.high[0] >= full.high[0] * (1 - 1e-9)
    truth = full.value[0] if np.isfinite(full.value[0]) else full.low[0]
    assert holds(figure(boiling=lacking(boiling)), truth)


def test_a_little_of_unknown_volatility_keeps_a_value_and_much_does_not():
    volatile = VolatileFraction(np.array([0.0, 0.0]), np.array([0.0, 1.0]))
    little = voc_mass_fraction([[0.99, 0.01]], volatile, names=["water", "defoamer"])
    assert little.value[0] == pytest.approx(0.005) and "defoamer" in little.reasons[0]
    much = voc_mass_fraction([[0.9, 0.1]], volatile, names=["water", "defoamer"])
    assert np.isnan(much.value[0]) and (much.low[0], much.high[0]) == pytest.approx((0.0, 0.1))


def test_an_unknown_amount_is_unknown():
    volatile = VolatileFraction(np.array([0.0, 1.0]), np.array([0.0, 1.0]))
    found = voc_mass_fraction([[0.9, NAN]], volatile, names=["water", "ethanol"])
    assert np.isnan(found.value[0]) and "ethanol" in found.reasons[0]


def test_pure_water_has_nothing_less_water():
    of = volumes([[1.0]], density_g_cm3=[0.998], nonvolatile_fraction=[0.0], names=["water"])
    none = VolatileFraction(np.array([0.0]), np.array([0.0]))
    voc = voc_mass_fraction([[1.0]], none, names=["water"])
    assert voc_ready_to_use_g_l(voc, of).value[0] == 0.0
    assert np.isnan(voc_less_water_g_l(voc, of, [True]).value[0])
