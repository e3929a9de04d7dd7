"""How the forms of a dissolved substance share its protons at a given pH.

Form j of a substance has lost j protons from the form that holds them all (charge z_0). Its amount
against that form is the product of 10^pH K_i over i = 1..j, with the step constants

    K_i = 10^(-pKa_i + D (z_i^2 - z_{i-1}^2)),   z_i = z_0 - i,   D from the Davies equation
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]

LN10 = float(np.log(10.0))
_MOST_DECADES = 300.0  # the product over all steps stays within a double


def step_constants(pka: Array, *, charge_fully_protonated: Array, d: Array) -> Array:
    """K_i of every substance; 0 for steps that do not exist (NaN). (S,n) or (R,S,n), (S,), (R,) to (R,S,n)"""
    n = pka.shape[-1]
    change = 2 * np.arange(1, n + 1) - 1 - 2 * charge_fully_protonated[:, None]
    exponent = d[:, None, None] * change - pka
    constants = np.exp(LN10 * np.minimum(exponent, _MOST_DECADES / max(n, 1) - 16))
    return np.where(np.isnan(pka), 0.0, constants)


def loss_moments(ph: Array, steps: Array) -> tuple[Array, Array]:
    """Mean and variance of the number of protons lost. (R,), (R,S,n) to two of (R,S)"""
    x = np.exp(LN10 * ph)[:, None]
    weight = np.ones(steps.shape[:2])
    total, first, second = weight.copy(), np.zeros_like(weight), np.zeros_like(weight)
    for i in range(steps.shape[2]):
        weight = weight * (x * steps[:, :, i])
        total += weight
        first += (i + 1) * weight
        second += (i + 1) ** 2 * weight
    mean = first / total
    return mean, np.maximum(second / total - mean**2, 0.0)


def shares(ph: Array, steps: Array) -> Array:
    """Fraction of each substance in each form; sums to 1 over the forms. (R,), (R,S,n) to (R,S,n+1)"""
    ratio = np.exp(LN10 * ph)[:, None, None] * steps
    weight = np.concatenate([np.ones((*steps.shape[:2], 1)), np.cumprod(ratio, axis=-1)], axis=-1)
    return weight / weight.sum(axis=-1, keepdims=True)


def refuse_pka_out_of_order(pka: Array) -> None:
    """Raise ValueError where pKa values fall, are infinite, or stand after a gap."""
    bad = np.isinf(pka)
    bad[..., 1:] |= np.isnan(pka[..., :-1]) & ~np.isnan(pka[..., 1:])
    bad[..., 1:] |= pka[..., 1:] < pka[..., :-1]
    if bad.any():
        place = tuple(int(i) for i in np.argwhere(bad)[0])
        raise ValueError(f"pka{list(place)} is {pka[place]} among {pka[place[:-1]].tolist()}; "
                         "expected finite pKa values in rising order, NaN only after the last")
