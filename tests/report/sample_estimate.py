"""Estimates to show in tests; the figures are invented and only look like those of boxes."""

from __future__ import annotations

from math import exp

from formcheck.check.record import Cited, Swatch
from formcheck.check.record_estimate import (
    BoxLevel,
    BoxLevels,
    Estimate,
    EstimatedBand,
    EstimatedForm,
    EstimatedShade,
    EstimatedSpectrum,
)


def spectrum(maxima: list[tuple[float, float]]) -> EstimatedSpectrum:
    wavelength = [200.0 + 5 * step for step in range(117)]
    value = [sum(height * exp(-((nm - at) / 30) ** 2) for at, height in maxima) for nm in wavelength]
    return EstimatedSpectrum(wavelength_nm=wavelength, value=value, low=[0.6 * one for one in value],
                             high=[1.4 * one + 800 for one in value])


def chain() -> BoxLevels:
    return BoxLevels(label="chain of 1.20 nm", shape="chain", n_pi_electrons=8, count=2, levels=[
        BoxLevel(label=f"n={n}", energy_ev=0.261 * n * n, orbitals=1, electrons=2 if n <= 4 else 0)
        for n in range(1, 7)])


def ring() -> BoxLevels:
    return BoxLevels(label="ring of 0.84 nm around", shape="ring", n_pi_electrons=6, levels=[
        BoxLevel(label="k=0", energy_ev=0.0, orbitals=1, electrons=2),
        BoxLevel(label="k=+1 k=-1", energy_ev=2.13, orbitals=2, electrons=4),
        BoxLevel(label="k=+2 k=-2", energy_ev=8.53, orbitals=2, electrons=0)])


def swatch(hex_text: str, lightness: float) -> Swatch:
    return Swatch(lab=(lightness, 12.0, 40.0), srgb_hex=hex_text, in_gamut=True)


def sample_estimate() -> Estimate:
    base = EstimatedForm(
        name="base form", boxes=[chain(), ring()],
        bands=[EstimatedBand(label="chain, n=4 to n=5", lambda_max_nm=527.3, lambda_sd_nm=31.0,
                             epsilon_l_mol_cm=61200.0, epsilon_relative_sd=0.4, oscillator_strength=1.13,
                             half_height_nm=(488.0, 561.0)),
               EstimatedBand(label="ring, |k|=1 to 2", lambda_max_nm=201.0, epsilon_l_mol_cm=40000.0)],
        spectrum=spectrum([(527.3, 61200.0), (230.0, 40000.0)]),
        shade=EstimatedShade(light="D65", observer_deg=2, concentration_mol_l=1.2e-5, path_length_cm=1.0,
                             swatch=swatch("#d58bb0", 66.0), words="pink to violet",
                             region=[swatch("#e0a080", 71.0), swatch("#d58bb0", 66.0),
                                     swatch("#9f8fd0", 63.0)]))
    acid = EstimatedForm(
        name="acid form", boxes=[ring()], colourless=True,
        bands=[EstimatedBand(label="ring, |k|=1 to 2", lambda_max_nm=256.0, lambda_sd_nm=20.0,
                             epsilon_l_mol_cm=8000.0)],
        spectrum=spectrum([(256.0, 8000.0)]), notes=["no band of this form reaches visible light"])
    return Estimate(formcheck_version="0.1.0", title="A dye of two chains and a ring", file="boxes.yaml",
                    forms=[base, acid], error="invented: maxima within 31 nm, strengths within 40 %",
                    notes=["isolated molecule: no solvent"],
                    sources=[Cited(cite="Invented J. of Boxes 1 (1949) 1", kind="paper")])
