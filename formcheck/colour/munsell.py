"""Munsell notation of a colour: hue, value, chroma by the renotation of 1943.

The table gives chromaticities at 40 hues, even chromas and whole values. Between them formcheck goes in
polar coordinates about illuminant C: distance and angle linear in hue and in chroma, and in luminance
between values. Both rise without a turn along chroma and hue throughout the table, so the way back is two
searches in turn.
"""

from __future__ import annotations

from functools import cache
from pathlib import Path

import numpy as np
from numpy.typing import ArrayLike

from formcheck.colour import tristimulus
from formcheck.colour.baked import read_baked
from formcheck.colour.refuse import refuse_where
from formcheck.spectra.grid import WAVELENGTH_NM

TABLE = Path(__file__).parent / "data" / "munsell.csv"
FAMILIES = ("R", "YR", "Y", "GY", "G", "BG", "B", "PB", "P", "RP")
LIGHT, OBSERVER_DEG = "C", 2  # for which the renotation holds
WHITE_XY = np.array([0.31006, 0.31616])  # of illuminant C, as the table has it
HUE_STEP, CHROMA_STEP = 2.5, 2.0
# Y in percent of the perfect diffuser, V up to the fifth power [ASTM D1535, which has the 0.975 of the older
# scale, percent of magnesium oxide, within]
Y_OF_VALUE = np.array([0.0, 1.1914, -0.22533, 0.23352, -0.020484, 0.00081939])
VALUES = np.linspace(0, 10, 201)  # where the way back from Y begins
ROUNDS, SETTLED = 60, 1e-7
NEARLY = 1e-6  # so close to a point of the table counts as on it
LEAST_CHROMA = 0.05  # below, the notation to one decimal has no hue


def luminance_of_value(value: ArrayLike) -> np.ndarray:
    """Y in percent of the perfect diffuser of Munsell values 0 to 10. Source: ASTM D1535."""
    return np.polynomial.polynomial.polyval(np.asarray(value, dtype=float), Y_OF_VALUE)


def value_of_luminance(Y: ArrayLike) -> np.ndarray:
    """Munsell value 0 to 10 of Y in percent of the perfect diffuser; NaN above 100. Inverse of the above."""
    Y = np.asarray(Y, dtype=float)
    refuse_where(~(Y >= 0), Y, "Y", "a luminance of at least 0 percent")
    value = np.interp(Y, luminance_of_value(VALUES), VALUES)
    slope = np.polynomial.polynomial.polyder(Y_OF_VALUE)
    for _ in range(4):
        value = value - (luminance_of_value(value) - Y) / np.polynomial.polynomial.polyval(value, slope)
    return np.where(Y > 100 + 1e-9, np.nan, np.clip(value, 0, 10))


def hue_value_chroma(xyY: ArrayLike) -> np.ndarray:
    """Munsell hue, value and chroma of chromaticities x, y and luminance Y.

    Parameters
    ----------
    xyY : float array, shape (..., 3)
        For the 1931 observer and illuminant C; Y in percent of the perfect diffuser.

    Returns
    -------
    float array, shape (..., 3)
        Hue 0 to 100 (5 is 5R, 15 is 5YR, up to 100, 10RP), value 0 to 10, chroma. All NaN where the table
        does not reach; 0 for the hue of a grey.

    Raises
    ------
    ValueError
        A luminance below 0.

    Errors
    ------
    Within 0.3 steps of hue and 0.3 of chroma of other ways to go between the points of the table
    (tests/colour/test_munsell.py); below value 1 and above 9 the table itself is extrapolated.

    Source
    ------
    ASTM D1535; S. M. Newhall, D. Nickerson & D. B. Judd, J. Opt. Soc. Am. 33 (1943) 385.
    """
    xyY = np.asarray(xyY, dtype=float)
    value = value_of_luminance(xyY[..., 2])
    found = np.full(xyY.shape, np.nan)
    for place in np.ndindex(xyY.shape[:-1]):
        if np.isfinite(xyY[place]).all() and np.isfinite(value[place]):
            hue, chroma = _hue_chroma(xyY[place][:2], float(value[place]))
            found[place] = (hue, value[place], chroma) if np.isfinite(chroma) else np.nan
    return found


def hue_value_chroma_of_spectrum(spectrum: ArrayLike, wavelength_nm: ArrayLike = WAVELENGTH_NM) -> np.ndarray:
    """The same of reflectance spectra (..., W), under illuminant C for the 1931 observer; gives (..., 3)."""
    XYZ = tristimulus.xyz(spectrum, LIGHT, OBSERVER_DEG, wavelength_nm)
    total = XYZ.sum(axis=-1, keepdims=True)
    grey = np.broadcast_to(WHITE_XY, XYZ[..., :2].shape)
    xy = np.divide(XYZ[..., :2], total, out=grey.copy(), where=total > 0)
    return hue_value_chroma(np.concatenate([xy, np.clip(XYZ[..., 1:2], 0, None)], axis=-1))


def notation(hue_value_chroma: ArrayLike) -> str | None:
    """`5.0R 4.0/12.0`, or `N 5.0/` for a grey, of one (3,); None where it is not known (NaN)."""
    hue, value, chroma = (float(part) for part in np.asarray(hue_value_chroma, dtype=float))
    if np.isnan(chroma):
        return None
    if chroma < LEAST_CHROMA:
        return f"N {value:.1f}/"
    tenths = round(hue * 10) % 1000 or 1000  # 10RP closes the circle
    family, step = divmod(tenths - 1, 100)
    return f"{(step + 1) / 10:.1f}{FAMILIES[family]} {value:.1f}/{chroma:.1f}"


