"""From the records of the ingredients to what is dissolved in the water of a mixture, or why not."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from formcheck.acid_base.unsettled import (
    LEAST_WATER_IN_LIQUID,
    LEAST_WATER_IN_MIXTURE,
    MOST_MOL_KG,
    SALT_KINDS,
    Unsettled,
    names_of,
    takes_part,
    why_unsettled,
)
from formcheck.materials.record import AcidBase, Material, spread

Array = NDArray[np.float64]

# Where a record gives no spread: what careful handbooks differ by at 25 C (common practice).
USUAL_PKA_SD = 0.05

_COSOLVENT_KINDS = ("solvent", "plasticiser")


@dataclass(frozen=True)
class WaterPhase:
    """R recipes, S dissolved acids, bases and salts of n steps at most.

    total_mol_kg (R,S)           per kg of water; NaN throughout a recipe that is unsettled
    pka, pka_sd (S,n)            at 25 C, padded with NaN
    charge_fully_protonated, counter_charge (S,);  column (S,) the ingredient each stands for
    other_ionic_strength_mol_kg (R,)   of salts whose record does not give their ions
    cosolvent_share (R,)         organic solvent in solvent and water, by mass
    unsettled                    why a recipe's pH cannot be computed
    notes                        what was assumed
    """

    total_mol_kg: Array
    pka: Array
    pka_sd: Array
    charge_fully_protonated: Array
    counter_charge: Array
    column: NDArray[np.int_]
    other_ionic_strength_mol_kg: Array
    cosolvent_share: Array
    unsettled: Unsettled
    notes: tuple[str, ...]


@dataclass(frozen=True)
class _Substance:
    record: AcidBase
    molar_mass_g_mol: float
    column: int


def water_phase(materials: Sequence[Material | None], mass_fraction: ArrayLike, *,
                names: Sequence[str] | None = None) -> WaterPhase:
    """What is dissolved in the water of each recipe.

    Parameters
    ----------
    materials : I
        None for an undeclared part. Expand a material into its composition before the call where it
        has no `acid_base` of its own, so that water and ammonia of a 28 % ammonia count.
    mass_fraction : (R,I)
        NaN where unknown. [1]
    names : I, optional
        What the maker calls each, for the reasons.

    Raises
    ------
    ValueError
        Shapes that do not fit; an undeclared part without a name.
    """
    w = np.asarray(mass_fraction, float)
    if w.ndim != 2 or w.shape[1] != len(materials) or (names is not None and len(names) != len(materials)):
        raise ValueError(f"mass fractions {w.shape} for {len(materials)} materials; expected (R,I)")
    water = _sum(w, [m is not None and m.kind == "water" for m in materials])
    with np.errstate(divide="ignore", invalid="ignore"):
        per_kg_water = np.where(w == 0, 0.0, w / water[:, None])
    substances = _substances(materials)
    total = _totals(substances, per_kg_water)
    called = names_of(materials, names)
    strength, notes = _salts_without_ions(materials, called, per_kg_water)
    unsettled = Unsettled(
        names=called, mass_fraction=w,
        by_record=tuple(why_unsettled(m, name) for m, name in zip(materials, called, strict=True)),
        undissolved=_undissolved(materials, per_kg_water),
        no_water=water == 0, too_little_water=water < LEAST_WATER_IN_MIXTURE,
        water_diluted=(water > 0) & (water < LEAST_WATER_IN_LIQUID * _liquid(materials, w)),
        too_concentrated=(water > 0) & ((total > MOST_MOL_KG).any(axis=1) | (strength > MOST_MOL_KG)))
    pka, pka_sd = _pka_tables(substances)
    return WaterPhase(
        total_mol_kg=np.where(unsettled.any[:, None], np.nan, total), pka=pka, pka_sd=pka_sd,
        charge_fully_protonated=np.array([s.record.charge_fully_protonated for s in substances], float),
        counter_charge=np.array([s.record.counter_charge for s in substances], float),
        column=np.array([s.column for s in substances], int),
        other_ionic_strength_mol_kg=np.where(unsettled.any, np.nan, strength),
        cosolvent_share=_cosolvent_share(materials, w, water), unsettled=unsettled, notes=notes)


def _substances(materials: Sequence[Material | None]) -> list[_Substance]:
    return [_Substance(m.acid_base, m.molar_mass_g_mol.value, i) for i, m in enumerate(materials)
            if m is not None and m.acid_base is not None and m.molar_mass_g_mol is not None
            and takes_part(m.acid_base) and not m.acid_base.buffers_unknowably]


def _totals(substances: Sequence[_Substance], per_kg_water: Array) -> Array:
    molar_mass_kg = np.array([s.molar_mass_g_mol for s in substances]) / 1000
    return per_kg_water[:, [s.column for s in substances]] / molar_mass_kg


def _pka_tables(substances: Sequence[_Substance]) -> tuple[Array, Array]:
    n = max((len(s.record.pka) for s in substances), default=0)
    pka, sd = np.full((len(substances), n), np.nan), np.full((len(substances), n), np.nan)
    for row, substance in enumerate(substances):
        for step, number in enumerate(substance.record.pka):
            given = spread(number)
            pka[row, step], sd[row, step] = number.value, USUAL_PKA_SD if given is None else given
    return pka, sd


def _salts_without_ions(materials: Sequence[Material | None], names: Sequence[str],
                        per_kg_water: Array) -> tuple[Array, tuple[str, ...]]:
    """Ionic strength of salts recorded as neutral only, each taken as two ions of charge one."""
    strength, notes = np.zeros(len(per_kg_water)), []
    for i, m in enumerate(materials):
        if (m is None or m.kind not in SALT_KINDS or m.acid_base is None or takes_part(m.acid_base)
                or m.molar_mass_g_mol is None):
            continue
        strength = strength + per_kg_water[:, i] * 1000 / m.molar_mass_g_mol.value
        notes.append(f"the record of {names[i]} does not give its ions; its ionic strength was taken as "
                     "that of two ions of charge one")
    return strength, tuple(notes)


def _undissolved(materials: Sequence[Material | None], per_kg_water: Array) -> NDArray[np.bool_]:
    """Where more of an acid, base or salt is present than water dissolves, by the record. (R,I)"""
    most = [m.solubility_water_g_l.value / 1000 if m is not None and m.solubility_water_g_l is not None
            and m.acid_base is not None and takes_part(m.acid_base) else np.inf for m in materials]
    return per_kg_water > np.array(most)


def _liquid(materials: Sequence[Material | None], w: Array) -> Array:
    """Mass of what makes up the liquid: water, organic solvents, liquid acids and bases. (R,)"""
    return _sum(w, [m is not None and (m.kind == "water" or m.kind in _COSOLVENT_KINDS or (
        m.kind in ("acid", "base") and m.physical_form == "liquid")) for m in materials])


def _cosolvent_share(materials: Sequence[Material | None], w: Array, water: Array) -> Array:
    solvent = _sum(w, [m is not None and m.kind in _COSOLVENT_KINDS for m in materials])
    with np.errstate(divide="ignore", invalid="ignore"):
        return np.where(solvent == 0, 0.0, solvent / (solvent + water))


def _sum(mass_fraction: Array, mask: Sequence[bool]) -> Array:
    return mass_fraction[:, np.array(mask, bool)].sum(axis=1)
