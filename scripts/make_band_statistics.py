"""Write the spread of published bands, and of published bands about the box models, into data files.

    python scripts/make_band_statistics.py

Reads tests/published/data/dye_bands.csv and box_series.csv (sources at their heads); writes
formcheck/spectra/data/band_widths.json and box_errors.json, which say how each number came about.
"""

from __future__ import annotations

import csv
import json
from pathlib import Path

import numpy as np

from formcheck.spectra import chain_box, ring_box
from formcheck.spectra.bands import band_area, half_heights_of_widths
from formcheck.spectra.free_electron import transitions_of

ROOT = Path(__file__).resolve().parents[1]
PUBLISHED = ROOT / "tests" / "published" / "data"
DATA = ROOT / "formcheck" / "spectra" / "data"
BANDS_CITE = (
    "46 dye bands of PhotochemCAD (M. Taniguchi & J. S. Lindsey, Photochem. Photobiol. 94 (2018) 290), "
    "rows in tests/published/data/dye_bands.csv"
)
SERIES_CITE = (
    "PhotochemCAD (M. Taniguchi & J. S. Lindsey, Photochem. Photobiol. 94 (2018) 290) unless marked from "
    "memory, rows in tests/published/data/box_series.csv"
)
ORIGIN_CM1, ORIGIN_EPSILON = 20000.0, 50000.0
SAME_BAND_NM = 15.0  # two authors within this measured the same band of a dye
BOND_NM = 0.139
MEAN_END_BONDS = 0.7  # added to a cyanine's box, the one value for all series that leaves no mean error
POLYENE_V0_EV, POLYENE_END_BONDS = 2.0, 1.0  # Kuhn 1949, from memory: half a bond beyond each end atom
SHAPE_SD = 0.13
F_OF_INTEGRAL = 4.32e-9


def rows(name: str) -> list[dict]:
    lines = (PUBLISHED / name).read_text(encoding="utf-8").splitlines()
    return list(csv.DictReader(line for line in lines if not line.startswith("#")))


def column(table: list[dict], name: str) -> np.ndarray:
    return np.array([float(row[name]) for row in table])


def rounded(value, digits: int = 4):
    return float(f"{float(value):.{digits}g}")


# --- bands of dyes -------------------------------------------------------------------------------------


def half_widths_cm1(table: list[dict]) -> tuple[np.ndarray, np.ndarray]:
    nu = 1e7 / column(table, "lambda_max_nm")
    return (1e7 / column(table, "half_height_low_nm") - nu, nu - 1e7 / column(table, "half_height_high_nm"))


def width_law(table: list[dict]) -> dict:
    """Regression of each ln half width on wavenumber and ln strength of the band."""
    nu, strength = 1e7 / column(table, "lambda_max_nm"), column(table, "epsilon_l_mol_cm")
    terms = np.column_stack([np.ones(nu.size), nu - ORIGIN_CM1, np.log(strength / ORIGIN_EPSILON)])
    law: dict = {"from_wavenumber_cm1": ORIGIN_CM1, "from_epsilon": ORIGIN_EPSILON}
    left = []
    for side, widths in zip(("above", "below"), half_widths_cm1(table), strict=True):
        fitted = np.linalg.lstsq(terms, np.log(widths), rcond=None)[0]
        left.append(np.log(widths) - terms @ fitted)
        law[side] = {
            "ln_at_origin": rounded(fitted[0], 5),
            "per_cm1": rounded(fitted[1]),
            "per_ln_epsilon": rounded(fitted[2]),
            "observed_cm1": [rounded(widths.min()), rounded(widths.max())],
        }
    freedom = nu.size - terms.shape[1]
    law["ln_sd"] = rounded(np.sqrt(np.mean([np.sum(x**2) / freedom for x in left])), 3)
    law["how"] = (
        "least squares of ln half width on the wavenumber of the maximum and ln epsilon; ln_sd: root mean "
        "square of the residuals of both sides; a width is kept within the observed ones"
    )
    return law


def strength_and_position_scatter(table: list[dict]) -> tuple[np.ndarray, np.ndarray]:
    """ln of other published epsilon over the row's, and how far off their maxima stand."""
    ln_ratio, shift = [], []
    for row in table:
        for other in row["other_epsilon"].split():
            epsilon, at = map(float, other.split("@"))
            if abs(at - float(row["lambda_max_nm"])) <= SAME_BAND_NM:
                ln_ratio.append(np.log(epsilon / float(row["epsilon_l_mol_cm"])))
                shift.append(at - float(row["lambda_max_nm"]))
    return np.array(ln_ratio), np.array(shift)


def robust_sd(values) -> float:
    """1.4826 times the median of the absolute values: the standard deviation, were they normal about 0."""
    return 1.4826 * float(np.median(np.abs(values)))


