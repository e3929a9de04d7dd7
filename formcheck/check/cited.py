"""Provenance as the Check shows it."""

from __future__ import annotations

from formcheck.check.record import Cited
from formcheck.materials.record import Material
from formcheck.quantity import Provenance


def cited(provenance: Provenance) -> Cited:
    return Cited(cite=provenance.cite, kind=provenance.kind, edition=provenance.edition,
                 verified=provenance.verified)


def cited_by(material: Material, key: str) -> Cited:
    """The source a datum of a material names."""
    return cited(material.provenance(key))
