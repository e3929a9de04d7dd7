"""A layer on a ground, seen in air: pigmented film, dyed film, clear dye layer, stained ground.

One formula serves them all: a clear layer is a film that does not scatter.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from formcheck.colour import kubelka_munk, saunderson
from formcheck.colour.refuse import refuse_where

LN_10 = np.log(10.0)


def layer_reflectance(
    *,
    ground: ArrayLike,
    k_x: ArrayLike = 0.0,
    s_x: ArrayLike = 0.0,
    dye_absorbance: ArrayLike = 0.0,
    n: ArrayLike = 1.5,
    specular_included: bool = False,
    ground_in_air: bool = True,
    ground_n: ArrayLike | None = None,
    ground_specular_included: bool = False,
) -> np.ndarray:
    """Reflectance, in air, of one layer over a ground.

    Inside the layer Kubelka 1948 with K X = k_x + f ln(10) A; at its surface Saunderson 1942. A dye in
    a clear layer is passed twice, so f = 1 there; where pigment makes the light diffuse its path is
    twice as long, f = 2. Between, f = 1 + SX/(1 + SX): SX/(1 + SX) is the Kubelka-Munk reflectance of
    the layer without absorption, the share of the light that it has turned diffuse.

    Parameters
    ----------
    ground : float array, shape (..., W)
        Reflectance of the bare ground, 0 to 1. [1]
    k_x, s_x : float arrays, shape (..., W)
        Pigment absorption and scattering times dry thickness, K X and S X, at least 0. [1]
    dye_absorbance : float array, shape (..., W)
        Decadic absorbance of the dyes in the layer, one straight passage, at least 0. [1]
    n : float array that broadcasts with (..., W)
        Refractive index of the layer against air; 1 for a layer with no surface of its own. [1]
    specular_included : bool
        Whether the answer holds the gloss (d:8 sphere), or not (gloss trapped, and mostly the eye). For
        45:0 see geometry.py and layers.stack_reflectance.
    ground_in_air : bool
        The ground was measured in air: its own surface is taken off first. False: `ground` is already
        what light inside the layer meets (a ground given by its body alone, an ideal white).
    ground_n, ground_specular_included
        Index of the ground's surface, and how the ground was measured. By default the index of the
        layer: with optical contact and one index no boundary is left between the two. With another
        index the boundary between them reflects diffuse light from both its sides. 1 for an open ground
        (matt paper, raw wood): it has no surface to take off, and the layer wets it without a boundary.

    Returns
    -------
    float array, the broadcast shape (..., W)
        A layer with nothing in it gives back a ground measured as the answer is. [1]

    Raises
    ------
    ValueError
        Negative k_x, s_x or absorbance, index below 1, ground outside 0 to 1 where it is internal.

    Source
    ------
    P. Kubelka, J. Opt. Soc. Am. 38 (1948) 448; J. L. Saunderson, J. Opt. Soc. Am. 32 (1942) 727. The
    passage of f from 1 to 2 is formcheck's own; its two ends are Beer-Lambert and Kubelka-Munk.
    """
    k_x, s_x, A = (np.asarray(values, dtype=float) for values in (k_x, s_x, dye_absorbance))
    for values, name in ((k_x, "k_x"), (s_x, "s_x"), (A, "dye_absorbance")):
        refuse_where(~(values >= 0), values, name, "at least 0")
    k_x = k_x + (1 + s_x / (1 + s_x)) * LN_10 * A
    below = ground_below(
        ground,
        n=n,
        ground_n=ground_n,
        in_air=ground_in_air,
        specular_included=ground_specular_included,
    )
    inside = kubelka_munk.film(k_x, s_x, thickness_um=1.0, ground=below)
    return _through_surface(inside, n=n, specular_included=specular_included)


def ground_below(
    ground: ArrayLike,
    *,
    n: ArrayLike,
    ground_n: ArrayLike | None = None,
    in_air: bool = True,
    specular_included: bool = False,
) -> np.ndarray:
    """Reflectance of the ground as light inside a layer of index n meets it: its surface in air taken off.

    `ground` (..., W) unchanged where `in_air` is False. Where `ground_n` differs from n, the boundary
    between layer and ground is put in place of the one taken off; 1 stands for an open ground with neither.
    Readings that no such surface gives
    are held to 0 and 1: a black of 1 % measured with the gloss of n = 1.5 let in counts as ideal black.
    """
    if not in_air:
        return np.asarray(ground, dtype=float)
    ground_n = n if ground_n is None else ground_n
    k1, k2 = _surface(ground_n)
    body = saunderson.to_internal(ground, k1=k1, k2=k2, specular_included=specular_included)
    return behind_contact(body, n=n, ground_n=ground_n)


def behind_contact(body: ArrayLike, *, n: ArrayLike, ground_n: ArrayLike) -> np.ndarray:
    """What a layer of index n meets where it touches a body of index ground_n that reflects `body` inside.

    One boundary for diffuse light; none where the indices agree, or the body is open (index 1). Broadcasts.
    """
    onto = saunderson.diffuse_reflection(n_from=n, n_to=ground_n)
    back = saunderson.diffuse_reflection(n_from=ground_n, n_to=n)
    behind = saunderson.to_measured(body, k1=onto, k2=back, specular_included=True)
    return np.where(np.equal(ground_n, 1), body, np.minimum(behind, 1.0))  # rounding alone passes 1


def stained_ground(
    ground: ArrayLike,
    *,
    extra_k_over_s: ArrayLike,
    n: ArrayLike = 1.0,
    specular_included: bool = False,
) -> np.ndarray:
    """Reflectance of a ground that the dye has gone into: dyed textile, paper, stained wood.

    (K/S) = (K/S)_ground + extra, with the scattering that of the ground alone     [single constant]

    Parameters
    ----------
    ground : float array, shape (..., W)
        Reflectance of the undyed ground in air, thick enough to hide what is below. [1]
    extra_k_over_s : float array, shape (..., W)
        What the dye adds, at least 0: k_over_s_of_dye, or learnt from dyeings of known depth. [1]
    n : float array
        Index of a smooth surface. 1, the default, for fibres and open wood, which have none. [1]
    specular_included : bool
        How the ground was measured and the answer is meant.

    Returns
    -------
    float array, the broadcast shape (..., W). [1]

    Raises
    ------
    ValueError
        A negative addition, an index below 1.

    Source
    ------
    P. Kubelka & F. Munk, Z. tech. Phys. 12 (1931) 593; the sum over dyes is common practice for textiles.
    """
    k1, k2 = _surface(n)
    inside = saunderson.to_internal(ground, k1=k1, k2=k2, specular_included=specular_included)
    extra = np.asarray(extra_k_over_s, dtype=float)
    refuse_where(~(extra >= 0), extra, "extra_k_over_s", "at least 0, as a dye takes light away")
    ratio = kubelka_munk.k_over_s(inside) + extra
    return _through_surface(kubelka_munk.r_infinity(ratio, 1.0), n=n, specular_included=specular_included)


def k_over_s_of_dye(
    absorbance_per_um: ArrayLike, *, ground_scattering_per_um: ArrayLike
) -> np.ndarray:
    """K/S that a dissolved dye adds to the ground it has gone into: 2 ln(10) a / S.

    absorbance_per_um (..., W): decadic absorbance per um of dyed depth; ground_scattering_per_um: S of
    the ground, above 0. The 2 is the longer path of diffuse light [Kubelka & Munk 1931].
    """
    return 2 * LN_10 * np.asarray(absorbance_per_um, dtype=float) / np.asarray(ground_scattering_per_um)


def _through_surface(inside: np.ndarray, *, n: ArrayLike, specular_included: bool) -> np.ndarray:
    k1, k2 = _surface(n)
    return saunderson.to_measured(inside, k1=k1, k2=k2, specular_included=specular_included)


def _surface(n: ArrayLike) -> tuple[np.ndarray, np.ndarray]:
    return saunderson.k1_from_index(n), saunderson.k2_from_index(n)
