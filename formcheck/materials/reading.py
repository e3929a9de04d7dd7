"""Reading material records from files: one record to a YAML file, common citations beside them."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import replace
from pathlib import Path
from typing import Any

from formcheck import documents
from formcheck.documents import Document, FieldPath, path_text
from formcheck.materials.record import Material, Source
from formcheck.strict import Strict
from formcheck.trouble import InputError, Problem, shown, suggestion, trouble

SOURCES_FILE = "sources.yaml"
MOST_FILES = 5_000
GIVEN = "given"  # the source key that needs no citation: the user's own word


class Sources(Strict):
    """A file of citations: short key -> citation."""

    sources: dict[str, Source]


def read_material(path: Path, *, common: Mapping[str, Any]) -> Material:
    """One record, with those of the `common` citations that it names.

    Raises
    ------
    InputError
        unreadable, not a record, or a datum that names an unknown source: each with its place.
    """
    document = documents.read_yaml(path, what="a material record")
    return documents.validate(Material, with_sources(document, common))


def with_sources(document: Document, common: Mapping[str, Any]) -> Document:
    """The document with every citation it names; its own `sources` come before the common ones."""
    data = document.data
    if not isinstance(data, dict) or not isinstance(data.get("sources", {}), dict):
        return document  # validation says what is wrong
    own = data.get("sources", {})
    named = list(_named_sources(data, ()))
    missing = [(path, key) for path, key in named if key not in own and key not in common and key != GIVEN]
    if missing:
        raise InputError(Problem(document.place(path), f"the source {shown(key)}, which is not listed",
                                 suggestion(key, [*own, *common]) + ", or a citation under `sources`",
                                 path_text(path)) for path, key in missing)
    used = {key: common[key] for _, key in named if key in common and key not in own}
    return replace(document, data={**data, "sources": {**own, **used}})


def _named_sources(data: Any, path: FieldPath) -> Iterator[tuple[FieldPath, str]]:
    if isinstance(data, dict):
        for key, value in data.items():
            if key == "source" and isinstance(value, str) and value:
                yield (*path, key), value
            elif path or key != "sources":
                yield from _named_sources(value, (*path, key))
    elif isinstance(data, list):
        for n, value in enumerate(data):
            yield from _named_sources(value, (*path, n))


def read_sources(folder: Path) -> dict[str, Any]:
    """The citations of a folder's sources.yaml as plain data, checked; empty where there is none."""
    path = folder / SOURCES_FILE
    if not path.is_file():
        return {}
    document = documents.read_yaml(path, what="a file of citations")
    documents.validate(Sources, document)
    return document.data["sources"]


def read_folder(folder: Path, *, common: Mapping[str, Any]) -> list[tuple[Path, Material]]:
    """Every record (`.yaml`, `.yml`) in a folder and below it.

    Raises
    ------
    InputError
        no such folder, or everything that is wrong with its files, together.
    """
    citations = {**common, **read_sources(folder)}
    read: list[tuple[Path, Material]] = []
    problems: list[Problem] = []
    for path in record_files(folder):
        try:
            read.append((path, read_material(path, common=citations)))
        except InputError as error:
            problems += error.problems
    if problems:
        raise InputError(problems)
    return read


def record_files(folder: Path) -> list[Path]:
    """The files of a shelf folder that hold records, in the order of their names."""
    if not folder.is_dir():
        found = "a file" if folder.exists() else "no folder of this name"
        raise trouble(str(folder), found, "a folder of material records")
    files = sorted(path for path in folder.rglob("*") if path.suffix in (".yaml", ".yml") and path.is_file()
                   and path.name != SOURCES_FILE and not path.name.startswith("."))
    if len(files) > MOST_FILES:
        raise trouble(str(folder), f"{len(files):,} records", f"a folder of at most {MOST_FILES:,}")
    return files
