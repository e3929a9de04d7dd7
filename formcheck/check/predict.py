"""Composition to spectrum, for any number of variants of a recipe at once.

A prediction, its uncertainty and a sweep all run through `predict_spectrum`: variants lead,
wavelength comes last.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from formcheck.colour.beer_lambert import transmittance
from formcheck.colour.layer import k_over_s_of_dye, layer_reflectance, stained_ground

UM_PER_CM = 1e4


@dataclass(frozen=True)
class Optics:
    """What each colourant of a mixture does to light. F absorbers (bands of dye forms), P pigments.

    `epsilon` decadic molar absorptivity [L/(mol cm)] on the evenly spaced `wide_nm`, (F, V), and
    `epsilon_doubt` one standard deviation of what its shape may miss; `k`, `s` per um of pigment alone
    on `wavelength_nm`, (P, W). The index arrays point into the constituents.
    """

    wavelength_nm: np.ndarray  # (W,)
    wide_nm: np.ndarray  # (V,), reaching further than wavelength_nm at both ends
    absorber_constituent: np.ndarray  # (F,)
    molar_mass_g_mol: np.ndarray  # (F,)
    epsilon: np.ndarray
    epsilon_doubt: np.ndarray
    pigment_constituent: np.ndarray  # (P,)
    pigment_density_g_ml: np.ndarray  # (P,)
    k: np.ndarray
    s: np.ndarray


@dataclass(frozen=True)
class Layer:
    """Another film of the stack as it stands: arrays over the wavelengths of the prediction, and its index."""

    k_x: np.ndarray  # (W,)
    s_x: np.ndarray
    dye_absorbance: np.ndarray
    n: float


@dataclass(frozen=True)
class Setting:
    """Where the mixture is looked at: through a cell, or as a film on a ground."""

    path_length_cm: float | None = None  # set for a cell
    ground: np.ndarray | None = None  # (W,), reflectance
    ground_in_air: bool = True  # measured in air, so that its own surface is taken off first
    ground_specular_included: bool = True
    film_index: float = 1.5
    learned_surface: tuple[float, float] | None = None  # k1, k2 fitted with the K and S, in place of the index
    specular_included: bool = True
    directional: bool = False  # 45:0 instead of d:8
    ground_directional: bool = False
    takes_in: tuple[float, float] | None = None  # depth in um and S per um of a ground that the dye goes into
    under: tuple[Layer, ...] = ()  # films between the ground and this one, the lowest first
    over: tuple[Layer, ...] = ()  # films over this one, the lowest first


@dataclass(frozen=True)
class Variants:
    """N variants of one mixture; strengths and shifts are what the uncertainty of the data moves."""

    mass_fraction: np.ndarray  # (N, C)
    density_g_ml: np.ndarray  # (N,)
    share: np.ndarray  # (N, F), of the dye in the form that the absorber belongs to
    wet_thickness_um: np.ndarray  # (N,), unused for a cell
    strength: np.ndarray  # (N, F), 1 as published
    shift_nm: np.ndarray  # (N, F), 0 as published
    doubt: np.ndarray  # (N, F), of epsilon_doubt, 0 as published
    k_scale: np.ndarray  # (N, P)
    s_scale: np.ndarray  # (N, P)


def dye_absorbance_per_cm(optics: Optics, variants: Variants) -> np.ndarray:
    """Decadic absorbance of the dyes for 1 cm of the mixture, (N, W). Beer-Lambert."""
    fraction = variants.mass_fraction[:, optics.absorber_constituent]
    mol_l = fraction * variants.density_g_ml[:, None] * 1000 / optics.molar_mass_g_mol * variants.share
    weight = mol_l * variants.strength
    if not variants.shift_nm.any() and not variants.doubt.any():
        return weight @ moved(optics, optics.epsilon, np.zeros((1, len(optics.epsilon))))[0]
    epsilon = moved(optics, optics.epsilon, variants.shift_nm)
    epsilon += variants.doubt[:, :, None] * moved(optics, optics.epsilon_doubt, variants.shift_nm)
    return np.maximum(np.einsum("nf,nfw->nw", weight, epsilon), 0.0)


def moved(optics: Optics, spectra: np.ndarray, shift_nm: np.ndarray) -> np.ndarray:
    """Spectra (F, V), each moved to longer wavelengths by its shift, (N, F, W); linear in between."""
    step = optics.wide_nm[1] - optics.wide_nm[0]
    at = (optics.wavelength_nm - shift_nm[:, :, None] - optics.wide_nm[0]) / step
    at = np.clip(at, 0, len(optics.wide_nm) - 1)
    below = np.minimum(at.astype(int), len(optics.wide_nm) - 2)
    part = at - below
    row = np.arange(len(spectra))[None, :, None]
    return spectra[row, below] * (1 - part) + spectra[row, below + 1] * part


def pigment_volume_fraction(optics: Optics, variants: Variants) -> np.ndarray:
    """Volume of each pigment per volume of the wet mixture, (N, P)."""
    fraction = variants.mass_fraction[:, optics.pigment_constituent]
    return fraction * variants.density_g_ml[:, None] / optics.pigment_density_g_ml


def predict_spectrum(optics: Optics, setting: Setting, variants: Variants) -> np.ndarray:
    """Transmittance of a cell, or reflectance of a film on its ground, (N, W).

    A film is reckoned from what lies on each area: the wet film carries its colourants down to the
    dry film, so K and S times thickness do not change as it dries (Duncan 1940 mixing).
    """
    per_cm = dye_absorbance_per_cm(optics, variants)
    if setting.path_length_cm is not None:
        return transmittance(per_cm * setting.path_length_cm)
    assert setting.ground is not None
    thickness = variants.wet_thickness_um[:, None]
    volume = pigment_volume_fraction(optics, variants)
    k_x = (volume * variants.k_scale) @ optics.k * thickness
    s_x = (volume * variants.s_scale) @ optics.s * thickness
    dye_absorbance = per_cm * thickness / UM_PER_CM
    if setting.takes_in:
        depth_um, scattering_per_um = setting.takes_in
        extra = k_over_s_of_dye(dye_absorbance / depth_um, ground_scattering_per_um=scattering_per_um)
        return stained_ground(setting.ground, extra_k_over_s=extra, specular_included=setting.specular_included)
    if setting.learned_surface or setting.directional or setting.under or setting.over:
        return _as_stack(setting, k_x, s_x, dye_absorbance)
    return layer_reflectance(
        k_x=k_x,
        s_x=s_x,
        dye_absorbance=dye_absorbance,
        ground=setting.ground,
        n=setting.film_index,
        specular_included=setting.specular_included,
        ground_in_air=setting.ground_in_air,
        ground_specular_included=setting.ground_specular_included,
    )


def _as_stack(setting: Setting, k_x: np.ndarray, s_x: np.ndarray, dye_absorbance: np.ndarray) -> np.ndarray:
    """A film among others, in 45:0, or under the surface whose constants were learned with its K and S, (N, W)."""
    from formcheck.colour.geometry import DIRECTIONAL, GLOSS_IN, GLOSS_OUT, surface_of_constants
    from formcheck.colour.layers import stack_reflectance

    def geometry(directional: bool, specular_included: bool) -> str:
        return DIRECTIONAL if directional else GLOSS_IN if specular_included else GLOSS_OUT

    assert setting.ground is not None
    surface = None
    if setting.learned_surface:
        k1, k2 = setting.learned_surface
        surface = surface_of_constants(k1=k1, k2=k2, specular_included=setting.specular_included)
    above, below = setting.over[::-1], setting.under[::-1]  # a stack is written from the air down

    def stacked(own: np.ndarray, name: str) -> np.ndarray:
        films = [*(getattr(one, name) for one in above), own, *(getattr(one, name) for one in below)]
        return np.stack([np.broadcast_to(one, own.shape) for one in films], axis=1)

    return stack_reflectance(
        ground=setting.ground, k_x=stacked(k_x, "k_x"), s_x=stacked(s_x, "s_x"),
        dye_absorbance=stacked(dye_absorbance, "dye_absorbance"),
        n=np.array([*(one.n for one in above), setting.film_index, *(one.n for one in below)]),
        ground_in_air=setting.ground_in_air, air_surface=surface,
        geometry=geometry(setting.directional, setting.specular_included),
        ground_geometry=geometry(setting.ground_directional, setting.ground_specular_included))
