"""Volatile organic compounds of a product: grams per litre as ready to use, and less water.

What counts as volatile and as exempt differs between texts. It is handed in as a column per ingredient
with a low and a high value, made here from boiling points or from what evaporates; the boiling point
limit of a text is its own number and is handed in too.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from formcheck.film.bounds import Bounded, bounded, join_reasons, quotient, reasons_for
from formcheck.film.volumes import SMALL_SHARE, Volumes, refuse_outside, specific_volume, summed

Array = NDArray[np.float64]


@dataclass(frozen=True)
class VolatileFraction:
    """Grams of volatile organic compounds in a gram of each ingredient; (I,), low <= high. [1]"""

    low: Array
    high: Array

    @property
    def known(self) -> NDArray[np.bool_]:
        return self.low == self.high


def voc_by_boiling_point(boiling_point_c: ArrayLike, *, highest_boiling_point_c: float, organic: ArrayLike,
                         nonvolatile_fraction: ArrayLike) -> VolatileFraction:
    """Organic compounds that boil at or below a limit.

    Parameters
    ----------
    boiling_point_c : (I,)
        At 101.3 kPa, of the pure constituent; NaN where unknown. [C]
    highest_boiling_point_c : the limit of the text applied. [C]
    organic : (I,)
        1 organic, 0 not, NaN unknown (counts as organic in the high value). [1]
    nonvolatile_fraction : (I,)
        By mass, NaN unknown. Without a boiling point it bounds the volatile part. A boiling point below
        the limit beside a fraction strictly between 0 and 1 makes the rest volatile; beside 1 the two
        contradict each other and the answer stays open. Without a fraction a boiling point is taken as
        that of a pure liquid, which evaporates whole. [1]

    Source
    ------
    Definition by initial boiling point: ISO 11890, and the laws that take it over.
    """
    bp, org, nv = _columns(boiling_point_c, organic, nonvolatile_fraction)
    boils = bp <= highest_boiling_point_c
    evaporates = 1 - np.where(np.isnan(nv), 0.0, nv)
    contradicts = boils & (nv == 1)
    high = np.where(bp > highest_boiling_point_c, 0.0, np.where(contradicts, 1.0, evaporates))
    low = np.where(boils & ~contradicts, evaporates, 0.0)
    return _of_organic(low, high, org)


def voc_by_evaporation(nonvolatile_fraction: ArrayLike, *, organic: ArrayLike,
                       exempt: ArrayLike) -> VolatileFraction:
    """All that evaporates and is organic, without exempt compounds. Columns (I,); NaN unknown.

    exempt (I,) bool. Source: ASTM D3960; 40 CFR 59.406 for what the sum holds.
    """
    _, org, nv = _columns(np.full(np.shape(organic), np.nan), organic, nonvolatile_fraction)
    counted = ~np.asarray(exempt, bool)
    low = np.where(np.isnan(nv), 0.0, 1 - nv) * counted
    high = np.where(np.isnan(nv), 1.0, 1 - nv) * counted
    return _of_organic(low, high, org)


def voc_mass_fraction(mass_fraction: ArrayLike, volatile: VolatileFraction, *,
                      names: Sequence[str]) -> Bounded:
    """Grams of volatile organic compounds in a gram of product. (R,I) to (R,) [1]

    The value stands, in the middle of its bounds, as long as they are less than 2 % of the mass apart.
    """
    w = np.asarray(mass_fraction, float)
    low, high = w @ volatile.low, w @ volatile.high
    present = np.isnan(w) | (w > 0)
    missing = present & (np.isnan(w) | ~volatile.known)
    reasons = reasons_for(missing, names, lambda which: f"how much of {which} is volatile is not known")
    return bounded(np.where(high - low < SMALL_SHARE, (low + high) / 2, np.nan), low, high, reasons)


def voc_ready_to_use_g_l(voc: Bounded, of: Volumes) -> Bounded:
    """VOC per litre of the product as it is used, water included. (R,) [g/L]

    voc from `voc_mass_fraction`. Source: ISO 11890-2, method for VOC "ready for use".
    """
    return _per_litre(voc, specific_volume(of))


def voc_less_water_g_l(voc: Bounded, of: Volumes, left_out: ArrayLike) -> Bounded:
    """VOC per litre of the product less water and exempt compounds. (R,) [g/L]

    (W_v - W_w - W_e) / (V - V_w - V_e), with `voc` the mass above the line and left_out (I,) bool the
    water and exempt compounds below it. NaN where nothing else is there.
    Source: ASTM D3960; 40 CFR 59.406.
    """
    rest = bounded(*summed(of.wet, ~np.asarray(left_out, bool)), of.missing_density)
    return _per_litre(voc, rest)


def voc_per_solids_g_l(voc: Bounded, of: Volumes) -> Bounded:
    """VOC per litre of dry film. (R,) [g/L]  Source: ASTM D3960."""
    dry = bounded(*summed(of.dry), join_reasons(of.missing_density, of.missing_nonvolatile))
    return _per_litre(voc, dry)


def _per_litre(mass: Bounded, volume_cm3: Bounded) -> Bounded:
    g_cm3 = quotient(mass, volume_cm3)
    return Bounded(1000 * g_cm3.value, 1000 * g_cm3.low, 1000 * g_cm3.high, g_cm3.reasons)


def _of_organic(low: Array, high: Array, organic: Array) -> VolatileFraction:
    return VolatileFraction(np.where(organic == 1, low, 0.0), np.where(organic == 0, 0.0, high))


def _columns(bp: ArrayLike, organic: ArrayLike, nv: ArrayLike) -> tuple[Array, Array, Array]:
    columns = tuple(np.asarray(v, float) for v in (bp, organic, nv))
    if len({c.shape for c in columns}) != 1:
        raise ValueError(f"columns of shapes {[c.shape for c in columns]}; expected one value per ingredient")
    refuse_outside(columns[1], "organic", 0, 1)
    refuse_outside(columns[2], "nonvolatile_fraction", 0, 1)
    return columns[0], columns[1], columns[2]
