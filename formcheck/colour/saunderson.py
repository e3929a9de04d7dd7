"""Reflection at the surface of a film: from the reflectance inside it to the one measured, and back.

R_m = k1 + (1 - k1)(1 - k2) R / (1 - k2 R); without the first k1 where the gloss is not measured.
k1: light from outside thrown back at the surface; k2: diffuse light from inside thrown back in.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from formcheck.colour.refuse import refuse_where

NEARLY_ONE = 1e-4  # below 1 + this the closed form of k2 loses its digits; r = (n - 1)/3 to first order


def k1_from_index(n: ArrayLike) -> np.ndarray:
    """Fresnel reflection at normal incidence, ((n - 1)/(n + 1))**2, element by element. [1]

    n: refractive index of the film against air, at least 1; ValueError below. 0.04 at n = 1.5.
    """
    n = _index(n)
    return ((n - 1) / (n + 1)) ** 2


def k2_from_index(n: ArrayLike) -> np.ndarray:
    """Reflection of diffuse light at the surface from inside, element by element; 0.596 at n = 1.5. [1]

    n: refractive index of the film against air, at least 1; ValueError below. Perfectly diffuse
    light is assumed; constants fitted to paints often come out lower, 0.4 to 0.6.

    Source: D. B. Judd, J. Res. Natl. Bur. Stand. 29 (1942) 329;
    S. E. Orchard, J. Opt. Soc. Am. 59 (1969) 1584.
    """
    return diffuse_reflection(n_from=_index(n), n_to=1.0)


def diffuse_reflection(*, n_from: ArrayLike, n_to: ArrayLike) -> np.ndarray:
    """Share of diffuse light, coming through n_from, that a smooth boundary to n_to throws back. [1]

    With m the ratio of the higher index to the lower and r(m) the share thrown back from the lower
    side, it is r from that side and 1 - (1 - r)/m**2 from the other. Indices above 0, broadcast.

    Source: as k2_from_index.
    """
    n_from, n_to = np.asarray(n_from, dtype=float), np.asarray(n_to, dtype=float)
    m = np.maximum(n_from, n_to) / np.minimum(n_from, n_to)
    from_lower = _diffuse_external(m)
    return np.where(n_from > n_to, 1 - (1 - from_lower) / m**2, from_lower)


def to_measured(
    internal: ArrayLike, *, k1: ArrayLike, k2: ArrayLike, specular_included: bool
) -> np.ndarray:
    """Reflectance as measured in air from that inside the film; any shapes that broadcast, 0 to 1. [1]

    specular_included: sphere with the gloss let in (d:8, di:8). False: gloss trapped (de:8). With fitted
    constants also 45:0, whose own form for a given index is in geometry.py.

    Source: J. L. Saunderson, J. Opt. Soc. Am. 32 (1942) 727.
    """
    R, k1, k2 = (np.asarray(values, dtype=float) for values in (internal, k1, k2))
    body = (1 - k1) * (1 - k2) * R / (1 - k2 * R)
    return body + k1 if specular_included else body


def to_internal(
    measured: ArrayLike, *, k1: ArrayLike, k2: ArrayLike, specular_included: bool
) -> np.ndarray:
    """Reflectance inside the film from that measured in air, held to 0 to 1; inverse of to_measured.

    A reading outside what such a surface can give (darker than its own gloss) is taken to its limit.
    """
    R_m, k1, k2 = (np.asarray(values, dtype=float) for values in (measured, k1, k2))
    body = R_m - k1 if specular_included else R_m
    return np.clip(body / ((1 - k1) * (1 - k2) + k2 * np.maximum(body, 0)), 0, 1)


def _diffuse_external(n: np.ndarray) -> np.ndarray:
    """Reflection of diffuse light falling on a denser medium of relative index n (form in Judd 1942)."""
    m = np.maximum(n, 1 + NEARLY_ONE)
    n2, n4 = m**2, m**4
    closed = (
        0.5
        + (m - 1) * (3 * m + 1) / (6 * (m + 1) ** 2)
        + n2 * (n2 - 1) ** 2 / (n2 + 1) ** 3 * np.log((m - 1) / (m + 1))
        - 2 * m**3 * (n2 + 2 * m - 1) / ((n2 + 1) * (n4 - 1))
        + 8 * n4 * (n4 + 1) / ((n2 + 1) * (n4 - 1) ** 2) * np.log(m)
    )
    return np.where(n < 1 + NEARLY_ONE, (n - 1) / 3, closed)


def _index(n: ArrayLike) -> np.ndarray:
    n = np.asarray(n, dtype=float)
    refuse_where(~(n >= 1), n, "n", "a refractive index of at least 1, that of air")
    return n
