"""How well a film hides what it is put on."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

COMPLETE_HIDING = 0.98  # the contrast ratio taken as hiding by ISO 6504 and ASTM D2805


def contrast_ratio(*, y_black: ArrayLike, y_white: ArrayLike) -> np.ndarray:
    """Luminance Y of the film over black, divided by Y of the same film over white; shapes broadcast. [1]

    1 hides wholly, 0.98 counts as hiding. NaN where the film over white gives back no light at all.

    Source: ISO 6504-3, ASTM D2805.
    """
    y_black, y_white = np.broadcast_arrays(
        np.asarray(y_black, dtype=float), np.asarray(y_white, dtype=float)
    )
    out = np.full(y_white.shape, np.nan)
    return np.divide(y_black, y_white, out=out, where=y_white > 0)
