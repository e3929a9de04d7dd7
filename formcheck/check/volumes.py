"""Densities, solids, film and VOC of a batch, from the film room, as figures and as arrays for the other rooms."""

from __future__ import annotations

import json
from dataclasses import dataclass
from functools import cache

import numpy as np

from formcheck.check.parts import Parts
from formcheck.check.record import Cited, Figure
from formcheck.film.bounds import Bounded
from formcheck.film.cpvc import critical_pvc
from formcheck.film.pvc import pigment_volume_concentration
from formcheck.film.thickness import dry_thickness_um, wet_thickness_um
from formcheck.film.voc import (
    VolatileFraction,
    voc_by_boiling_point,
    voc_by_evaporation,
    voc_less_water_g_l,
    voc_mass_fraction,
    voc_ready_to_use_g_l,
)
from formcheck.film.volumes import Volumes, dry_volume_fractions, solids_by_mass, solids_by_volume, volumes
from formcheck.hazards.book import built_in_folder
from formcheck.materials.elements import element_bounds
from formcheck.materials.record import Material
from formcheck.materials.shelf import Shelf
from formcheck.recipe.batch import Batch
from formcheck.recipe.model import Film

PIGMENT_KINDS = ("pigment", "extender", "metal_powder")


@dataclass(frozen=True)
class FilmState:
    """What the film room says of a batch; each Bounded is (R,)."""

    density_g_ml: Bounded
    solids_mass: Bounded
    solids_volume: Bounded
    pvc: Bounded
    cpvc: Bounded
    voc_ready: Bounded
    voc_less_water: Bounded
    dry_fraction: np.ndarray  # (R, C), of the dry film by volume


def film_state(batch: Batch, parts: Parts, shelf: Shelf) -> FilmState:
    """Volumes and VOC of every recipe of a batch over its constituents."""
    materials = parts.materials
    fractions = parts.fractions(batch.mass_fraction)
    of = volumes(fractions, density_g_cm3=_column(materials, "density_g_cm3"),
                 nonvolatile_fraction=_column(materials, "nonvolatile_fraction"), names=parts.names)
    pigment = np.array([m is not None and m.kind in PIGMENT_KINDS for m in materials])
    return FilmState(
        density_g_ml=_product_density(batch),
        solids_mass=solids_by_mass(of), solids_volume=solids_by_volume(of),
        pvc=pigment_volume_concentration(of, pigment),
        cpvc=_cpvc(fractions, materials, pigment, parts.names),
        voc_ready=_voc_ready(of, fractions, parts, shelf),
        voc_less_water=_voc_less_water(of, fractions, parts, shelf),
        dry_fraction=dry_volume_fractions(of),
    )


def nonvolatile_of(materials: tuple[Material, ...], parts: Parts) -> np.ndarray:
    """Mass fraction of each ingredient that stays in the dry film, NaN where unknown, (I,)."""
    inside = np.nan_to_num(_column(parts.materials, "nonvolatile_fraction"), nan=0.0)
    unsure = parts.share @ np.isnan(_column(parts.materials, "nonvolatile_fraction")) > 0
    reckoned = np.where(unsure, np.nan, parts.share @ inside)
    stated = _column(materials, "nonvolatile_fraction")
    return np.where(np.isnan(stated), reckoned, stated)


def dry_fraction_of_lines(batch: Batch, parts: Parts, state: FilmState, r: int = 0) -> np.ndarray:
    """Volume fraction of the dry film that each line leaves (L,), NaN where unknown; a constituent that several
    lines bring is shared among them by mass."""
    mass = batch.line_mass_g[r, : len(batch.lines[r])]
    brought = mass[:, None] * parts.share[[line.material for line in batch.lines[r]]]
    of_constituent = brought.sum(axis=0)
    share = np.divide(brought, of_constituent, out=np.zeros_like(brought), where=of_constituent != 0)
    return np.where(share != 0, share * state.dry_fraction[r], 0.0).sum(axis=1)


def wet_film_um(film: Film, state: FilmState, r: int = 0) -> tuple[float | None, str]:
    """Wet thickness of the recipe's film, or None with the reason."""
    if film.wet is not None:
        return film.thickness_um, ""
    wet = wet_thickness_um(np.array([film.thickness_um]), _only(state.solids_volume, r))
    if np.isnan(wet.value[0]):
        return None, wet.reasons[0] or "the solids by volume are unknown"
    return float(wet.value[0]), ""


def film_figures(film: Film | None, state: FilmState, batch: Batch, r: int = 0) -> list[Figure]:
    """The figures of volume and film that the Check shows."""
    measured = batch.recipes[r].recipe.measured
    density_how = "measured" if measured and measured.density_g_cm3 else "sum of the ingredients' volumes"
    figures = [
        Figure(name="batch", value=_value(batch.total_mass_g[r]), unit="g", how="as resolved from the amounts",
               reason="" if not np.isnan(batch.total_mass_g[r]) else _reason(batch, r)),
        _figure("density", state.density_g_ml, r, "g/mL", density_how),
        _figure("solids by mass", state.solids_mass, r, "%", "nonvolatile parts of the records", 100),
    ]
    if film is None:
        return figures
    figures += [
        _figure("solids by volume", state.solids_volume, r, "%", "volumes added", 100),
        _figure("pigment volume concentration", state.pvc, r, "%", "pigments and extenders in the dry film", 100),
        _figure("critical pigment volume concentration", state.cpvc, r, "%",
                "from oil absorption, Asbeck & Van Loo 1949", 100),
        _figure("VOC, ready to use", state.voc_ready, r, "g/L", "by boiling point", source=_definition("ready_to_use")),
        _figure("VOC, less water", state.voc_less_water, r, "g/L", "all that evaporates and is organic",
                source=_definition("less_water")),
    ]
    thickness = np.array([film.thickness_um])
    of_film = _only(state.solids_volume, r)
    if film.wet is not None:
        figures.append(_figure("dry film", dry_thickness_um(thickness, of_film), 0, "um", "wet film times solids"))
    else:
        figures.append(_figure("wet film", wet_thickness_um(thickness, of_film), 0, "um", "dry film over solids"))
    return figures


