"""Write formcheck/colour/data/observers.csv and lights.csv from colour-science.

Run after an upgrade of colour-science; tests/colour/test_baked_tables.py compares the files with it.
colour-science takes seconds to import, so the command reads these files instead.
"""

from __future__ import annotations

from pathlib import Path

import colour
import numpy as np

DATA = Path(__file__).resolve().parent.parent / "formcheck" / "colour" / "data"
OBSERVERS = {2: "CIE 1931 2 Degree Standard Observer", 10: "CIE 1964 10 Degree Standard Observer"}
LIGHTS = ("D65", "D50", "A", "C", "D55", "D75", "FL2", "FL7", "FL11", "LED-B1", "LED-B2", "LED-B3",
          "LED-B4", "LED-B5", "LED-BH1", "LED-RGB1", "LED-V1", "LED-V2")

OBSERVER_HEAD = """\
# Colour-matching functions of the CIE 1931 (2 degree) and CIE 1964 (10 degree) standard observers
# Source: ISO/CIE 11664-1, 1 nm tables, as carried by colour-science {version}
# Baked by scripts/bake_observers.py
# wavelength_nm, x_2, y_2, z_2, x_10, y_10, z_10
"""
LIGHT_HEAD = """\
# Relative spectral power of CIE illuminants (A, C, D series, FL series) and of typical white LEDs (LED series)
# Source: ISO/CIE 11664-2 and CIE 015:2018, 5 nm tables, as carried by colour-science {version}; baked by
# scripts/bake_observers.py. FL and LED tables begin at 380 nm: their first value is held down to 360 nm.
# wavelength_nm, {names}
"""


def observer_rows() -> np.ndarray:
    shape = colour.SpectralShape(360, 780, 1)
    tables = [colour.MSDS_CMFS[name].copy().align(shape).values for name in OBSERVERS.values()]
    return np.column_stack([shape.wavelengths, *tables])


def light_rows() -> np.ndarray:
    shape = colour.SpectralShape(360, 780, 5)
    tables = [colour.SDS_ILLUMINANTS[name].copy().align(shape).values for name in LIGHTS]
    return np.column_stack([shape.wavelengths, *tables])


def write(path: Path, head: str, rows: np.ndarray) -> None:
    lines = [",".join(f"{value:.12g}" for value in row) for row in rows]
    beside = path.with_suffix(".new")
    beside.write_text(head + "\n".join(lines) + "\n", encoding="utf-8")
    beside.replace(path)


def main() -> None:
    DATA.mkdir(parents=True, exist_ok=True)
    version = colour.__version__
    write(DATA / "observers.csv", OBSERVER_HEAD.format(version=version), observer_rows())
    write(DATA / "lights.csv", LIGHT_HEAD.format(version=version, names=", ".join(LIGHTS)), light_rows())


if __name__ == "__main__":
    main()
