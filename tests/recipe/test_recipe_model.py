"""What a recipe file may say, and how what it may not say is told."""

from __future__ import annotations

import re

import pytest

from formcheck.documents import parse_yaml, validate
from formcheck.recipe.markets import markets, markets_reached
from formcheck.recipe.model import Recipe
from formcheck.trouble import InputError

GOOD = """\
formcheck: 1
title: Tidepool blue
what: stain
use: [consumer, wood]
sold_in: [EU, CA]
ingredients:
  - {material: water, amount: to make up, note: warm}
  - {material: Basic Blue 9, amount: 12 g/L, purity: 82 %}
batch: 2 L
film: {dry: 12 um, sd: 2 um}
path_length: 10 mm
ground: {spectrum: oak.csv, column: planed}
wanted: {lab: [40, -5, -30], light: D50, observer: 2, tolerance: 2.5}
lights: [D65, A]
observer: 2
specular: excluded
measured: {ph: 6.5, ph_sd: 0.1, density_g_cm3: 1.01, temperature_c: 21}
binder_index: 1.49
weighing: 10 mg
acts: [dry_weighing, brushing]
shelf: shelf
"""


def read(text: str) -> Recipe:
    return validate(Recipe, parse_yaml(text, "a.yaml"))


def problem(text: str) -> str:
    with pytest.raises(InputError) as caught:
        read(text)
    return str(caught.value)


def test_everything_a_recipe_may_say_is_read():
    recipe = read(GOOD)
    assert recipe.film and recipe.film.thickness_um == 12 and recipe.film.sd_um == 2
    assert recipe.path_length_cm == 1 and recipe.balance_step_g == 0.01
    assert recipe.ingredients[1].purity_fraction == pytest.approx(0.82)
    assert recipe.wanted and recipe.wanted.lab == [40, -5, -30] and recipe.wanted.observer == 2
    assert recipe.ground is not None and not isinstance(recipe.ground, str)
    assert recipe.ground.spectrum == "oak.csv" and recipe.ground.column == "planed"


def test_four_fields_are_enough():
    recipe = read("formcheck: 1\ntitle: x\nwhat: ink\ningredients: [{material: water, amount: 1 g}]\n")
    assert recipe.sold_in == [] and recipe.film is None and recipe.observer == 10
    for field in ("formcheck: 1", "title: x", "what: ink"):
        text = "formcheck: 1\ntitle: x\nwhat: ink\ningredients: [{material: water, amount: 1 g}]\n"
        assert f"no {field.split(':')[0]!r} here" in problem(text.replace(field + "\n", ""))


@pytest.mark.parametrize("old, new, place, found, expected", [
    ("title:", "titel:", "a.yaml:2:1", "the unknown key 'titel'", "did you mean 'title'?"),
    ("what: stain", "what: stane", "a.yaml:3:1", "'stane'", "did you mean 'stain'?"),
    ("[consumer, wood]", "[consumer, would]", "a.yaml:4:17", "'would'", "did you mean 'wood'?"),
    ("[EU, CA]", "[EU, UK]", "a.yaml:5:15", "'UK'", "did you mean 'GB'?"),
    ("[EU, CA]", "[EU, Canada]", "a.yaml:5:15", "'Canada'", "did you mean 'CA'?"),
    ("[EU, CA]", "[EU, QQ]", "a.yaml:5:15", "'QQ'", "ISO 3166-1"),
    ("12 g/L", "12", "a.yaml:8:30", "12 without a unit", "'300 g'"),
    ("12 g/L", "'12,5 g/L'", "a.yaml:8:30", "'12,5 g/L'", "decimal point"),
    ("12 g/L", "12 pints", "a.yaml:8:30", "the unit 'pints'", "g/L"),
    ("12 g/L", "-12 g/L", "a.yaml:8:30", "'-12 g/L'", "from 0"),
    ("12 g/L", "1e999 g/L", "a.yaml:8:30", "'1e999 g/L'", "workshop"),
    ("82 %", "182 %", "a.yaml:8:46", "'182 %'", "100 %"),
    ("2 L", "0 L", "a.yaml:9:1", "'0 L'", "more than nothing"),
    ("2 L", "2 % w/w", "a.yaml:9:1", "the unit '% w/w'", "one of g"),
    ("dry: 12 um", "dry: 12 um, wet: 30 um", "a.yaml:10:1", "both a wet and a dry", "one of"),
    ("{dry: 12 um, sd: 2 um}", "{sd: 2 um}", "a.yaml:10:1", "no thickness", "one of"),
    ("dry: 12 um", "dry: 12 g", "a.yaml:10:8", "the unit 'g'", "um"),
    ("spectrum: oak", "spectrun: oak", "a.yaml:12:10", "the unknown key 'spectrun'", "'spectrum'"),
    ("[40, -5, -30]", "[140, -5, -30]", "a.yaml:13:1", "140", "L* from 0 to 100"),
    ("[40, -5, -30]", "[40, -5]", "a.yaml:13:10", "[40, -5]", "3 items"),
    ("tolerance: 2.5", "tolerance: 0", "a.yaml:13:55", "0", "greater than 0"),
    ("observer: 2, tol", "observer: 5, tol", "a.yaml:13:42", "5", "1931"),
    ("ph: 6.5", "ph: 65", "a.yaml:17:12", "65", "16"),
    ("ph: 6.5", "ph: 'six'", "a.yaml:17:12", "'six'", "number"),
    ("acts: [dry_weighing", "acts: [dryweighing", "a.yaml:20:8", "'dryweighing'", "'dry_weighing'"),
    ("formcheck: 1", "formcheck: 2", "a.yaml:1:1", "2", "1, the format"),
])
def test_a_mistake_is_told_with_its_place_and_what_is_right(old, new, place, found, expected):
    text = GOOD.replace(old, new)
    assert text != GOOD
    said = problem(text)
    assert said.startswith(place + " "), said
    first = said.split("\n")
    assert found in first[1] and expected in first[2], said
    assert len(re.findall(r"^  found", said, re.MULTILINE)) == 1, said


def test_all_mistakes_are_told_at_once():
    text = GOOD.replace("material: water", "materal: water").replace("12 g/L", "12")
    said = problem(text.replace("D50", "''"))
    assert "materal" in said and "without a unit" in said and "wanted.light" in said


def test_markets_are_the_official_codes_and_the_wider_ones_they_lie_in():
    # ISO 3166-1 lists 249 officially assigned alpha-2 codes; EU is exceptionally reserved there.
    assert len(markets()) == 250
    # Treaty on European Union, Article 52 (consolidated): 27 members; EEA Agreement: three more.
    assert sum(row.within == "EU" for row in markets().values()) == 30
    assert markets_reached(["DE", "US"]) == ("DE", "EU", "US")
    assert markets_reached(["EU", "FR"]) == ("EU", "FR")
    assert markets_reached(["GB", "CH"]) == ("GB", "CH")
