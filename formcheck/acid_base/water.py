"""Liquid water from 0 to 100 C: density, permittivity and ion product.

Pressures are those of a workshop or of the water's own vapour; neither moves a digit that matters here.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray

LOWEST_C, HIGHEST_C = 0.0, 100.0
KELVIN = 273.15
MOLAR_MASS_KG_MOL = 0.018015268

# Kell 1975, J. Chem. Eng. Data 20, 97: ascending powers of the temperature in C.
_KELL_TOP = (999.83952, 16.945176, -7.9870401e-3, -46.170461e-6, 105.56302e-9, -280.54253e-12)
_KELL_BOTTOM = 16.879850e-3
# Malmberg & Maryott 1956, J. Res. NBS 56, 1: ascending powers of the temperature in C.
_PERMITTIVITY = (87.740, -0.40008, 9.398e-4, -1.410e-6)
# Bandura & Lvov 2006, J. Phys. Chem. Ref. Data 35, 15 (also IAPWS R11-07), equations 3 and 4.
_ION_NUMBER = 6
_ALPHA = (-0.864671, 8659.19, -22786.2)
_BETA = (0.642044, -56.8534, -0.375754)
_GAMMA = (6.141500e-1, 4.825133e4, -6.770793e4, 1.010210e7)


def density_g_cm3(temperature_c: ArrayLike) -> NDArray[np.float64]:
    """Density of water at one atmosphere, 0 to 100 C; NaN outside.

    Shape as given. [g/cm3]  Source: Kell, J. Chem. Eng. Data 20 (1975) 97.
    """
    t = _within(temperature_c)
    return _polynomial(t, _KELL_TOP) / (1 + _KELL_BOTTOM * t) / 1000


def relative_permittivity(temperature_c: ArrayLike) -> NDArray[np.float64]:
    """Static relative permittivity of water, 0 to 100 C; NaN outside.

    Shape as given. [1]  Source: Malmberg & Maryott, J. Res. Natl. Bur. Stand. 56 (1956) 1.
    """
    return _polynomial(_within(temperature_c), _PERMITTIVITY)


def pkw(temperature_c: ArrayLike) -> NDArray[np.float64]:
    """Negative decadic logarithm of the ion product of water on the molality scale, 0 to 100 C.

    Shape as given, NaN outside the range. [1]
    Source: Bandura & Lvov, J. Phys. Chem. Ref. Data 35 (2006) 15 (IAPWS R11-07), with the density of
    `density_g_cm3`; stated uncertainty 0.01 or better for the liquid at these temperatures.
    """
    t = _within(temperature_c)
    return pkw_at(t + KELVIN, density_g_cm3=density_g_cm3(t))


def pkw_at(temperature_k: ArrayLike, *, density_g_cm3: ArrayLike) -> NDArray[np.float64]:
    """The same equation at any temperature and density it covers (273 to 1073 K, to 1.25 g/cm3)."""
    T, rho = np.asarray(temperature_k, float), np.asarray(density_g_cm3, float)
    q = rho * np.exp(_ALPHA[0] + _ALPHA[1] / T + _ALPHA[2] / T**2 * rho ** (2 / 3))
    gas = _polynomial(1 / T, _GAMMA)
    solvation = np.log10(1 + q) - q / (1 + q) * rho * (_BETA[0] + _BETA[1] / T + _BETA[2] * rho)
    return -2 * _ION_NUMBER * solvation + gas + 2 * np.log10(MOLAR_MASS_KG_MOL)


def _polynomial(x: NDArray[np.float64], ascending: tuple[float, ...]) -> NDArray[np.float64]:
    return sum((c * x**power for power, c in enumerate(ascending)), np.zeros_like(x))


def _within(temperature_c: ArrayLike) -> NDArray[np.float64]:
    t = np.asarray(temperature_c, float)
    return np.where((t >= LOWEST_C) & (t <= HIGHEST_C), t, np.nan)
