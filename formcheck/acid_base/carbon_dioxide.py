"""Carbon dioxide of the air in water: how much dissolves, and its two steps of proton loss.

Source: Plummer & Busenberg, Geochim. Cosmochim. Acta 46 (1982) 1011, equations for 0 to 90 C.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray

from formcheck.acid_base.water import KELVIN

# log10 K = a + b T + c / T + d log10 T + e / T^2, T in kelvin.
_HENRY = (108.3865, 0.01985076, -6919.53, -40.45154, 669365.0)
_FIRST = (-356.3094, -0.06091964, 21834.37, 126.8339, -1684915.0)
_SECOND = (-107.8871, -0.03252849, 5151.79, 38.92561, -563713.9)

# Mole fraction in dry air at ground level, 420 ppm (WMO Greenhouse Gas Bulletin, mean of 2023), at 1 atm.
OF_AIR_ATM = 420e-6


def henry_mol_kg_atm(temperature_c: ArrayLike) -> NDArray[np.float64]:
    """Dissolved CO2 (with H2CO3) per pressure of CO2 over water. Shape as given. [mol/(kg atm)]"""
    return 10 ** _log10_k(temperature_c, _HENRY)


def pka(temperature_c: ArrayLike) -> NDArray[np.float64]:
    """Both pKa of dissolved CO2 (with H2CO3). (...) to (..., 2). [1]"""
    return -np.stack([_log10_k(temperature_c, _FIRST), _log10_k(temperature_c, _SECOND)], axis=-1)


def _log10_k(temperature_c: ArrayLike, terms: tuple[float, ...]) -> NDArray[np.float64]:
    T = np.asarray(temperature_c, float) + KELVIN
    a, b, c, d, e = terms
    return a + b * T + c / T + d * np.log10(T) + e / T**2
