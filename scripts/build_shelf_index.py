"""Writes formcheck/materials/data/index.json: which file of the built-in shelf holds which name.

Run it after any change to the records: python scripts/build_shelf_index.py
"""

from __future__ import annotations

import json
import os
from pathlib import Path
from typing import Any

from formcheck.materials.builtin import DATA, SHELVES
from formcheck.materials.names import index_names
from formcheck.materials.reading import read_folder, read_sources
from formcheck.materials.record import Material

ABOUT = "Made by scripts/build_shelf_index.py from the records and sources.yaml; not to be edited."


def build_index(data: Path = DATA) -> dict[str, Any]:
    """The index of the records in a data folder.

    Raises
    ------
    InputError
        a broken record.
    ValueError
        two records under one name.
    """
    sources = read_sources(data)
    read = [pair for shelf in SHELVES for pair in read_folder(data / shelf, common=sources)]
    keys, shared = index_names(material for _, material in read)
    entries = {material.id: _entry(path.relative_to(data), material) for path, material in read}
    return {
        "about": ABOUT,
        "records": dict(sorted(entries.items())),
        "keys": dict(sorted(keys.items())),
        "shared": dict(sorted(shared.items())),
        "sources": sources,
    }


def _entry(file: Path, material: Material) -> dict[str, Any]:
    return {
        "file": file.as_posix(), "kind": material.kind, "names": material.names,
        "ci_generic_name": material.ci_generic_name.value if material.ci_generic_name else "",
        "cas": material.cas.value if material.cas else "", "groups": material.groups,
    }


def write_index(data: Path = DATA) -> None:
    beside = data / "index.json.new"
    beside.write_text(json.dumps(build_index(data), ensure_ascii=False, indent=0) + "\n", encoding="utf-8")
    os.replace(beside, data / "index.json")


if __name__ == "__main__":
    write_index()
