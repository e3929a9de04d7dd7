"""Computed pH against printed pH; each block of data/ph_checks.yaml names its source."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
import yaml

from formcheck.acid_base import activity, carbon_dioxide, water
from formcheck.acid_base.ph import solve_ph

CHECKS = yaml.safe_load((Path(__file__).parent / "data" / "ph_checks.yaml").read_text(encoding="utf-8"))
IDEAL, AT_25_C, BY_TEMPERATURE = CHECKS["ideal"], CHECKS["buffers_25_c"], CHECKS["buffers_by_temperature"]


def solved(substances, **more):
    n = max(len(pka) for _, pka, _, _ in substances)
    pka = [list(map(float, steps)) + [np.nan] * (n - len(steps)) for _, steps, _, _ in substances]
    return solve_ph([[c for c, *_ in substances]], np.reshape(pka, (len(substances), n)),
                    charge_fully_protonated=[z for _, _, z, _ in substances],
                    counter_charge=[z for *_, z in substances], **more)


@pytest.mark.parametrize("row", IDEAL["rows"], ids=lambda row: row["what"])
def test_ideal_ph_as_printed(row):
    state = solved(row["substances"], pkw=IDEAL["pkw"])
    assert state.ph_ideal[0] == pytest.approx(row["ph"], abs=row["within"])


@pytest.mark.parametrize("row", AT_25_C["rows"], ids=lambda row: row["what"])
def test_standard_buffers_at_25_c(row):
    assert solved(row["substances"]).ph[0] == pytest.approx(row["ph"], abs=AT_25_C["within"])


@pytest.mark.parametrize("row", BY_TEMPERATURE["rows"], ids=lambda row: row["what"])
def test_standard_buffers_at_other_temperatures(row):
    for temperature_c, printed in row["ph"].items():
        T = temperature_c + 273.15
        pka = (list(carbon_dioxide.pka(temperature_c)) if row["acid"] == "carbonic" else
               [c / T + a + b * T for c, a, b in BY_TEMPERATURE["pka_terms"][row["acid"]]])
        state = solved([[c, pka, 0, counter] for c, counter in row["amounts"]], temperature_c=temperature_c)
        assert state.ph[0] == pytest.approx(printed, abs=BY_TEMPERATURE["within"]), temperature_c


def test_ion_product_of_water_gives_the_check_values_of_its_release():
    # IAPWS R11-07, table of computer-program verification: T in K, density in g/cm3, pKw.
    for T, rho, printed in [(300, 1.0, 13.906565), (600, 0.7, 11.203153), (800, 0.2, 15.089765),
                            (800, 1.2, 6.438330)]:
        assert water.pkw_at(T, density_g_cm3=rho) == pytest.approx(printed, abs=2e-6)


def test_ion_product_of_water_against_the_handbook():
    # CRC Handbook, ion product of water at 0, 25, 50, 100 C; from memory.
    assert water.pkw([0, 25, 50, 100]) == pytest.approx([14.95, 13.995, 13.26, 12.25], abs=0.011)


def test_debye_hueckel_constant():
    # Test suite of the open-source package chempy: A = 0.50669 at 20 C (eps 80.1, 998.2071 kg/m3); the
    # tolerance lets the permittivity of Malmberg & Maryott differ in its fifth digit.
    assert activity.debye_hueckel_a(20.0) == pytest.approx(0.50669, abs=1e-4)
    # Robinson & Stokes: 0.5115 mol^-1/2 L^1/2 at 25 C with older constants; from memory.
    assert activity.debye_hueckel_a(25.0) == pytest.approx(0.510, abs=0.002)


@pytest.mark.parametrize("salt, molality, printed", [
    ("NaCl", 0.01, 0.902), ("NaCl", 0.1, 0.778), ("KCl", 0.1, 0.770), ("HCl", 0.1, 0.796),
    ("NaOH", 0.1, 0.766)])
def test_davies_against_measured_mean_coefficients(salt, molality, printed):
    # CRC Handbook, mean activity coefficients at 25 C; from memory. Davies is held to 0.02 for 1:1 salts.
    log = activity.log10_activity_coefficient(1, ionic_strength_mol_kg=molality)
    assert 10**log == pytest.approx(printed, abs=0.02), salt


def test_water_open_to_the_air():
    # Stumm & Morgan, Aquatic Chemistry: water in equilibrium with the air of 1990s (3.5e-4 atm) has
    # pH 5.65; pK_H 1.47, pKa 6.35 at 25 C; from memory.
    state = solve_ph(np.zeros((1, 0)), np.zeros((0, 0)), charge_fully_protonated=[], counter_charge=[],
                     co2_partial_pressure_atm=3.5e-4)
    assert state.ph[0] == pytest.approx(5.65, abs=0.02)
    assert -np.log10(carbon_dioxide.henry_mol_kg_atm(25.0)) == pytest.approx(1.47, abs=0.01)
    assert carbon_dioxide.pka(25.0) == pytest.approx([6.35, 10.33], abs=0.01)


def test_density_and_permittivity_of_water_against_a_chemistry_library():
    # IAPWS-95 saturated liquid and IAPWS R8-97 as coded in the open-source package `chemicals`.
    from chemicals import permittivity_IAPWS
    from chemicals.iapws import iapws95_rhol_sat
    for t in (5.0, 25.0, 60.0, 95.0):
        rho = float(iapws95_rhol_sat(t + 273.15)) / 1000
        assert water.density_g_cm3(t) == pytest.approx(rho, abs=1e-4)
        by_library = permittivity_IAPWS(t + 273.15, 1000 * rho)
        assert water.relative_permittivity(t) == pytest.approx(by_library, rel=0.004)
