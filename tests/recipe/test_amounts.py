"""Amounts to masses: worked by hand, by a second route, against a units library, and what must be refused."""

from __future__ import annotations

import math

import numpy as np
import pint
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from recipe_samples import ETHANOL_G_CM3, GLYCEROL_G_CM3, WATER_G_CM3, batch_of

from formcheck.trouble import InputError
from formcheck.units import UNITS, parse_amount


def refusal(lines, **more) -> str:
    with pytest.raises(InputError) as caught:
        batch_of(lines, **more)
    assert all(one.place.file == "sample.yaml" and one.place.line for one in caught.value.problems)
    return str(caught.value)


# --- worked by hand -------------------------------------------------------------------------------------

def test_percent_and_rest():
    batch = batch_of({"glycerol": "5 % w/w", "ethanol": "20 % w/w", "water": "rest"}, head="batch: 2 kg")
    assert batch.line_mass_g[0] == pytest.approx([100, 400, 1500], rel=1e-12)
    volume = 100 / GLYCEROL_G_CM3 + 400 / ETHANOL_G_CM3 + 1500 / WATER_G_CM3
    assert batch.total_volume_ml[0] == pytest.approx(volume, rel=1e-12)


def test_volumes_by_density():
    batch = batch_of({"ethanol": "250 mL", "water": "0.75 L"})
    assert batch.mass_g[0, :2] == pytest.approx([250 * ETHANOL_G_CM3, 750 * WATER_G_CM3], rel=1e-12)
    assert batch.total_volume_ml[0] == pytest.approx(1000, rel=1e-12)


def test_grams_per_litre_of_product_in_a_bath_made_up_to_its_volume():
    batch = batch_of({"water": "to make up", "glycerol": "20 g/L", "ethanol": "5 % v/v"}, head="batch: 3 L")
    water = (3000 - 60 / GLYCEROL_G_CM3 - 150) * WATER_G_CM3
    assert batch.line_mass_g[0] == pytest.approx([water, 60, 150 * ETHANOL_G_CM3], rel=1e-12)
    assert batch.total_volume_ml[0] == pytest.approx(3000, rel=1e-12)


def test_parts_fill_what_percentages_leave():
    batch = batch_of({"glycerol": "10 % w/w", "ethanol": "1 part", "water": "2 parts"}, head="batch: 300 g")
    assert batch.line_mass_g[0] == pytest.approx([30, 90, 180], rel=1e-12)


def test_percent_beside_grams_sizes_the_batch():
    batch = batch_of({"water": "285 g", "glycerol": "5 % w/w"})
    assert batch.line_mass_g[0] == pytest.approx([285, 15], rel=1e-12)
    assert batch.total_mass_g[0] == pytest.approx(300, rel=1e-12)


def test_a_measured_density_settles_the_volume():
    batch = batch_of({"mystery": "10 g/L", "water": "to make up"},
                     head="batch: 2 L\nmeasured: {density_g_cm3: 1.05}")
    assert batch.line_mass_g[0] == pytest.approx([20, 2080], rel=1e-12)
    assert batch.total_volume_ml[0] == pytest.approx(2000, rel=1e-12)
    assert batch.reasons[0] == ()


def test_a_batch_by_volume_of_percentages_by_weight():
    batch = batch_of({"ethanol": "40 % w/w", "water": "60 % w/w"}, head="batch: 1 L")
    total = 1000 / (0.4 / ETHANOL_G_CM3 + 0.6 / WATER_G_CM3)
    assert batch.line_mass_g[0] == pytest.approx([0.4 * total, 0.6 * total], rel=1e-12)


def test_relative_amounts_are_reckoned_for_a_round_batch_and_it_is_said():
    by_mass = batch_of({"ethanol": "1 part", "water": "3 parts"})
    assert by_mass.total_mass_g[0] == pytest.approx(100) and "Reckoned for 100 g" in by_mass.notes[0][0]
    by_volume = batch_of({"glycerol": "10 g/L", "water": "to make up"})
    assert by_volume.total_volume_ml[0] == pytest.approx(1000) and "Reckoned for 1 L" in by_volume.notes[0][0]
    assert by_volume.line_mass_g[0, 0] == pytest.approx(10)


def test_percentages_within_rounding_are_brought_to_the_whole_and_it_is_said():
    batch = batch_of({"ethanol": "33.3 % w/w", "water": "66.6 %"}, head="batch: 1 kg")
    assert batch.total_mass_g[0] == pytest.approx(1000, rel=1e-12)
    assert batch.mass_fraction[0, 0] == pytest.approx(1 / 3, rel=1e-9)
    assert any("99.9" in note for note in batch.notes[0]) and any("bare %" in note for note in batch.notes[0])


