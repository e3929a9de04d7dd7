"""The share of each form of a dye at a pH, and how sure it is."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray

from formcheck.acid_base import activity
from formcheck.acid_base.protons import LN10, refuse_pka_out_of_order, shares, step_constants

Array = NDArray[np.float64]


def form_fractions(pka: ArrayLike, ph: ArrayLike, *, charge_fully_protonated: ArrayLike | None = None,
                   ionic_strength_mol_kg: ArrayLike = 0.0, temperature_c: ArrayLike = 25.0) -> Array:
    """Fraction of each dye in each of its forms, from the most protonated to the least.

    Stepwise Henderson-Hasselbalch; with charges and an ionic strength the Davies coefficients of both
    forms of each step enter (held above 0.5 mol/kg, see `activity`).

    Parameters
    ----------
    pka : (D,n) or (R,D,n)
        Thermodynamic pKa, rising, padded with NaN. A dye of m steps has 0 in the forms beyond m. [1]
    ph : (R,)
        -log10 of the activity of H+; NaN gives NaN. [1]
    charge_fully_protonated : (D,), optional
        Needed when `ionic_strength_mol_kg` is above 0. [1]
    ionic_strength_mol_kg, temperature_c : scalar or (R,)
        NaN gives NaN; 0 for shares at infinite dilution. [mol/kg], [C]

    Returns
    -------
    (R,D,n+1), sums to 1 over the last axis. [1]

    Raises
    ------
    ValueError
        pKa out of order; ionic strength without charges.

    Source
    ------
    Henderson-Hasselbalch per step; C. W. Davies, Ion Association (1962).
    """
    pka_, ph_ = np.array(pka, float), np.atleast_1d(np.asarray(ph, float))
    refuse_pka_out_of_order(pka_)
    strength = np.broadcast_to(np.asarray(ionic_strength_mol_kg, float), ph_.shape)
    if charge_fully_protonated is None:
        if (strength > 0).any():
            raise ValueError("ionic_strength_mol_kg above 0 without charge_fully_protonated; expected both")
        charge_fully_protonated = np.zeros(pka_.shape[-2])
    d = activity.davies_d(strength, a=activity.debye_hueckel_a(temperature_c))
    charge = np.asarray(charge_fully_protonated, float)
    return shares(ph_, step_constants(pka_, charge_fully_protonated=charge, d=d))


def form_fraction_sd(fraction: ArrayLike, *, ph_sd: ArrayLike, pka_sd: ArrayLike) -> Array:
    """One standard deviation of `form_fractions`, first order in pH and in every pKa, held independent.

    fraction (R,D,n+1), ph_sd (R,) or scalar, pka_sd (D,n) or (R,D,n) with NaN for steps that do not
    exist; returns (R,D,n+1). [1]
    """
    f = np.asarray(fraction, float)
    by_ph, by_pka = form_fraction_slopes(f)
    ph_var = np.broadcast_to(np.asarray(ph_sd, float) ** 2, f.shape[:1])
    pka_var = np.nan_to_num(np.asarray(pka_sd, float)) ** 2
    variance = by_ph**2 * ph_var[:, None, None] + (by_pka**2 * pka_var[..., None, :]).sum(axis=-1)
    return np.sqrt(variance)


def form_fraction_slopes(fraction: Array) -> tuple[Array, Array]:
    """Change of each fraction per unit of pH (R,D,n+1) and of each pKa (R,D,n+1,n)."""
    n_forms = fraction.shape[-1]
    lost = np.arange(n_forms, dtype=float)
    mean = (fraction @ lost)[..., None]
    has_taken = lost[:, None] >= np.arange(1, n_forms)  # form j has taken step i
    have_taken = np.cumsum(fraction[..., ::-1], axis=-1)[..., ::-1][..., None, 1:]
    return LN10 * fraction * (lost - mean), -LN10 * fraction[..., None] * (has_taken - have_taken)
