"""Reading a recipe file of any kind into one model."""

from __future__ import annotations

import hashlib
import json
from collections.abc import Callable
from dataclasses import dataclass, field
from pathlib import Path

from formcheck.documents import Document, read_yaml, validate
from formcheck.recipe.model import Recipe
from formcheck.recipe.read_csv import read_csv
from formcheck.trouble import trouble


@dataclass(frozen=True)
class WrittenRecipe:
    """A recipe as it stands in its file.

    `folder` is what relative paths in the recipe start from; `digest` is the SHA-256 of what the recipe
    says, whichever kind of file says it and however it is laid out there.
    """

    recipe: Recipe
    document: Document = field(repr=False)
    folder: Path
    digest: str


def read_recipe(path: Path | str) -> WrittenRecipe:
    """Read a recipe from YAML (.yaml, .yml, .json), delimited text (.csv, .tsv) or a workbook (.xlsx).

    Raises
    ------
    InputError
        the file cannot be read or is no recipe; every problem with its file, line and column. In a
        workbook these are the row and the column of the cell.
    """
    path = Path(path)
    reader = READERS.get(path.suffix.lower())
    if reader is None:
        raise trouble(str(path), f"a file named {path.suffix or path.name!r}"[:80],
                      f"a recipe file: {', '.join(READERS)}")
    return written_recipe(reader(path), folder=path.parent)


def written_recipe(document: Document, *, folder: Path) -> WrittenRecipe:
    """The recipe that a document holds; InputError as for `read_recipe`."""
    recipe = validate(Recipe, document)
    return WrittenRecipe(recipe, document, folder, digest(recipe))


def digest(recipe: Recipe) -> str:
    """SHA-256 of the recipe's content in one spelling; fields at their default do not count."""
    content = recipe.model_dump(mode="json", exclude_defaults=True)
    text = json.dumps(content, sort_keys=True, ensure_ascii=False, separators=(",", ":"))
    return hashlib.sha256(text.encode("utf-8", "surrogatepass")).hexdigest()


def _read_yaml(path: Path) -> Document:
    return read_yaml(path, what="a recipe file")


def _read_xlsx(path: Path) -> Document:
    from formcheck.recipe.read_xlsx import read_xlsx  # zip and XML are only loaded for a workbook

    return read_xlsx(path)


READERS: dict[str, Callable[[Path], Document]] = {
    ".yaml": _read_yaml, ".yml": _read_yaml, ".json": _read_yaml,
    ".csv": read_csv, ".tsv": read_csv, ".xlsx": _read_xlsx,
}
