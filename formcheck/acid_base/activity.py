"""Activity coefficients of ions by the Davies equation.

    log10 gamma = -z^2 D,   D = A(T) (sqrt I / (1 + sqrt I) - 0.3 I)            [Davies 1962]

Held up to I = 0.5 mol/kg. Above that D stays at its value for 0.5: the equation turns upward there
while measured coefficients of common salts do not yet, so holding is the smaller error; callers flag it.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray

from formcheck.acid_base import water

HIGHEST_IONIC_STRENGTH_MOL_KG = 0.5
# (e^2 / 4 pi eps_0 k)^1.5 sqrt(2 pi N_A 1000) / ln 10 from CODATA 2018, for density in g/cm3.
_DEBYE_HUECKEL = 1.824812e6


def debye_hueckel_a(temperature_c: ArrayLike) -> NDArray[np.float64]:
    """A of the Debye-Hueckel limiting law in water, molality scale, decadic. [kg^1/2 mol^-1/2]

    Shape as given; NaN outside 0 to 100 C. About 0.509 at 25 C.
    """
    t = np.asarray(temperature_c, float)
    epsilon_t = water.relative_permittivity(t) * (t + water.KELVIN)
    return _DEBYE_HUECKEL * np.sqrt(water.density_g_cm3(t)) * epsilon_t**-1.5


def davies_d(ionic_strength_mol_kg: ArrayLike, *, a: ArrayLike) -> NDArray[np.float64]:
    """D of the Davies equation: -log10 gamma of an ion of charge one. Shapes broadcast. [1]

    Source: C. W. Davies, Ion Association, Butterworths 1962 (coefficient 0.3).
    """
    strength = np.minimum(np.asarray(ionic_strength_mol_kg, float), HIGHEST_IONIC_STRENGTH_MOL_KG)
    root = np.sqrt(np.maximum(strength, 0.0))
    return np.asarray(a, float) * (root / (1 + root) - 0.3 * strength)


def log10_activity_coefficient(charge: ArrayLike, *, ionic_strength_mol_kg: ArrayLike,
                               temperature_c: ArrayLike = 25.0) -> NDArray[np.float64]:
    """log10 gamma of an ion by Davies; 0 for a neutral molecule. Shapes broadcast. [1]"""
    d = davies_d(ionic_strength_mol_kg, a=debye_hueckel_a(temperature_c))
    return -np.asarray(charge, float) ** 2 * d


def beyond_davies(ionic_strength_mol_kg: ArrayLike) -> NDArray[np.bool_]:
    """Whether the ionic strength lies beyond what the Davies equation is held to cover."""
    return np.asarray(ionic_strength_mol_kg, float) > HIGHEST_IONIC_STRENGTH_MOL_KG
