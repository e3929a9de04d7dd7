"""Density, solids, dry film and PVC, known and with data missing."""

from __future__ import annotations

import numpy as np
import pytest
from film_cases import NAN, holds, names, recipes
from hypothesis import given, settings
from hypothesis import strategies as st

from formcheck.film.pvc import pigment_volume_concentration
from formcheck.film.spreading import spreading_rate_m2_kg, spreading_rate_m2_l
from formcheck.film.thickness import dry_thickness_um, wet_thickness_um
from formcheck.film.volumes import (
    dry_volume_fractions,
    product_density,
    solids_by_mass,
    solids_by_volume,
    volumes,
)

PAINT = ("water", "titania", "calcite", "resin", "glycol")
W = np.array([[0.40, 0.25, 0.15, 0.17, 0.03]])
DENSITY = [0.998, 4.2, 2.7, 1.1, 1.04]
NONVOLATILE = [0.0, 1.0, 1.0, 1.0, 0.0]
PIGMENT = [False, True, True, False, False]


def paint(w=W, density=DENSITY, nonvolatile=NONVOLATILE):
    return volumes(w, density_g_cm3=density, nonvolatile_fraction=nonvolatile, names=PAINT)


def without(values, i):
    return [NAN if k == i else v for k, v in enumerate(values)]


def test_a_paint_worked_by_hand():
    # ISO 4618 definitions, volumes additive: cm3 per 100 g, summed on paper.
    wet = 40 / 0.998 + 25 / 4.2 + 15 / 2.7 + 17 / 1.1 + 3 / 1.04
    pigment, resin = 25 / 4.2 + 15 / 2.7, 17 / 1.1
    of = paint()
    assert product_density(of).value[0] == pytest.approx(100 / wet)
    assert solids_by_mass(of).value[0] == pytest.approx(0.57)
    assert solids_by_volume(of).value[0] == pytest.approx((pigment + resin) / wet)
    pvc = pigment_volume_concentration(of, PIGMENT)
    assert pvc.value[0] == pytest.approx(pigment / (pigment + resin))
    assert pvc.low[0] == pvc.high[0] == pvc.value[0] and pvc.reasons == ("",)
    shares = dry_volume_fractions(of)[0]
    assert shares.sum() == pytest.approx(1.0) and shares[[0, 4]] == pytest.approx(0.0)


def test_a_latex_given_whole_comes_near_its_parts():
    """Half resin of 1.10 and half water: as parts exact, as a whole within the bounds and a few percent."""
    whole_density = 1 / (0.5 / 1.10 + 0.5 / 0.998)
    whole = volumes([[0.6, 0.4]], density_g_cm3=[whole_density, 4.2], nonvolatile_fraction=[0.5, 1.0],
                    names=["latex", "titania"])
    parts = volumes([[0.3, 0.3, 0.4]], density_g_cm3=[1.10, 0.998, 4.2], nonvolatile_fraction=[1.0, 0.0, 1.0],
                    names=["resin", "water", "titania"])
    pvc_whole = pigment_volume_concentration(whole, [False, True])
    pvc_parts = pigment_volume_concentration(parts, [False, False, True])
    assert pvc_whole.low[0] < pvc_parts.value[0] < pvc_whole.high[0]
    assert pvc_whole.value[0] == pytest.approx(pvc_parts.value[0], rel=0.05)
    assert solids_by_mass(whole).value[0] == pytest.approx(solids_by_mass(parts).value[0])


@settings(max_examples=80, deadline=None)
@given(recipes())
def test_density_lies_between_the_densities_of_the_parts(recipe):
    w, density, nonvolatile = recipe
    of = volumes(w, density_g_cm3=density, nonvolatile_fraction=nonvolatile, names=names(len(density)))
    assert density.min() - 1e-9 <= product_density(of).value[0] <= density.max() + 1e-9
    assert 0 <= solids_by_volume(of).value[0] <= 1
    assert of.dry[0] + of.volatile[0] == pytest.approx(of.wet[0])


@settings(max_examples=120, deadline=None)
@given(recipes(), st.data())
def test_a_missing_datum_leaves_bounds_that_hold_the_truth(recipe, data):
    """Every figure with one datum taken away must still hold the figure with it there."""
    w, density, nonvolatile = recipe
    n = len(density)
    i = data.draw(st.integers(0, n - 1))
    pigment = data.draw(st.lists(st.booleans(), min_size=n, max_size=n))
    full = volumes(w, density_g_cm3=density, nonvolatile_fraction=nonvolatile, names=names(n))
    for lacking in (volumes(w, density_g_cm3=without(density, i), nonvolatile_fraction=nonvolatile,
                            names=names(n)),
                    volumes(w, density_g_cm3=density, nonvolatile_fraction=without(nonvolatile, i),
                            names=names(n))):
        for figure in (product_density, solids_by_mass, solids_by_volume):
            assert holds(figure(lacking), figure(full).value[0]), figure
        if nonvolatile.sum() > 0:
            assert holds(pigment_volume_concentration(lacking, pigment),
                         pigment_volume_concentration(full, pigment).value[0])


