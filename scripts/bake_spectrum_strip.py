"""Write formcheck/report/data/spectrum_strip.json: how the wavelengths of visible light look on a screen.

An ornament under the axis of a spectrum, not a colour that anything is judged by: each wavelength of the
CIE 1931 observer, dimmed towards both ends, cut to what sRGB holds.

    python scripts/bake_spectrum_strip.py
"""

from __future__ import annotations

import json
from pathlib import Path

import colour
import numpy as np

OUT = Path(__file__).resolve().parent.parent / "formcheck" / "report" / "data" / "spectrum_strip.json"
STEP_NM = 10
EDGES_NM = range(380, 741, STEP_NM)
DIMMER = 0.45  # how far the strip follows the eye's brightness: 0 not at all, 1 fully
GREY = 0.05  # of the brightest, added so that the purest greens do not shout


def strip_hexes() -> list[str]:
    """One colour for each stretch between two edges, taken at its middle."""
    middles = np.array([edge + STEP_NM / 2 for edge in list(EDGES_NM)[:-1]])
    xyz = colour.wavelength_to_XYZ(middles, colour.MSDS_CMFS["CIE 1931 2 Degree Standard Observer"])
    light = xyz @ colour.RGB_COLOURSPACES["sRGB"].matrix_XYZ_to_RGB.T
    light /= light.max(axis=1, keepdims=True) ** (1 - DIMMER)
    light = np.clip(light / light.max() + GREY, 0, 1)
    coded = colour.cctf_encoding(light, function="sRGB")
    return [f"#{r:02x}{g:02x}{b:02x}" for r, g, b in np.round(255 * np.clip(coded, 0, 1)).astype(int)]


def main() -> None:
    OUT.write_text(json.dumps({
        "what": "sRGB look of the wavelengths of visible light; made by scripts/bake_spectrum_strip.py",
        "source": "CIE 1931 2 degree observer (ISO/CIE 11664-1), sRGB (IEC 61966-2-1), by colour-science",
        "edges_nm": list(EDGES_NM), "hexes": strip_hexes(),
    }, indent=1) + "\n", encoding="utf-8")


if __name__ == "__main__":
    main()
