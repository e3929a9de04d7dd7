"""Volumes, CPVC and VOC against worked figures; data/film_checks.yaml names the source of each."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
import yaml

from formcheck.film.bounds import exact
from formcheck.film.cpvc import critical_pvc
from formcheck.film.spreading import spreading_rate_m2_l
from formcheck.film.voc import (
    VolatileFraction,
    voc_less_water_g_l,
    voc_mass_fraction,
    voc_per_solids_g_l,
    voc_ready_to_use_g_l,
)
from formcheck.film.volumes import volumes

CHECKS = yaml.safe_load((Path(__file__).parent / "data" / "film_checks.yaml").read_text(encoding="utf-8"))
LB_GAL = CHECKS["voc"]["pound_per_gallon_g_l"]
PAINT, PERCENTAGES, THINNER, TRAP = CHECKS["voc"]["rows"]
NAMES = ("water", "solids", "solvent")
SOLVENT_ONLY = VolatileFraction(np.array([0.0, 0.0, 1.0]), np.array([0.0, 0.0, 1.0]))
WATER_MASK = np.array([True, False, False])


def three_part(masses_lb, volumes_gal):
    """VOC ready to use, less water and per solids, in lb/gal, of water + solids + solvent."""
    m, v = np.array(masses_lb), np.array(volumes_gal)
    w = (m / m.sum())[None, :]
    density = np.where(m > 0, m / np.where(v > 0, v, 1.0) * LB_GAL / 1000, 1.0)
    of = volumes(w, density_g_cm3=density, nonvolatile_fraction=[0.0, 1.0, 0.0], names=NAMES)
    voc = voc_mass_fraction(w, SOLVENT_ONLY, names=NAMES)
    figures = (voc_ready_to_use_g_l(voc, of), voc_less_water_g_l(voc, of, WATER_MASK),
               voc_per_solids_g_l(voc, of))
    return [float(figure.value[0]) / LB_GAL for figure in figures]


@pytest.mark.parametrize("row", CHECKS["cpvc"]["rows"])
def test_cpvc_of_a_single_pigment(row):
    found = critical_pvc([[1.0]], density_g_cm3=[row["density"]],
                         oil_absorption_g_100g=[row["oil_absorption"]], names=["pigment"])
    assert found.value[0] == pytest.approx(row["cpvc"], abs=0.5e-4)


def test_voc_of_a_waterborne_paint():
    row = PAINT
    solvent_gal = row["paint_gal"] - row["water_gal"] - row["solids_gal"]
    found = three_part([row["water_gal"] * 8.33, 400.0, row["solvent_lb"]],
                       [row["water_gal"], row["solids_gal"], solvent_gal])
    printed = row["printed"]
    assert found == pytest.approx([printed["ready_to_use"], printed["less_water"], printed["per_solids"]],
                                  abs=row["within"])


def test_voc_from_weight_percentages():
    row = PERCENTAGES
    w = np.array([row["water_weight"], row["solids_weight"], 1 - row["water_weight"] - row["solids_weight"]])
    mass = w * row["coating_lb_gal"]  # in one gallon
    water_gal = mass[0] / row["water_lb_gal"]
    rest = (1 - water_gal) / 2  # how solids and solvent share the rest does not matter here
    ready, less_water, _ = three_part(mass, [water_gal, rest, rest])
    assert ready == pytest.approx(row["printed"]["ready_to_use"], abs=row["within"])
    assert less_water == pytest.approx(row["printed"]["less_water"], abs=row["within"])


def test_thinner_that_just_keeps_the_limit():
    row = THINNER
    y = row["thinner_gal"]
    solvent = row["base_lb"] + row["thinner_lb_per_gal"] * y
    solvent_gal = solvent / row["thinner_lb_per_gal"]
    ready, *_ = three_part([0.0, 30.0, solvent], [0.0, row["base_gal"] + y - solvent_gal, solvent_gal])
    assert ready == pytest.approx(row["printed"]["ready_to_use"], abs=row["within"])


def test_an_example_printed_wrong_does_not_come_out_as_printed():
    row = TRAP
    mass = [row["water_vol"] * 8.33, row["solids_vol"] * 10.0, row["solvent_vol"] * row["solvent_lb_gal"]]
    _, less_water, _ = three_part(mass, [row["water_vol"], row["solids_vol"], row["solvent_vol"]])
    assert less_water == pytest.approx(row["right"], abs=row["within"])
    assert abs(less_water - row["printed_wrong"]) > 0.1


def test_theoretical_spreading_rate():
    # Common practice: 10 x solids by volume in % / dry film in um; 45 % at 40 um gives 11.25 m2/L.
    rate = spreading_rate_m2_l(np.array([40.0]), exact(np.array([0.45])))
    assert rate.value[0] == pytest.approx(11.25)