def band_statistics() -> dict:
    table = rows("dye_bands.csv")
    ln_ratio, shift = strength_and_position_scatter(table)
    return {
        "source": BANDS_CITE,
        "default_width": width_law(table),
        "epsilon_relative_sd": {
            "value": rounded(robust_sd(ln_ratio), 2),
            "how": f"{ln_ratio.size} pairs of published epsilon of one dye within "
            f"{SAME_BAND_NM:g} nm: 1.4826 times the median of |ln ratio|; dye content, aggregation, solvent",
        },
        "lambda_sd_nm": {
            "value": rounded(robust_sd(shift), 2),
            "how": "the same pairs: 1.4826 times the median of |shift of the maximum|",
        },
        "shape_sd_of_peak": {
            "value": SHAPE_SD,
            "how": "of the maximum; one standard deviation where a log-normal through maximum and both half "
            "heights may miss (bands.shape_doubt); chosen so that nine in ten holds at least 80 % of the "
            "shades in tests/published/data/dye_solution_shades.csv at peak absorbance 1",
        },
    }


# --- boxes ---------------------------------------------------------------------------------------------


def first_band(row: dict, *, circumference_nm=None, length_nm=None, gap_ev=0.0):
    n = int(row["n_pi_electrons"])
    box = (
        ring_box.orbitals(n, circumference_nm=circumference_nm)
        if circumference_nm
        else chain_box.orbitals(n, length_nm=length_nm)
    )
    return transitions_of(box, n, gap_ev=gap_ev)[0]


def cyanines() -> list[dict]:
    return [row for row in rows("box_series.csv") if row["p"]]


def cyanine_length_nm(row: dict, *, end_bonds: float) -> float:
    return (int(row["p"]) + 3 + end_bonds) * BOND_NM


def end_bonds_of(series: list[dict]) -> float:
    """The end extension, in bonds, with which the box meets a series best (least squares in wavelength)."""
    tried = np.linspace(-1, 3, 401)
    miss = np.zeros(tried.size)
    for row in series:
        bonds = int(row["p"]) + 3
        without = first_band(row, length_nm=cyanine_length_nm(row, end_bonds=0)).wavelength_nm
        miss += (float(row["lambda_max_nm"]) - without * ((bonds + tried) / bonds) ** 2) ** 2  # as L^2
    return float(tried[int(np.argmin(miss))])


def ln_misses(table: list[dict], **box) -> np.ndarray:
    """ln of measured over model wavelength; `box` gives what first_band wants of each row."""
    return np.array(
        [
            np.log(
                float(row["lambda_max_nm"])
                / first_band(row, **{name: make(row) for name, make in box.items()}).wavelength_nm
            )
            for row in table
        ]
    )


def within_a_series() -> float:
    """Error left when another member of a dye's own series fixes the end extension. [nm, root mean square]"""
    misses = []
    for row in cyanines():
        others = [r for r in cyanines() if r["series"].split()[0] == row["series"].split()[0] and r != row]
        ends = end_bonds_of(others)
        misses.append(
            float(row["lambda_max_nm"])
            - first_band(row, length_nm=cyanine_length_nm(row, end_bonds=ends)).wavelength_nm
        )
    return float(np.sqrt(np.mean(np.square(misses))))


def strength_ln_ratios() -> np.ndarray:
    """ln of measured over model oscillator strength of the cyanines, at the measured wavelength."""
    ratios = []
    asymmetry = cyanine_asymmetry()
    for row in cyanines():
        at = float(row["lambda_max_nm"])
        width = float(row["fwhm_nm"]) * 1e7 / at**2
        half = half_heights_of_widths(
            at, above_cm1=width * asymmetry / (1 + asymmetry), below_cm1=width / (1 + asymmetry)
        )
        measured = (
            F_OF_INTEGRAL * float(row["epsilon_l_mol_cm"]) * band_area(lambda_max_nm=at, half_height_nm=half)
        )
        model = first_band(row, length_nm=cyanine_length_nm(row, end_bonds=MEAN_END_BONDS))
        ratios.append(np.log(measured / (model.oscillator_strength * model.wavelength_nm / at)))
    return np.array(ratios)


def carotene_ln_ratio() -> float:
    """The same for beta-carotene, the one alternating chain with a measured width."""
    row = next(r for r in rows("dye_bands.csv") if r["id"] == "beta_carotene")
    half = [float(row["half_height_low_nm"]), float(row["half_height_high_nm"])]
    measured = (
        F_OF_INTEGRAL
        * float(row["epsilon_l_mol_cm"])
        * band_area(lambda_max_nm=float(row["lambda_max_nm"]), half_height_nm=half)
    )
    n = 22
    model = first_band(
        {"n_pi_electrons": n},
        length_nm=(n - 1 + POLYENE_END_BONDS) * BOND_NM,
        gap_ev=chain_box.alternation_gap_ev(n, bond_alternation_ev=POLYENE_V0_EV),
    )
    return float(np.log(measured / model.oscillator_strength))