def test_a_rest_of_nothing_is_no_error():
    batch = batch_of({"ethanol": "60 % w/w", "glycerol": "40 % w/w", "water": "to make up"})
    assert batch.line_mass_g[0] == pytest.approx([60, 40, 0], abs=1e-9)


def test_a_line_of_nothing_needs_no_density():
    batch = batch_of({"mystery": "0 mL", "water": "1 kg"})
    assert batch.line_mass_g[0].tolist() == [0, 1000] and batch.reasons[0] == ()


# --- what is not known is said, not guessed ---------------------------------------------------------------

def test_a_volume_without_a_density_leaves_the_mass_unknown():
    batch = batch_of({"mystery": "300 mL", "water": "500 g", "white": "50 g"})
    assert math.isnan(batch.mass_g[0, 0]) and batch.mass_g[0, 1] == 500
    assert math.isnan(batch.total_mass_g[0]) and np.isnan(batch.mass_fraction[0]).all()
    assert batch.reasons[0][0].what == "mass of mystery" and "density" in batch.reasons[0][0].would_settle
    # 300 mL weigh no less than nothing and no more than 300 mL at 20 g/cm3.
    assert batch.mass_fraction_high[0, 2] == pytest.approx(50 / 550)
    assert batch.mass_fraction_low[0, 2] == pytest.approx(50 / 6550)


def test_masses_stay_known_where_only_the_volume_is_not():
    batch = batch_of({"mystery": "30 % w/w", "water": "to make up"}, head="batch: 1 kg")
    assert batch.line_mass_g[0] == pytest.approx([300, 700])
    assert math.isnan(batch.total_volume_ml[0]) and math.isnan(batch.total_volume_low_ml[0])
    assert [reason.what for reason in batch.reasons[0]] == ["volume of the batch"]


def test_what_hangs_on_an_unknown_volume_is_unknown_with_bounds():
    batch = batch_of({"mystery": "300 g", "glycerol": "5 g/L", "water": "to make up"}, head="batch: 1 kg")
    assert batch.mass_g[0, 0] == 300 and np.isnan(batch.mass_g[0, 1:3]).all()
    assert batch.mass_fraction[0, 0] == pytest.approx(0.3)
    assert batch.mass_fraction_high[0, 1] == pytest.approx(0.7) and batch.mass_fraction_low[0, 1] == 0


def test_little_of_unknown_density_widens_the_volume_instead():
    batch = batch_of({"mystery": "10 g", "water": "990 g"})
    low, high = 990 / WATER_G_CM3 + 10 * 0.05, 990 / WATER_G_CM3 + 10 * 1.5
    assert batch.total_volume_low_ml[0] == pytest.approx(low)
    assert batch.total_volume_high_ml[0] == pytest.approx(high)
    assert low < batch.total_volume_ml[0] < high
    assert batch.reasons[0] == () and any("mystery" in note for note in batch.notes[0])
    more = batch_of({"mystery": "21 g", "water": "979 g"})  # above 2 %
    assert math.isnan(more.total_volume_ml[0])


def test_little_of_unknown_density_given_by_volume_has_bounds_and_no_mass():
    batch = batch_of({"mystery": "0.5 mL", "water": "999 g"})
    assert math.isnan(batch.mass_g[0, 0]) and math.isnan(batch.mass_fraction[0, 0])
    assert 0 < batch.mass_fraction_low[0, 0] < batch.mass_fraction_high[0, 0] < 0.011
    assert batch.mass_fraction[0, 1] == pytest.approx(0.9992, abs=3e-4)


def test_a_heap_of_powder_by_volume_tells_no_mass():
    batch = batch_of({"white": "10 mL", "water": "990 g"})
    assert math.isnan(batch.mass_g[0, 0]) and "heap" in batch.reasons[0][0].why
    assert batch.mass_fraction_high[0, 0] <= 10 * 4.23 / (10 * 4.23 + 990) + 1e-12


def test_an_impossible_density_on_a_record_is_unknown():
    batch = batch_of({"odd": "10 mL", "water": "20 g"}, densities={"odd": 0.01, "water": 1.0})
    assert math.isnan(batch.mass_g[0, 0]) and "cannot be" in batch.reasons[0][0].why


