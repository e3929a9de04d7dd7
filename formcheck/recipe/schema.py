"""The JSON Schema of a recipe file, for editors that complete and check it."""

from __future__ import annotations

from typing import Any

from formcheck.recipe.model import FORMAT_VERSION, Recipe


def recipe_json_schema() -> dict[str, Any]:
    """JSON Schema (draft 2020-12) of a recipe in YAML or JSON.

    It tells shapes, words and ranges. What needs arithmetic or a look-up (units inside amounts, sums,
    names on the shelf) only `formcheck check` can tell.
    """
    described = Recipe.model_json_schema()
    return {
        "$schema": "https://json-schema.org/draft/2020-12/schema",
        "$id": f"urn:formcheck:recipe:{FORMAT_VERSION}",
        **described,
        "title": "formcheck recipe",
    }
