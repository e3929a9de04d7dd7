"""Many pigmented films on one ground, from loadings to Lab, in pieces that stay in the cache."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from formcheck.colour import kubelka_munk, saunderson, tristimulus
from formcheck.colour.cielab import lab
from formcheck.colour.layer import ground_below
from formcheck.colour.lights import Light
from formcheck.colour.refuse import refuse_where
from formcheck.spectra.grid import WAVELENGTH_NM

FILMS_AT_ONCE = 256  # x 85 wavelengths x 8 bytes: four such arrays fit a common second-level cache


def lab_of_films(
    volume_fraction: ArrayLike,
    *,
    k: ArrayLike,
    s: ArrayLike,
    thickness_um: ArrayLike,
    ground: ArrayLike,
    n: float = 1.5,
    specular_included: bool = False,
    ground_in_air: bool = True,
    ground_specular_included: bool = False,
    light: Light = "D65",
    observer_deg: int = 10,
    wavelength_nm: ArrayLike = WAVELENGTH_NM,
) -> np.ndarray:
    """L*, a*, b* of films given by their pigment loadings: the shade of a whole search at once.

    Same formulas as `layer.layer_reflectance` and `cielab.lab_of_spectrum`, without keeping spectra.

    Parameters
    ----------
    volume_fraction : float array, shape (R, P)
        Of each pigment in the dry film, at least 0. [1]
    k, s : float arrays, shape (P, W)
        Absorption and scattering of each pigment alone, at least 0. [1/um]
    thickness_um : float array, shape () or (R,)
        Dry thickness, at least 0. [um]
    ground : float array, shape (W,)
        Reflectance of the one ground. [1]
    n, specular_included, ground_in_air, ground_specular_included
        As for `layer.layer_reflectance`.
    light, observer_deg, wavelength_nm
        As for `tristimulus.weights`.

    Returns
    -------
    float array, shape (R, 3)

    Raises
    ------
    ValueError
        A loading, coefficient or thickness below 0; see also `tristimulus.weights`.
    """
    loading, k, s = (np.asarray(values, dtype=float) for values in (volume_fraction, k, s))
    for values, name in ((loading, "volume_fraction"), (k, "k"), (s, "s")):
        refuse_where(~(values >= 0), values, name, "at least 0")
    X = np.broadcast_to(np.asarray(thickness_um, dtype=float), loading.shape[:1])
    refuse_where(~(X >= 0), X, "thickness_um", "a thickness of at least 0 um")
    below = ground_below(ground, n=n, in_air=ground_in_air, specular_included=ground_specular_included)
    k1, k2 = saunderson.k1_from_index(n), saunderson.k2_from_index(n)
    table = tristimulus.weights(light, observer_deg, wavelength_nm)
    xyz = np.empty((len(loading), 3))
    for start in range(0, len(loading), FILMS_AT_ONCE):
        part = slice(start, start + FILMS_AT_ONCE)
        K, S = kubelka_munk.mix(loading[part], k), kubelka_munk.mix(loading[part], s)
        inside = kubelka_munk.film_writing_over(K, S, X[part, None], below)
        seen = saunderson.to_measured(inside, k1=k1, k2=k2, specular_included=specular_included)
        xyz[part] = seen @ table
    return lab(xyz, table.sum(axis=0))
