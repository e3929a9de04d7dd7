"""Mixtures for the tests of the hazards room: facts of plain numbers, and random ones."""

from __future__ import annotations

import numpy as np

from formcheck.hazards.mixture import MixtureFacts, Scope, knowledge_of
from formcheck.materials.record import Material
from formcheck.materials.shelf import open_shelf

SOURCES = {"test": {"cite": "a test", "kind": "invented_demo"}}


def material(name="x", **facets) -> Material:
    """A record of just these facets; strings become cited texts where the record wants them."""
    for key in ("cas", "charge", "formula", "ci_generic_name"):
        if isinstance(facets.get(key), str):
            facets[key] = {"value": facets[key], "source": "test"}
    if isinstance(facets.get("hazards"), list):
        entries = [{"hazard_class": cls, "code": code, "source": "test"} for cls, code in facets["hazards"]]
        facets["hazards"] = {"status": "classified" if entries else "not_classified", "entries": entries,
                             "source": "test"}
    if isinstance(facets.get("composition"), dict):
        facets["composition"] = [{"material": part, "mass_fraction": share, "source": "test"}
                                 for part, share in facets["composition"].items()]
    return Material.model_validate({"id": name, "names": [name], "kind": "additive", "sources": SOURCES} | facets)


def facts(materials, fractions, *, what="coating", use=("consumer",), sold_in=("EU",), acts=("stirring",),
          nonvolatile=None, ph=None, voc=None, density=1.0) -> MixtureFacts:
    """Facts of recipes over `materials`; `fractions` is one row or several; None is unknown."""
    rows = np.atleast_2d(np.array(fractions, dtype=float))
    n, low, high = len(rows), *(ph if isinstance(ph, tuple) else (ph, ph))

    def column(value):
        return np.full(n, np.nan if value is None else value)

    stays = [np.nan] * len(materials) if nonvolatile is None else nonvolatile
    return MixtureFacts(
        materials=tuple(materials), names=tuple(one.names[0] for one in materials),
        places=tuple(f"recipe.yaml:{i + 5}:3" for i in range(len(materials))), mass_fraction=rows,
        scopes=(Scope(what, tuple(use), tuple(sold_in), tuple(acts)),) * n,
        nonvolatile_fraction=np.array(stays, dtype=float), ph=(column(low), column(high)),
        voc_g_l={kind: (column(voc), column(voc)) for kind in ("ready_to_use", "less_water")},
        density_g_ml=(column(density), column(density)))


def knowledge(*records: Material):
    """Knowledge over the built-in shelf and these records."""
    return knowledge_of(open_shelf(own=list({one.id: one for one in records}.values())))
