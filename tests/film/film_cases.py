"""Random recipes with densities and nonvolatile parts, some of them missing."""

from __future__ import annotations

import numpy as np
from hypothesis import strategies as st

NAN = float("nan")


@st.composite
def recipes(draw, *, at_most=6):
    """mass fraction (1,I), density (I,), nonvolatile (I,), all known; fractions sum to 1."""
    n = draw(st.integers(1, at_most))
    parts = np.array(draw(st.lists(st.floats(0.001, 1.0), min_size=n, max_size=n)))
    density = np.array(draw(st.lists(st.floats(0.7, 8.0), min_size=n, max_size=n)))
    nonvolatile = np.array(draw(st.lists(st.sampled_from([0.0, 1.0, 0.5]), min_size=n, max_size=n)))
    return (parts / parts.sum())[None, :], density, nonvolatile


def names(n):
    return [f"ingredient {i}" for i in range(n)]


def holds(figure, value):
    """Whether the bounds of a figure hold a value, to rounding; NaN bounds refuse nothing."""
    low, high = figure.low[0], figure.high[0]
    return not (low > value * (1 + 1e-9) + 1e-12 or high < value * (1 - 1e-9) - 1e-12)
