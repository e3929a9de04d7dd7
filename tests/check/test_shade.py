"""The shade as the whole check tells it, against published figures, closed forms and second routes."""

from __future__ import annotations

import csv
from pathlib import Path

import numpy as np
import pytest
from recipes import (
    DEMO,
    absorbance,
    band,
    checked,
    chroma,
    demo,
    demo_data,
    dye,
    highest,
    hue_deg,
    shade,
    solution,
    spectrum,
)

from formcheck.colour.difference import delta_e_2000
from tests.published.colorimetry_values import VALUES

PUBLISHED = Path(__file__).resolve().parents[1] / "published" / "data"


def rows(name: str) -> list[dict[str, str]]:
    with (PUBLISHED / name).open(encoding="utf-8") as file:
        return list(csv.DictReader(line for line in file if not line.startswith("#")))


# Bands and shades of 46 dyes: PhotochemCAD records (Taniguchi & Lindsey, Photochem. Photobiol. 94 (2018) 290).
SHADES = {row["id"]: row for row in rows("dye_solution_shades.csv")}
BANDS = {row["id"]: row for row in rows("dye_bands.csv")}


def published_band(name: str) -> dict:
    row = BANDS[name]
    return band(float(row["lambda_max_nm"]), float(row["epsilon_l_mol_cm"]),
                [float(row["half_height_low_nm"]), float(row["half_height_high_nm"])])


# --- Beer-Lambert ----------------------------------------------------------------------------------------

@pytest.mark.parametrize("name, molar_mass", [  # molar masses by formula, standard atomic weights
    ("acid_red_1", 509.4), ("acid_black_1", 616.5), ("crystal_violet", 408.0), ("rhodamine_b", 479.0),
    ("erythrosine", 879.9), ("methyl_orange_ph7_5", 327.3)])
@pytest.mark.parametrize("path_length, path_cm", [("10 mm", 1.0), ("5 mm", 0.5), ("2 cm", 2.0)])
def test_absorbance_at_the_maximum_is_epsilon_times_concentration_times_path(name, molar_mass, path_length, path_cm):
    recipe = solution(tested="10 mg/L") | {
        "path_length": path_length, "materials": [dye("tested", molar_mass=molar_mass, bands=[published_band(name)])]}
    at, found = highest(shade(recipe))
    expected = float(BANDS[name]["epsilon_l_mol_cm"]) * 0.010 / molar_mass * path_cm
    # The 5 nm grid meets a maximum to within 2.5 nm, which costs a narrow band up to 1.5 %.
    assert found == pytest.approx(expected, rel=0.015) and found <= expected * (1 + 1e-9)
    assert abs(at - float(BANDS[name]["lambda_max_nm"])) <= 2.5


SPECIFIED = [row for row in VALUES["specific_absorbance"]["rows"] if row[5]]


@pytest.mark.parametrize("row", SPECIFIED, ids=lambda row: row[0])
def test_dyes_of_the_shelf_have_the_absorbance_of_their_specification(row):
    """E(1 %, 1 cm) of the law's specification, source in the row; authors differ by some 12 %."""
    name, specific = row[0], row[1]
    recipe = solution(**{name: "5 mg/L"}) | {"measured": {"ph": 5.0}}
    assert highest(shade(recipe))[1] == pytest.approx(specific * 0.0005, rel=0.13)


# E(1 %, 1 cm) in water from the specifications of Regulation (EU) No 231/2012; from memory.
@pytest.mark.parametrize("name, specific, at_nm", [
    ("brilliant_blue_fcf", 1630, 630), ("amaranth", 440, 520), ("allura_red", 540, 504),
    ("indigo_carmine", 480, 610), ("green_s", 1720, 632), ("tartrazine", 530, 426)])
def test_food_dyes_of_the_shelf_agree_with_their_specification(name, specific, at_nm):
    at, found = highest(shade(solution(**{name: "5 mg/L"}) | {"measured": {"ph": 7.0}}))
    assert found == pytest.approx(specific * 0.0005, rel=0.2) and abs(at - at_nm) <= 8


