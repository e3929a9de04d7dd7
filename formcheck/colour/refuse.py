"""Say which element of an array is outside what a method can take."""

from __future__ import annotations

import numpy as np


def refuse_where(bad: np.ndarray, values: np.ndarray, name: str, expected: str) -> None:
    """Raise ValueError naming the first element of `values` where `bad` holds."""
    if not np.any(bad):
        return
    place = [int(i) for i in np.argwhere(bad)[0]]
    found = np.broadcast_to(values, np.shape(bad))[tuple(place)]
    raise ValueError(f"{name}{place or ''} is {found}; expected {expected}")
