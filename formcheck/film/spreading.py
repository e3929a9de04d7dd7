"""How far a volume or a mass of product goes at a film thickness."""

from __future__ import annotations

from formcheck.film.bounds import Array, Bounded, exact, quotient


def spreading_rate_m2_l(dry_thickness_um: Array, solids_by_volume: Bounded) -> Bounded:
    """Area that a litre covers at a dry thickness, without loss. (R,) [m2/L]

    1 L of wet film 1 um thick is 1000 m2. Source: ISO 23811, theoretical spreading rate.
    """
    s = solids_by_volume
    thickness = exact(dry_thickness_um)
    return quotient(Bounded(1000 * s.value, 1000 * s.low, 1000 * s.high, s.reasons), thickness)


def spreading_rate_m2_kg(spreading_rate_m2_l: Bounded, product_density_g_cm3: Bounded) -> Bounded:
    """Area that a kilogram covers. (R,) [m2/kg]"""
    return quotient(spreading_rate_m2_l, product_density_g_cm3)
