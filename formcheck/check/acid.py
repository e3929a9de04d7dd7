"""The pH of the mixture, measured or computed, and the share of every form of every dye at it."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from formcheck.acid_base.forms import form_fractions
from formcheck.acid_base.mixture_ph import mixture_ph
from formcheck.acid_base.water_phase import water_phase
from formcheck.check.parts import Parts, parts_of, with_impure_rests
from formcheck.check.record import Cited, DyeForms, Figure
from formcheck.materials.record import Material
from formcheck.materials.shelf import Shelf
from formcheck.recipe.batch import Batch
from formcheck.recipe.model import Measured

USUAL_TEMPERATURE_C = 25.0
METER_SD = 0.05  # of a pH meter adjusted with two buffers (common practice)


@dataclass(frozen=True)
class AcidState:
    """pH of one recipe: `ph` None with `reason`; `computed` None likewise."""

    ph: float | None
    ph_sd: float
    reason: str
    computed: float | None
    computed_ideal: float | None
    computed_sd: float | None
    computed_reason: str
    ionic_strength_mol_kg: float
    beyond_davies: bool
    notes: tuple[str, ...] = ()

    @property
    def bounds(self) -> tuple[float, float]:
        """Two standard deviations to each side; NaN when unknown."""
        if self.ph is None:
            return np.nan, np.nan
        return self.ph - 2 * self.ph_sd, self.ph + 2 * self.ph_sd


def acid_state(batch: Batch, shelf: Shelf, r: int = 0) -> AcidState:
    """pH by measurement where there is one, else by charge balance, else unknown with the reason."""
    measured = batch.recipes[r].recipe.measured or Measured()
    parts = parts_of(shelf, batch.materials, kept_whole=lambda material: material.acid_base is not None)
    parts = with_impure_rests(parts, batch, r)
    phase = water_phase(parts.materials, parts.fractions(batch.mass_fraction)[r:r + 1], names=parts.names)
    temperature_c = USUAL_TEMPERATURE_C if measured.temperature_c is None else measured.temperature_c
    found = mixture_ph(phase, temperature_c=temperature_c)
    computed, ideal, sd = (_known(values[0]) for values in (found.ph, found.ph_ideal, found.ph_sd))
    strength = float(np.nan_to_num(found.ionic_strength_mol_kg[0]))
    ph, ph_sd, reason = computed, sd or 0.0, found.reasons[0]
    if measured.ph is not None:
        ph, ph_sd, reason = measured.ph, measured.ph_sd or METER_SD, ""
    return AcidState(ph, ph_sd, reason, computed, ideal, sd, found.reasons[0], strength,
                     bool(found.beyond_davies[0]), found.notes)


def _known(value: float) -> float | None:
    return float(value) if np.isfinite(value) else None


def ph_figures(state: AcidState, is_measured: bool) -> tuple[Figure, Figure | None]:
    """The pH that counts, and the computed one beside a measured one."""
    how = "charge balance, activities by Davies"
    if state.beyond_davies:
        how += "; ionic strength beyond the range of Davies (0.5 mol/kg)"
    computed = Figure(name="pH computed", value=_rounded(state.computed), unit="", how=how, sd=state.computed_sd,
                      reason=state.computed_reason)
    if is_measured:
        source = Cited(cite="measured value in the recipe", kind="user")
        return Figure(name="pH", value=state.ph, unit="", sd=state.ph_sd, how="measured", source=source), computed
    if state.ph is None:
        return Figure(name="pH", value=None, unit="", reason=state.reason), None
    return Figure(name="pH", value=_rounded(state.ph), unit="", sd=state.ph_sd, how=how), None


def _rounded(value: float | None) -> float | None:
    return None if value is None else round(value, 6)


def pka_of(material: Material) -> list[float]:
    return [number.value for number in material.acid_base.pka] if material.acid_base else []


def shares_at(material: Material, ph: np.ndarray) -> np.ndarray:
    """Shares (N, forms) of a dye's forms at each pH (N,); a dye of one form is all in it."""
    n_forms = len(material.optical.forms) if material.optical else 1
    if n_forms <= 1:
        return np.ones((len(ph), max(n_forms, 1)))
    return form_fractions(np.array([pka_of(material)]), ph)[:, 0, :]


def form_shares(parts: Parts, present: np.ndarray, state: AcidState) -> dict[int, np.ndarray | None]:
    """Shares of the forms of every dye that is present, by constituent; None where the pH is unknown."""
    found: dict[int, np.ndarray | None] = {}
    for c, material in enumerate(parts.materials):
        if material is None or not present[c] or not (material.optical and material.optical.forms):
            continue
        several = len(material.optical.forms) > 1
        if several and state.ph is None:
            found[c] = None
        else:
            found[c] = shares_at(material, np.array([7.0 if state.ph is None else state.ph]))[0]
    return found


def dye_forms(parts: Parts, shares: dict[int, np.ndarray | None], state: AcidState) -> list[DyeForms]:
    """What the Check says of the dyes that have more than one form."""
    told = []
    for c, share in shares.items():
        material = parts.materials[c]
        if material is None or material.optical is None or len(material.optical.forms) < 2:
            continue
        told.append(DyeForms(
            material=parts.names[c], forms=[form.name for form in material.optical.forms], pka=pka_of(material),
            shares=None if share is None else [float(x) for x in share],
            reason=f"the pH is unknown: {state.reason}" if share is None else ""))
    return told
