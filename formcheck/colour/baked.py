"""Read a baked table of numbers under a `#` heading whose last line names the columns."""

from __future__ import annotations

from pathlib import Path

import numpy as np


def read_baked(path: Path) -> dict[str, np.ndarray]:
    """Columns by name, in the order of the file. (numpy's own reader costs more to import than to run.)"""
    lines = path.read_text(encoding="utf-8").splitlines()
    heading = [line for line in lines if line.startswith("#")][-1]
    names = [name.strip() for name in heading.lstrip("# ").split(",")]
    rows = [[float(cell) for cell in line.split(",")] for line in lines if not line.startswith("#")]
    return dict(zip(names, np.array(rows).T, strict=True))
