"""Absorption spectra from published bands: a maximum, its strength, and the two half heights."""

from __future__ import annotations

import json
from collections.abc import Iterable
from functools import cache
from pathlib import Path
from typing import Any

import numpy as np

STATISTICS = Path(__file__).parent / "data" / "band_widths.json"
NM_TO_WAVENUMBER = 1e7  # nm times cm-1
LEAST_OF_PEAK = 1e-3  # relative standard deviations are taken of no less than this part of the highest value
SYMMETRIC_BELOW = 1e-7  # |ln(asymmetry)| at which the log-normal has become its Gaussian limit


def lognormal_band(wavelength_nm, *, lambda_max_nm, epsilon, half_height_nm):
    """Absorption band, log-normal in wavenumber, through its maximum and both half heights.

    eps(nu) = eps_max exp{-ln 2 [ln(1 + (nu - nu_max)(rho^2 - 1)/(rho H)) / ln rho]^2}
    H: full width at half height, rho: its part above the maximum over its part below (in wavenumber);
    rho -> 1 is a Gaussian. Zero beyond the wavenumber where the band ends.

    Parameters
    ----------
    wavelength_nm : float array, shape (W,) [nm]
    lambda_max_nm, epsilon : float or float array, shape (...) [nm], [L/(mol cm)]
    half_height_nm : float array, shape (..., 2)
        the wavelengths below and above the maximum where the band has half its height. [nm]

    Returns
    -------
    float array, shape (..., W) [L/(mol cm)]

    Raises
    ------
    ValueError
        the half heights do not enclose the maximum.

    Source
    ------
    D. B. Siano & D. E. Metzler, J. Chem. Phys. 51 (1969) 1856.
    """
    maximum, strength, half = (
        np.asarray(x, float)[..., None]
        for x in (lambda_max_nm, epsilon, np.moveaxis(np.asarray(half_height_nm, float), -1, 0))
    )
    if not ((half[0] > 0) & (half[0] < maximum) & (maximum < half[1])).all():
        raise ValueError(f"half heights {half_height_nm} do not enclose the maximum at {lambda_max_nm} nm")
    nu, nu_max = NM_TO_WAVENUMBER / np.asarray(wavelength_nm, float), NM_TO_WAVENUMBER / maximum
    above, below = NM_TO_WAVENUMBER / half[0] - nu_max, nu_max - NM_TO_WAVENUMBER / half[1]
    return strength * np.exp2(-(_half_widths_away(nu - nu_max, above, below) ** 2))


def _half_widths_away(offset, above, below):
    """Distance from the maximum in half widths: -1 and 1 at the half heights, infinite past the end."""
    ln_rho = np.log(above / below)
    skewed = np.abs(ln_rho) > SYMMETRIC_BELOW
    # (rho^2 - 1) / (rho H) = 1/below - 1/above
    inside = np.where(skewed, offset * (1 / below - 1 / above), 0.0)
    with np.errstate(divide="ignore", invalid="ignore"):
        away = np.where(inside > -1, np.log1p(inside), -np.inf) / np.where(skewed, ln_rho, 1.0)
    return np.where(skewed, away, 2 * offset / (above + below))


def half_heights_of_widths(
    lambda_max_nm: float, *, above_cm1: float, below_cm1: float
) -> tuple[float, float]:
    """Half-height wavelengths of a band from its half widths above and below the maximum in wavenumber."""
    nu = NM_TO_WAVENUMBER / lambda_max_nm
    return NM_TO_WAVENUMBER / (nu + above_cm1), NM_TO_WAVENUMBER / (nu - min(below_cm1, 0.5 * nu))


def band_area(*, lambda_max_nm, half_height_nm):
    """Integral over wavenumber of a band one high. [cm-1] Arrays broadcast as in `lognormal_band`."""
    half = np.asarray(half_height_nm, float)
    nu_max = NM_TO_WAVENUMBER / np.asarray(lambda_max_nm, float)
    above, below = NM_TO_WAVENUMBER / half[..., 0] - nu_max, nu_max - NM_TO_WAVENUMBER / half[..., 1]
    ln_rho = np.log(above / below)
    skewed = np.abs(ln_rho) > SYMMETRIC_BELOW
    # (above + below) / 2 is the limit of ln rho / (1/below - 1/above) where both sides are equal
    half_width = np.where(skewed, ln_rho / np.where(skewed, 1 / below - 1 / above, 1.0), (above + below) / 2)
    return half_width * np.sqrt(np.pi / np.log(2)) * np.exp(ln_rho**2 / (4 * np.log(2)))


@cache
def statistics() -> dict:
    """Spread of published bands: widths, strengths, positions, shape; the file says how each came about."""
    return json.loads(STATISTICS.read_text(encoding="utf-8"))


