"""Electron boxes with published parameters give the published values to their printed digits."""

import csv
from pathlib import Path
from types import SimpleNamespace

import numpy as np
import pytest

from formcheck.spectra.boxes import box_bands, box_errors, box_levels, transitions
from formcheck.spectra.free_electron import H2_OVER_8M_EV_NM2, HC_EV_NM

SERIES = Path(__file__).parent / "data" / "box_series.csv"
BOND_NM = 0.139


def box(shape, n, *, v0=0.0, **size):
    sizes = {"length_nm": None, "sides_nm": None, "circumference_nm": None} | size
    return SimpleNamespace(shape=shape, n_pi_electrons=n, bond_alternation_ev=v0, count=1, **sizes)


def first(a_box):
    return transitions(a_box)[0]


def series():
    with SERIES.open(encoding="utf-8") as file:
        return list(csv.DictReader(line for line in file if not line.startswith("#")))


CYANINES = [row for row in series() if row["p"]]


def test_constants_are_those_of_codata():
    """CODATA 2018: h 6.62607015e-34 J s, m_e 9.1093837015e-31 kg, e 1.602176634e-19 C, c 299792458 m/s."""
    h, m, e, c = 6.62607015e-34, 9.1093837015e-31, 1.602176634e-19, 299792458.0
    assert pytest.approx(h**2 / (8 * m) / e * 1e18, rel=1e-7) == H2_OVER_8M_EV_NM2
    assert pytest.approx(h * c / e * 1e9, rel=1e-9) == HC_EV_NM


def test_published_prefactor_of_the_cyanine_rule():
    """Kuhn's rule as printed in teaching texts: lambda = 63.7 nm (p + 3)^2 / (p + 4), bonds of 1.39 A."""
    for p in (3, 5, 7, 9):
        lambda_nm = first(box("chain", p + 3, length_nm=(p + 3) * BOND_NM)).wavelength_nm
        assert lambda_nm * (p + 4) / (p + 3) ** 2 == pytest.approx(63.7, abs=0.05)


@pytest.mark.parametrize("row", CYANINES, ids=lambda row: row["id"])
def test_cyanine_series_with_the_published_parameters(row):
    """Values of the rule for the series, printed to 0.1 nm. Source: see the head of the table."""
    p, n = int(row["p"]), int(row["n_pi_electrons"])
    assert n == p + 3
    assert first(box("chain", n, length_nm=(p + 3) * BOND_NM)).wavelength_nm == pytest.approx(
        float(row["model_nm"]), abs=0.051
    )


def test_oxacyanine_series_of_8_10_and_12_electrons():
    """Published rule Z = 7, 9, 11 chain atoms with both N: 453.0, 579.1, 705.7 nm (teaching text on dyes)."""
    found = [first(box("chain", n, length_nm=n * BOND_NM)).wavelength_nm for n in (8, 10, 12)]
    assert found == pytest.approx([453.0, 579.1, 705.7], abs=0.051)


@pytest.mark.parametrize("k, printed", [(0, 315.2), (1, 417.1), (2, 519.1), (3, 621.2)])
def test_other_published_length_rule_of_cyanines(k, printed):
    """L = 2.49 A (k + 1) + 5.69 A, highest filled n = k + 3 (physical chemistry course text)."""
    length = 0.249 * (k + 1) + 0.569
    assert first(box("chain", 2 * (k + 3), length_nm=length)).wavelength_nm == pytest.approx(
        printed, abs=0.051
    )


@pytest.mark.parametrize(
    "n, length_nm, printed",
    [
        (4, 0.578, 220.3),  # butadiene as a box of 5.78 A, n = 2 to 3; measured 217 nm (textbook exercise)
        (6, 0.713, 239.5),  # hexatriene, 3 x 135 + 2 x 154 pm (textbook exercise quotes 240 nm)
        (8, 1.002, 367.8),  # octatetraene, 4 x 135 + 3 x 154 pm (textbook exercise)
        (8, 1.12, 459.6),  # cyanine of 8 bonds of 0.14 nm (textbook exercise)
    ],
)
def test_textbook_chains(n, length_nm, printed):
    found = first(box("chain", n, length_nm=length_nm))
    assert found.wavelength_nm == pytest.approx(printed, abs=0.051)
    assert found.label == f"n={n // 2} to {n // 2 + 1}"


def test_bond_alternation_adds_v0_of_one_less_a_share():
    """Kuhn, J. Chem. Phys. 17 (1949) 1198: V0 (1 - 1/N), V0 about 2 eV for polyenes (from memory)."""
    n, length = 22, 22 * BOND_NM
    added = (
        first(box("chain", n, length_nm=length, v0=2.0)).energy_ev
        - first(box("chain", n, length_nm=length)).energy_ev
    )
    assert added == pytest.approx(2.0 * (1 - 1 / 22))


