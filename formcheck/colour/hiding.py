"""How well a film hides what it is put on, and how thick it must be to hide."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from formcheck.colour import tristimulus
from formcheck.colour.first_crossing import first_crossing
from formcheck.colour.layer import layer_reflectance
from formcheck.colour.lights import Light
from formcheck.colour.refuse import refuse_where
from formcheck.spectra.grid import WAVELENGTH_NM

COMPLETE_HIDING = 0.98  # the contrast ratio taken as hiding by ISO 6504 and ASTM D2805
THINNEST_UM, THICKEST_UM = 1e-3, 1e6  # between which a hiding film is looked for


def contrast_ratio(*, y_black: ArrayLike, y_white: ArrayLike) -> np.ndarray:
    """Luminance Y of the film over black, divided by Y of the same film over white; shapes broadcast. [1]

    1 hides wholly, 0.98 counts as hiding. NaN where the film over white gives back no light at all.

    Source: ISO 6504-3, ASTM D2805.
    """
    y_black, y_white = np.broadcast_arrays(
        np.asarray(y_black, dtype=float), np.asarray(y_white, dtype=float)
    )
    out = np.full(y_white.shape, np.nan)
    return np.divide(y_black, y_white, out=out, where=y_white > 0)


def contrast_of_film(
    *,
    k: ArrayLike,
    s: ArrayLike,
    thickness_um: ArrayLike,
    black: ArrayLike,
    white: ArrayLike,
    dye_absorbance_per_um: ArrayLike = 0.0,
    light: Light = "D65",
    observer_deg: int = 10,
    wavelength_nm: ArrayLike = WAVELENGTH_NM,
    **seen,
) -> np.ndarray:
    """Contrast ratio of films over a black and a white ground.

    Parameters
    ----------
    k, s, dye_absorbance_per_um : float arrays, shape (..., W)
        Absorption and scattering of the dry film, and decadic absorbance of its dyes, at least 0. [1/um]
    thickness_um : float array, shape (...)
        Dry thickness, at least 0. [um]
    black, white : float arrays, shape (..., W)
        Reflectance of the two grounds. [1]
    light, observer_deg, wavelength_nm
        Under which Y is taken, as for `tristimulus.weights`.
    **seen
        n, specular_included, ground_in_air, ground_n, ground_specular_included of `layer.layer_reflectance`.

    Returns
    -------
    float array, the broadcast shape (...); NaN where the film over white gives back no light. [1]

    Raises
    ------
    ValueError
        As `layer.layer_reflectance` and `tristimulus.weights`.

    Source: ISO 6504-3, ASTM D2805.
    """
    X = np.asarray(thickness_um, dtype=float)[..., None]
    k, s, A = (np.asarray(values, dtype=float) * X for values in (k, s, dye_absorbance_per_um))
    y_weights = tristimulus.weights(light, observer_deg, wavelength_nm)[:, 1]
    y_black, y_white = (
        layer_reflectance(ground=ground, k_x=k, s_x=s, dye_absorbance=A, **seen) @ y_weights
        for ground in (black, white)
    )
    return contrast_ratio(y_black=y_black, y_white=y_white)


def thickness_for_contrast(
    *,
    k: ArrayLike,
    s: ArrayLike,
    black: ArrayLike,
    white: ArrayLike,
    contrast: float = COMPLETE_HIDING,
    dye_absorbance_per_um: ArrayLike = 0.0,
    light: Light = "D65",
    observer_deg: int = 10,
    wavelength_nm: ArrayLike = WAVELENGTH_NM,
    **seen,
) -> np.ndarray:
    """Least dry thickness at which films reach a contrast ratio; arguments as `contrast_of_film`.

    Returns
    -------
    float array, the broadcast shape (...)
        0 where the bare grounds already reach it; infinite where no film up to a metre does (a dye alone,
        a clear film). The spreading rate follows by the wet thickness (film/spreading.py). [um]

    Raises
    ------
    ValueError
        A contrast not between 0 and 1; as `contrast_of_film`.

    Source: ISO 6504-3, ASTM D2805.
    """
    wanted = np.asarray(contrast, dtype=float)
    refuse_where(~((wanted > 0) & (wanted < 1)), wanted, "contrast", "a ratio above 0 and below 1")
    k, s, A, black, white = np.broadcast_arrays(
        *(np.asarray(values, dtype=float) for values in (k, s, dye_absorbance_per_um, black, white))
    )

    def short_of(thickness_um: np.ndarray) -> np.ndarray:
        found = contrast_of_film(
            k=k, s=s, thickness_um=thickness_um, black=black, white=white, dye_absorbance_per_um=A,
            light=light, observer_deg=observer_deg, wavelength_nm=wavelength_nm, **seen,
        )  # fmt: skip
        return np.nan_to_num(found, nan=0.0) - wanted

    return first_crossing(short_of, k.shape[:-1], lowest=THINNEST_UM, highest=THICKEST_UM)


def scattering_power_for_contrast(
    k_over_s: ArrayLike, *, white: ArrayLike, contrast: ArrayLike = COMPLETE_HIDING
) -> np.ndarray:
    """S X at which a film of one K/S throughout reaches a contrast ratio over ideal black and `white`.

    With u = b coth(bSX): R_black = 1/(a + u), R_white = [1 - g (a - u)]/(a - g + u), and their ratio C gives
    C g u**2 - (1 - C) u + C a (1 - g a) - a + g = 0, a = 1 + K/S, b = sqrt(a**2 - 1), g the white ground.
    Without absorption S X = 1/u.

    Parameters
    ----------
    k_over_s : float array, at least 0. [1]
    white, contrast : float arrays that broadcast with it
        Reflectance of the white ground inside the film, 0.80 in ASTM D2805; both above 0, contrast below 1.

    Returns
    -------
    float array, the broadcast shape. [1]

    Raises
    ------
    ValueError
        An argument outside its range.

    Source: P. Kubelka, J. Opt. Soc. Am. 38 (1948) 448, solved for the thickness; ASTM D2805 by its charts.
    """
    ratio, g, C = (np.asarray(values, dtype=float) for values in (k_over_s, white, contrast))
    refuse_where(~(ratio >= 0), ratio, "k_over_s", "at least 0")
    refuse_where(~((g > 0) & (g <= 1)), g, "white", "a reflectance above 0, at most 1")
    refuse_where(~((C > 0) & (C < 1)), C, "contrast", "a ratio above 0 and below 1")
    a, b = 1 + ratio, np.sqrt(ratio * (2 + ratio))
    under_root = (1 - C) ** 2 + 4 * C * g * (a - g - C * a * (1 - g * a))
    u = ((1 - C) + np.sqrt(np.maximum(under_root, 0))) / (2 * C * g)
    return scattering_power(u, b)


def scattering_power(u: ArrayLike, b: ArrayLike) -> np.ndarray:
    """S X of u = b coth(bSX); 1/u where b is 0, infinite where u is not above b."""
    u, b = np.asarray(u, dtype=float), np.asarray(b, dtype=float)
    with np.errstate(divide="ignore", invalid="ignore"):
        bent = np.arctanh(np.minimum(b / u, 1.0)) / b
        return np.where(b / u < 1e-6, 1 / u, bent)
