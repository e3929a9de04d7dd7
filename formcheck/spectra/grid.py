"""The wavelength grid that spectra are brought to, and how they are brought there."""

from __future__ import annotations

import numpy as np

WAVELENGTH_NM = np.arange(360.0, 781.0, 5.0)
WAVELENGTH_NM.flags.writeable = False

EVEN_WITHIN = 1e-6  # relative: steps that differ less count as even
# Sprague's fifth-order polynomial between the third and fourth of six points, and the two points that CIE 167
# puts beyond each end.
SPRAGUE = (
    np.array(
        [
            [0, 0, 24, 0, 0, 0],
            [2, -16, 0, 16, -2, 0],
            [-1, 16, -30, 16, -1, 0],
            [-9, 39, -70, 66, -33, 7],
            [13, -64, 126, -124, 61, -12],
            [-5, 25, -50, 50, -25, 5],
        ]
    )
    / 24
)
BEYOND_AN_END = np.array([[884, -1960, 3033, -2648, 1080, -180], [508, -540, 488, -367, 144, -24]]) / 209


def resample(wavelength_nm, values, onto=WAVELENGTH_NM) -> tuple[np.ndarray, np.ndarray]:
    """A spectrum at other wavelengths.

    Even steps: Sprague's interpolation, as CIE 167 recommends. Uneven steps, or fewer than six points: a
    cubic that keeps each rise and fall (Fritsch & Carlson). Beyond the ends the end value is held, and the
    mask says so.

    Parameters
    ----------
    wavelength_nm : float array, shape (N,), rising [nm]
    values : float array, shape (..., N)
    onto : float array, shape (W,) [nm]

    Returns
    -------
    values : float array, shape (..., W)
    outside : bool array, shape (W,)
        True where `onto` lies beyond the measured range.

    Raises
    ------
    ValueError
        wavelengths not rising, or not as many as there are values.

    Source
    ------
    CIE 167:2005; F. N. Fritsch & R. E. Carlson, SIAM J. Numer. Anal. 17 (1980) 238.
    """
    x, y, onto = np.asarray(wavelength_nm, float), np.asarray(values, float), np.asarray(onto, float)
    if x.ndim != 1 or x.size == 0 or y.shape[-1] != x.size:
        raise ValueError(f"{x.shape} wavelengths for values of shape {y.shape}; expected one for each value")
    if not (np.diff(x) > 0).all():
        raise ValueError("wavelengths that do not rise; expected each above the one before")
    outside = (onto < x[0]) | (onto > x[-1])
    at = np.clip(onto, x[0], x[-1])
    if x.size == 1:
        return np.broadcast_to(y, (*y.shape[:-1], onto.size)).copy(), outside
    step = np.diff(x)
    even = x.size >= 6 and np.ptp(step) <= EVEN_WITHIN * step.mean()
    return (_sprague(x, y, at) if even else _monotone_cubic(x, y, at)), outside


def _sprague(x, y, at):
    padded = np.concatenate(
        [(y[..., :6] @ BEYOND_AN_END.T), y, (y[..., :-7:-1] @ BEYOND_AN_END[::-1].T)], axis=-1
    )
    step = (x[-1] - x[0]) / (x.size - 1)
    interval = np.clip(((at - x[0]) / step).astype(int), 0, x.size - 2)
    t = (at - x[0]) / step - interval
    six = padded[..., interval[:, None] + np.arange(6)]
    return np.einsum("...ws,ps,pw->...w", six, SPRAGUE, t ** np.arange(6)[:, None])


def _monotone_cubic(x, y, at):
    step = np.diff(x)
    rise = np.diff(y, axis=-1) / step
    slope = _slopes(step, rise)
    interval = np.clip(np.searchsorted(x, at, side="right") - 1, 0, x.size - 2)
    h = step[interval]
    t = (at - x[interval]) / h
    return (
        (1 + 2 * t) * (1 - t) ** 2 * y[..., interval]
        + t * (1 - t) ** 2 * h * slope[..., interval]
        + t**2 * (3 - 2 * t) * y[..., interval + 1]
        + t**2 * (t - 1) * h * slope[..., interval + 1]
    )


def _slopes(step, rise):
    """Slope at each point: the weighted harmonic mean of both sides, 0 at a turn; one-sided at the ends."""
    if step.size == 1:
        return np.concatenate([rise, rise], axis=-1)
    before, after = rise[..., :-1], rise[..., 1:]
    heavy, light = 2 * step[1:] + step[:-1], step[1:] + 2 * step[:-1]
    turning = before * after <= 0
    with np.errstate(divide="ignore", invalid="ignore"):
        inner = np.where(turning, 0.0, (heavy + light) / (heavy / before + light / after))
    return np.concatenate(
        [
            _end_slope(step[0], step[1], rise[..., :1], rise[..., 1:2]),
            inner,
            _end_slope(step[-1], step[-2], rise[..., -1:], rise[..., -2:-1]),
        ],
        axis=-1,
    )


def _end_slope(step, next_step, rise, next_rise):
    slope = ((2 * step + next_step) * rise - step * next_rise) / (step + next_step)
    slope = np.where(slope * rise <= 0, 0.0, slope)
    too_steep = (rise * next_rise < 0) & (np.abs(slope) > 3 * np.abs(rise))
    return np.where(too_steep, 3 * rise, slope)
