"""What a measuring geometry takes in of a surface: the light that enters, what comes out, and the gloss.

R_m = gloss + through R / (1 - k2 R): R inside the film, k2 the diffuse light thrown back in at the surface.

| geometry | gloss | through |
|---|---|---|
| d:8 specular included | k1 | (1 - k1)(1 - k2) |
| d:8 specular excluded | 0  | (1 - k1)(1 - k2) |
| 45:0                  | 0  | (1 - r(45 deg)) (1 - r(0)) / n**2 |

d:8 is by reciprocity 8:d, light that enters once nearly upright and leaves in all directions, which is
Saunderson's form. 45:0 lights at 45 degrees, loses what the surface reflects there into the gloss that
the eye-piece upright does not see, and collects upright only the share 1/n**2 of the inner radiance that
refraction leaves it. Readings are against the perfect diffuser, so an ideal white under n = 1.5 reads 1.00
in 45:0 and 0.96 with the gloss shut out: 45:0 lies about 4.6 % of the reading above d:8 specular excluded.

Taken as ideal: a smooth surface, a gloss trap that takes all of the gloss, diffuse light inside the film.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from formcheck.colour import saunderson
from formcheck.trouble import suggestion

DIRECTIONAL = "45:0"
GLOSS_IN = "d:8 specular included"
GLOSS_OUT = "d:8 specular excluded"
GEOMETRIES = (DIRECTIONAL, GLOSS_IN, GLOSS_OUT)


@dataclass(frozen=True)
class Surface:
    """A surface as one geometry meets it; the three broadcast. A row of the table above, worked out."""

    gloss: np.ndarray
    through: np.ndarray
    k2: np.ndarray


def surface(n: ArrayLike, geometry: str = GLOSS_OUT) -> Surface:
    """The surface of a film of index n against air, as the geometry meets it.

    n : float array, any shape, at least 1; 1 stands for no surface, where all geometries read alike. [1]

    ValueError for an index below 1 or an unknown geometry.

    Source: d:8, J. L. Saunderson, J. Opt. Soc. Am. 32 (1942) 727; 45:0, F. C. Williams & F. R. Clapper,
    J. Opt. Soc. Am. 43 (1953) 595; names of the geometries, CIE 015:2018 and ASTM E1164 (de:8 and di:8 there).
    """
    refuse_unknown(geometry)
    n = np.asarray(n, dtype=float)
    k1, k2 = saunderson.k1_from_index(n), saunderson.k2_from_index(n)
    if geometry != DIRECTIONAL:
        return surface_of_constants(k1=k1, k2=k2, specular_included=geometry == GLOSS_IN)
    return Surface(np.zeros_like(n), (1 - _fresnel_at_45(n)) * (1 - k1) / n**2, k2)


def surface_of_constants(*, k1: ArrayLike, k2: ArrayLike, specular_included: bool) -> Surface:
    """A surface by Saunderson's two constants, as fitted to measured films; each from 0 to below 1, broadcast."""
    k1, k2 = np.asarray(k1, dtype=float), np.asarray(k2, dtype=float)
    return Surface(k1 if specular_included else np.zeros_like(k1), (1 - k1) * (1 - k2), k2)


def seen_in_air(inside: ArrayLike, surface: Surface) -> np.ndarray:
    """The reading of a film whose reflectance under its surface is `inside` (0 to 1); shapes broadcast. [1]"""
    R = np.asarray(inside, dtype=float)
    return surface.through * R / (1 - surface.k2 * R) + surface.gloss


def met_inside(reading: ArrayLike, surface: Surface) -> np.ndarray:
    """The reflectance under the surface, held to 0 to 1, that gives this reading; inverse of seen_in_air.

    A reading outside what such a surface can give (darker than its own gloss) is taken to its limit.
    """
    body = np.asarray(reading, dtype=float) - surface.gloss
    return np.clip(body / (surface.through + surface.k2 * np.maximum(body, 0)), 0, 1)


def refuse_unknown(geometry: str) -> None:
    if geometry not in GEOMETRIES:
        raise ValueError(f"geometry {geometry!r}; {suggestion(geometry, GEOMETRIES)}")


def _fresnel_at_45(n: np.ndarray) -> np.ndarray:
    """Reflection of unpolarised light falling from air at 45 degrees onto index n. [Fresnel 1823]"""
    outside = np.sqrt(0.5)
    inside = np.sqrt(1 - 0.5 / n**2)
    across = (outside - n * inside) / (outside + n * inside)
    along = (n * outside - inside) / (n * outside + inside)
    return (across**2 + along**2) / 2
