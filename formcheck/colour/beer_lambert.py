"""Clear solutions: absorbance adds over the dyes, transmittance falls by tens."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from formcheck.colour.refuse import refuse_where


def absorbance(
    epsilon: ArrayLike, concentration_mol_l: ArrayLike, path_length_cm: ArrayLike
) -> np.ndarray:
    """Decadic absorbance of solutions of several dyes (or forms of a dye).

    A = sum over dyes of epsilon c l                                        [Beer 1852, Lambert 1760]

    Parameters
    ----------
    epsilon : float array, shape (D, W)
        Decadic molar absorption coefficient. [L/(mol cm)]
    concentration_mol_l : float array, shape (..., D)
        At least 0. [mol/L]
    path_length_cm : float array, shape (...)
        Length of the cell, or thickness of a clear layer; at least 0. [cm]

    Returns
    -------
    float array, shape (..., W)
        Absorbance of one passage. [1]

    Raises
    ------
    ValueError
        A concentration or path length below 0.

    Source
    ------
    IUPAC Gold Book, "Beer-Lambert law". Holds for dyes that do not aggregate at this concentration.
    """
    concentration = np.asarray(concentration_mol_l, dtype=float)
    path = np.asarray(path_length_cm, dtype=float)
    refuse_where(concentration < 0, concentration, "concentration_mol_l", "at least 0 mol/L")
    refuse_where(path < 0, path, "path_length_cm", "at least 0 cm")
    return (concentration * path[..., None]) @ np.asarray(epsilon, dtype=float)


def transmittance(absorbance: ArrayLike) -> np.ndarray:
    """Fraction of light let through: T = 10**-A, element by element, any shape. [1]"""
    return np.power(10.0, -np.asarray(absorbance, dtype=float))
