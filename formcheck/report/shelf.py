"""`formcheck shelf` in the terminal: a list of materials, or one whole, each datum with its source."""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path

from rich.console import Console
from rich.text import Text

from formcheck.materials.record import Material, name_key
from formcheck.materials.shelf import Found, Listed, Shelf, find, listing, open_shelf, suggest
from formcheck.report.record_rows import label_and_unit, record_rows
from formcheck.report.terminal_parts import heading, labelled, paragraph, speaking, table
from formcheck.report.words import FROM_MEMORY, one_line, spelled
from formcheck.trouble import trouble

SHOWN_AT_THE_TOP = frozenset({"id", "names", "kind", "sources", "note"})


def show_shelf(words: str, folder: Path | None = None, console: Console | None = None) -> None:
    """List the materials that hold all the words; the only one, or one named exactly, is shown whole.

    Raises
    ------
    InputError
        no material holds the words; the message names the closest ones.
    """
    shelf = open_shelf(folder=folder)
    named = find(shelf, words) if words else None
    lines = listing(shelf, words.split())
    if named is None and len(lines) == 1:
        named = find(shelf, lines[0].id)
    if named is None and not lines:
        raise trouble("formcheck shelf", f"no material of {words[:60]!r}", suggest(shelf, words))
    with speaking(console) as out:
        if named is not None:
            show_material(out, named)
        else:
            show_list(out, shelf, lines)


def show_list(console: Console, shelf: Shelf, lines: Sequence[Listed]) -> None:
    rows = []
    for line in lines:
        found = find(shelf, line.id)
        known = [optical_text(found.material), hazards_text(found.material)] if found else ["", ""]
        rows.append([line.id, other_name(line), spelled(line.kind), *known])
    table(console, [("id", "whole"), "also", ("kind", "whole"), "optical", "hazards"], rows)
    paragraph(console, f"{len(lines)} materials; one of them whole: formcheck shelf ID", indent=0)


def other_name(line: Listed) -> str:
    """Its first name and its Colour Index name, where the id does not say them already."""
    said = {name_key(line.id)}
    told = []
    for name in (line.names[0], line.ci_generic_name):
        if name and name_key(name) not in said:
            said.add(name_key(name))
            told.append(one_line(name))
    return ", ".join(told)


def show_material(console: Console, found: Found) -> None:
    """One record whole: every datum with its source, and what is not on it."""
    material = found.material
    console.print(Text(one_line(material.names[0]), style="bold"))
    labelled(console, [row for row in [
        ("id", material.id), ("also", ", ".join(map(one_line, material.names[1:]))),
        ("kind", spelled(material.kind)), ("record", f"{found.where}: {found.file}"),
        ("note", one_line(material.note))] if row[1]], indent=0)
    heading(console, "On record")
    rows = record_rows(material, lambda key: source_text(material, key), skip=SHOWN_AT_THE_TOP)
    labelled(console, [("  " * depth + label, text) for depth, label, text in rows])
    if absent := absent_text(material):
        heading(console, "Not on record, so unknown")
        paragraph(console, absent)


def source_text(material: Material, key: str) -> str:
    """A source of the record in words; `given` is the user's own word."""
    source = material.provenance(key)
    edition = f", edition {one_line(source.edition)}" if source.edition else ""
    return f"{one_line(source.cite)}{edition}" + ("" if source.verified else f" ({FROM_MEMORY})")


def absent_text(material: Material) -> str:
    absent = [label_and_unit(name)[0] for name, value in material if value is None]
    return ", ".join(absent)


def optical_text(material: Material) -> str:
    """What the shade of this material can stand on."""
    optical = material.optical
    if optical is None:
        return ""
    kinds = [
        ("K and S", optical.k_and_s is not None),
        ("measured", any(form.spectrum for form in optical.forms)),
        ("bands", any(form.bands for form in optical.forms)),
        ("boxes", any(form.boxes for form in optical.forms)),
        ("colourless", all(form.colourless for form in optical.forms) and bool(optical.forms)),
    ]
    forms = f", {len(optical.forms)} forms" if len(optical.forms) > 1 else ""
    return ", ".join(name for name, there in kinds if there) + forms


def hazards_text(material: Material) -> str:
    """H codes, none found, or unknown: a record without a word on hazards says nothing of them."""
    if material.hazards is None:
        return "unknown"
    codes = list(dict.fromkeys(entry.code for entry in material.hazards.entries))
    return " ".join(codes) or spelled(material.hazards.status)
