"""Tristimulus values of a spectrum under a light, by the weights of ASTM E308 and ASTM E2022."""

from __future__ import annotations

from functools import cache, lru_cache
from pathlib import Path

import numpy as np
from numpy.typing import ArrayLike

from formcheck.colour import lights
from formcheck.colour.baked import read_baked
from formcheck.colour.lagrange import interpolation_matrix
from formcheck.colour.lights import Light
from formcheck.spectra.grid import WAVELENGTH_NM

TABLE = Path(__file__).parent / "data" / "observers.csv"
OBSERVERS_DEG = (2, 10)  # CIE 1931 and CIE 1964
FIRST_NM, LAST_NM = 360, 780  # the range ASTM E308 sums over
MUST_REACH_NM = (420.0, 680.0)  # a spectrum that stops inside these says too little about its colour


def xyz(
    spectrum: ArrayLike,
    light: Light = "D65",
    observer_deg: int = 10,
    wavelength_nm: ArrayLike = WAVELENGTH_NM,
) -> np.ndarray:
    """Tristimulus values X, Y, Z of reflectance or transmittance spectra.

    Parameters
    ----------
    spectrum : float array, shape (..., W)
        Reflectance or transmittance as a fraction. [1]
    light : str, or pair of arrays
        Name of a CIE illuminant (lights.light_names), or (wavelength in nm, relative power).
    observer_deg : int
        2 for CIE 1931, 10 for CIE 1964.
    wavelength_nm : float array, shape (W,)
        Where the spectrum is given. [nm]

    Returns
    -------
    float array, shape (..., 3)
        Scaled so that Y is 100 for a spectrum of 1 throughout.

    Raises
    ------
    ValueError
        See `weights`; or a spectrum whose last axis is not that of the wavelengths.

    Source
    ------
    ASTM E308; CIE 015:2018.
    """
    table = weights(light, observer_deg, wavelength_nm)
    spectrum = np.asarray(spectrum, dtype=float)
    if spectrum.shape[-1:] != table.shape[:1]:
        raise ValueError(
            f"a spectrum of shape {spectrum.shape}; expected {len(table)} values on its last axis"
        )
    return spectrum @ table


def white_point(
    light: Light = "D65", observer_deg: int = 10, wavelength_nm: ArrayLike = WAVELENGTH_NM
) -> np.ndarray:
    """X, Y, Z of the perfect white under a light, shape (3,), with the weights of the same grid."""
    return weights(light, observer_deg, wavelength_nm).sum(axis=0)


def weights(
    light: Light = "D65", observer_deg: int = 10, wavelength_nm: ArrayLike = WAVELENGTH_NM
) -> np.ndarray:
    """Weights W (wavelengths, 3) such that X, Y, Z = spectrum @ W; read-only, kept once made.

    - 1 nm data, and 5 nm data under a light that is itself tabulated at 5 nm: plain summation.
    - 20 nm data: first taken to 10 nm (four-point Lagrange), then as 10 nm.
    - else: the spectrum is taken to 1 nm by local Lagrange interpolation and summed there, which for
      10 nm gives the E2022 tables; uneven steps go the same way.
    Weights of wavelengths the data do not reach are added to the end points; data beyond 360 to
    780 nm are not used.

    Raises ValueError for an unknown light or observer, or wavelengths that do not rise, are fewer
    than four, or do not reach over 420 to 680 nm.

    Source: ASTM E308, ASTM E2022.
    """
    if observer_deg not in OBSERVERS_DEG:
        raise ValueError(f"observer {observer_deg!r}; expected 2 or 10 degrees")
    grid = np.ascontiguousarray(wavelength_nm, dtype=float)
    _refuse_unusable(grid)
    if isinstance(light, str):
        key: Light | tuple[bytes, bytes] = lights.light_name(light)
    else:
        key = (_bytes(light[0]), _bytes(light[1]))
    return _weights(key, observer_deg, grid.tobytes())


@lru_cache(maxsize=64)
def _weights(key, observer_deg: int, grid_bytes: bytes) -> np.ndarray:
    grid = np.frombuffer(grid_bytes)
    light: Light = key if isinstance(key, str) else (np.frombuffer(key[0]), np.frombuffer(key[1]))
    inside = (grid >= FIRST_NM) & (grid <= LAST_NM)
    table = np.zeros((len(grid), 3))
    table[inside] = _weights_inside(light, observer_deg, grid[inside])
    table *= 100 / table[:, 1].sum()
    table.flags.writeable = False
    return table


