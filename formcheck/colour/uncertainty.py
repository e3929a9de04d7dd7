"""How sure a shade is: spreads of the inputs carried to the outputs, and the chance to be in tolerance."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass
from functools import cache

import numpy as np
from numpy.typing import ArrayLike

from formcheck.colour.difference import delta_e_2000
from formcheck.colour.refuse import refuse_where

POINTS = 4096  # of the fixed sequence; probabilities hold to about 0.01
GREATEST_RADIUS = 6.0  # in standard deviations; beyond lies 1e-7 of a normal distribution in space


@dataclass(frozen=True)
class Propagated:
    """First-order spread of outputs O over inputs I, recipes on the leading axes."""

    value: np.ndarray  # (..., O) at the inputs as given
    jacobian: np.ndarray  # (..., O, I)
    covariance: np.ndarray  # (..., O, O)
    sd: np.ndarray  # (..., O)
    share: np.ndarray  # (..., O, I): of each output's variance by input; 0 where there is none
    share_total: np.ndarray  # (..., I): of the variances of all outputs summed


def propagate(
    function: Callable[[np.ndarray], np.ndarray],
    x: ArrayLike,
    sd: ArrayLike,
    *,
    lower: ArrayLike = -np.inf,
    upper: ArrayLike = np.inf,
) -> Propagated:
    """First-order propagation of independent standard deviations.

    covariance = J diag(sd**2) J^T, the columns of J by central differences one standard deviation to
    each side: the step then spans what the input may be, and a curved response is met by its chord.

    Parameters
    ----------
    function : callable
        Takes parameter rows (N, I), gives outputs (N, O) or (N,). Called once, with 2I + 1 rows per recipe.
    x, sd : float arrays, shape (..., I)
        Inputs and their standard deviations, at least 0; an input of sd 0 adds nothing.
    lower, upper : float arrays that broadcast with x
        Bounds that no row may cross (a mass below 0); the step towards a bound is cut short.

    Returns
    -------
    Propagated

    Raises
    ------
    ValueError
        A standard deviation that is negative or not a number, an input outside its bounds.

    Errors
    ------
    First order: good while the response bends little within two standard deviations.

    Source
    ------
    JCGM 100:2008 (GUM), clause 5.1.
    """
    x, sd, lower, upper = np.broadcast_arrays(
        *(np.asarray(values, dtype=float) for values in (x, sd, lower, upper))
    )
    refuse_where(~((sd >= 0) & np.isfinite(sd)), sd, "sd", "a finite standard deviation of at least 0")
    refuse_where(~((lower <= x) & (x <= upper)), x, "x", "a value within its bounds")
    each = np.eye(x.shape[-1])
    up = np.minimum(x + sd, upper)[..., None, :] * each + x[..., None, :] * (1 - each)
    down = np.maximum(x - sd, lower)[..., None, :] * each + x[..., None, :] * (1 - each)
    value, at_up, at_down = _evaluate(function, x, up, down)
    span = np.minimum(x + sd, upper) - np.maximum(x - sd, lower)
    per_span = np.divide(sd, span, out=np.zeros_like(span), where=span > 0)
    scaled = np.swapaxes(at_up - at_down, -1, -2) * per_span[..., None, :]  # J sd, (..., O, I)
    return _propagated(value, scaled, sd)


def _evaluate(
    function: Callable[[np.ndarray], np.ndarray], x: np.ndarray, up: np.ndarray, down: np.ndarray
) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    """All rows in one call; outputs at x (..., O), and with each input up or down (..., I, O)."""
    n_inputs = x.shape[-1]
    rows = np.concatenate([x[..., None, :], up, down], axis=-2)
    found = np.asarray(function(rows.reshape(-1, n_inputs)), dtype=float)
    found = found.reshape(*rows.shape[:-1], -1)
    return found[..., 0, :], found[..., 1 : 1 + n_inputs, :], found[..., 1 + n_inputs :, :]


def _propagated(value: np.ndarray, scaled: np.ndarray, sd: np.ndarray) -> Propagated:
    variance_by_input = scaled**2
    variance = variance_by_input.sum(axis=-1)
    by_input, total = variance_by_input.sum(axis=-2), variance.sum(axis=-1)
    return Propagated(
        value=value,
        jacobian=_ratio(scaled, sd[..., None, :]),
        covariance=scaled @ np.swapaxes(scaled, -1, -2),
        sd=np.sqrt(variance),
        share=_ratio(variance_by_input, variance[..., None]),
        share_total=_ratio(by_input, total[..., None]),
    )


def _ratio(part: np.ndarray, whole: np.ndarray) -> np.ndarray:
    whole = np.broadcast_to(whole, part.shape)
    return np.divide(part, whole, out=np.zeros_like(part), where=whole > 0)


def probability_within(
    lab_mean: ArrayLike, lab_cov: ArrayLike, wanted_lab: ArrayLike, tolerance: ArrayLike
) -> np.ndarray:
    """P(DE00 <= tolerance) for a shade that is normally distributed about `lab_mean`.

    Parameters
    ----------
    lab_mean : float array, shape (..., 3)
    lab_cov : float array, shape (..., 3, 3)
        Covariance of L*, a*, b*; may be singular, or 0 for a shade known exactly.
    wanted_lab : float array, shape (..., 3)
    tolerance : float array, shape (...)
        CIEDE2000, at least 0. [1]

    Returns
    -------
    float array, shape (...)
        From 0 to 1, within about 0.01; the same inputs always give the same answer. [1]

    Raises
    ------
    ValueError
        A covariance that is not symmetric with variances of at least 0, a tolerance below 0.

    Source
    ------
    Mean over the fixed points of an additive recurrence (Kronecker sequence): H. Niederreiter, Random
    Number Generation and Quasi-Monte Carlo Methods, SIAM 1992.
    """
    tolerance = np.asarray(tolerance, dtype=float)
    refuse_where(~(tolerance >= 0), tolerance, "tolerance", "a colour difference of at least 0")
    return (_differences(lab_mean, lab_cov, wanted_lab) <= tolerance[..., None]).mean(axis=-1)


def difference_spread(
    lab_mean: ArrayLike, lab_cov: ArrayLike, wanted_lab: ArrayLike
) -> tuple[np.ndarray, np.ndarray]:
    """Mean and standard deviation of DE00 to the wanted shade, each shape (...); as probability_within.

    Not first order: DE00 has no slope where the shades meet, and its mean lies above 0 there.
    """
    found = _differences(lab_mean, lab_cov, wanted_lab)
    return found.mean(axis=-1), found.std(axis=-1)


def _differences(lab_mean: ArrayLike, lab_cov: ArrayLike, wanted_lab: ArrayLike) -> np.ndarray:
    """DE00 to the wanted shade at each fixed point, (..., POINTS)."""
    mean, wanted = np.asarray(lab_mean, dtype=float), np.asarray(wanted_lab, dtype=float)
    spread = _square_root(np.asarray(lab_cov, dtype=float))
    shades = mean[..., None, :] + _normal_points() @ np.swapaxes(spread, -1, -2)
    return delta_e_2000(shades, wanted[..., None, :])


def _square_root(covariance: np.ndarray) -> np.ndarray:
    """A with A A^T = covariance, singular ones too."""
    variances, axes = np.linalg.eigh(covariance)
    slack = 1e-9 * np.maximum(np.abs(variances).max(axis=-1, keepdims=True), 1e-300)
    uneven = np.abs(covariance - np.swapaxes(covariance, -1, -2)).max(axis=(-1, -2))[..., None] > slack
    wrong = (variances < -slack) | uneven
    refuse_where(wrong, variances, "lab_cov (along its axes)", "a symmetric covariance, none below 0")
    return axes * np.sqrt(np.maximum(variances, 0))[..., None, :]


@cache
def _normal_points() -> np.ndarray:
    """(POINTS, 3), spread as a standard normal distribution, from a recurrence in the unit cube."""
    root = 1.2207440846057596  # of x**4 = x + 1: its powers fill the cube most evenly
    cube = (0.5 + np.arange(1, POINTS + 1)[:, None] * root ** -np.arange(1.0, 4.0)) % 1
    radius = _radius_within(cube[:, 0])
    up, turn = 2 * cube[:, 1] - 1, 2 * np.pi * cube[:, 2]
    flat = np.sqrt(1 - up**2)
    return radius[:, None] * np.stack([flat * np.cos(turn), flat * np.sin(turn), up], axis=-1)


def _radius_within(probability: np.ndarray) -> np.ndarray:
    """Radius of the ball that holds this share of a standard normal distribution in space (chi, 3)."""
    r = np.linspace(0, GREATEST_RADIUS, 1201)
    erf = np.array([math.erf(value) for value in r / math.sqrt(2)])
    return np.interp(probability, erf - math.sqrt(2 / math.pi) * r * np.exp(-(r**2) / 2), r)
