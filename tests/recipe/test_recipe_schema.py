"""The JSON Schema: valid itself, takes what the reader takes, refuses shapes that the reader refuses."""

from __future__ import annotations

from pathlib import Path

import jsonschema
import pytest

from formcheck.documents import parse_yaml, read_yaml
from formcheck.recipe.model import Film, Ingredient, Measured, Recipe, SpectrumReference, Wanted
from formcheck.recipe.schema import recipe_json_schema

TOP = Path(__file__).resolve().parents[2]
SAMPLES = sorted([*(TOP / "demo_formulations").glob("*.yaml"),
                  *(Path(__file__).parent / "data").glob("*.yaml")])

BASE = "formcheck: 1\ntitle: x\nwhat: ink\ningredients: [{material: water, amount: 1 g}]\n"


VALIDATOR = jsonschema.Draft202012Validator(recipe_json_schema())


def check(text: str) -> None:
    VALIDATOR.validate(parse_yaml(text, "x.yaml").data)


def test_it_is_a_valid_draft_2020_12_schema():
    schema = recipe_json_schema()
    assert schema["$schema"] == jsonschema.Draft202012Validator.META_SCHEMA["$id"]
    jsonschema.Draft202012Validator.check_schema(schema)


@pytest.mark.parametrize("path", SAMPLES, ids=lambda path: path.name)
def test_recipes_pass(path):
    VALIDATOR.validate(read_yaml(path).data)


@pytest.mark.parametrize("more", [
    "colour: blue", "film: 30 um", "sold_in: [UK]", "use: consumer", "observer: 5",
    "ground: {file: a.csv}", "wanted: {lab: [1, 2]}", "measured: {ph: acid}", "batch: 300",
])
def test_broken_recipes_fail(more):
    check(BASE)
    with pytest.raises(jsonschema.ValidationError):
        check(BASE + more)


@pytest.mark.parametrize("without", ["formcheck: 1\n", "title: x\n", "what: ink\n"])
def test_what_must_be_there_is_asked_for(without):
    with pytest.raises(jsonschema.ValidationError):
        check(BASE.replace(without, ""))


@pytest.mark.parametrize("model", [Recipe, Ingredient, Film, SpectrumReference, Wanted, Measured])
def test_every_field_is_described_for_the_editor(model):
    for name, field in model.model_fields.items():
        assert field.description, f"{model.__name__}.{name}"