def test_ring_of_porphyrin():
    """18 electrons on a ring of 400 pm radius, |k| = 4 to 5: 3.43e-19 J as printed (textbook exercise after
    Simpson, J. Chem. Phys. 17 (1949) 1218)."""
    ring = first(box("ring", 18, circumference_nm=2 * np.pi * 0.400))
    assert ring.energy_ev * 1.602176634e-19 == pytest.approx(3.43e-19, abs=0.005e-19)
    assert ring.wavelength_nm == pytest.approx(578.5, abs=0.051)


def test_ring_of_porphyrin_is_not_filled_to_two_only():
    """A wrong solution in circulation fills k = 0, +-1, +-2 with the 18 electrons: 5 hbar^2 / 2 m r^2."""
    levels = box_levels(box("ring", 18, circumference_nm=2 * np.pi * 0.400))
    filled = [level for level in levels if level.electrons]
    assert filled[-1].label == "k=+4 k=-4" and sum(level.electrons for level in filled) == 18


def test_square_plate_of_22_electrons():
    """Porphyrin as a square of 10 A: lowest gap (3,3) to (4,2), an examination answer; 0.752 eV.

    Its dipole is zero by parity, since both quantum numbers change.
    """
    levels = box_levels(box("plate", 22, sides_nm=[1.0, 1.0]))
    highest = max(i for i, level in enumerate(levels) if level.electrons)
    assert levels[highest].label == "(3,3)" and set(levels[highest + 1].label.split()) == {"(2,4)", "(4,2)"}
    assert levels[highest + 1].energy_ev - levels[highest].energy_ev == pytest.approx(0.75206, abs=5e-6)
    assert min(t.energy_ev for t in transitions(box("plate", 22, sides_nm=[1.0, 1.0]))) > 1.0


def test_square_plate_of_26_electrons():
    """Porphine as a square of 1000 pm: (4,2) to (4,3); a textbook compares about 15100 cm-1 with 17000 cm-1
    observed (from memory)."""
    plate = first(box("plate", 26, sides_nm=[1.0, 1.0]))
    assert 1e7 / plate.wavelength_nm == pytest.approx(15164, abs=1)
    assert "(4,2) to (4,3)" in plate.label


def test_benzene_sized_ring_absorbs_in_the_ultraviolet():
    """Benzene absorbs below 270 nm (common knowledge); Platt's one level lies among its three bands."""
    assert 170 < first(box("ring", 6, circumference_nm=6 * BOND_NM)).wavelength_nm < 270


def test_nine_in_ten_holds_its_share_of_the_published_maxima():
    """Over all rows with an error of their own: cyanines, polyenes (N > 2), rings."""
    inside = []
    for row in series():
        n, measured = int(row["n_pi_electrons"]), float(row["lambda_max_nm"])
        if row["p"]:
            a_box = box("chain", n, length_nm=(int(row["p"]) + 3.7) * BOND_NM)
        elif "polyene" in row["series"] and n > 2:
            a_box = box("chain", n, length_nm=n * BOND_NM, v0=2.0)
        elif "ring" in row["series"]:
            a_box = box("ring", n, circumference_nm=n * BOND_NM)
        else:
            continue
        model = box_bands([a_box])[0]
        inside.append(abs(measured - model.lambda_max_nm) <= 1.645 * model.lambda_sd_nm)
    assert len(inside) == sum(entry["rows"] for entry in box_errors().values())
    assert 0.80 <= np.mean(inside) <= 0.97


def test_cyanine_strengths_lie_about_the_published_ones():
    """Molar absorptivities of the series: geometric mean within a fifth, nine in ten within the error."""
    ln_ratio, sd = [], box_errors()["chain_equal_bonds"]["strength_relative_sd"]
    for row in CYANINES:
        n, measured = int(row["n_pi_electrons"]), float(row["lambda_max_nm"])
        length = (
            (int(row["p"]) + 3.7)
            * BOND_NM
            * np.sqrt(
                measured / first(box("chain", n, length_nm=(int(row["p"]) + 3.7) * BOND_NM)).wavelength_nm
            )
        )
        ln_ratio.append(
            np.log(
                float(row["epsilon_l_mol_cm"])
                / box_bands([box("chain", n, length_nm=length)])[0].epsilon_l_mol_cm
            )
        )
    assert abs(np.mean(ln_ratio)) < 0.3
    assert np.mean(np.abs(ln_ratio) < 1.645 * np.hypot(sd, 0.31)) >= 0.8
