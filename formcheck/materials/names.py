"""The names by which a material is found, and what to do when two materials share one."""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator

from formcheck.materials.record import Material, name_key

# The trade's short forms of the Colour Index generic names of pigments.
SHORT_HUES = {"white": "W", "yellow": "Y", "orange": "O", "red": "R", "violet": "V", "blue": "B",
              "green": "G", "brown": "Br", "black": "Bk", "metal": "M"}
GENERIC_PIGMENT = re.compile(r"(?:c\.?\s*i\.?\s+)?pigment\s+([a-z]+)\s+(\d+(?::\d+)?)", re.IGNORECASE)


def own_keys(material: Material) -> set[str]:
    """Keys that are this material's alone: its id and its listed names."""
    return {name_key(name) for name in (material.id, *material.names)}


def shared_keys(material: Material) -> set[str]:
    """Keys that other materials may bear too: generic name, its short form, constitution number, CAS."""
    found = set()
    if material.ci_generic_name:
        generic = material.ci_generic_name.value
        found |= {name_key(generic), name_key(short_generic_name(generic) or generic)}
    if material.ci_constitution_number:
        found.add(name_key("CI " + material.ci_constitution_number.value))
    if material.cas:
        found.add(name_key(material.cas.value))
    return found


def short_generic_name(generic: str) -> str | None:
    """`Pigment Blue 15:3` as `PB15:3`; None for what is not a pigment's generic name."""
    match = GENERIC_PIGMENT.fullmatch(generic.strip())
    hue = SHORT_HUES.get(match.group(1).lower()) if match else None
    return f"P{hue}{match.group(2)}" if match and hue else None


def looked_for(name: str) -> Iterator[str]:
    """The keys under which a name is looked up, in order; `CAS 1310-73-2` means the bare number too."""
    key = name_key(name)
    if key:
        yield key
    if re.fullmatch(r"cas(no|number|nr)?\d+", key):
        yield re.sub(r"\D", "", key)


def index_names(materials: Iterable[Material]) -> tuple[dict[str, str], dict[str, list[str]]]:
    """Key -> id, and key -> ids for the keys that several materials bear and none has for its own.

    Raises
    ------
    ValueError
        (key, id, id): two materials have the same id or list the same name.
    """
    materials = list(materials)
    keys: dict[str, str] = {}
    for material in materials:
        for key in own_keys(material):
            if key in keys:
                raise ValueError(key, keys[key], material.id)
            keys[key] = material.id
    bearers: dict[str, list[str]] = {}
    for material in materials:
        for key in shared_keys(material) - keys.keys():
            bearers.setdefault(key, []).append(material.id)
    keys |= {key: ids[0] for key, ids in bearers.items() if len(ids) == 1}
    return keys, {key: ids for key, ids in bearers.items() if len(ids) > 1}