def _product_density(batch: Batch) -> Bounded:
    """Mass over volume; a measured density has already set the volume of the batch."""
    with np.errstate(divide="ignore", invalid="ignore"):
        value, low, high = (batch.total_mass_g / volume for volume in (
            batch.total_volume_ml, batch.total_volume_high_ml, batch.total_volume_low_ml))
    reasons = tuple(_reason(batch, r) if np.isnan(value[r]) else "" for r in range(len(value)))
    return Bounded(value, low, high, reasons)


def _reason(batch: Batch, r: int) -> str:
    return "; ".join(dict.fromkeys(reason.why for reason in batch.reasons[r])) or "the volume is unknown"


def _cpvc(fractions: np.ndarray, materials, pigment: np.ndarray, names) -> Bounded:
    if not pigment.any():
        nothing = np.full(len(fractions), np.nan)
        return Bounded(nothing, nothing, nothing, ("no pigment or extender",) * len(fractions))
    those = [m for m, is_pigment in zip(materials, pigment, strict=True) if is_pigment]
    return critical_pvc(
        fractions[:, pigment], density_g_cm3=_column(those, "density_g_cm3"),
        oil_absorption_g_100g=_column(those, "oil_absorption_g_100g"),
        names=[name for name, is_pigment in zip(names, pigment, strict=True) if is_pigment])


def _voc_ready(of: Volumes, fractions: np.ndarray, parts: Parts, shelf: Shelf) -> Bounded:
    volatile = voc_by_boiling_point(
        _column(parts.materials, "boiling_point_c"), organic=_organic(parts, shelf),
        nonvolatile_fraction=_column(parts.materials, "nonvolatile_fraction"),
        highest_boiling_point_c=voc_definitions()["ready_to_use"]["highest_boiling_point_c"])
    return voc_ready_to_use_g_l(voc_mass_fraction(fractions, volatile, names=parts.names), of)


def _voc_less_water(of: Volumes, fractions: np.ndarray, parts: Parts, shelf: Shelf) -> Bounded:
    """Low with the compounds left out that memory says are exempt, high with none: nothing passes on memory."""
    organic, nonvolatile = _organic(parts, shelf), _column(parts.materials, "nonvolatile_fraction")
    water = np.array([m is not None and m.kind == "water" for m in parts.materials])
    exempt_cas = voc_definitions()["less_water"]["exempt_cas"]
    exempt = np.array([m is not None and m.cas is not None and m.cas.value in exempt_cas for m in parts.materials])

    def less_water(left_out: np.ndarray) -> Bounded:
        volatile: VolatileFraction = voc_by_evaporation(nonvolatile, organic=organic, exempt=left_out)
        return voc_less_water_g_l(voc_mass_fraction(fractions, volatile, names=parts.names), of, water | left_out)

    none_exempt = less_water(np.zeros_like(exempt))
    if not exempt.any():
        return none_exempt
    some_exempt = less_water(exempt)
    return Bounded(none_exempt.value, np.fmin(none_exempt.low, some_exempt.low), none_exempt.high, none_exempt.reasons)


def _organic(parts: Parts, shelf: Shelf) -> np.ndarray:
    """1 organic, 0 not, NaN unknown: organic is what holds carbon and is no carbonate, carbide or cyanide complex."""
    return np.array([_is_organic(material, shelf) for material in parts.materials])


def _is_organic(material: Material | None, shelf: Shelf) -> float:
    if material is None:
        return np.nan
    if material.kind == "water" or {"carbonate", "cyanide_complex"} & set(material.groups):
        return 0.0
    made_of = material.elements.only if material.elements else None
    by_name = material.kind == "solvent" or "organic_solvent" in material.groups
    if by_name or (made_of and "C" in made_of):  # how much carbon it holds may be untold
        return 1.0
    low, high, _ = element_bounds(shelf, material, "C")
    return 1.0 if low > 0 else 0.0 if high == 0 else np.nan


@cache
def voc_definitions() -> dict:
    """What counts as VOC by the texts, and which compounds they leave out; data of hazard_rules/."""
    return json.loads((built_in_folder() / "voc_definitions.json").read_text(encoding="utf-8"))


def _definition(key: str) -> Cited:
    return Cited(**voc_definitions()[key]["source"])


def _column(materials, field: str) -> np.ndarray:
    numbers = [getattr(m, field) if m is not None else None for m in materials]
    return np.array([np.nan if number is None else number.value for number in numbers], dtype=float)


def _only(bounded: Bounded, r: int) -> Bounded:
    return Bounded(bounded.value[r:r + 1], bounded.low[r:r + 1], bounded.high[r:r + 1], (bounded.reasons[r],))


def _figure(name: str, of: Bounded, r: int, unit: str, how: str, factor: float = 1.0,
            source: Cited | None = None) -> Figure:
    value, low, high = (_value(array[r] * factor) for array in (of.value, of.low, of.high))
    reason = of.reasons[r] if value is None else ""
    return Figure(name=name, value=value, unit=unit, low=low, high=high, how=how, source=source,
                  reason=reason or ("not determined" if value is None else ""))


def _value(number: float) -> float | None:
    return float(number) if np.isfinite(number) else None
