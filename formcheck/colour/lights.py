"""Lights to see a shade under: CIE illuminants by name, or any spectrum the user gives."""

from __future__ import annotations

from functools import cache
from pathlib import Path

import numpy as np
from numpy.typing import ArrayLike

from formcheck.colour.baked import read_baked
from formcheck.trouble import suggestion

# A CIE name, or (wavelengths in nm, relative power at each).
Light = str | tuple[ArrayLike, ArrayLike]

TABLE = Path(__file__).parent / "data" / "lights.csv"
ALSO_CALLED = {"F2": "FL2", "F7": "FL7", "F11": "FL11"}  # as ASTM E308 writes them


def light_names() -> tuple[str, ...]:
    """Names of the built-in lights, in the order of the table."""
    return tuple(_table())


def light_name(name: str) -> str:
    """The name as the table writes it, whatever the case; ValueError with the closest names if unknown."""
    wanted = ALSO_CALLED.get(name.upper(), name.upper())
    if wanted not in _table():
        raise ValueError(f"light {name!r} is not built in; {suggestion(name, light_names())}")
    return wanted


def power(light: Light, at_nm: np.ndarray) -> np.ndarray:
    """Relative spectral power of a light at the wavelengths asked for, shape of `at_nm`.

    Between tabulated points linear, beyond them the end value is held [CIE 015:2018, ASTM E308].

    ValueError for an unknown name, or a spectrum that is not two rising, finite rows of equal length,
    never negative, reaching over 400 to 700 nm.
    """
    wavelength_nm, values = table(light)
    return np.interp(at_nm, wavelength_nm, values)


def table(light: Light) -> tuple[np.ndarray, np.ndarray]:
    """(wavelength_nm, power) as tabulated, checked."""
    if isinstance(light, str):
        return _table()[light_name(light)]
    wavelength_nm, values = (np.asarray(row, dtype=float) for row in light)
    _refuse_unusable(wavelength_nm, values)
    return wavelength_nm, values


@cache
def _table() -> dict[str, tuple[np.ndarray, np.ndarray]]:
    columns = read_baked(TABLE)
    wavelength_nm = columns.pop("wavelength_nm")
    return {name: (wavelength_nm, column) for name, column in columns.items()}


def _refuse_unusable(wavelength_nm: np.ndarray, values: np.ndarray) -> None:
    if wavelength_nm.ndim != 1 or wavelength_nm.shape != values.shape or len(values) < 2:
        raise ValueError(
            f"a light of {np.shape(wavelength_nm)} wavelengths and {np.shape(values)} powers; "
            "expected two rows of equal length"
        )
    if not (np.isfinite(wavelength_nm).all() and np.isfinite(values).all()):
        raise ValueError("a light with wavelengths or powers that are not numbers; expected finite ones")
    if not (np.diff(wavelength_nm) > 0).all():
        raise ValueError("a light whose wavelengths do not rise; expected rising wavelengths in nm")
    if (values < 0).any() or not values.any():
        raise ValueError("a light of negative or no power; expected powers of at least 0, not all 0")
    if wavelength_nm[0] > 400 or wavelength_nm[-1] < 700:
        raise ValueError(
            f"a light from {wavelength_nm[0]:g} to {wavelength_nm[-1]:g} nm; expected at least 400 to 700 nm"
        )