def _weights_inside(light: Light, observer_deg: int, grid: np.ndarray) -> np.ndarray:
    """Weights, not yet scaled, of a grid that lies within the range of the observers."""
    step = _even_step(grid)
    if step == 20:
        tens = np.arange(grid[0], grid[-1] + 5, 10.0)
        return interpolation_matrix(grid, tens).T @ _weights_inside(light, observer_deg, tens)
    covering, index = _covering(grid)
    if step == 1 or (step == 5 and _is_tabulated_at(light, covering)):
        on_covering = _product(light, observer_deg, covering)
    else:
        ones = np.arange(FIRST_NM, LAST_NM + 1.0)
        on_covering = interpolation_matrix(covering, ones).T @ _product(light, observer_deg, ones)
    folded = np.zeros((len(grid), 3))
    np.add.at(folded, index, on_covering)
    return folded


def _product(light: Light, observer_deg: int, at_nm: np.ndarray) -> np.ndarray:
    """Light times observer, (len(at_nm), 3); at_nm are whole nanometres."""
    rows = np.rint(at_nm).astype(int) - FIRST_NM
    return lights.power(light, at_nm)[:, None] * _observer(observer_deg)[rows]


def _covering(grid: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """The grid carried on by its end steps over the whole range, and where each point folds back to."""
    before = _steps_onward(grid[0] - FIRST_NM, grid[1] - grid[0])
    after = _steps_onward(LAST_NM - grid[-1], grid[-1] - grid[-2])
    covering = np.concatenate([grid[0] - before[::-1], grid, grid[-1] + after])
    index = np.clip(np.arange(len(covering)) - len(before), 0, len(grid) - 1)
    return covering, index


def _steps_onward(gap: float, step: float) -> np.ndarray:
    """Distances of the points needed to bridge a gap: step, 2 step, ... until it is covered."""
    return step * np.arange(1, np.ceil(gap / step - 1e-9) + 1) if gap > 0 else np.zeros(0)


def _even_step(grid: np.ndarray) -> int | None:
    """1, 5, 10 or 20 where the grid has this step and falls on its multiples (tens for 20); else None."""
    for step in (1, 5, 10, 20):
        aligned = np.allclose(grid / min(step, 10), np.rint(grid / min(step, 10)), atol=1e-9)
        if aligned and np.allclose(np.diff(grid), step):
            return step
    return None


def _is_tabulated_at(light: Light, grid: np.ndarray) -> bool:
    """Whether the light's own table is no finer than this grid, so that summing on the grid loses nothing."""
    wavelength_nm, _ = lights.table(light)
    visible = wavelength_nm[(wavelength_nm >= grid[0]) & (wavelength_nm <= grid[-1])]
    return set(visible.tolist()) <= set(grid.tolist())


@cache
def _observer(observer_deg: int) -> np.ndarray:
    """Colour-matching functions at 1 nm from 360 to 780 nm, (421, 3)."""
    columns = read_baked(TABLE)
    return np.stack([columns[f"{axis}_{observer_deg}"] for axis in "xyz"], axis=-1)


def _refuse_unusable(grid: np.ndarray) -> None:
    if grid.ndim != 1 or not (np.isfinite(grid).all() and (np.diff(grid) > 0).all()):
        raise ValueError("wavelengths that do not rise; expected a rising row in nm")
    used = np.count_nonzero((grid >= FIRST_NM) & (grid <= LAST_NM))
    if used < 4:
        raise ValueError(f"{used} wavelengths from {FIRST_NM} to {LAST_NM} nm; expected at least 4")
    if grid[0] > MUST_REACH_NM[0] or grid[-1] < MUST_REACH_NM[1]:
        raise ValueError(
            f"wavelengths from {grid[0]:g} to {grid[-1]:g} nm; expected at least "
            f"{MUST_REACH_NM[0]:g} to {MUST_REACH_NM[1]:g} nm"
        )


def _bytes(values: ArrayLike) -> bytes:
    return np.ascontiguousarray(values, dtype=float).tobytes()
