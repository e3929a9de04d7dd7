"""Shades from published bands against shades from the measured spectra of the same dyes."""

import csv
from pathlib import Path

import numpy as np
import pytest

from formcheck.colour.cielab import lab_of_spectrum
from formcheck.colour.difference import delta_e_2000
from formcheck.spectra.bands import (
    band_sum,
    default_half_heights,
    lognormal_band,
    shape_doubt,
    statistics,
)
from formcheck.spectra.grid import WAVELENGTH_NM

DATA = Path(__file__).parent / "data"


def rows(name):
    with (DATA / name).open(encoding="utf-8") as file:
        return list(csv.DictReader(line for line in file if not line.startswith("#")))


# Sources of both tables at their heads: bands and spectra of the PhotochemCAD records (Taniguchi & Lindsey,
# Photochem. Photobiol. 94 (2018) 290).
SHADES = {row["id"]: row for row in rows("dye_solution_shades.csv")}
BANDS = [row for row in rows("dye_bands.csv") if row["id"] in SHADES]
SEEN = WAVELENGTH_NM[WAVELENGTH_NM >= 380]


def height(band, half_height_nm):
    """The band one high; as the shades' header says, held below the first wavelength, zero past the last."""
    shade = SHADES[band["id"]]
    at = np.maximum(SEEN, float(shade["first_nm"]))
    y = lognormal_band(
        at, lambda_max_nm=float(band["lambda_max_nm"]), epsilon=1.0, half_height_nm=half_height_nm
    )
    return np.where(float(shade["last_nm"]) < SEEN, 0.0, y)


def published_half_heights(band):
    return [float(band["half_height_low_nm"]), float(band["half_height_high_nm"])]


def lab(absorbance):
    return lab_of_spectrum(10.0**-absorbance, "D65", 10, SEEN)


def differences(half_heights_of, peak):
    found = []
    for band in BANDS:
        y = height(band, half_heights_of(band))
        shade = SHADES[band["id"]]
        there = [float(shade[f"{axis}_{peak}"]) for axis in "Lab"]
        found.append(float(delta_e_2000(lab(float(peak) * y / y[SEEN >= 400].max()), there)))
    return np.array(found)


def test_the_table_holds_46_dyes():
    assert len(BANDS) == len(SHADES) == 46


@pytest.mark.parametrize("peak, median, ninety", [("0.3", 2.0, 4.5), ("1.0", 4.0, 9.0), ("2.0", 7.0, 14.0)])
def test_shades_from_maximum_and_half_heights(peak, median, ninety):
    found = differences(published_half_heights, peak)
    assert np.median(found) <= median and np.percentile(found, 90) <= ninety


def test_a_symmetric_gaussian_would_be_far_off():
    """The reason for the log-normal: equal half widths miss by a median of about 11."""

    def symmetric(band):
        nu = 1e7 / float(band["lambda_max_nm"])
        low, high = (1e7 / h for h in published_half_heights(band))
        return [1e7 / (nu + (low - high) / 2), 1e7 / (nu - (low - high) / 2)]

    assert np.median(differences(symmetric, "1.0")) > 2 * np.median(
        differences(published_half_heights, "1.0")
    )


def test_shades_from_maximum_and_strength_alone():
    found = differences(
        lambda band: default_half_heights(
            float(band["lambda_max_nm"]), epsilon=float(band["epsilon_l_mol_cm"])
        ),
        "1.0",
    )
    assert np.median(found) <= 7.0


def test_nine_in_ten_of_the_shape_doubt_holds_80_to_97_percent_of_the_shades():
    """1.645 standard deviations of the shape alone, either way, against the difference that is there."""
    sd, held = statistics()["shape_sd_of_peak"]["value"], 0
    for band, there in zip(BANDS, differences(published_half_heights, "1.0"), strict=True):
        y = height(band, published_half_heights(band))
        doubt = shape_doubt(SEEN, y, float(band["lambda_max_nm"])) * sd
        scale = y[SEEN >= 400].max()
        sides = np.where(float(band["lambda_max_nm"]) > SEEN, 1, [[1], [-1]]) * doubt
        away = delta_e_2000(lab(np.maximum(y / scale + sides, 0)), lab(y / scale))
        held += there <= 1.645 * np.sqrt(np.mean(away**2))
    assert 0.80 <= held / len(BANDS) <= 0.97


def test_nine_in_ten_of_the_published_strengths_lie_within_the_default_spread():
    """Strengths of other authors against the row, by the spread that stands in where none is given."""
    spread, inside, total = statistics(), 0, 0
    for row in rows("dye_bands.csv"):
        for other in row["other_epsilon"].split():
            epsilon, at = map(float, other.split("@"))
            if abs(at - float(row["lambda_max_nm"])) <= 15:
                total += 1
                inside += (
                    abs(np.log(epsilon / float(row["epsilon_l_mol_cm"])))
                    <= 1.645 * spread["epsilon_relative_sd"]["value"]
                )
    assert total > 40 and 0.80 <= inside / total <= 0.97


def test_phenolphthalein_dianion_absorbs_near_552_nm():
    """General chemistry texts: 552 to 554 nm, pink (common knowledge)."""
    band = next(b for b in BANDS if b["id"] == "phenolphthalein_dianion")
    y = height(band, published_half_heights(band))
    assert SEEN[np.argmax(y)] == pytest.approx(552, abs=5)
    _, a, b = lab(y)
    assert a > 40 and b < 0  # pink


def test_two_bands_absorb_what_each_absorbs():
    from types import SimpleNamespace

    both = [
        SimpleNamespace(
            lambda_max_nm=float(b["lambda_max_nm"]),
            epsilon_l_mol_cm=float(b["epsilon_l_mol_cm"]),
            half_height_nm=published_half_heights(b),
            lambda_sd_nm=None,
            epsilon_relative_sd=None,
        )
        for b in BANDS[:2]
    ]
    epsilon, _ = band_sum(SEEN, both)
    assert epsilon == pytest.approx(
        sum(
            float(b["epsilon_l_mol_cm"])
            * lognormal_band(
                SEEN,
                lambda_max_nm=float(b["lambda_max_nm"]),
                epsilon=1.0,
                half_height_nm=published_half_heights(b),
            )
            for b in BANDS[:2]
        )
    )