def test_an_unknown_density_of_much_is_unknown_with_the_name():
    density = product_density(paint(density=without(DENSITY, 1)))
    assert np.isnan(density.value[0]) and "no density of titania" in density.reasons[0]
    assert np.isnan(pigment_volume_concentration(paint(density=without(DENSITY, 1)), PIGMENT).value[0])


def test_an_unknown_density_of_little_is_bounded():
    w = np.array([[0.42, 0.25, 0.15, 0.17, 0.01]])
    known, lacking = product_density(paint(w)), product_density(paint(w, density=without(DENSITY, 4)))
    assert lacking.low[0] < known.value[0] < lacking.high[0]
    assert lacking.high[0] - lacking.low[0] < 0.04 and "glycol" in lacking.reasons[0]


def test_the_density_of_a_solvent_does_not_matter_to_pvc():
    pvc = pigment_volume_concentration(paint(density=without(DENSITY, 0)), PIGMENT)
    assert pvc.value[0] == pytest.approx(pigment_volume_concentration(paint(), PIGMENT).value[0])


def test_an_unknown_nonvolatile_part_bounds_the_solids():
    solids = solids_by_mass(paint(nonvolatile=without(NONVOLATILE, 3)))
    assert np.isnan(solids.value[0])
    assert (solids.low[0], solids.high[0]) == pytest.approx((0.40, 0.57))
    assert "resin" in solids.reasons[0]


def test_what_a_recipe_does_not_hold_needs_no_data():
    of = paint(np.array([[0.5, 0.25, 0.0, 0.25, 0.0], W[0]]), density=without(DENSITY, 2))
    density = product_density(of)
    assert np.isfinite(density.value[0]) and density.reasons[0] == ""
    assert np.isnan(density.value[1])


def test_an_unknown_amount_makes_all_unknown():
    of = paint(np.array([[NAN, 0.25, 0.15, 0.17, 0.03]]))
    for figure in (product_density(of), solids_by_mass(of), solids_by_volume(of),
                   pigment_volume_concentration(of, PIGMENT)):
        assert np.isnan(figure.value[0]) and "amount of water" in figure.reasons[0]


def test_one_recipe_is_a_batch_of_one():
    rng = np.random.default_rng(2)
    w = rng.dirichlet(np.ones(5), 50)
    together = pigment_volume_concentration(paint(w), PIGMENT).value
    alone = [pigment_volume_concentration(paint(w[i:i + 1]), PIGMENT).value[0] for i in range(50)]
    assert together == pytest.approx(alone, abs=1e-14)


def test_a_dye_bath_leaves_no_film_to_speak_of_but_a_solvent_leaves_none():
    of = volumes([[1.0]], density_g_cm3=[0.79], nonvolatile_fraction=[0.0], names=["solvent"])
    assert solids_by_volume(of).value[0] == 0.0
    assert np.isnan(pigment_volume_concentration(of, [False]).value[0])
    assert np.isnan(wet_thickness_um(np.array([10.0]), solids_by_volume(of)).value[0])


def test_thickness_there_and_back_and_spreading():
    solids = solids_by_volume(paint())
    dry = dry_thickness_um(np.array([120.0]), solids)
    assert wet_thickness_um(dry.value, solids).value[0] == pytest.approx(120.0)
    rate = spreading_rate_m2_l(dry.value, solids)
    assert rate.value[0] == pytest.approx(1000 / 120)  # a litre 120 um thick, wet
    per_kg = spreading_rate_m2_kg(rate, product_density(paint()))
    assert per_kg.value[0] == pytest.approx(1000 / 120 / product_density(paint()).value[0])


@pytest.mark.parametrize("w, density, nonvolatile, said", [
    ([[-0.1]], [1.0], [1.0], r"mass_fraction\[0, 0\] is -0.1"),
    ([[1.0]], [0.0], [1.0], "density_g_cm3"),
    ([[1.0]], [np.inf], [1.0], "density_g_cm3"),
    ([[1.0]], [1.0], [1.5], "nonvolatile_fraction"),
    ([[1.0, 0.0]], [1.0], [1.0], "expected"),
])
def test_what_cannot_be_meant_is_refused(w, density, nonvolatile, said):
    with pytest.raises(ValueError, match=said):
        volumes(w, density_g_cm3=density, nonvolatile_fraction=nonvolatile, names=["a"])
