"""Write the Munsell renotation from colour-science, and 200 notations it works out, for the tests.

formcheck/colour/data/munsell.csv and tests/published/data/munsell_notations.csv (half a minute). Run after an
upgrade of colour-science; tests/colour/test_munsell.py compares both files with it.
"""

from __future__ import annotations

from pathlib import Path

import colour
import numpy as np

TOP = Path(__file__).resolve().parent.parent
TABLE = TOP / "formcheck" / "colour" / "data" / "munsell.csv"
NOTATIONS = TOP / "tests" / "published" / "data" / "munsell_notations.csv"
FAMILIES = ("R", "YR", "Y", "GY", "G", "BG", "B", "PB", "P", "RP")
LEAST_VALUE = 0.4  # the plane below it lacks a hue

HEAD = """\
# Chromaticity of Munsell colours, CIE 1931 observer, illuminant C; chromas beyond what surfaces reach, and
# values below 1 and of 10, are extrapolated. Hue counts 2.5 for 2.5R to 100 for 10RP.
# Source: S. M. Newhall, D. Nickerson & D. B. Judd, J. Opt. Soc. Am. 33 (1943) 385, with its extrapolation, as
# carried by colour-science {version}. The luminances there are on the scale of magnesium oxide and are left out.
# Baked by scripts/bake_munsell.py
# hue, value, chroma, x, y
"""


def munsell_rows() -> np.ndarray:
    """hue, value, chroma, x, y; sorted."""
    rows = [
        (_hue(name), value, chroma, x, y)
        for (name, value, chroma), (x, y, _) in colour.notation.MUNSELL_COLOURS["Munsell Colours All"]
        if value >= LEAST_VALUE
    ]
    return np.array(sorted(rows))


def _hue(name: str) -> float:
    """7.5YR is 17.5."""
    family = name.lstrip("0123456789.")
    return 10 * FAMILIES.index(family) + float(name.removesuffix(family))


def notation_rows(count: int) -> np.ndarray:
    """x, y, Y in percent, and hue (0 to 100), value, chroma by colour-science, of random surface colours."""
    from colour.notation import munsell

    rng, rows = np.random.default_rng(1943), []
    while len(rows) < count:
        hue, value = rng.uniform(0, 10), rng.uniform(1, 9)
        code, chroma = rng.integers(1, 11), rng.uniform(0.5, 14)
        try:
            xyY = munsell.munsell_specification_to_xyY([hue, value, chroma, code])
            if not colour.volume.is_within_macadam_limits(xyY, "C"):
                continue
            found = munsell.xyY_to_munsell_specification(xyY)
        except (AssertionError, RuntimeError, ValueError):
            continue  # outside their table, or their search did not end
        rows.append([*xyY[:2], 100 * xyY[2], munsell.hue_to_ASTM_hue(found[[0, 3]]), *found[1:3]])
    return np.array(rows)


NOTATIONS_HEAD = """\
# Random surface colours and their Munsell notation by xyY_to_munsell_specification of colour-science {version}
# Baked by scripts/bake_munsell.py
# x, y, Y, hue, value, chroma
"""


def write(path: Path, head: str, rows: np.ndarray, digits: int) -> None:
    lines = [",".join(f"{cell:.{digits}g}" for cell in row) for row in rows]
    beside = path.with_suffix(".new")
    beside.write_text(head.format(version=colour.__version__) + "\n".join(lines) + "\n", encoding="utf-8")
    beside.replace(path)


def main() -> None:
    write(TABLE, HEAD, munsell_rows(), 6)
    write(NOTATIONS, NOTATIONS_HEAD, notation_rows(200), 10)


if __name__ == "__main__":
    main()
