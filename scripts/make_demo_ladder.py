"""Makes the readings of the demo ladder and dilution: invented K, S and absorptivity, their films and solutions, noise.

Run from the top of the checkout: python scripts/make_demo_ladder.py
Nothing is measured: the curves are sums of bell shapes that look like pigments and belong to none.
"""

from __future__ import annotations

import sys
from pathlib import Path

import numpy as np

sys.path.insert(0, str(Path(__file__).resolve().parent.parent))

from formcheck.colour import kubelka_munk, saunderson
from formcheck.documents import read_yaml

FOLDER = Path(__file__).resolve().parent.parent / "demo_formulations" / "ladder"
NM = np.arange(400.0, 701.0, 10.0)
REPEATABILITY = 0.001
INDEX = 1.5  # of the invented binder: sets the surface
DRAWN_SD = 0.02  # of a film's thickness about the one written
SEED = 7


def bell(centre_nm: float, width_nm: float) -> np.ndarray:
    return np.exp(-(((NM - centre_nm) / width_nm) ** 2))


# K and S per um of pigment alone, invented.
K = {
    "tidewater_blue": 0.04 + 4.0 * bell(630, 55) + 0.9 * bell(560, 40) + 0.5 * bell(400, 25),
    "tidewater_white": 0.0004 + 0.05 * bell(380, 18),
    "tidewater_black": 5.0 * (550 / NM) ** 0.3,
}
S = {
    "tidewater_blue": 0.12 * (550 / NM) ** 1.5,
    "tidewater_white": 1.1 * (550 / NM) ** 0.7,
    "tidewater_black": 0.06 * np.ones_like(NM),
}
GROUNDS = {"white": 0.85 - 0.05 * np.exp((400 - NM) / 60), "black": 0.055 * np.ones_like(NM)}
ABSORPTIVITY = 42 * bell(545, 32) + 14 * bell(515, 24) + 3 * bell(420, 30)  # L/(g cm)


def main() -> None:
    rng = np.random.default_rng(SEED)
    columns = {f"bare {name}": _read(values, rng) for name, values in GROUNDS.items()}
    file = read_yaml(FOLDER / "tidewater_blue.yaml").data
    density = {one["id"]: one["density_g_cm3"] for one in (*file["colourants"], *file["clear"])}
    for panel in file["panels"]:
        thickness_um = float(panel["film"]["dry"].split()[0]) * (1 + DRAWN_SD * rng.standard_normal())
        for reading in panel["readings"]:
            columns[reading["column"]] = _read(_film(panel["parts"], density, thickness_um, reading["ground"]), rng)
    _write(FOLDER / "tidewater_readings.csv", "reflectance (0 to 1)", columns)
    _write(FOLDER / "quay_rose_absorbances.csv", "absorbance", _solutions(rng))


def _film(parts: dict[str, float], density: dict[str, float], thickness_um: float, ground: str) -> np.ndarray:
    volume = {name: part / density[name] for name, part in parts.items()}
    total = sum(volume.values())
    k = sum(volume[name] / total * K[name] for name in volume if name in K)
    s = sum(volume[name] / total * S[name] for name in volume if name in S)
    surface = {"k1": saunderson.k1_from_index(INDEX), "k2": saunderson.k2_from_index(INDEX), "specular_included": True}
    below = saunderson.to_internal(GROUNDS[ground], **surface)
    return saunderson.to_measured(kubelka_munk.film(k, s, thickness_um=thickness_um, ground=below), **surface)


def _solutions(rng: np.random.Generator) -> dict[str, np.ndarray]:
    columns = {}
    for one in read_yaml(FOLDER / "quay_rose.yaml").data["solutions"]:
        grams_per_litre = float(one["concentration"].split()[0]) * (1 + 0.008 * rng.standard_normal())
        columns[one["column"]] = ABSORPTIVITY * grams_per_litre + 0.001 * rng.standard_normal(len(NM))
    return columns


def _read(values: np.ndarray, rng: np.random.Generator) -> np.ndarray:
    return values + REPEATABILITY * rng.standard_normal(len(NM))


def _write(path: Path, what: str, columns: dict[str, np.ndarray]) -> None:
    lines = [f"# invented for the demo: {what}", ",".join(["wavelength_nm", *columns])]
    lines += [",".join([f"{nm:g}", *(f"{values[n]:.4f}" for values in columns.values())]) for n, nm in enumerate(NM)]
    path.write_text("\n".join(lines) + "\n", encoding="utf-8")


if __name__ == "__main__":
    main()
