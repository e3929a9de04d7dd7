"""Tinting strength of a batch against a standard, and the shade left over when the strength is made up for."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from formcheck.colour import kubelka_munk, tristimulus
from formcheck.colour.cielab import lab_of_spectrum
from formcheck.colour.geometry import Surface, met_inside, seen_in_air
from formcheck.colour.lights import Light
from formcheck.colour.refuse import refuse_where
from formcheck.spectra.grid import WAVELENGTH_NM

FIRST_NM, LAST_NM = 400.0, 700.0  # between which the maximum of absorption is looked for


def added_k_over_s(
    reflectance: ArrayLike, *, white: ArrayLike | None = None, surface: Surface | None = None
) -> np.ndarray:
    """K/S that a colourant adds to the white it is reduced with, from opaque reductions (..., W). [1]

    white (..., W): the reduction without colourant, read alike; None takes its K/S as 0. surface: the one
    to take off both (geometry.surface); None for textiles and matt reductions. Noise may make it dip below 0.

    Source: P. Kubelka & F. Munk, Z. tech. Phys. 12 (1931) 593; the difference, as for dyed textiles.
    """
    added = _k_over_s(reflectance, surface)
    return added if white is None else added - _k_over_s(white, surface)


def strength_at_maximum(
    batch: ArrayLike, standard: ArrayLike, wavelength_nm: ArrayLike = WAVELENGTH_NM
) -> np.ndarray:
    """K/S of the batch by that of the standard where the standard absorbs most, 400 to 700 nm; 1 is equal.

    batch, standard: `added_k_over_s` (..., W) at equal loadings in equal white; gives (...). [1]

    Source: ISO 18314-2 and ISO 787-24 (relative tinting strength), the clause on the absorption maximum
    from memory.
    """
    batch, standard = _pair(batch, standard)
    at = np.asarray(wavelength_nm, dtype=float)
    visible = np.where((at >= FIRST_NM) & (at <= LAST_NM), standard, -np.inf)
    most = np.argmax(visible, axis=-1)[..., None]
    return _ratio(*(np.take_along_axis(values, most, -1)[..., 0] for values in (batch, standard)))


def strength_by_weights(
    batch: ArrayLike,
    standard: ArrayLike,
    *,
    light: Light = "D65",
    observer_deg: int = 10,
    wavelength_nm: ArrayLike = WAVELENGTH_NM,
) -> np.ndarray:
    """K/S summed over the spectrum with the weights E (x + y + z), batch by standard; 1 is equal.

    Arguments as `strength_at_maximum`, light and observer as `tristimulus.weights`; gives (...). Holds
    also where the maximum has moved or noise sits on it.

    Source: the weighted sum of AATCC Evaluation Procedure 6, from memory; ISO 18314-2.
    """
    batch, standard = _pair(batch, standard)
    weights = tristimulus.weights(light, observer_deg, wavelength_nm).sum(axis=-1)
    return _ratio(batch @ weights, standard @ weights)


def shades_at_equal_strength(
    batch: ArrayLike,
    standard: ArrayLike,
    *,
    strength: ArrayLike,
    white_k_over_s: ArrayLike = 0.0,
    surface: Surface | None = None,
    light: Light = "D65",
    observer_deg: int = 10,
    wavelength_nm: ArrayLike = WAVELENGTH_NM,
) -> tuple[np.ndarray, np.ndarray]:
    """Lab of the standard and of the batch dosed 1/strength as high: what differs then is the shade itself.

    Parameters
    ----------
    batch, standard : float arrays, shape (..., W)
        `added_k_over_s` of each. [1]
    strength : float array, shape (...)
        Of the batch, from one of the two functions above; above 0. [1]
    white_k_over_s : float array, shape (..., W)
        Of the white that both are reduced with. [1]
    surface : Surface
        Through which the shades are seen, as for `added_k_over_s`.
    light, observer_deg, wavelength_nm
        As for `tristimulus.weights`.

    Returns
    -------
    (standard, batch) : float arrays, shape (..., 3)
        For difference.parts_2000, cmc.parts_cmc and difference.difference_words.

    Raises
    ------
    ValueError
        A strength that is not above 0.

    Source: ISO 18314-2 (residual colour difference after adjusting the strength).
    """
    strength = np.asarray(strength, dtype=float)
    refuse_where(~(strength > 0), strength, "strength", "a strength above 0")
    batch, standard = _pair(batch, standard)
    seen = []
    for added in (standard, batch / strength[..., None]):
        inside = kubelka_munk.r_infinity(np.maximum(white_k_over_s + added, 0), 1.0)
        spectrum = inside if surface is None else seen_in_air(inside, surface)
        seen.append(lab_of_spectrum(spectrum, light, observer_deg, wavelength_nm))
    return seen[0], seen[1]


def _k_over_s(reflectance: ArrayLike, surface: Surface | None) -> np.ndarray:
    return kubelka_munk.k_over_s(reflectance if surface is None else met_inside(reflectance, surface))


def _pair(batch: ArrayLike, standard: ArrayLike) -> tuple[np.ndarray, np.ndarray]:
    first, second = np.broadcast_arrays(np.asarray(batch, dtype=float), np.asarray(standard, dtype=float))
    return first, second


def _ratio(batch: np.ndarray, standard: np.ndarray) -> np.ndarray:
    """NaN where the standard shows no colour to compare with."""
    return np.divide(batch, standard, out=np.full(np.shape(standard), np.nan), where=standard > 0)
