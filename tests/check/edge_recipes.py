"""Recipes just over a limit, of own records without a datum to spare: each datum of them decides."""

from __future__ import annotations

from pathlib import Path
from typing import Any

from lessened import Told

SOURCES = {"sheet": {"cite": "a test", "kind": "invented_demo"}}


def number(value: float, **more) -> dict[str, Any]:
    return {"value": value, "source": "sheet", **more}


def record(id: str, kind: str, **more) -> dict[str, Any]:
    return {"id": id, "names": [id.replace("_", " ")], "kind": kind, "sources": SOURCES, **more}


def solvent(**more) -> dict[str, Any]:
    """Of which carbon and hydrogen are all that is known of its make-up."""
    return record("thin_spirit", "solvent", density_g_cm3=number(0.78), boiling_point_c=number(170.0),
                  nonvolatile_fraction=number(0.0), elements={"only": ["C", "H"], "source": "sheet"}, **more)


def binder() -> dict[str, Any]:
    return record("plain_resin", "binder", density_g_cm3=number(1.1), nonvolatile_fraction=number(1.0),
                  elements={"mg_kg": {"Pb": number(0.0)}, "source": "sheet"})


def coating(lines: dict[str, str], materials: list[dict[str, Any]], **more) -> Told:
    data = {"formcheck": 1, "title": "on the edge", "what": "coating", "batch": "1 kg",
            "ingredients": [{"material": name, "amount": amount} for name, amount in lines.items()],
            "materials": materials, **more}
    return Told(data, Path(__file__).parent, "edge.yaml")


def lead_over_in_the_dry_film_alone() -> Told:
    """40 mg/kg as made, 100 mg/kg when the solvent has left: over the 90 mg/kg that US and Canada allow."""
    pigment = record("earth", "pigment", density_g_cm3=number(2.6), nonvolatile_fraction=number(1.0),
                     elements={"mg_kg": {"Pb": number(400.0)}, "source": "sheet"})
    lines = {"plain_resin": "30 % w/w", "earth": "10 % w/w", "thin_spirit": "to make up"}
    return coating(lines, [binder(), pigment, solvent()], use=["consumer", "toy", "exterior_wall"],
                   sold_in=["US", "CA"], film={"wet": "60 um"})


def voc_just_over() -> Told:
    """Solvent for some 440 g/L where 430 are allowed outdoors in the EU."""
    lines = {"plain_resin": "53 % w/w", "thin_spirit": "47 % w/w"}
    return coating(lines, [binder(), solvent()], use=["exterior_wall"], sold_in=["EU"], film={"wet": "60 um"})


def sensitiser_in_a_paste() -> Told:
    """1,2-benzisothiazol-3(2H)-one through a paste into a wall paint, over what asks for a word on the label."""
    paste = record("pack_saver", "preservative", physical_form="liquid", density_g_cm3=number(1.1), composition=[
        {"material": "benzisothiazolinone", "mass_fraction": 0.2, "source": "sheet"},
        {"material": "water", "mass_fraction": 0.8, "source": "sheet"}])
    lines = {"water": "to make up", "plain_resin": "40 % w/w", "pack_saver": "0.05 % w/w"}
    return coating(lines, [binder(), paste], use=["consumer", "interior_wall"], sold_in=["EU"],
                   film={"wet": "60 um"}, measured={"ph": 8.0, "ph_sd": 0.1})


EDGE_RECIPES = {made.__name__: made for made in (lead_over_in_the_dry_film_alone, voc_just_over, sensitiser_in_a_paste)}