@settings(max_examples=60, deadline=None)
@given(st.floats(0.7, 19.0), st.floats(0.7, 19.0))
def test_bounds_hold_the_truth_whatever_the_density_turns_out_to_be(first, second):
    lines = {"mystery": "4 mL", "second_mystery": "6 g", "glycerol": "30 g/L", "white": "100 g",
             "water": "rest"}
    known = {"water": 1.0, "glycerol": 1.26, "mystery": None, "second_mystery": None}
    unknown = batch_of(lines, head="batch: 20 L", densities=known)
    true = batch_of(lines, head="batch: 20 L", densities=known | {"mystery": first, "second_mystery": second})
    assert (unknown.mass_fraction_low[0] <= true.mass_fraction[0] + 1e-12).all()
    assert (unknown.mass_fraction_high[0] >= true.mass_fraction[0] - 1e-12).all()
    assert unknown.total_volume_low_ml[0] <= true.total_volume_ml[0] + 1e-9
    assert unknown.total_volume_high_ml[0] >= true.total_volume_ml[0] - 1e-9


# --- what cannot be ----------------------------------------------------------------------------------------

@pytest.mark.parametrize("lines, head, line, found, expected", [
    ({"water": "to make up", "ethanol": "rest"}, "", 7, "a second ingredient 'rest'", "one ingredient"),
    ({"water": "to make up", "ethanol": "2 parts"}, "", 7, "parts beside water", "parts, or one"),
    ({"water": "0 g", "ethanol": "0 g"}, "", 5, "come to nothing", "above zero"),
    ({"water": "70 % w/w", "ethanol": "50 % w/w"}, "", 7, "120 % w/w", "at most 100"),
    ({"water": "60 % w/w", "ethanol": "30 % w/w"}, "", 5, "sum to 90 % w/w", "100 % w/w (within 0.5)"),
    ({"water": "60 % v/v", "ethanol": "30 % v/v"}, "", 5, "sum to 90 % v/v", "to make up"),
    ({"water": "900 g", "ethanol": "200 g", "glycerol": "rest"}, "batch: 1 kg", 8, "1100 g", "larger batch"),
    ({"water": "900 g", "ethanol": "1 part"}, "batch: 800 g", 7, "900 g", "larger batch"),
    ({"water": "900 g", "ethanol": "1 part"}, "", 7, "without a batch size", "batch: 1 kg"),
    ({"water": "to make up", "ethanol": "10 g"}, "", 6, "without a batch size", "batch: 1 kg"),
    ({"water": "900 g", "ethanol": "50 g"}, "batch: 2 kg", 4, "come to 950 g", "`batch: 950 g`"),
    ({"water": "900 mL", "ethanol": "50 mL"}, "batch: 2 L", 4, "come to 950 mL", "`batch: 950 mL`"),
    ({"water": "100 % w/w", "ethanol": "50 g"}, "", 7, "100 % w/w", "leave room"),
    ({"water": "100 % w/w", "ethanol": "5 parts"}, "", 7, "100 % w/w", "leave room"),
    ({"glycerol": "10 g/L", "ethanol": "20 g/L"}, "", 5, "of the whole", "to make up"),
    ({"glycerol": "3000 g/L", "water": "to make up"}, "", 7, "'to make up'", "larger batch"),
])
def test_amounts_that_cannot_be_are_refused_at_their_place(lines, head, line, found, expected):
    said = refusal(lines, head=head)
    place, first, second = said.split("\n")
    assert place.startswith(f"sample.yaml:{line}:") and found in first and expected in second, said


# --- a second route: known masses, written in any units, come back ------------------------------------------

LIQUIDS = ["water", "ethanol", "glycerol"]


@st.composite
def described(draw):
    """Masses of some ingredients, and the same recipe written in a mix of units."""
    n = draw(st.integers(2, 6))
    masses = [draw(st.floats(1, 100)) for _ in range(n)]
    densities = [draw(st.floats(0.7, 8)) for _ in range(n)]
    total = sum(masses)
    volume = sum(m / d for m, d in zip(masses, densities, strict=True))
    free = draw(st.sampled_from(["rest", "parts", "none"]))
    batch = draw(st.sampled_from(["mass", "volume"] if free != "none" else ["mass", "volume", "none"]))
    units = []
    for k in range(n):
        if k == 0 and free == "rest":
            units.append("rest")
        else:
            units.append(draw(st.sampled_from(["g", "kg", "mL", "% w/w", "% v/v", "g/L"]
                                              + (["parts"] if free == "parts" else []))))
    if free == "none" and batch == "none" and not any(unit in ("g", "kg", "mL") for unit in units):
        units[0] = "g"
    if free == "none":
        units = [unit if unit not in ("g/L", "% v/v") or batch != "none" else "% w/w" for unit in units]
        if all(unit == "% w/w" for unit in units):
            batch = "mass"
        if all(unit in ("g/L", "% v/v") for unit in units):
            units[0] = "g"
    if free == "parts" and "parts" not in units:
        units[-1] = "parts"
    part = draw(st.floats(0.1, 10))

    def write(unit: str, m: float, d: float) -> str:
        number = {"g": m, "kg": m / 1e3, "mL": m / d, "% w/w": 100 * m / total, "% v/v": 100 * m / d / volume,
                  "g/L": m / volume * 1e3, "parts": m / part, "rest": 0}[unit]
        return "to make up" if unit == "rest" else f"{number!r} {unit}"

    lines = [(f"m{k}", write(unit, masses[k], densities[k])) for k, unit in enumerate(units)]
    head = {"mass": f"batch: {total!r} g", "volume": f"batch: {volume!r} mL", "none": ""}[batch]
    return lines, head, {f"m{k}": d for k, d in enumerate(densities)}, np.array(masses), volume


