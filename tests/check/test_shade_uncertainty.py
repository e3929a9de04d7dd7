"""How sure a shade is said to be: first order against many drawn recipes, and what weighing and films add."""

from __future__ import annotations

import numpy as np
import pytest
from recipes import demo_data, shade, written

from formcheck.check.acid import acid_state
from formcheck.check.colourants import colourants_of
from formcheck.check.parts import parts_of
from formcheck.check.prediction_model import prediction_model
from formcheck.check.setting import viewing_of
from formcheck.check.volumes import film_state
from formcheck.colour.cielab import lab
from formcheck.colour.tristimulus import white_point, xyz
from formcheck.recipe.batch import build_batch

DRAWN = 3000
# Recipes whose spreads are small enough for the first order: colourants measured within 5 %.
MEASURED = ["harbour_blue_screen_ink.yaml", "ember_red_gravure_ink.yaml"]
# Of optical constants and handbook bands, 20 to 60 %: bent, so that the order of size is what must agree.
ESTIMATED = ["quarry_white_wall_coating.yaml", "oak_amber_wood_stain.yaml", "madder_rose_dye_bath.yaml"]


def drawn_labs(name: str) -> np.ndarray:
    """Lab of recipes whose inputs are drawn from their spreads, by the same optics, (DRAWN, 3)."""
    recipe = written(demo_data(name))
    batch = build_batch([recipe])
    parts = parts_of(batch.shelves[0], batch.materials)
    film, acid = film_state(batch, parts, batch.shelves[0]), acid_state(batch, batch.shelves[0])
    viewing = viewing_of(recipe, parts, film)
    known = colourants_of(parts, ~(parts.fractions(batch.mass_fraction)[0] == 0))
    model = prediction_model(batch, parts, film, acid, viewing, known, 0)
    x, chance = model.inputs, np.random.default_rng(7)
    rows = np.maximum(x.value + chance.standard_normal((DRAWN, len(x.value))) * x.sd, x.lower)
    light, observer = viewing.lights[0], viewing.observer_deg
    return lab(xyz(model.spectra(rows, viewing.setting), light, observer), white_point(light, observer))


@pytest.mark.parametrize("name", MEASURED)
def test_first_order_is_what_drawn_recipes_spread(name):
    found, drawn = shade(demo_data(name)), drawn_labs(name)
    assert found.lab_sd == pytest.approx(drawn.std(axis=0), rel=0.15)
    assert found.swatch.lab == pytest.approx(drawn.mean(axis=0), abs=0.5 * max(found.lab_sd))


@pytest.mark.parametrize("name", ESTIMATED)
def test_first_order_is_of_the_size_that_drawn_recipes_spread(name):
    found, drawn = np.array(shade(demo_data(name)).lab_sd), drawn_labs(name).std(axis=0)
    total = np.sqrt((found**2).sum()), np.sqrt((drawn**2).sum())
    assert 0.6 < total[0] / total[1] < 1.7


@pytest.mark.parametrize("name", MEASURED)
def test_the_chance_to_be_within_tolerance_is_that_of_drawn_recipes(name):
    from formcheck.colour.difference import delta_e_2000

    found, drawn = shade(demo_data(name)), drawn_labs(name)
    assert found.wanted is not None and found.wanted.tolerance_de00 is not None
    away = delta_e_2000(drawn, np.array(found.wanted.swatch.lab))
    assert found.probability_within == pytest.approx((away <= found.wanted.tolerance_de00).mean(), abs=0.04)
    assert found.de00_sd == pytest.approx(away.std(), rel=0.25)


@pytest.mark.parametrize("name", [*MEASURED, *ESTIMATED])
def test_a_coarser_balance_is_never_surer(name):
    """Milligrams, decigrams, grams, and none given: what is left out can only narrow."""
    recipe = demo_data(name) | {"batch": "100 kg"}  # holds 2 g of the scarcest dye
    spreads = [np.array(shade({**recipe, "weighing": step}).lab_sd) for step in ("1 mg", "0.1 g", "1 g")]
    without = shade({key: value for key, value in recipe.items() if key != "weighing"})
    assert (spreads[0] <= spreads[1] + 1e-9).all() and (spreads[1] <= spreads[2] + 1e-9).all()
    assert (np.array(without.lab_sd) <= spreads[0] + 1e-9).all()
    assert any("weighing" in said for said in without.left_out)


def test_a_film_said_to_be_even_is_surer_and_says_so():
    recipe = demo_data("ember_red_gravure_ink.yaml")
    even = shade({**recipe, "film": {"wet": recipe["film"]["wet"]}})
    assert sum(even.lab_sd) < sum(shade(recipe).lab_sd)
    assert any("unevenness" in said for said in even.left_out)


def test_what_dominates_is_what_is_least_known():
    recipe = demo_data("harbour_blue_screen_ink.yaml") | {"weighing": "100 g"}
    assert shade(recipe).dominated_by.startswith("weighing")
    recipe = demo_data("harbour_blue_screen_ink.yaml") | {"film": {"wet": "24 um", "sd": "12 um"}}
    assert shade(recipe).dominated_by.startswith("film thickness")


def test_the_band_of_the_spectrum_holds_the_value():
    of = shade(demo_data("quarry_white_wall_coating.yaml")).spectrum
    low, value, high = np.array(of.low), np.array(of.value), np.array(of.high)
    assert (low <= value).all() and (value <= high).all() and (high - low).max() > 0.01
    assert (low >= 0).all() and (high <= 1).all()


def test_the_same_recipe_always_gives_the_same_region():
    one, other = (shade(demo_data("estimated_cyanine_ink.yaml")) for _ in range(2))
    assert one == other