def test_half_the_dye_over_twice_the_path_looks_the_same():
    strong = shade(solution(acid_red_1="40 mg/L"))
    weak = shade(solution(acid_red_1="20 mg/L") | {"path_length": "20 mm"})
    assert weak.swatch.lab == pytest.approx(strong.swatch.lab, abs=0.02)  # the density moves by a hair


def test_dyes_add_up():
    """Absorbances of two dyes in one cell are those of each alone."""
    _, red = absorbance(shade(solution(acid_red_1="20 mg/L")))
    _, blue = absorbance(shade(solution(brilliant_blue_fcf="5 mg/L")))
    _, both = absorbance(shade(solution(acid_red_1="20 mg/L", brilliant_blue_fcf="5 mg/L")))
    assert both == pytest.approx(red + blue, abs=1e-9)


# --- published shades ------------------------------------------------------------------------------------

def difference_from_published(name: str, peak: str) -> float:
    """The dye as a record of one published band, so much of it that the highest absorbance is `peak`."""
    recipe = {"materials": [dye("tested", bands=[published_band(name)])]}
    _, of_a_milligram = highest(shade(solution(tested="1 mg/L") | recipe))
    found = shade(solution(tested=f"{float(peak) / of_a_milligram:.9g} mg/L") | recipe)
    row = SHADES[name]
    return float(delta_e_2000(found.swatch.lab, [float(row[f"{axis}_{peak}"]) for axis in "Lab"]))


def test_shades_of_46_dyes_come_near_those_of_their_measured_spectra():
    found = [difference_from_published(name, "1.0") for name in SHADES]
    assert len(found) == 46 and np.median(found) <= 4.0 and np.percentile(found, 90) <= 9.0


# --- acid and base ---------------------------------------------------------------------------------------

def phenolphthalein(ph: float):
    return checked(solution(phenolphthalein="5 mg/L") | {"measured": {"ph": ph}})


def test_phenolphthalein_in_acid_is_colourless():
    found = phenolphthalein(4.0)
    assert chroma(found.shade) < 0.1 and found.shade.swatch.lab[0] > 99.9
    assert found.dye_forms[0].shares[0] > 0.999


def test_phenolphthalein_twice_deprotonated_absorbs_near_552_nm_and_looks_pink():
    """552 nm in alkali: handbooks of analytical chemistry, from memory; pink: common knowledge of the titration."""
    found = phenolphthalein(11.5).shade
    assert abs(highest(found)[0] - 552) <= 5
    assert found.swatch.lab[0] > 60 and found.swatch.lab[1] > 25
    assert hue_deg(found) > 310 or hue_deg(found) < 20


def test_the_pink_comes_between_ph_8_and_10():
    """Transition range 8.2 to 10.0: common practice of titration."""
    strength = [chroma(phenolphthalein(ph).shade) for ph in (7.5, 8.2, 9.0, 10.0, 11.5)]
    assert strength == sorted(strength) and strength[0] < 3 and strength[-2] > 0.75 * strength[-1]


def indicator_ink(ph: float):
    recipe = demo_data("tide_mark_indicator_ink.yaml")
    return shade(recipe | {"measured": {"ph": ph, "ph_sd": 0.05}})


def test_the_indicator_ink_is_yellow_in_acid_and_red_violet_in_alkali():
    """Phenol red: yellow below pH 6.8, red-violet above 8.2 (common practice)."""
    acid, base = indicator_ink(4.5), indicator_ink(10.5)
    assert 70 < hue_deg(acid) < 115
    assert hue_deg(base) > 300 or hue_deg(base) < 30
    assert delta_e_2000(acid.swatch.lab, base.swatch.lab) > 30


def test_at_the_pka_half_of_the_dye_is_in_either_form():
    found = checked(demo_data("tide_mark_indicator_ink.yaml"))
    pka = found.dye_forms[0].pka[-1]
    half = checked(demo_data("tide_mark_indicator_ink.yaml") | {"measured": {"ph": round(pka, 6)}})
    assert half.dye_forms[0].shares[-1] == pytest.approx(half.dye_forms[0].shares[-2], abs=1e-4)


