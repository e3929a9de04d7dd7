"""The built-in shelf: an index says which file holds which name, so that only needed files are read."""

from __future__ import annotations

import json
from functools import lru_cache
from pathlib import Path
from typing import Any

from formcheck.materials.reading import read_material
from formcheck.materials.record import Material

DATA = Path(__file__).parent / "data"
SHELVES = ("pigments", "dyes", "indicators", "others")


@lru_cache(maxsize=1)
def index() -> dict[str, Any]:
    """`records` (id -> file, names ...), `keys` (name key -> id), `shared` (key -> ids), `sources`.

    Made by scripts/build_shelf_index.py; a test holds it fresh.
    """
    return json.loads((DATA / "index.json").read_text(encoding="utf-8"))


@lru_cache(maxsize=1024)
def built_in(material_id: str) -> Material:
    """A built-in record by its id, which must be in the index."""
    return read_material(DATA / file_of(material_id), common=index()["sources"])


def file_of(material_id: str) -> str:
    """The file of a built-in record, from the data folder."""
    return index()["records"][material_id]["file"]
