"""Volumes of the ingredients, wet and dry: density of the product, solids by mass and by volume.

Volumes add (ideal mixing, as in ASTM D5201). An unknown density is bounded where its ingredients
are less than 2 % of the mass; an unknown nonvolatile part lies between none and all of it.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from formcheck.film.bounds import Bounded, bounded, join_reasons, reasons_for, share

Array = NDArray[np.float64]
Triple = tuple[Array, Array, Array]  # value, low, high

# Specific volumes of what makers use, from tungsten or gold powder to foamed or fluffy matter. [cm3/g]
LEAST_SPECIFIC_VOLUME, MOST_SPECIFIC_VOLUME = 0.05, 1.5
SMALL_SHARE = 0.02
# Volatile liquids from hexane to dichloromethane; in the middle, where the whole is not itself between
# 0.8 and 1.0. Only used for a material given as part volatile, part not. [g/cm3]
LIGHTEST_VOLATILE, HEAVIEST_VOLATILE = 0.65, 1.35
USUAL_VOLATILE = (0.8, 1.0)


@dataclass(frozen=True)
class Volumes:
    """Of each ingredient per gram of product, as (value, low, high) of (R,I).

    `wet`, `dry` and `volatile` are volumes, in cm3/g; `solid_mass` is in g/g.
    `missing_density` and `missing_nonvolatile` (R,) are reasons in words.
    """

    wet: Triple
    dry: Triple
    volatile: Triple
    solid_mass: Triple
    missing_density: tuple[str, ...]
    missing_nonvolatile: tuple[str, ...]


def volumes(mass_fraction: ArrayLike, *, density_g_cm3: ArrayLike, nonvolatile_fraction: ArrayLike,
            names: Sequence[str]) -> Volumes:
    """Volumes of every ingredient in every recipe, with bounds where data are missing.

    Parameters
    ----------
    mass_fraction : (R,I)
        NaN where unknown: then all is unknown for that recipe. Expand dispersions and solutions into
        constituents first: for those the dry volume is exact. [1]
    density_g_cm3 : (I,)
        NaN where unknown. [g/cm3]
    nonvolatile_fraction : (I,)
        By mass, 0 to 1, NaN where unknown. Between 0 and 1 the dry volume is what is left when the
        volatile part fills the volume of a usual solvent. [1]
    names : I

    Raises
    ------
    ValueError
        Densities not above 0, fractions outside 0..1, shapes that do not fit.

    Source
    ------
    Additive volumes, ASTM D5201; nonvolatile by mass, ISO 3251; by volume, ISO 3233-3.
    """
    w, rho, nv = (np.asarray(v, float) for v in (mass_fraction, density_g_cm3, nonvolatile_fraction))
    if w.ndim != 2 or rho.shape != w.shape[1:] or nv.shape != w.shape[1:] or len(names) != w.shape[1]:
        raise ValueError(f"mass fractions {w.shape}, densities {rho.shape}, nonvolatile {nv.shape}, "
                         f"{len(names)} names; expected (R,I), (I,), (I,), I")
    refuse_outside(w, "mass_fraction", 0, 1 + 1e-9)
    refuse_outside(nv, "nonvolatile_fraction", 0, 1)
    refuse_outside(rho, "density_g_cm3", 1e-3, 100)
    amount = reasons_for(np.isnan(w), names, lambda which: f"the amount of {which} is not known")
    w = np.where(np.isnan(w).any(axis=1, keepdims=True), np.nan, w)
    specific = _specific_volumes(w, rho)
    solid_fraction = _nonvolatile_fractions(w, nv)
    wet = _times(w, specific)
    dry, volatile = _dry_and_volatile(w, wet, solid_fraction, np.isnan(nv) | ((nv > 0) & (nv < 1)))
    return Volumes(
        wet, dry, volatile, _times(w, solid_fraction),
        join_reasons(amount, reasons_for((w > 0) & np.isnan(rho), names,
                                         lambda which: f"no density of {which}")),
        join_reasons(amount, reasons_for((w > 0) & np.isnan(nv), names,
                                         lambda which: f"no nonvolatile part of {which}")))


def specific_volume(of: Volumes) -> Bounded:
    """Volume of a gram of product. (R,) [cm3/g]"""
    return bounded(*summed(of.wet), of.missing_density)


def product_density(of: Volumes) -> Bounded:
    """Density of the product as it is, volumes additive. (R,) [g/cm3]"""
    volume = specific_volume(of)
    with np.errstate(divide="ignore"):
        return Bounded(1 / volume.value, 1 / volume.high, 1 / volume.low, volume.reasons)


def solids_by_mass(of: Volumes) -> Bounded:
    """Nonvolatile matter by mass. (R,) [1]"""
    return bounded(*summed(of.solid_mass), of.missing_nonvolatile)


def solids_by_volume(of: Volumes) -> Bounded:
    """Dry volume over wet volume. (R,) [1]"""
    return share(summed(of.dry), summed(of.volatile),
                 join_reasons(of.missing_density, of.missing_nonvolatile))


def dry_volume_fractions(of: Volumes) -> Array:
    """Each ingredient's share of the dry film by volume, without pores; NaN where unknown. (R,I) [1]"""
    total = of.dry[0].sum(axis=1, keepdims=True)
    with np.errstate(divide="ignore", invalid="ignore"):
        return np.where(total > 0, of.dry[0] / total, np.nan)