def test_an_unknown_ph_leaves_the_shade_of_an_indicator_unknown():
    """No share of its forms is guessed."""
    found = checked(solution(phenol_red="20 mg/L", sodium_alginate="1 g/L"))
    assert found.ph.value is None and found.shade is None
    assert "share" in found.shade_reason and any(one.what == "the shade" for one in found.unknowns)


# --- near black, colourless, boxes -----------------------------------------------------------------------

def test_the_near_black_is_dark_and_without_colour():
    found = demo("midnight_black_ink.yaml").shade
    assert found.swatch.lab[0] < 20 and chroma(found) < 8
    assert all(region.lab[0] < 30 for region in found.region)


def boxed(shape: dict):
    recipe = solution(tested="5 mg/L") | {"materials": [dye("tested", boxes=[{**shape, "source": "test"}])]}
    return shade(recipe)


def test_a_longer_chain_absorbs_at_longer_wavelengths():
    at = [highest(boxed({"shape": "chain", "n_pi_electrons": 8, "length_nm": length}), 360.0)[0]
          for length in (0.95, 1.05, 1.15, 1.25)]
    assert at == sorted(at) and at[-1] - at[0] > 100


def test_a_ring_of_the_size_of_benzene_is_colourless():
    """Benzene: six pi electrons, 0.139 nm from atom to atom; its bands lie below 270 nm."""
    found = boxed({"shape": "ring", "n_pi_electrons": 6, "circumference_nm": 0.84})
    assert found.swatch.lab[0] > 99.5 and chroma(found) < 0.5
    assert found.basis[0].basis == "box model"


# --- films -----------------------------------------------------------------------------------------------

def pigmented(thickness: str, **more) -> dict:
    return {"formcheck": 1, "title": "a film", "what": "coating", "batch": "1 kg", "shelf": "shelf",
            "film": {"wet": thickness}, "ground": "ideal_white", "lights": ["D65"],
            "ingredients": [{"material": "quay acrylic dispersion", "amount": "to make up"},
                            {"material": "harbour blue pigment", "amount": "5 % w/w"}], **more}


def test_a_thick_film_without_surface_reflects_as_kubelka_and_munk_say():
    """R_inf = 1 + K/S - sqrt((K/S)^2 + 2 K/S) [Kubelka & Munk 1931], K and S read from the file by hand."""
    lines = [line.split(",") for line in (DEMO / "spectra" / "phthalo_blue_k_s.csv").read_text().splitlines()
             if line[:1].isdigit()]
    by_nm = {float(nm): float(k) / float(s) for nm, k, s in lines}
    wavelength_nm, found = spectrum(shade(pigmented("90 mm", binder_index=1.0)))
    compared = 0
    for nm, reflectance in zip(wavelength_nm, found, strict=True):
        if nm in by_nm:
            ratio = by_nm[nm]
            assert reflectance == pytest.approx(1 + ratio - np.sqrt(ratio**2 + 2 * ratio), rel=1e-4)
            compared += 1
    assert compared > 30


def test_contrast_rises_with_thickness_to_full_hiding():
    ratios = [shade(pigmented(thickness)).contrast_ratio for thickness in ("2 um", "20 um", "200 um", "2 mm")]
    assert ratios == sorted(ratios) and ratios[0] < 0.8 and ratios[-1] > 0.99


def test_a_film_of_nothing_shows_its_ground():
    clear = pigmented("1 nm", binder_index=1.5, specular="included", ground={"spectrum": "spectra/print_card.csv"})
    wavelength_nm, found = spectrum(shade(clear))
    lines = [line.split(",") for line in (DEMO / "spectra" / "print_card.csv").read_text().splitlines()
             if line[:1].isdigit()]
    card = {float(nm): float(r) for nm, r in lines}
    assert all(found[n] == pytest.approx(card[nm], abs=2e-3) for n, nm in enumerate(wavelength_nm) if nm in card)


def test_a_dry_thickness_stands_for_the_wet_film_that_leaves_it():
    wet = checked(pigmented("40 um"))
    dry_um = next(figure.value for figure in wet.figures if figure.name == "dry film")
    same = shade(pigmented("40 um") | {"film": {"dry": f"{dry_um:.12g} um"}})
    assert same.swatch.lab == pytest.approx(wet.shade.swatch.lab, abs=1e-6)


