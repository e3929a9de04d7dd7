"""Wet and dry thickness of a film."""

from __future__ import annotations

from formcheck.film.bounds import Array, Bounded, exact, quotient


def dry_thickness_um(wet_thickness_um: Array, solids_by_volume: Bounded) -> Bounded:
    """Dry film left by a wet one, no pores, no loss into the ground. (R,) [um]

    Source: ISO 3233-3 (nonvolatile matter by volume), ISO 2808 for both thicknesses.
    """
    s = solids_by_volume
    return Bounded(wet_thickness_um * s.value, wet_thickness_um * s.low, wet_thickness_um * s.high, s.reasons)


def wet_thickness_um(dry_thickness_um: Array, solids_by_volume: Bounded) -> Bounded:
    """Wet film that dries to a given one; NaN where nothing is left. (R,) [um]"""
    return quotient(exact(dry_thickness_um), solids_by_volume)
