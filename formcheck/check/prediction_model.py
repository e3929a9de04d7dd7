"""A recipe made ready for prediction: rows of uncertain inputs in, spectra out, any number at once."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from random import Random

import numpy as np
from numpy.typing import ArrayLike

from formcheck.check.acid import AcidState, shares_at
from formcheck.check.colourants import WIDE_NM, Colourants
from formcheck.check.parts import Parts
from formcheck.check.predict import Optics, Setting, Variants, predict_spectrum
from formcheck.check.setting import Viewing
from formcheck.check.volumes import FilmState
from formcheck.materials.elements import molar_mass_of
from formcheck.recipe.batch import Batch
from formcheck.spectra.grid import WAVELENGTH_NM

DRAWS = 200
WEIGHINGS = np.sqrt(2.0)  # a weighing is the difference of two readings
LEAST_STRENGTH = 0.05


@dataclass(frozen=True)
class Inputs:
    """The uncertain inputs of a prediction: values, spreads, least values, and what each is called."""

    value: np.ndarray
    sd: np.ndarray
    lower: np.ndarray
    label: list[str]


@dataclass(frozen=True)
class Model:
    """A recipe made ready for prediction: rows of inputs in, spectra or Lab out."""

    inputs: Inputs
    spectra: Callable[[np.ndarray, Setting], np.ndarray]
    variants: Callable[[np.ndarray], Variants]
    optics: Optics


def prediction_model(batch: Batch, parts: Parts, film: FilmState, acid: AcidState, viewing: Viewing,
                     known: Colourants, r: int) -> Model:
    """The model of recipe `r` of a batch; it serves every recipe of the same lines, with their own inputs."""
    optics = _optics(parts, known)
    columns = [line.material for line in batch.lines[r]]
    share_of_line = parts.share[columns]
    inputs = inputs_of(batch, viewing, known, acid, film, r)
    n_lines, n_abs, n_pig = len(columns), len(known.absorbers), len(known.pigments)
    at = np.cumsum([n_lines, n_abs, n_abs, n_abs, n_pig, n_pig, 1, 1, 1])[:-1]

    def variants(rows: np.ndarray) -> Variants:
        mass, strength, shift, doubt, k, s, thickness, density, ph = np.split(rows, at, axis=1)
        return Variants(
            mass_fraction=mass @ share_of_line / mass.sum(axis=1, keepdims=True),
            density_g_ml=density[:, 0], share=_absorber_shares(parts, known, ph[:, 0]),
            wet_thickness_um=thickness[:, 0], strength=strength, shift_nm=shift, doubt=doubt, k_scale=k, s_scale=s)

    def spectra(rows: np.ndarray, setting: Setting) -> np.ndarray:
        return predict_spectrum(optics, setting, variants(rows))

    return Model(inputs, spectra, variants, optics)


def _optics(parts: Parts, known: Colourants) -> Optics:
    wide, grid = len(WIDE_NM), len(WAVELENGTH_NM)
    molar_masses = []
    for one in known.absorbers:
        material = parts.materials[one.constituent]
        molar_mass = molar_mass_of(material).value if material is not None else None
        assert molar_mass is not None
        molar_masses.append(molar_mass)
    return Optics(
        wavelength_nm=WAVELENGTH_NM, wide_nm=WIDE_NM,
        absorber_constituent=np.array([one.constituent for one in known.absorbers], dtype=int),
        molar_mass_g_mol=np.array(molar_masses),
        epsilon=np.array([one.epsilon for one in known.absorbers]).reshape(-1, wide),
        epsilon_doubt=np.array([one.doubt for one in known.absorbers]).reshape(-1, wide),
        pigment_constituent=np.array([one.constituent for one in known.pigments], dtype=int),
        pigment_density_g_ml=np.array([one.density_g_ml for one in known.pigments]),
        k=np.array([one.k for one in known.pigments]).reshape(-1, grid),
        s=np.array([one.s for one in known.pigments]).reshape(-1, grid))


def inputs_of(batch: Batch, viewing: Viewing, known: Colourants, acid: AcidState, film: FilmState, r: int) -> Inputs:
    """Inputs in the order that `prediction_model` takes them apart again."""
    lines, absorbers, pigments = batch.lines[r], known.absorbers, known.pigments
    step = batch.recipes[r].recipe.balance_step_g
    weighing = 0.0 if step is None else step / np.sqrt(12.0) * WEIGHINGS
    mass = batch.line_mass_g[r, : len(lines)]
    spectra_of = [f"spectrum of {one.name}" for one in absorbers]
    optics_of = [f"K and S of {one.name}" for one in pigments]
    pigment_sd = [one.relative_sd for one in pigments]
    density = film.density_g_ml
    density_sd = (density.high[r] - density.low[r]) / 4  # the bounds taken as two standard deviations to each side
    ph, ph_sd = (7.0, 0.0) if acid.ph is None else (acid.ph, acid.ph_sd)
    # label, value, standard deviation, least value
    groups: list[tuple[list[str], ArrayLike, ArrayLike, ArrayLike]] = [
        (["weighing"] * len(lines), mass, np.where(mass > 0, weighing, 0.0), LEAST_STRENGTH * mass),
        (spectra_of, 1.0, [one.strength_sd for one in absorbers], LEAST_STRENGTH),
        (spectra_of, 0.0, [one.lambda_sd_nm for one in absorbers], -np.inf),
        (spectra_of, 0.0, [float(one.doubt.any()) for one in absorbers], -np.inf),
        (optics_of, 1.0, pigment_sd, LEAST_STRENGTH),
        (optics_of, 1.0, pigment_sd, LEAST_STRENGTH),
        (["film thickness"], viewing.wet_thickness_um, viewing.thickness_sd_um, 0.0),
        (["density"], density.value[r], density_sd, LEAST_STRENGTH * density.value[r]),
        (["pH"], ph, ph_sd, -np.inf),
    ]
    value, sd, lower = (
        np.concatenate([np.broadcast_to(np.asarray(group[n], dtype=float), len(group[0])) for group in groups])
        for n in (1, 2, 3))
    return Inputs(value, sd, lower, [label for group in groups for label in group[0]])


def _absorber_shares(parts: Parts, known: Colourants, ph: np.ndarray) -> np.ndarray:
    """Share of each absorber's form at each pH, (N, F)."""
    shares = np.ones((len(ph), len(known.absorbers)))
    at: dict[int, np.ndarray] = {}
    for f, one in enumerate(known.absorbers):
        material = parts.materials[one.constituent]
        assert material is not None
        if one.constituent not in at:
            at[one.constituent] = shares_at(material, ph)
        shares[:, f] = at[one.constituent][:, one.form]
    return shares


def draws_of(x: Inputs, n: int = DRAWS, seed: int = 20) -> np.ndarray:
    """Rows that the inputs could be, (n, inputs); the same inputs always give the same rows."""
    uncertain = np.flatnonzero(x.sd > 0)
    chance = Random(seed)  # NumPy's generators take longer to import than these few numbers to draw
    noise = np.array([chance.gauss(0.0, 1.0) for _ in range(n * len(uncertain))]).reshape(n, -1)
    drawn = np.tile(x.value, (n, 1))
    drawn[:, uncertain] += noise * x.sd[uncertain]
    return np.maximum(drawn, x.lower)
