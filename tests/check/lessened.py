"""A recipe with everything it stands on inside it, and all the recipes that hold one datum less."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from datetime import date
from pathlib import Path
from typing import Any

from formcheck.check.acid import acid_state
from formcheck.check.parts import parts_of, with_impure_rests
from formcheck.check.rules import judged
from formcheck.check.volumes import film_state
from formcheck.documents import Document, FieldPath
from formcheck.hazards.answer import Answer
from formcheck.hazards.book import Book
from formcheck.materials.shelf import find
from formcheck.recipe.batch import build_batch
from formcheck.recipe.read import read_recipe, written_recipe

DAY = date(2026, 12, 1)
# What a record or a recipe cannot be without, or what says nothing of the mixture.
NOT_DATA = {"id", "names", "kind", "source", "sources", "note", "formcheck", "title", "what", "ingredients"}
# Lists of which an item less says something else of the recipe, not less.
STATEMENTS = {"use", "sold_in", "acts", "lights", "lab"}
# No rule asks for the optics of a material: dropped whole, not band by band.
DROPPED_WHOLE = {"optical", *STATEMENTS}
# Lists that by their presence say that they are complete, so that an item less says "not of this family".
SAID_TO_BE_COMPLETE = ("groups", "hazards.entries", "elements.only")


@dataclass(frozen=True)
class Told:
    """A recipe as plain data; `folder` is what file names in it start from."""

    data: dict[str, Any]
    folder: Path
    file: str


def told_whole(path: Path) -> Told:
    """A recipe with every record that it uses, down to the constituents, under its own `materials`."""
    written = read_recipe(path)
    batch = build_batch([written])
    shelf = batch.shelves[0]
    used = {one.id: one for one in batch.materials}
    for found in parts_of(shelf, batch.materials).found:
        if found:
            used.setdefault(found.material.id, found.material)
    for one in list(used.values()):  # what stands between an ingredient and its constituents
        for part in one.composition:
            if found := find(shelf, part.material):
                used.setdefault(found.material.id, found.material)
    data = {**written.document.data, "materials": [
        one.model_dump(mode="json", exclude_unset=True) for one in used.values()]}
    data.pop("shelf", None)
    return Told(data, path.parent, str(path))


def answers(told: Told, book: Book) -> list[Answer]:
    """What the rules of the book say; the rooms in the order of formcheck.check.run, without the shade."""
    written = written_recipe(Document(told.file, told.data, {}), folder=told.folder)
    batch = build_batch([written])
    shelf = batch.shelves[0]
    pure = parts_of(shelf, batch.materials)
    film = film_state(batch, with_impure_rests(pure, batch), shelf)
    return judged(batch, pure, shelf, film=film, acid=acid_state(batch, shelf), book=book, as_of=DAY)


def lessened(told: Told) -> Iterator[tuple[str, Told]]:
    """Every recipe with one datum less, and what it lost."""
    for path in _data_of(told.data, ()):
        yield _said(told.data, path), Told(_without(told.data, path), told.folder, told.file)


def _without(value: Any, path: FieldPath) -> Any:
    """The same, with what lies on the path copied and its end gone."""
    copied = value.copy()
    if len(path) == 1:
        del copied[path[0]]
    else:
        copied[path[0]] = _without(value[path[0]], path[1:])
    return copied


def _data_of(value: Any, path: FieldPath) -> Iterator[FieldPath]:
    if isinstance(value, dict):
        for key, inner in value.items():
            if key in ("ingredients", "materials"):
                yield from _data_of(inner, (*path, key))
            elif key not in NOT_DATA:
                yield (*path, key)
                if key not in DROPPED_WHOLE:
                    yield from _data_of(inner, (*path, key))
    elif isinstance(value, list):
        for n, inner in enumerate(value):
            if path[-1] not in ("ingredients", "materials"):
                yield (*path, n)
            yield from _data_of(inner, (*path, n))


def _said(data: dict[str, Any], path: FieldPath) -> str:
    if path[0] == "materials":
        return f"{data['materials'][path[1]]['id']} without {'.'.join(map(str, path[2:]))}"
    return f"the recipe without {'.'.join(map(str, path))}"


def is_item_of_complete_list(said: str) -> bool:
    """Whether what was lost is one item of a list that counts as complete where it is given."""
    lost = said.partition(" without ")[2].rsplit(".", 1)
    return len(lost) == 2 and lost[1].isdigit() and lost[0] in SAID_TO_BE_COMPLETE