def default_half_heights(lambda_max_nm: float, *, epsilon: float | None = None) -> tuple[float, float]:
    """Half-height wavelengths to expect of a dye's band where none are published. [nm]

    From 46 published dye bands: half widths in wavenumber grow with the wavenumber of the maximum and
    shrink with its strength; one standard deviation of ln width is `statistics()["default_width"]["ln_sd"]`.
    """
    law = statistics()["default_width"]
    away = NM_TO_WAVENUMBER / lambda_max_nm - law["from_wavenumber_cm1"]
    stronger = np.log((epsilon or law["from_epsilon"]) / law["from_epsilon"])
    above, below = (
        float(
            np.clip(
                np.exp(side["ln_at_origin"] + side["per_cm1"] * away + side["per_ln_epsilon"] * stronger),
                *side["observed_cm1"],
            )
        )
        for side in (law["above"], law["below"])
    )
    return half_heights_of_widths(lambda_max_nm, above_cm1=above, below_cm1=below)


def band_sum(wavelength_nm, bands: Iterable[Any]) -> tuple[np.ndarray, np.ndarray]:
    """Spectrum of several bands and its relative standard deviation, each shape (W,).

    A band is anything with `lambda_max_nm`, `epsilon_l_mol_cm`, and `half_height_nm`, `lambda_sd_nm` and
    `epsilon_relative_sd`, which may be None: then the spread of published bands stands in. Four errors add
    in squares: strength, position, width (where the half heights are not published) and the shape that a
    log-normal misses. Where hardly anything absorbs the relative figure is large; times epsilon it is
    the standard deviation down to a thousandth of the highest value.
    """
    wavelength_nm = np.asarray(wavelength_nm, float)
    total, variance = np.zeros(wavelength_nm.size), np.zeros(wavelength_nm.size)
    for band in bands:
        epsilon, sd = _band_and_sd(wavelength_nm, band)
        total, variance = total + epsilon, variance + sd**2
    if not total.any():
        return total, np.zeros(wavelength_nm.size)
    return total, np.sqrt(variance) / np.maximum(total, LEAST_OF_PEAK * total.max())


def _band_and_sd(wavelength_nm, band: Any) -> tuple[np.ndarray, np.ndarray]:
    spread = statistics()
    at, strength, half = band.lambda_max_nm, band.epsilon_l_mol_cm, band.half_height_nm

    def shaped(half_heights, wavelengths=wavelength_nm):
        return lognormal_band(wavelengths, lambda_max_nm=at, epsilon=strength, half_height_nm=half_heights)

    published_width = half is not None
    half = tuple(half) if published_width else default_half_heights(at, epsilon=strength)
    epsilon = shaped(half)
    lambda_sd = spread["lambda_sd_nm"]["value"] if band.lambda_sd_nm is None else band.lambda_sd_nm
    strength_sd = (
        spread["epsilon_relative_sd"]["value"]
        if band.epsilon_relative_sd is None
        else band.epsilon_relative_sd
    )
    variance = (strength_sd * epsilon) ** 2 + (
        spread["shape_sd_of_peak"]["value"] * strength * shape_doubt(wavelength_nm, epsilon / strength, at)
    ) ** 2
    if lambda_sd:
        shorter, longer = (shaped(half, wavelength_nm * at / (at + step)) for step in (-lambda_sd, lambda_sd))
        variance = variance + ((longer - shorter) / 2) ** 2
    if not published_width:
        factor = np.exp(spread["default_width"]["ln_sd"])
        narrow, wide = (shaped(_scaled(half, at, f)) for f in (1 / factor, factor))
        variance = variance + ((wide - narrow) / 2) ** 2
    return epsilon, np.sqrt(variance)


def shape_doubt(wavelength_nm, height, lambda_max_nm: float):
    """Where a log-normal may miss a band, as a share of `shape_sd_of_peak`.

    None at the maximum, less and less down the long-wavelength side, and all of it on the short side, where
    weaker bands lie unseen.
    """
    short = np.asarray(wavelength_nm) < lambda_max_nm
    return (1 - height) * np.where(short, 1.0, height**0.25)


def _scaled(half, lambda_max_nm: float, factor: float) -> tuple[float, float]:
    """Half heights with both half widths `factor` times as far in wavenumber."""
    nu = NM_TO_WAVENUMBER / lambda_max_nm
    return half_heights_of_widths(
        lambda_max_nm,
        above_cm1=factor * (NM_TO_WAVENUMBER / half[0] - nu),
        below_cm1=factor * (nu - NM_TO_WAVENUMBER / half[1]),
    )
