"""Where materials are looked up: the recipe's own records, then the user's shelf, then the built-in one."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from difflib import get_close_matches
from pathlib import Path
from typing import Literal

from formcheck.materials import builtin
from formcheck.materials.names import index_names, looked_for
from formcheck.materials.reading import read_folder
from formcheck.materials.record import Material, name_key
from formcheck.trouble import trouble

Where = Literal["recipe", "your shelf", "built in"]
MOST_DEEP = 8  # compositions within compositions


@dataclass(frozen=True)
class Found:
    """A record, where it was found, and the folder from which file names in it start."""

    material: Material
    where: Where
    file: str
    root: Path


@dataclass(frozen=True)
class Level:
    """Records that stand side by side: id -> record, name key -> id, keys borne by several."""

    records: Mapping[str, Found]
    keys: Mapping[str, str]
    shared: Mapping[str, list[str]]


@dataclass(frozen=True)
class Shelf:
    """The recipe's own records and the user's shelf folder; the built-in shelf lies under every one."""

    own: Level
    folder: Level


@dataclass(frozen=True)
class Listed:
    """One line of the listing."""

    id: str
    names: tuple[str, ...]
    kind: str
    ci_generic_name: str
    cas: str
    where: Where


@dataclass(frozen=True)
class Constituent:
    """A pure part of a mixture; `material` is None where a composition names what no shelf holds."""

    name: str
    material: Material | None
    mass_fraction: float
    low: float
    high: float


@dataclass(frozen=True)
class Composition:
    """Pure parts with their mass fractions, and the mass fraction that nothing accounts for."""

    constituents: tuple[Constituent, ...]
    undeclared: float


def open_shelf(*, own: Sequence[Material] = (), folder: Path | str | None = None,
               own_file: str = "the recipe", own_root: Path | str = ".") -> Shelf:
    """The shelf of one recipe.

    Parameters
    ----------
    own
        The recipe's own records; `own_file` names the recipe in messages, and file names inside the
        records start from the folder `own_root`.
    folder
        The user's shelf folder: any number of records, one to a YAML file, with an optional
        sources.yaml; file names inside its records start from it.

    Raises
    ------
    InputError
        no such folder, a broken record in it, or two records of one level under one name.
    """
    mine = [Found(material, "recipe", own_file, Path(own_root)) for material in own]
    theirs: list[Found] = []
    if folder is not None:
        root = Path(folder)
        theirs = [Found(material, "your shelf", str(path), root)
                  for path, material in read_folder(root, common=builtin.index()["sources"])]
    return Shelf(_level(mine), _level(theirs))


def _level(founds: list[Found]) -> Level:
    try:
        keys, shared = index_names(found.material for found in founds)
    except ValueError as error:
        key, first, second = error.args
        files = sorted({f.file for f in founds if f.material.id in (first, second)})
        raise trouble(files[-1], f"{key!r} as a name of both {first!r} and {second!r}"
                      + (f" ({files[0]})" if len(files) > 1 else ""),
                      "ids and names that belong to one record each") from None
    return Level({found.material.id: found for found in founds}, keys, shared)


def find(shelf: Shelf, name: str) -> Found | None:
    """The material of a name: id, listed name, Colour Index name or number, CAS number; else None.

    Case, spaces, hyphens, colons and a leading `C.I.` do not matter. A Colour Index or CAS number
    that several records bear finds none of them: `suggest` then names them.
    """
    for key in looked_for(name):
        for level in (shelf.own, shelf.folder):
            if key in level.keys:
                return level.records[level.keys[key]]
            if key in level.shared:
                return None
        if key in builtin.index()["keys"]:
            return _built_in(builtin.index()["keys"][key])
    return None


def _built_in(material_id: str) -> Found:
    file = builtin.file_of(material_id)
    return Found(builtin.built_in(material_id), "built in", file, builtin.DATA)


def suggest(shelf: Shelf, name: str) -> str:
    """What to write instead of a name that finds nothing, as words for a message."""
    for key in looked_for(name):
        for bearers in (shelf.own.shared, shelf.folder.shared, builtin.index()["shared"]):
            if key in bearers:
                return f"one of {', '.join(bearers[key])}, which share this name"
    close = closest_names(shelf, name)
    if close:
        return "did you mean " + " or ".join(repr(word) for word in close) + "?"
    return "a material of the shelf (see `formcheck shelf`)"


def closest_names(shelf: Shelf, name: str, *, most: int = 3) -> list[str]:
    """Names on the shelf that look like `name`, at most one to a material, the closest first."""
    spelled: dict[str, tuple[str, str]] = {}
    for listed in listing(shelf):
        for word in (*listed.names, listed.ci_generic_name, listed.id):
            spelled.setdefault(name_key(word), (listed.id, word))
    close = get_close_matches(name_key(name), [key for key in spelled if key], n=12, cutoff=0.65)
    kept: dict[str, str] = {}
    for key in close:
        kept.setdefault(*spelled[key])
    return list(kept.values())[:most]


def listing(shelf: Shelf, words: Iterable[str] = ()) -> list[Listed]:
    """Every material whose names, kind, groups or numbers hold all of the words, sorted by id."""
    rows: dict[str, tuple[Listed, str]] = {}
    for level in (shelf.own, shelf.folder):
        for found in level.records.values():
            rows.setdefault(found.material.id, _row(found))
    for material_id, entry in builtin.index()["records"].items():
        line = Listed(material_id, tuple(entry["names"]), entry["kind"], entry["ci_generic_name"],
                      entry["cas"], "built in")
        rows.setdefault(material_id, (line, " ".join(entry["groups"])))
    wanted = [word.casefold() for word in words]
    return [line for _, (line, groups) in sorted(rows.items())
            if all(word in _text(line, groups) for word in wanted)]


def _row(found: Found) -> tuple[Listed, str]:
    material = found.material
    line = Listed(material.id, tuple(material.names), material.kind,
                  material.ci_generic_name.value if material.ci_generic_name else "",
                  material.cas.value if material.cas else "", found.where)
    return line, " ".join(material.groups)


def _text(line: Listed, groups: str) -> str:
    return " ".join((line.id, *line.names, line.kind, line.ci_generic_name, line.cas, groups)).casefold()


def data_file(found: Found, file: str) -> Path:
    """The path of a file that a record names: relative names start from the root of its shelf."""
    return found.root / file


def expand(shelf: Shelf, material: Material) -> Composition:
    """What a material is made of, down to materials that have no composition of their own.

    A pure material is its own single constituent. Ranges multiply along the way; a constituent met
    twice is summed.

    Raises
    ------
    InputError
        a composition that contains itself, or is nested deeper than `MOST_DEEP`.
    """
    parts: dict[str, Constituent] = {}
    undeclared = _expand(shelf, material, Constituent(material.id, material, 1.0, 1.0, 1.0), parts, ())
    return Composition(tuple(parts.values()), undeclared)


def _expand(shelf: Shelf, top: Material, part: Constituent, parts: dict[str, Constituent],
            above: tuple[str, ...]) -> float:
    """Adds the pure parts of `part` to `parts`; returns what its compositions leave undeclared."""
    material = part.material
    if material is None or not material.composition:
        parts[part.name] = _sum(parts.get(part.name), part)
        return 0.0
    path = (*above, material.id)
    if material.id in above or len(path) > MOST_DEEP:
        raise _refused(shelf, top, path)
    share = [(_child(shelf, inner.material), inner) for inner in material.composition]
    undeclared = part.mass_fraction * max(0.0, 1.0 - sum(inner.mass_fraction for _, inner in share))
    for (name, found), inner in share:
        low = inner.mass_fraction if inner.low is None else inner.low
        high = inner.mass_fraction if inner.high is None else inner.high
        child = Constituent(name, found, part.mass_fraction * inner.mass_fraction, part.low * low,
                            part.high * high)
        undeclared += _expand(shelf, top, child, parts, path)
    return undeclared if undeclared > 1e-9 else 0.0


def _child(shelf: Shelf, name: str) -> tuple[str, Material | None]:
    found = find(shelf, name)
    return (found.material.id, found.material) if found else (name, None)


def _sum(first: Constituent | None, second: Constituent) -> Constituent:
    if first is None:
        return second
    return Constituent(second.name, second.material, first.mass_fraction + second.mass_fraction,
                       first.low + second.low, first.high + second.high)


def _refused(shelf: Shelf, top: Material, path: tuple[str, ...]):
    found = find(shelf, top.id)
    what = "a composition that contains itself" if path[-1] in path[:-1] else "compositions nested too deep"
    return trouble(found.file if found else top.id, f"{what}: {' > '.join(path)}",
                   f"compositions that end in pure materials within {MOST_DEEP} steps", field="composition")
