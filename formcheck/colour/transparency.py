"""Transparency of an ink: how little it lightens or tints a black ground as the film grows."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from formcheck.colour.cielab import lab_of_spectrum
from formcheck.colour.difference import delta_e_ab
from formcheck.colour.layer import layer_reflectance
from formcheck.colour.lights import Light
from formcheck.colour.refuse import refuse_where
from formcheck.spectra.grid import WAVELENGTH_NM


def transparency_number(thickness_um: ArrayLike, delta_e: ArrayLike) -> np.ndarray:
    """1 / slope of DE*ab to the bare black against film thickness: um of film for one unit of difference.

    Parameters
    ----------
    thickness_um, delta_e : float arrays, shape (..., N)
        Films over black, at least two of different thickness; DE*ab of each to the bare black. [um], [1]

    Returns
    -------
    float array, shape (...)
        Infinite where the difference does not grow with the film: wholly transparent. [um]

    Raises
    ------
    ValueError
        Thicknesses that do not differ.

    Errors
    ------
    Over black DE*ab bends with thickness, so the number hangs on the range; compare inks over the same.

    Source
    ------
    The reciprocal of the regression slope, as DIN 55988 (transparency number) and ISO 2846-1 (transparency
    of printing inks) define it; both from memory.
    """
    X, E = np.broadcast_arrays(np.asarray(thickness_um, dtype=float), np.asarray(delta_e, dtype=float))
    away = X - X.mean(axis=-1, keepdims=True)
    spread = (away**2).sum(axis=-1)
    refuse_where(~(spread > 0), spread, "spread of thickness_um", "films of at least two thicknesses")
    slope = (away * E).sum(axis=-1) / spread
    out = np.full(slope.shape, np.inf)
    return np.divide(1.0, slope, out=out, where=slope > 0)


def transparency_of_film(
    *,
    k: ArrayLike,
    s: ArrayLike,
    thickness_um: ArrayLike,
    black: ArrayLike,
    dye_absorbance_per_um: ArrayLike = 0.0,
    light: Light = "D65",
    observer_deg: int = 10,
    wavelength_nm: ArrayLike = WAVELENGTH_NM,
    **seen,
) -> np.ndarray:
    """`transparency_number` of predicted films.

    k, s, dye_absorbance_per_um (..., W) in 1/um; thickness_um (N,), the range it is judged over; black
    (W,); gives (...) in um. **seen as for `hiding.contrast_of_film`.
    """
    X = np.asarray(thickness_um, dtype=float)[:, None]
    black = np.asarray(black, dtype=float)
    k, s, A, _ = np.broadcast_arrays(k, s, dye_absorbance_per_um, black)
    k_x, s_x, absorbance = (values[..., None, :] * X for values in (k, s, A))
    bare = layer_reflectance(ground=black, **seen)
    over = layer_reflectance(ground=black, k_x=k_x, s_x=s_x, dye_absorbance=absorbance, **seen)
    labs = [lab_of_spectrum(spectrum, light, observer_deg, wavelength_nm) for spectrum in (bare, over)]
    return transparency_number(X[:, 0], delta_e_ab(labs[0], labs[1]))