# --- what must change nothing ----------------------------------------------------------------------------

SHADED = ["harbour_blue_screen_ink.yaml", "ember_red_gravure_ink.yaml", "quarry_white_wall_coating.yaml",
          "oak_amber_wood_stain.yaml", "brick_red_masonry_coating.yaml"]


def scaled(recipe: dict, factor: float) -> dict:
    """All amounts in g and the batch times a factor; relative amounts as they are."""
    def times(text: str) -> str:
        number, _, unit = text.partition(" ")
        return f"{float(number) * factor:.12g} {unit}" if unit in ("g", "kg", "L", "mL", "mg") else text

    lines = [{**line, "amount": times(line["amount"])} for line in recipe["ingredients"]]
    return {**recipe, "batch": times(recipe["batch"]), "ingredients": lines}


@pytest.mark.parametrize("name", SHADED)
def test_the_size_of_the_batch_changes_no_shade(name):
    recipe = demo_data(name)
    small, large = shade(scaled(recipe, 0.01)), shade(scaled(recipe, 37.0))
    assert large.swatch.lab == pytest.approx(small.swatch.lab, abs=1e-6)
    assert large.lab_sd <= tuple(sd + 1e-9 for sd in small.lab_sd), "weighing hurts a small batch, never a large one"


@pytest.mark.parametrize("name", SHADED)
def test_a_line_split_in_two_changes_no_shade(name):
    recipe = demo_data(name)
    number, _, unit = recipe["ingredients"][1]["amount"].partition(" ")
    if recipe["ingredients"][1]["amount"] == "to make up":
        pytest.skip("nothing to split")
    half = {**recipe["ingredients"][1], "amount": f"{float(number) / 2:.12g} {unit}"}
    split = {**recipe, "ingredients": [recipe["ingredients"][0], half, half, *recipe["ingredients"][2:]]}
    whole, parts = checked(recipe), checked(split)
    assert parts.shade.swatch.lab == pytest.approx(whole.shade.swatch.lab, abs=1e-6)
    assert [f.value for f in parts.figures] == pytest.approx([f.value for f in whole.figures], nan_ok=True)


@pytest.mark.parametrize("name", SHADED)
def test_the_order_of_the_lines_changes_no_shade(name):
    recipe = demo_data(name)
    turned = {**recipe, "ingredients": recipe["ingredients"][::-1]}
    assert shade(turned).swatch.lab == pytest.approx(shade(recipe).swatch.lab, abs=1e-6)


def test_a_purity_of_half_is_half_the_dye():
    whole = shade(solution(acid_red_1="10 mg/L"))
    half = solution(acid_red_1="20 mg/L")
    half["ingredients"][1]["purity"] = "50 %"
    assert shade(half).swatch.lab == pytest.approx(whole.swatch.lab, abs=1e-3)


def test_what_a_purity_leaves_out_is_unknown_to_the_ph():
    recipe = solution(**{"sodium hydroxide": "1 g/L"})
    assert checked(recipe).ph.value == pytest.approx(12.36, abs=0.05)  # 0.025 mol/L, by charge balance by hand
    recipe["ingredients"][1]["purity"] = "50 %"
    found = checked(recipe)
    assert found.ph.value is None and "rest of sodium hydroxide" in found.ph.reason


def test_a_molar_mass_by_formula_serves_a_dye():
    """C20H14O4 is 318.33 g/mol; without it there is no concentration in mol/L."""
    record = dye("tested", molar_mass=318.33, bands=[published_band("acid_red_1")])
    by_formula = {key: value for key, value in record.items() if key != "molar_mass_g_mol"}
    by_formula["formula"] = {"value": "C20H14O4", "source": "test"}
    one, other = (shade(solution(tested="10 mg/L") | {"materials": [each]}) for each in (record, by_formula))
    assert other.swatch.lab == pytest.approx(one.swatch.lab, abs=1e-3)
    del by_formula["formula"]
    assert "molar mass" in checked(solution(tested="10 mg/L") | {"materials": [by_formula]}).shade_reason
