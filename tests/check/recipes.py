"""Recipes made in a test, checked whole."""

from __future__ import annotations

from functools import cache
from pathlib import Path
from typing import Any

import numpy as np
import yaml
from lessened import DAY

from formcheck.check.record import Check, Shade
from formcheck.check.run import check_file, check_recipe
from formcheck.documents import Document
from formcheck.hazards.book import Book, load_book
from formcheck.recipe.read import WrittenRecipe, written_recipe

DEMO = Path(__file__).resolve().parents[2] / "demo_formulations"
SOURCES = {"test": {"cite": "a test", "kind": "invented_demo"}}


@cache
def book() -> Book:
    return load_book()


@cache
def no_rules() -> Book:
    return Book({}, book().words)


@cache
def demo(name: str) -> Check:
    return check_file(DEMO / name, as_of=DAY, book=book())


def demo_data(name: str) -> dict[str, Any]:
    return yaml.safe_load((DEMO / name).read_text(encoding="utf-8"))


def written(data: dict[str, Any], folder: Path = DEMO) -> WrittenRecipe:
    return written_recipe(Document("test.yaml", data, {}), folder=folder)


def checked(data: dict[str, Any], folder: Path = DEMO, *, rules: bool = False) -> Check:
    return check_recipe(written(data, folder), as_of=DAY, book=book() if rules else no_rules())


def shade(data: dict[str, Any], folder: Path = DEMO) -> Shade:
    found = checked(data, folder)
    assert found.shade is not None, found.shade_reason
    return found.shade


def solution(**dyes: str) -> dict[str, Any]:
    """Dyes by id with their amounts, in water, in a cell of 10 mm."""
    lines = [{"material": name, "amount": amount} for name, amount in dyes.items()]
    return {"formcheck": 1, "title": "a solution", "what": "solution", "batch": "1 L", "path_length": "10 mm",
            "lights": ["D65"], "ingredients": [{"material": "water", "amount": "to make up"}, *lines]}


def dye(name: str, *, molar_mass: float = 500.0, **form) -> dict[str, Any]:
    """A record of a dye of one form: bands, boxes or a spectrum."""
    return {"id": name, "names": [name], "kind": "dye", "molar_mass_g_mol": {"value": molar_mass, "source": "test"},
            "density_g_cm3": {"value": 1.4, "source": "test"}, "sources": SOURCES,
            "acid_base": {"neutral": True, "source": "test"}, "optical": {"forms": [{"name": "only", **form}]}}


def band(lambda_max_nm: float, epsilon: float, half_height_nm: list[float]) -> dict[str, Any]:
    return {"lambda_max_nm": lambda_max_nm, "epsilon_l_mol_cm": epsilon, "half_height_nm": half_height_nm,
            "source": "test"}


def spectrum(of: Shade) -> tuple[np.ndarray, np.ndarray]:
    return np.array(of.spectrum.wavelength_nm), np.array(of.spectrum.value)


def absorbance(of: Shade) -> tuple[np.ndarray, np.ndarray]:
    """Wavelengths and decadic absorbance of a cell."""
    wavelength_nm, transmitted = spectrum(of)
    return wavelength_nm, -np.log10(transmitted)


def highest(of: Shade, least_nm: float = 400.0) -> tuple[float, float]:
    """Wavelength and height of the highest absorbance above a wavelength."""
    wavelength_nm, found = absorbance(of)
    found = np.where(wavelength_nm >= least_nm, found, -1.0)
    return float(wavelength_nm[found.argmax()]), float(found.max())


def hue_deg(of: Shade) -> float:
    return float(np.degrees(np.arctan2(of.swatch.lab[2], of.swatch.lab[1])) % 360)


def chroma(of: Shade) -> float:
    return float(np.hypot(*of.swatch.lab[1:]))
