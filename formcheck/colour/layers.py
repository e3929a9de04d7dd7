"""A stack of films on a ground, seen in air: primer, ink, varnish, each absorbing, scattering or clear.

The stack is built up from the ground: what one film and all below it reflect is the ground of the next.
That is Kubelka's composition (composition.py) with the transmittances multiplied out, so a stack of one
is exactly `layer.layer_reflectance`, and S = 0, K = 0, films of no thickness and films that hide need no cases.

Range of the two-flux model. K and S describe diffuse light. Against photons followed one by one (diffuse
light, isotropic scattering, index 1 throughout, Lambertian ground; tests/colour/photon_walk.py), with
K = 2 sigma_a and S = 3/4 sigma_s (1 - g) [P. S. Mudgett & L. W. Richards, Appl. Opt. 10 (1971) 1485], the
reflectance comes out
- within 0.006 where sigma_s X >= 4 and sigma_a <= 0.03 sigma_s, on any ground;
- up to 0.012 low where sigma_s X >= 4 and the absorption is stronger;
- up to 0.025 low in thinner films over black, and up to 0.04 low in thin strongly absorbing ones over white.
Coefficients measured as films of the same kind carry these errors within them, and predict more closely.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from formcheck.colour import kubelka_munk
from formcheck.colour.composition import Optics, boundary_optics, compose, film_optics
from formcheck.colour.geometry import GLOSS_OUT, Surface, met_inside, seen_in_air, surface
from formcheck.colour.layer import LN_10, behind_contact
from formcheck.colour.refuse import refuse_where


def stack_reflectance(
    *,
    ground: ArrayLike,
    k_x: ArrayLike = 0.0,
    s_x: ArrayLike = 0.0,
    dye_absorbance: ArrayLike = 0.0,
    n: ArrayLike = 1.5,
    geometry: str = GLOSS_OUT,
    ground_in_air: bool = True,
    ground_n: ArrayLike | None = None,
    ground_geometry: str = GLOSS_OUT,
    boundaries: bool = True,
    air_surface: Surface | None = None,
) -> np.ndarray:
    """Reflectance, in air, of L films over a ground.

    Parameters
    ----------
    ground : float array, shape (..., W)
        Reflectance of the bare ground, 0 to 1. [1]
    k_x, s_x : float arrays, shape (..., L, W)
        Pigment absorption and scattering times dry thickness of each film, at least 0; the film at the air
        first, the one on the ground last. [1]
    dye_absorbance : float array, shape (..., L, W)
        Decadic absorbance of the dyes in each film, one straight passage, at least 0. [1]
    n : float array, shape () or (..., L)
        Refractive index of each film; 1 for one with no surface of its own. [1]
    geometry : str
        How the answer is measured, one of geometry.GEOMETRIES.
    ground_in_air, ground_n, ground_geometry
        As `ground_in_air`, `ground_n` and the measurement of the ground for `layer.layer_reflectance`;
        ground_n by default the index of the lowest film.
    boundaries : bool
        Whether films of different index reflect diffuse light where they meet. False: as if of one index.
    air_surface : Surface
        In place of the one that follows from the index of the top film: constants fitted to measured films.

    Returns
    -------
    float array, the broadcast shape (..., W)
        0 to 1, but that in 45:0 an ideal white may read a little above 1. [1]

    Raises
    ------
    ValueError
        Negative k_x, s_x or absorbance, index below 1, an unknown geometry, no film, ground outside 0 to 1
        where it is internal.

    Source
    ------
    P. Kubelka, J. Opt. Soc. Am. 38 (1948) 448. The path of light in dyes: `effective_k_x`.
    """
    k_x, s_x, n = _films(k_x, s_x, dye_absorbance, n)
    lowest = n[..., -1:]
    R = np.asarray(ground, dtype=float)
    if ground_in_air:
        ground_n = lowest if ground_n is None else np.asarray(ground_n, dtype=float)
        R = behind_contact(met_inside(R, surface(ground_n, ground_geometry)), n=lowest, ground_n=ground_n)
    R = _inside(k_x, s_x, n if boundaries else np.broadcast_to(lowest, n.shape), R)
    return seen_in_air(R, surface(n[..., 0, None], geometry) if air_surface is None else air_surface)


def stack_optics(
    *,
    k_x: ArrayLike = 0.0,
    s_x: ArrayLike = 0.0,
    dye_absorbance: ArrayLike = 0.0,
    n: ArrayLike = 1.5,
    boundaries: bool = True,
) -> Optics:
    """Reflectance and transmittance of the films alone, for diffuse light inside the top and the lowest film.

    Arguments as `stack_reflectance`; every array of the answer has the broadcast shape (..., W). Both outer
    surfaces are left to the caller.
    """
    k_x, s_x, n = _films(k_x, s_x, dye_absorbance, n)
    pile = film_optics(k_x[..., 0, :], s_x[..., 0, :])
    for i in range(1, k_x.shape[-2]):
        if boundaries:
            pile = compose(pile, _contact(n[..., i - 1, None], n[..., i, None]))
        pile = compose(pile, film_optics(k_x[..., i, :], s_x[..., i, :]))
    return pile


def effective_k_x(*, k_x: ArrayLike, s_x: ArrayLike, dye_absorbance: ArrayLike) -> np.ndarray:
    """K X of each film with its dyes: k_x + f ln(10) A, all (..., L, W), the film at the air first. [1]

    f is 1 for a clear film at the air, through which light passes straight, and 2 where light is diffuse.
    At a depth D = S X above it, 1/(1 + D)**2 of the light comes and goes straight (1/(1 + D) is the
    two-flux transmittance without absorption); the mean over a film from D_0 to D_1 gives
    f = 2 - 1/((1 + D_0)(1 + D_1)), for a single film 1 + SX/(1 + SX) as in layer.py.

    Source: formcheck's own between the ends, which are Beer-Lambert and Kubelka-Munk.
    """
    k_x, s_x, A = (np.asarray(values, dtype=float) for values in (k_x, s_x, dye_absorbance))
    depth = np.cumsum(s_x, axis=-2)
    turned = depth / (1 + depth)  # share of the light that is diffuse where it leaves the film below
    before = np.concatenate([np.zeros_like(turned[..., :1, :]), turned[..., :-1, :]], axis=-2)
    return k_x + (1 + (before + turned - before * turned)) * LN_10 * A


def _films(
    k_x: ArrayLike, s_x: ArrayLike, dye_absorbance: ArrayLike, n: ArrayLike
) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    """Checked and broadcast: K X with the dyes and S X (..., L, W), index (..., L)."""
    named = {"k_x": k_x, "s_x": s_x, "dye_absorbance": dye_absorbance}
    arrays = {name: np.asarray(values, dtype=float) for name, values in named.items()}
    for name, values in arrays.items():
        refuse_where(~(values >= 0), values, name, "at least 0")
    n = np.asarray(n, dtype=float)
    k, s, A = np.broadcast_arrays(*arrays.values())
    if k.ndim < 2 or k.shape[-2] == 0:
        raise ValueError(f"films of shape {k.shape}; expected films on the last axis but one, at least one")
    if n.ndim and n.shape[-1] not in (1, k.shape[-2]):
        raise ValueError(f"{n.shape[-1]} indices for {k.shape[-2]} films; expected one for each")
    films = np.broadcast_shapes(k.shape[:-1], n.shape)
    return effective_k_x(k_x=k, s_x=s, dye_absorbance=A), s, np.broadcast_to(n, films)


def _inside(k_x: np.ndarray, s_x: np.ndarray, n: np.ndarray, ground: np.ndarray) -> np.ndarray:
    """Reflectance under the surface of the top film, on a ground as the lowest film meets it."""
    R = ground
    for i in reversed(range(k_x.shape[-2])):
        R = kubelka_munk.film(k_x[..., i, :], s_x[..., i, :], thickness_um=1.0, ground=R)
        if i:
            R = behind_contact(R, n=n[..., i - 1, None], ground_n=n[..., i, None])
    return R


def _contact(n_above: np.ndarray, n_below: np.ndarray) -> Optics:
    """The boundary of layer.behind_contact: none onto an open film (index 1)."""
    return boundary_optics(n_above=n_above, n_below=np.where(np.equal(n_below, 1), n_above, n_below))
