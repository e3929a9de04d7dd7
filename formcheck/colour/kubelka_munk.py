"""Films that absorb and scatter: the two-flux theory of Kubelka and Munk, inside the film.

Everything is written with t = tanh(alpha X) / alpha, alpha = sqrt(K (K + 2S)). t goes smoothly to X
for K -> 0 and to 1/alpha for a thick film, so one expression holds from the clear layer to the film
that hides, and no ratio K/S is ever formed. Surface reflection is the business of saunderson.py.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from formcheck.colour.refuse import refuse_where

# Stands in for alpha = 0, where tanh(alpha X) / alpha is exactly X (and, for X without end, without end).
LEAST_ALPHA = 1e-100


def mix(volume_fraction: ArrayLike, coefficient: ArrayLike) -> np.ndarray:
    """K or S of a mixture: sum over pigments of volume fraction x coefficient.

    `volume_fraction` (..., P) is that of each pigment in the dry film, `coefficient` (P, W) that of
    the pigment alone, per um; gives (..., W), per um.

    Source: D. R. Duncan, Proc. Phys. Soc. 52 (1940) 390. Holds while pigments do not crowd.
    """
    return np.asarray(volume_fraction, dtype=float) @ np.asarray(coefficient, dtype=float)


def r_infinity(K: ArrayLike, S: ArrayLike) -> np.ndarray:
    """Reflectance, inside the film, of a layer so thick that its ground does not show.

    R_inf = 1 + K/S - sqrt((K/S)**2 + 2 K/S) = S / (K + S + sqrt(K (K + 2S)))

    K and S broadcast, at least 0, in one unit; 0 where nothing scatters. [1]

    Source: P. Kubelka & F. Munk, Z. tech. Phys. 12 (1931) 593.
    """
    K, S = _not_negative(K, S)
    # Two roots, so that the K of a black does not overflow; tiny, so that nothing over nothing is 0.
    return S / (K + S + np.sqrt(K) * np.sqrt(K + 2 * S) + np.finfo(float).tiny)


def k_over_s(reflectance: ArrayLike) -> np.ndarray:
    """K/S of an opaque layer from its internal reflectance: (1 - R)**2 / 2R; without end at R = 0.

    Source: Kubelka & Munk 1931, the inverse of r_infinity.
    """
    R = np.asarray(reflectance, dtype=float)
    refuse_where(~((R >= 0) & (R <= 1)), R, "reflectance", "a fraction from 0 to 1")
    with np.errstate(divide="ignore", over="ignore"):
        return (1 - R) ** 2 / (2 * R)


def film(K: ArrayLike, S: ArrayLike, *, thickness_um: ArrayLike, ground: ArrayLike) -> np.ndarray:
    """Reflectance, inside the film, of a film on a ground.

    R = [1 - R_g (a - b coth bSX)] / [a - R_g + b coth bSX], a = 1 + K/S, b = sqrt(a**2 - 1),
    multiplied through by S t so that S = 0, K = 0, X = 0 and X without end need no cases, and
    gathered so that no large terms are subtracted:

    R = [R_g (1 - t K) + t S (1 - R_g)] / [1 + t K + t S (1 - R_g)]

    Parameters
    ----------
    K, S : float arrays, shape (..., W)
        Absorption and scattering of the film, at least 0. [1/um]
    thickness_um : float array, shape (...)
        X, dry film thickness, at least 0; may be infinite. [um]
    ground : float array, shape (..., W)
        R_g, reflectance of the ground as met from inside the film, 0 to 1. [1]

    Returns
    -------
    float array, the broadcast shape (..., W)
        From 0 to 1. [1]

    Raises
    ------
    ValueError
        K, S or thickness below 0, or a ground outside 0 to 1.

    Errors
    ------
    None of arithmetic: the two-flux equations are solved exactly. They themselves assume diffuse light
    in a homogeneous film of even thickness, no fluorescence, no orientation of flakes.

    Source
    ------
    P. Kubelka, J. Opt. Soc. Am. 38 (1948) 448.
    """
    K, S = _not_negative(K, S)
    X, R_g = _thickness_and_ground(thickness_um, ground)
    shape = np.broadcast_shapes(K.shape, S.shape, X.shape, R_g.shape)
    K, S = (np.array(np.broadcast_to(values, shape)) for values in (K, S))  # copies, to be written over
    return film_writing_over(K, S, X, R_g, scratch=(np.empty(shape), np.empty(shape)))


def film_writing_over(
    K: np.ndarray, S: np.ndarray, X: np.ndarray, R_g: np.ndarray, *, scratch: tuple[np.ndarray, np.ndarray]
) -> np.ndarray:
    """`film` for checked arrays, K, S and scratch of the full shape; the result stands in K, the rest is spent.

    One square root, one tanh and no array of its own: fast where the four fit the cache.
    """
    alpha, t = scratch
    np.add(S, S, out=alpha)
    alpha += K
    alpha *= K
    np.sqrt(alpha, out=alpha)
    alpha += LEAST_ALPHA
    np.multiply(alpha, X, out=t)
    np.tanh(t, out=t)
    t /= alpha
    K *= t  # at most 1, reached where nothing scatters
    S *= t
    S *= 1 - R_g
    numerator = np.subtract(1.0, K, out=t)
    np.maximum(numerator, 0.0, out=numerator)  # rounding alone takes it below
    numerator *= R_g
    numerator += S
    denominator = np.add(K, S, out=K)
    denominator += 1.0
    return np.divide(numerator, denominator, out=K)


def film_transmittance(K: ArrayLike, S: ArrayLike, *, thickness_um: ArrayLike) -> np.ndarray:
    """Diffuse transmittance, inside the film, of a film alone.

    T = b / (a sinh bSX + b cosh bSX) = sech(alpha X) / (1 + t (K + S))

    K, S (..., W) in 1/um and thickness_um (...) as for `film`; gives (..., W), 0 to 1. ValueError as there.

    Source: P. Kubelka, J. Opt. Soc. Am. 38 (1948) 448.
    """
    K, S = _not_negative(K, S)
    X, _ = _thickness_and_ground(thickness_um, 0.0)
    alpha = np.sqrt(K * (K + 2 * S))
    t = np.tanh((alpha + LEAST_ALPHA) * X) / (alpha + LEAST_ALPHA)
    depth = np.zeros(np.broadcast_shapes(alpha.shape, X.shape))
    np.multiply(alpha, X, out=depth, where=alpha > 0)  # a clear film takes nothing, however thick
    sech = 2 * np.exp(-depth) / (1 + np.exp(-2 * depth))
    return sech / (1 + t * (K + S))


def _not_negative(K: ArrayLike, S: ArrayLike) -> tuple[np.ndarray, np.ndarray]:
    K, S = np.asarray(K, dtype=float), np.asarray(S, dtype=float)
    refuse_where(~(K >= 0), K, "K", "an absorption coefficient of at least 0")
    refuse_where(~(S >= 0), S, "S", "a scattering coefficient of at least 0")
    return K, S


def _thickness_and_ground(thickness_um: ArrayLike, ground: ArrayLike) -> tuple[np.ndarray, np.ndarray]:
    """Both checked; the thickness with an axis for the wavelengths."""
    X, R_g = np.asarray(thickness_um, dtype=float), np.asarray(ground, dtype=float)
    refuse_where(~(X >= 0), X, "thickness_um", "a thickness of at least 0 um")
    refuse_where(~((R_g >= 0) & (R_g <= 1)), R_g, "ground", "a reflectance from 0 to 1")
    return X[..., None], R_g