@settings(max_examples=250, deadline=None)
@given(described())
def test_masses_come_back_from_any_way_of_writing_them(case):
    lines, head, densities, masses, volume = case
    batch = batch_of(lines, head=head, densities=densities)
    assert batch.line_mass_g[0] == pytest.approx(masses, rel=1e-7)
    assert batch.total_mass_g[0] == pytest.approx(batch.line_mass_g[0].sum(), rel=1e-9)
    assert batch.total_volume_ml[0] == pytest.approx(volume, rel=1e-7)
    assert batch.mass_fraction[0].sum() == pytest.approx(1, rel=1e-9)


@settings(max_examples=60, deadline=None)
@given(described(), st.floats(0.01, 100))
def test_scaling_the_batch_changes_no_fraction(case, factor):
    lines, head, densities, _, _ = case

    def scaled(text: str) -> str:
        number, _, unit = text.partition(" ")
        return f"{float(number) * factor!r} {unit}" if unit in ("g", "kg", "mL") else text

    larger = [(name, scaled(amount)) for name, amount in lines]
    larger_head = "batch: " + scaled(head.removeprefix("batch: ")) if head else ""
    one = batch_of(lines, head=head, densities=densities)
    other = batch_of(larger, head=larger_head, densities=densities)
    assert other.mass_fraction[0] == pytest.approx(one.mass_fraction[0], rel=1e-7)


@settings(max_examples=60, deadline=None)
@given(described(), st.data())
def test_splitting_a_line_in_two_changes_nothing(case, data):
    lines, head, densities, _, _ = case
    at = data.draw(st.integers(0, len(lines) - 1))
    name, amount = lines[at]
    number, _, unit = amount.partition(" ")
    if amount == "to make up":
        return
    share = data.draw(st.floats(0.05, 0.95))
    halves = [(name, f"{float(number) * share!r} {unit}"), (name, f"{float(number) * (1 - share)!r} {unit}")]
    whole = batch_of(lines, head=head, densities=densities)
    split = batch_of(lines[:at] + halves + lines[at + 1:], head=head, densities=densities)
    assert split.mass_g[0] == pytest.approx(whole.mass_g[0], rel=1e-7)
    assert split.mass_fraction_high[0] == pytest.approx(whole.mass_fraction_high[0], rel=1e-7)


# --- a units library as the oracle ------------------------------------------------------------------------

REGISTRY = pint.UnitRegistry()
PINT_NAME = {"% w/w": "0.01", "%": "0.01", "ppm w/w": "1e-6", "% v/v": "0.01", "t": "tonne",
             "ug": "microgram", "um": "micrometer", "uL": "microliter", "cm3": "cm**3", "part": "1",
             "parts": "1"}
BASE = {"mass": "g", "volume": "mL", "length": "um", "mass_fraction": "", "volume_fraction": "", "parts": "",
        "mass_per_volume": "g/L"}


@pytest.mark.parametrize("unit", sorted(UNITS))
def test_units_agree_with_a_units_library(unit):
    # Source: pint (general-purpose units library), whose definitions follow the SI brochure.
    amount = parse_amount(f"2.5 {unit}")
    name = PINT_NAME.get(unit, unit)
    plain = name[0].isdigit()
    expected = REGISTRY.Quantity(2.5 * float(name), "") if plain else REGISTRY.Quantity(2.5, name)
    assert amount.value == pytest.approx(expected.to(BASE[amount.kind]).magnitude, rel=1e-12)


@pytest.mark.parametrize("one, other", [
    ("0.3 kg", "300 g"), ("300000 mg", "300 g"), ("250 mL", "0.25 L"), ("25 cL", "250 cm3"),
    ("5 %", "5 % w/w"), ("50000 ppm w/w", "5 % w/w"), ("3 g/L", "3000 mg/L"), ("0.003 g/mL", "0.003 kg/L"),
])
def test_one_unit_says_the_same_as_another(one, other):
    first, second = (batch_of({"glycerol": amount, "water": "to make up"}, head="batch: 1 kg")
                     for amount in (one, other))
    assert first.line_mass_g[0] == pytest.approx(second.line_mass_g[0], rel=1e-12)
