"""What is to be said of the wavelengths of a spectrum: where it ends, how far apart its points are."""

from __future__ import annotations

import numpy as np

from formcheck.spectra.grid import EVEN_WITHIN

VISIBLE_NM = (400.0, 700.0)
WIDEST_STEP_NM = 20.0  # of the weights in ASTM E308


def held_beyond(what: str, wavelength_nm: np.ndarray) -> list[str]:
    """What to say of a spectrum that does not reach over the visible; nothing where it does."""
    first, last = float(wavelength_nm[0]), float(wavelength_nm[-1])
    gaps = [f"below {first:g} nm"] * (first > VISIBLE_NM[0]) + [f"above {last:g} nm"] * (last < VISIBLE_NM[1])
    return [f"{what} {' and '.join(gaps)}: the end value is held there"] if gaps else []


def step_notes(wavelength_nm: np.ndarray) -> list[str]:
    """What to say of uneven steps, and of steps in the visible that are wider than colour figures allow."""
    steps = np.diff(wavelength_nm)
    if not steps.size:
        return ["a single wavelength: its value is held everywhere"]
    seen = (wavelength_nm[1:] > VISIBLE_NM[0]) & (wavelength_nm[:-1] < VISIBLE_NM[1])
    widest = int(np.argmax(np.where(seen, steps, 0.0)))
    notes = []
    if steps[widest] > WIDEST_STEP_NM * (1 + EVEN_WITHIN) and seen.any():
        notes.append(f"no value between {wavelength_nm[widest]:g} and {wavelength_nm[widest + 1]:g} nm: interpolated "
                     f"over more than the {WIDEST_STEP_NM:g} nm that ASTM E308 has weights for")
    elif np.ptp(steps) > EVEN_WITHIN * steps.mean():
        notes.append(f"wavelengths in uneven steps of {steps.min():g} to {steps.max():g} nm: interpolated by a cubic "
                     "that keeps each rise and fall")
    return notes
