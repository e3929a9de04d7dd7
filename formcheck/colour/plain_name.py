"""A plain name for a colour, for the reader who does not think in Lab. Thresholds are formcheck's own."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from formcheck.colour.cielab import lch

# Hue angle up to which each name runs, in degrees of CIELAB.
HUES = ((20, "red"), (45, "red"), (68, "orange"), (108, "yellow"), (165, "green"), (220, "blue-green"),
        (285, "blue"), (325, "violet"), (350, "magenta"), (360, "red"))


def plain_name(lab: ArrayLike) -> str:
    """`near black`, `colourless`, `pale yellow`, `dark blue`; lab of shape (3,)."""
    lightness, chroma, hue = (float(v) for v in lch(np.asarray(lab, dtype=float)))
    if lightness < 18 and chroma < 20:
        return "near black"
    if chroma < 3 and lightness > 95:
        return "colourless"
    if chroma < 6:
        return "white" if lightness > 92 else "dark grey" if lightness < 40 else "grey"
    name = next(name for limit, name in HUES if hue <= limit)
    if name in ("red", "magenta") and lightness > 62:
        name = "pink"
    if name in ("orange", "red") and lightness < 50 and 40 < hue < 75:
        name = "brown"
    if name == "pink":
        return "pale pink" if lightness > 85 else "pink"
    if lightness < 30:
        return f"dark {name}"
    return f"pale {name}" if lightness > 85 and chroma < 30 else name
