"""Built-in grounds that a layer may lie on, with where their figures come from."""

from __future__ import annotations

import json
from dataclasses import dataclass
from functools import cache
from pathlib import Path

import numpy as np
from numpy.typing import ArrayLike

from formcheck.quantity import Provenance
from formcheck.spectra.grid import WAVELENGTH_NM
from formcheck.trouble import suggestion

TABLE = Path(__file__).parent / "data" / "grounds.json"


@dataclass(frozen=True)
class Ground:
    """`reflectance` is one fraction for all wavelengths. `measured_in_air` and `specular_included` are
    the `ground_in_air` and `ground_specular_included` of layer.layer_reflectance.
    """

    name: str
    reflectance: float
    measured_in_air: bool
    specular_included: bool
    provenance: Provenance


def ground_names() -> tuple[str, ...]:
    return tuple(_table())


def ground_record(name: str) -> Ground:
    """The ground with its provenance; ValueError with the closest names if unknown."""
    if name not in _table():
        raise ValueError(f"ground {name!r} is not built in; {suggestion(name, ground_names())}")
    return _table()[name]


def ground(name: str, wavelength_nm: ArrayLike = WAVELENGTH_NM) -> np.ndarray:
    """Reflectance (W,) of a built-in ground, as a fraction; ValueError if unknown. [1]"""
    return np.full(len(np.asarray(wavelength_nm)), ground_record(name).reflectance)


@cache
def _table() -> dict[str, Ground]:
    rows = json.loads(TABLE.read_text(encoding="utf-8"))
    return {
        name: Ground(
            name,
            row["reflectance"],
            row["measured_in_air"],
            row["specular_included"],
            Provenance(**row["source"]),
        )
        for name, row in rows.items()
    }
