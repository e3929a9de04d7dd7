"""Many pigmented films on one ground, from loadings to Lab, in pieces that stay in the cache."""

from __future__ import annotations

import os
from collections.abc import Callable

import numpy as np
from numpy.typing import ArrayLike

from formcheck.colour import kubelka_munk, saunderson, tristimulus
from formcheck.colour.cielab import lab
from formcheck.colour.layer import ground_below
from formcheck.colour.lights import Light
from formcheck.colour.refuse import refuse_where
from formcheck.spectra.grid import WAVELENGTH_NM

FILMS_AT_ONCE = 512  # x 85 wavelengths x 8 bytes: four such arrays fit a common second-level cache
ONE = np.ones(())  # the thickness, once K and S carry it
FILMS_PER_THREAD = 4 * FILMS_AT_ONCE  # with fewer a thread is not worth its start


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
    threads: int | None = None,
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
        Dry thickness, at least 0 and finite. [um]
    ground : float array, shape (W,)
        Reflectance of the one ground. [1]
    n, specular_included, ground_in_air, ground_specular_included
        As for `layer.layer_reflectance`.
    light, observer_deg, wavelength_nm
        As for `tristimulus.weights`.
    threads : int
        How many share the work; by default one for each processor that may be used. The answer is the same.

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
    refuse_where(~((X >= 0) & np.isfinite(X)), X, "thickness_um", "a finite thickness of at least 0 um")
    below = ground_below(ground, n=n, in_air=ground_in_air, specular_included=ground_specular_included)
    table = tristimulus.weights(light, observer_deg, wavelength_nm)
    k1, k2 = saunderson.k1_from_index(n), saunderson.k2_from_index(n)
    # Saunderson's R_m = k1 + (1 - k1)(1 - k2) R/(1 - k2 R): all but the bent part goes with the weights.
    through = np.broadcast_to((1 - k1) * (1 - k2), table.shape[:1])[:, None] * table
    gloss = np.broadcast_to(k1, table.shape[:1]) @ table if specular_included else 0.0
    white, found = table.sum(axis=0), np.empty((len(loading), 3))

    def reckon(first: int, last: int) -> None:
        room = np.empty((4, min(FILMS_AT_ONCE, last - first), table.shape[0]))
        for start in range(first, last, FILMS_AT_ONCE):
            part = slice(start, min(start + FILMS_AT_ONCE, last))
            K, S, *scratch = room[:, : part.stop - start]
            amount = loading[part] * X[part, None]
            np.matmul(amount, k, out=K)
            np.matmul(amount, s, out=S)
            R = kubelka_munk.film_writing_over(K, S, ONE, below, scratch=(scratch[0], scratch[1]))
            bent = np.multiply(R, -k2, out=S)
            bent += 1.0
            found[part] = lab(np.divide(R, bent, out=R) @ through + gloss, white)

    _shared_out(reckon, len(loading), threads)
    return found


def _shared_out(reckon: Callable[[int, int], None], count: int, threads: int | None) -> None:
    """Runs of films, one to a thread: NumPy lets go of the interpreter while it works on an array."""
    most = len(os.sched_getaffinity(0)) if hasattr(os, "sched_getaffinity") else os.cpu_count() or 1
    workers = min(most if threads is None else max(threads, 1), max(count // FILMS_PER_THREAD, 1))
    if workers == 1:
        return reckon(0, count)
    from concurrent.futures import ThreadPoolExecutor  # not needed, nor its import, for a few films

    ends = [count * i // workers for i in range(workers + 1)]
    with ThreadPoolExecutor(workers) as pool:
        for _ in pool.map(reckon, ends[:-1], ends[1:]):
            pass
    return None