def xy_of(hue: float, value: float, chroma: float) -> np.ndarray:
    """x, y (2,) of one Munsell colour, hue 0 to 100; NaN where the table does not reach."""
    distance, angle, most = _plane_at(value)
    if chroma > _most_at(most, hue):
        return np.full(2, np.nan)
    rho, phi = (_between_hues(_at_chroma(grid, chroma), hue) for grid in (distance, angle))
    return WHITE_XY + rho * np.array([np.cos(phi), np.sin(phi)])


def _hue_chroma(xy: np.ndarray, value: float) -> tuple[float, float]:
    """By turns: the hue whose angle fits at this chroma, the chroma whose distance fits at this hue."""
    distance, angle, most = _plane_at(value)
    dx, dy = xy - WHITE_XY
    rho, phi = float(np.hypot(dx, dy)), float(np.arctan2(dy, dx))
    if rho < 1e-9:
        return 0.0, 0.0
    chromas = CHROMA_STEP * np.arange(distance.shape[1])
    chroma, hue = 4.0, 0.0
    for _ in range(ROUNDS):
        hue = _hue_at_angle(_at_chroma(angle, chroma), phi)
        before, chroma = chroma, float(np.interp(rho, _between_hues(distance, hue), chromas))
        if abs(chroma - before) < SETTLED:
            break
    beyond = chroma > _most_at(most, hue)
    return (np.nan, np.nan) if beyond else (hue, chroma)


def _plane_at(value: float) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    """Distance and angle (40 hues, chromas from 0) and the greatest chroma (40,) at a value.

    Between two values of the table linear in luminance; below the least of them that one is held.
    """
    values, distance, angle, most = _planes()
    lower = int(np.clip(np.searchsorted(values, value, side="right") - 1, 0, len(values) - 2))
    low, high, here = luminance_of_value([values[lower], values[lower + 1], value])
    share = float(np.clip((here - low) / (high - low), 0, 1))
    pair = slice(lower, lower + 2)
    weight = np.array([1 - share, share])
    # A value of the table itself needs only its own plane
    reach = np.where(weight[:, None] > NEARLY, most[pair], np.inf).min(axis=0)
    return (*(np.tensordot(weight, grid[pair], 1) for grid in (distance, angle)), reach)


@cache
def _planes() -> tuple[np.ndarray, np.ndarray, np.ndarray, np.ndarray]:
    """Values (V,); distance and angle (V, 40, chromas from 0); greatest chroma (V, 40).

    Beyond the greatest chroma of a hue its line is carried on straight, so that a search always ends.
    """
    t = read_baked(TABLE)
    values = np.unique(t["value"])
    chromas = int(t["chroma"].max() / CHROMA_STEP) + 1
    rho, phi = np.full((2, len(values), 40, chromas), np.nan)
    at = (
        np.searchsorted(values, t["value"]),
        np.rint(t["hue"] / HUE_STEP).astype(int) - 1,
        np.rint(t["chroma"] / CHROMA_STEP).astype(int),
    )
    dx, dy = t["x"] - WHITE_XY[0], t["y"] - WHITE_XY[1]
    rho[at], phi[at] = np.hypot(dx, dy), np.arctan2(dy, dx)
    rho[..., 0], phi[..., 0] = 0, phi[..., 1]
    most = CHROMA_STEP * (np.isfinite(rho).sum(axis=-1) - 1)
    for c in range(1, chromas):
        missing = np.isnan(rho[..., c])
        step = rho[..., c - 1] - rho[..., c - 2] if c > 1 else rho[..., c - 1]
        rho[..., c] = np.where(missing, rho[..., c - 1] + step, rho[..., c])
        phi[..., c] = np.where(missing, phi[..., c - 1], phi[..., c])
    # One turn over the hues of every ring, all rings begun alike: angles then rise from 2.5R to 10RP
    phi = np.unwrap(phi, axis=1)
    return values, rho, phi - 2 * np.pi * np.rint((phi[:, :1] - phi[:1, :1, :1]) / (2 * np.pi)), most


def _at_chroma(grid: np.ndarray, chroma: float) -> np.ndarray:
    """A ring (40,) of a grid (40, chromas)."""
    place = min(chroma / CHROMA_STEP, grid.shape[1] - 1.0)
    lower = min(int(place), grid.shape[1] - 2)
    return grid[:, lower] + (place - lower) * (grid[:, lower + 1] - grid[:, lower])


def _between_hues(grid: np.ndarray, hue: float) -> np.ndarray:
    """Row of a grid (40, ...) at a hue; angles of the seam are brought to one turn."""
    place = hue / HUE_STEP - 1
    lower = int(np.floor(place))
    first, second = grid[lower % 40], grid[(lower + 1) % 40]
    if lower in (-1, 39):  # between 10RP and 2.5R
        turned = 2 * np.pi * np.rint((first - second) / (2 * np.pi))
        second = second + turned
    return first + (place - lower) * (second - first)


def _hue_at_angle(ring: np.ndarray, phi: float) -> float:
    """Hue, above 0 to 100, at which a rising ring of angles (40,) meets an angle."""
    closed = np.append(ring, ring[0] + 2 * np.pi)
    onward = ring[0] + (phi - ring[0]) % (2 * np.pi)
    hue = float(np.interp(onward, closed, HUE_STEP * np.arange(1, 42)))
    return hue - 100 if hue > 100 else hue


def _most_at(most: np.ndarray, hue: float) -> float:
    """Greatest chroma that both neighbouring hues of the table reach."""
    place = hue / HUE_STEP - 1
    lower, upper = int(np.floor(place + NEARLY)), int(np.ceil(place - NEARLY))
    return float(min(most[lower % 40], most[upper % 40])) + NEARLY
