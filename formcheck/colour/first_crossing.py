"""Where functions of a positive number first rise through 0, many at once."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np

STRIDE = 4.0  # from one place looked at to the next
ROUNDS = 7  # each about doubles the digits, from the one that the stride leaves


def first_crossing(
    function: Callable[[np.ndarray], np.ndarray], shape: tuple[int, ...], *, lowest: float, highest: float
) -> np.ndarray:
    """Least x from `lowest` to `highest` at which each function reaches 0 from below; array of `shape`.

    `function` takes x, one per element, and gives values of that shape. 0 where it has reached 0 at
    `lowest` already; infinite where it never does. A rise and fall between two strides goes unseen.

    Source: strides, then C. J. F. Ridders, IEEE Trans. Circuits Syst. 26 (1979) 979, in log x.
    """
    steps = int(np.ceil(np.log(highest / lowest) / np.log(STRIDE)))
    places = np.log(lowest) + np.log(highest / lowest) * np.linspace(0, 1, steps + 1)
    values = np.array([function(np.full(shape, np.exp(place))) for place in places])
    reached = values >= 0
    first = np.argmax(reached, axis=0)
    upper = np.maximum(first, 1)
    low, high = places[upper - 1], places[upper]
    at_low, at_high = (np.take_along_axis(values, i[None], 0)[0] for i in (upper - 1, upper))
    root = np.exp(_ridders(function, low, high, at_low, at_high))
    return np.where(reached.any(axis=0), np.where(first == 0, 0.0, root), np.inf)


def _ridders(function, low, high, at_low, at_high) -> np.ndarray:
    """Log of the roots between `low` (value below 0) and `high` (0 or above), both logs."""
    root = high
    for _ in range(ROUNDS):
        middle = (low + high) / 2
        at_middle = function(np.exp(middle))
        size = np.sqrt(np.maximum(at_middle**2 - at_low * at_high, np.finfo(float).tiny))
        root = np.clip(middle + (middle - low) * -at_middle / size, low, high)
        at_root = function(np.exp(root))
        for x, y in ((middle, at_middle), (root, at_root)):
            below, above = (y < 0) & (x > low), (y >= 0) & (x < high)
            low, at_low = np.where(below, x, low), np.where(below, y, at_low)
            high, at_high = np.where(above, x, high), np.where(above, y, at_high)
    return root