def summed(of: Triple, mask: NDArray[np.bool_] | None = None) -> Triple:
    """Over the ingredients, or those of a mask (I,). Three of (R,I) to three of (R,)"""
    chosen = slice(None) if mask is None else mask
    return of[0][:, chosen].sum(axis=1), of[1][:, chosen].sum(axis=1), of[2][:, chosen].sum(axis=1)


def _specific_volumes(w: Array, rho: Array) -> Triple:
    """(R,I) specific volume: known, bounded where little of it is unknown, else NaN. 0 where absent."""
    missing = (w > 0) & np.isnan(rho)
    little = np.where(missing, w, 0.0).sum(axis=1, keepdims=True) < SMALL_SHARE
    middle = (LEAST_SPECIFIC_VOLUME + MOST_SPECIFIC_VOLUME) / 2
    known = np.where(w == 0, 0.0, np.broadcast_to(1 / rho, w.shape))
    return _filled(known, missing & little, middle, LEAST_SPECIFIC_VOLUME, MOST_SPECIFIC_VOLUME)


def _nonvolatile_fractions(w: Array, nv: Array) -> Triple:
    """(R,I) nonvolatile fraction: known, else from 0 to 1 with a value only where little is unknown."""
    missing = (w > 0) & np.isnan(nv)
    little = np.where(missing, w, 0.0).sum(axis=1, keepdims=True) < SMALL_SHARE
    known = np.where(w == 0, 0.0, np.where(np.isnan(w), np.nan, nv))
    value = np.where(missing & little, 0.5, known)
    return value, np.where(missing, 0.0, known), np.where(missing, 1.0, known)


def _dry_and_volatile(w: Array, wet: Triple, solid: Triple,
                      in_part: NDArray[np.bool_]) -> tuple[Triple, Triple]:
    """Dry and volatile volume of each ingredient; exact where all or none of it is volatile."""
    value, low, high = wet
    whole = [_product(s, v) for s, v in zip(solid, wet, strict=True)]
    partly = _dry_beside_volatile(w, wet, solid)
    dry_value, dry_low, dry_high = (np.where(in_part, p, a) for p, a in zip(partly, whole, strict=True))
    rest = (value - dry_value, np.maximum(low - dry_high, 0.0), high - dry_low)
    vapour = (1 - solid[0], 1 - solid[2], 1 - solid[1])
    gone = [_product(s, v) for s, v in zip(vapour, wet, strict=True)]
    volatile = tuple(np.where(in_part, r, g) for r, g in zip(rest, gone, strict=True))
    return (dry_value, dry_low, dry_high), (volatile[0], volatile[1], volatile[2])


def _dry_beside_volatile(w: Array, wet: Triple, solid: Triple) -> Triple:
    """Dry volume of a material given as part volatile: what its volatile part leaves of the whole."""
    value, low, high = wet
    with np.errstate(divide="ignore", invalid="ignore"):
        usual = np.clip(np.where(value > 0, w / value, USUAL_VOLATILE[1]), *USUAL_VOLATILE)
    least = w * LEAST_SPECIFIC_VOLUME
    return (np.clip(value - w * (1 - solid[0]) / usual, least * solid[0], value),
            np.clip(low - w * (1 - solid[1]) / LIGHTEST_VOLATILE, least * solid[1], low),
            np.clip(high - w * (1 - solid[2]) / HEAVIEST_VOLATILE, least * solid[2], high))


def _product(fraction: Array, volume: Array) -> Array:
    """Nothing of an unknown volume is nothing."""
    return np.where(fraction == 0, 0.0, fraction * volume)


def _filled(known: Array, where: NDArray[np.bool_], value: float, low: float, high: float) -> Triple:
    return np.where(where, value, known), np.where(where, low, known), np.where(where, high, known)


def _times(w: Array, of: Triple) -> Triple:
    return w * of[0], w * of[1], w * of[2]


def refuse_outside(values: Array, name: str, low: float, high: float) -> None:
    """Raise ValueError that names the first value outside low..high; NaN passes as unknown."""
    bad = ~((values >= low) & (values <= high)) & ~np.isnan(values)
    if bad.any():
        place = tuple(int(i) for i in np.argwhere(bad)[0])
        raise ValueError(f"{name}{list(place)} is {values[place]}; expected {low:g} to {high:g}, or NaN")