def cyanine_asymmetry() -> float:
    """Half width above over below, median of the published dye bands."""
    above, below = half_widths_cm1(rows("dye_bands.csv"))
    return float(np.median(above / below))


def polyene_length_nm(row: dict) -> float:
    return (int(row["n_pi_electrons"]) - 1 + POLYENE_END_BONDS) * BOND_NM


def polyene_gap_ev(row: dict) -> float:
    return chain_box.alternation_gap_ev(int(row["n_pi_electrons"]), bond_alternation_ev=POLYENE_V0_EV)


def strength_of_cyanines() -> dict:
    ln_strength, asymmetry = strength_ln_ratios(), cyanine_asymmetry()
    width = float(np.median([float(r["fwhm_nm"]) * 1e7 / float(r["lambda_max_nm"]) ** 2 for r in cyanines()]))
    return {
        "strength_factor": rounded(np.exp(ln_strength.mean()), 2),
        "strength_relative_sd": rounded(ln_strength.std(ddof=1), 2),
        "half_width_above_cm1": rounded(width * asymmetry / (1 + asymmetry), 3),
        "half_width_below_cm1": rounded(width / (1 + asymmetry), 3),
        "strength_how": f"{ln_strength.size} cyanines: measured over model oscillator strength at the "
        "measured wavelength, geometric mean and spread; width: median of the same, asymmetry of the "
        "median dye band",
    }


def strength_of_others() -> dict:
    above, below = (float(np.median(side)) for side in half_widths_cm1(rows("dye_bands.csv")))
    apart = abs(strength_ln_ratios().mean() - carotene_ln_ratio())
    return {
        "strength_factor": rounded(np.exp((strength_ln_ratios().mean() + carotene_ln_ratio()) / 2), 2),
        "strength_relative_sd": rounded(apart, 1),
        "half_width_above_cm1": rounded(above, 3),
        "half_width_below_cm1": rounded(below, 3),
        "strength_how": "geometric mean of the cyanines' factor and that of beta-carotene (the one other "
        "strength with a width); spread: the distance of the two in ln; widths: median dye band",
    }


def box_statistics() -> dict:
    table = rows("box_series.csv")
    polyenes = [r for r in table if "polyene" in r["series"] and int(r["n_pi_electrons"]) >= 4]
    rings = [r for r in table if "ring" in r["series"]]
    misses = {
        "chain_equal_bonds": ln_misses(
            cyanines(), length_nm=lambda r: cyanine_length_nm(r, end_bonds=MEAN_END_BONDS)
        ),
        "chain_alternating": ln_misses(polyenes, length_nm=polyene_length_nm, gap_ev=polyene_gap_ev),
        "ring": ln_misses(rings, circumference_nm=lambda r: int(r["n_pi_electrons"]) * BOND_NM),
    }
    how = {
        "chain_equal_bonds": f"cyanines of five series, length (p + 3 + {MEAN_END_BONDS:g}) bonds of "
        "0.139 nm: root mean square of ln measured over model; where another member of its series "
        f"fixes a dye's length, {within_a_series():.0f} nm root mean square instead",
        "chain_alternating": f"polyenes of 4 to 22 pi electrons, V0 = {POLYENE_V0_EV:g} eV and length N "
        "bonds of 0.139 nm (both from memory of Kuhn 1949; four of the six maxima are from memory "
        "too): root mean square of ln measured over model",
        "ring": "benzene, acenes, porphyrins and phthalocyanines as rings of N bonds of 0.139 nm; measured: "
        "the maximum of the main band listed; root mean square of ln measured over model",
    }
    classes = {
        name: {"lambda_relative_sd": rounded(rms(ln), 2), "rows": len(ln), "how": how[name]}
        for name, ln in misses.items()
    }
    classes["plate"] = {
        "lambda_relative_sd": max(0.3, classes["ring"]["lambda_relative_sd"]),
        "rows": 0,
        "how": "no published series read: taken as no better than the ring; the one textbook comparison "
        "(from memory) is 659 nm for 588 nm",
    }
    for name, entry in classes.items():
        entry |= strength_of_cyanines() if name == "chain_equal_bonds" else strength_of_others()
    return {"source": SERIES_CITE, "classes": classes}


def rms(values) -> float:
    return float(np.sqrt(np.mean(np.square(values))))


def main() -> None:
    DATA.mkdir(parents=True, exist_ok=True)
    for name, made in (("band_widths.json", band_statistics()), ("box_errors.json", box_statistics())):
        (DATA / name).write_text(json.dumps(made, indent=1) + "\n", encoding="utf-8")


if __name__ == "__main__":
    main()
