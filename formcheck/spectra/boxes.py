"""From electron boxes to bands and a spectrum, each with its error.

A box here is anything with the fields `shape` (chain, plate, ring), `n_pi_electrons`, the size of its shape
(`length_nm`, `sides_nm`, `circumference_nm`), `bond_alternation_ev` and `count`. Several boxes in one
molecule absorb side by side.
"""

from __future__ import annotations

import json
from collections.abc import Iterable
from dataclasses import dataclass
from functools import cache
from pathlib import Path
from typing import Any

import numpy as np

from formcheck.spectra import chain_box, plate_box, ring_box
from formcheck.spectra.bands import band_area, half_heights_of_widths, lognormal_band
from formcheck.spectra.free_electron import Level, Orbitals, Transition, levels_of, transitions_of
from formcheck.trouble import InputError, Place, Problem

ERRORS = Path(__file__).parent / "data" / "box_errors.json"
INTEGRAL_TO_STRENGTH = (
    4.32e-9  # f = 4.32e-9 times the integral of epsilon over wavenumber (Strickler & Berg 1962)
)
SHORTEST_NM = 160.0  # below it no solvent lets light through
WEAKEST = 0.01  # of the strongest band of a box: weaker ones are lost in its tails
DRAWS = 200
LOW, HIGH = 0.05, 0.95


@dataclass(frozen=True)
class EstimatedBand:
    """A band worked out from a box: the fields a band has on a material record, and its f."""

    lambda_max_nm: float
    epsilon_l_mol_cm: float
    half_height_nm: tuple[float, float]
    lambda_sd_nm: float
    epsilon_relative_sd: float
    oscillator_strength: float
    label: str
    source: str = "box model"


def box_levels(box: Any, *, empty: int = 3) -> list[Level]:
    """Energies of a box with the electrons in them, lowest first, up to `empty` levels above the filled."""
    return levels_of(_orbitals(box), box.n_pi_electrons, empty=empty)


def transitions(box: Any) -> list[Transition]:
    """Allowed transitions of one box, longest wavelength first, with the model's oscillator strength.

    Raises
    ------
    InputError
        a size that no molecule has; bond alternation on a shape other than a chain.
    """
    gap = 0.0
    if box.bond_alternation_ev:
        if box.shape != "chain":
            raise InputError(
                Problem(
                    Place("box"),
                    f"bond_alternation_ev on a {box.shape}",
                    "it on a chain only: Kuhn's term is that of a chain",
                )
            )
        gap = chain_box.alternation_gap_ev(box.n_pi_electrons, bond_alternation_ev=box.bond_alternation_ev)
    return transitions_of(_orbitals(box), box.n_pi_electrons, gap_ev=gap)


def _orbitals(box: Any) -> Orbitals:
    if box.shape == "chain":
        return chain_box.orbitals(box.n_pi_electrons, length_nm=box.length_nm)
    if box.shape == "plate":
        return plate_box.orbitals(box.n_pi_electrons, sides_nm=box.sides_nm)
    if box.shape == "ring":
        return ring_box.orbitals(box.n_pi_electrons, circumference_nm=box.circumference_nm)
    raise InputError(Problem(Place("box"), f"the shape {box.shape!r}", "chain, plate or ring"))


def box_bands(boxes: Iterable[Any]) -> list[EstimatedBand]:
    """Bands of all boxes of a molecule, longest wavelength first.

    Strength: the model's oscillator strength times the factor that published strengths show against it;
    epsilon from it by the integral over the band and the width of published bands. Position and strength
    carry the spread of published bands about the model (`box_errors`).
    """
    found = [band for number, box in enumerate(boxes, 1) for band in _bands_of(box, number)]
    return sorted(found, key=lambda band: -band.lambda_max_nm)


def _bands_of(box: Any, number: int) -> list[EstimatedBand]:
    seen = [t for t in transitions(box) if t.wavelength_nm >= SHORTEST_NM]
    strongest = max((t.oscillator_strength for t in seen), default=0.0)
    return [
        _band(t, box, f"{box.shape} {number}: {t.label}")
        for t in seen
        if t.oscillator_strength >= WEAKEST * strongest
    ]


def _band(transition: Transition, box: Any, label: str) -> EstimatedBand:
    errors = box_errors()[box_class(box)]
    half = half_heights_of_widths(
        transition.wavelength_nm,
        above_cm1=errors["half_width_above_cm1"],
        below_cm1=errors["half_width_below_cm1"],
    )
    strength = transition.oscillator_strength * errors["strength_factor"] * box.count
    area = float(band_area(lambda_max_nm=transition.wavelength_nm, half_height_nm=half))
    return EstimatedBand(
        transition.wavelength_nm,
        strength / INTEGRAL_TO_STRENGTH / area,
        half,
        errors["lambda_relative_sd"] * transition.wavelength_nm,
        errors["strength_relative_sd"],
        transition.oscillator_strength * box.count,
        label if box.count == 1 else f"{label}, {box.count} times",
    )


def box_class(box: Any) -> str:
    """The class whose published errors hold for a box."""
    if box.shape != "chain":
        return box.shape
    return "chain_alternating" if box.bond_alternation_ev else "chain_equal_bonds"


@cache
def box_errors() -> dict[str, dict]:
    """By class: errors of position and strength, widths, and how they were derived from how many rows."""
    return json.loads(ERRORS.read_text(encoding="utf-8"))["classes"]


def drawn_spectra(bands: Iterable[Any], wavelength_nm, *, draws: int = DRAWS, seed: int = 0) -> np.ndarray:
    """Spectra that the bands could have within their errors, shape (draws, W) [L/(mol cm)].

    Positions vary normally by `lambda_sd_nm`, strengths log-normally by `epsilon_relative_sd`; bands vary on
    their own. The same seed gives the same spectra.
    """
    bands, wavelength_nm = list(bands), np.asarray(wavelength_nm, float)
    chance = np.random.default_rng(seed)
    total = np.zeros((draws, wavelength_nm.size))
    for band in bands:
        move = chance.standard_normal(draws) * (band.lambda_sd_nm or 0.0)
        ln_factor = chance.standard_normal(draws) * np.log1p(band.epsilon_relative_sd or 0.0)
        # stretching the wavelengths against the band moves all draws of it in one evaluation
        at = np.maximum(band.lambda_max_nm + move, 0.25 * band.lambda_max_nm)
        stretched = wavelength_nm[None, :] * (band.lambda_max_nm / at)[:, None]
        total += np.exp(ln_factor)[:, None] * lognormal_band(
            stretched,
            lambda_max_nm=band.lambda_max_nm,
            epsilon=band.epsilon_l_mol_cm,
            half_height_nm=band.half_height_nm,
        )
    return total


def spectrum_of_bands(bands: Iterable[Any], wavelength_nm) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    """Epsilon of the bands as they stand, and the low and high edge of nine in ten drawn spectra; each (W,).

    The edges are taken wavelength by wavelength: no single spectrum runs along them.
    """
    bands, wavelength_nm = list(bands), np.asarray(wavelength_nm, float)
    middle = np.zeros(wavelength_nm.size)
    for band in bands:
        middle += lognormal_band(
            wavelength_nm,
            lambda_max_nm=band.lambda_max_nm,
            epsilon=band.epsilon_l_mol_cm,
            half_height_nm=band.half_height_nm,
        )
    low, high = np.quantile(drawn_spectra(bands, wavelength_nm), [LOW, HIGH], axis=0)
    return middle, np.minimum(low, middle), np.maximum(high, middle)
