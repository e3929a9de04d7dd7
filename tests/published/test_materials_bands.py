"""Bands and constants of dyes and indicators against what their published sources print."""

import pytest

from formcheck.materials.builtin import built_in

# Source: French order of 2 October 1997, Annex VI-A (transposes Directive 95/45/EC): maximum in water, and
# absorbance of 1 % in 1 cm of the pure dye; epsilon = E * M / 10. Columns: id, nm, E.
PRINTED_ABSORBANCE = [
    ("tartrazine", 426, 530), ("quinoline_yellow", 411, 865), ("sunset_yellow", 485, 555),
    ("azorubine", 516, 510), ("amaranth", 520, 440), ("ponceau_4r", 505, 430), ("erythrosine", 526, 1100),
    ("allura_red", 504, 540), ("patent_blue_v", 638, 2000), ("indigo_carmine", 610, 480),
    ("brilliant_blue_fcf", 630, 1630), ("green_s", 632, 1720), ("riboflavin", 444, 328),
]


@pytest.mark.parametrize("id, lambda_max_nm, absorbance_of_1_percent", PRINTED_ABSORBANCE)
def test_food_dyes_absorb_as_specified(id, lambda_max_nm, absorbance_of_1_percent):
    record = built_in(id)
    band = record.optical.forms[-1].bands[0]
    assert band.lambda_max_nm == lambda_max_nm
    expected = absorbance_of_1_percent * record.molar_mass_g_mol.value / 10
    assert band.epsilon_l_mol_cm == pytest.approx(expected, rel=2e-3)


# Source: Taniguchi & Lindsey, Photochem. Photobiol. 94 (2018) 290, records J05, J10, L03, N11, I12, L08:
# maximum, half heights [nm], and the range of strengths that the authors gathered there report.
PUBLISHED_BANDS = [
    ("acid_orange_7", 486, (434.4, 524.9), (15_400, 20_700)),
    ("acid_red_1", 505, (467.6, 552.3), (31_585, 32_079)),
    ("crystal_violet", 590.5, (526.6, 613.8), (73_200, 112_000)),
    ("rhodamine_b", 542.75, (522.4, 557.5), (102_000, 106_000)),
    ("methylene_blue", 656, (627.9, 670.2), (40_700, 96_000)),
    ("phenolphthalein", 554, (521.2, 571.6), (21_501, 33_400)),
]


@pytest.mark.parametrize("id, lambda_max_nm, half_height_nm, strengths", PUBLISHED_BANDS)
def test_bands_are_published_ones_and_their_error_spans_the_authors(id, lambda_max_nm, half_height_nm,
                                                                    strengths):
    band = built_in(id).optical.forms[-1].bands[0]
    assert band.lambda_max_nm == lambda_max_nm
    assert tuple(band.half_height_nm) == half_height_nm
    assert strengths[0] <= band.epsilon_l_mol_cm <= strengths[1]
    spread = 2 * band.epsilon_relative_sd * band.epsilon_l_mol_cm
    assert band.epsilon_l_mol_cm - spread <= strengths[0] and strengths[1] <= band.epsilon_l_mol_cm + spread


# Ranges of pH over which the colour is seen to change. Sources: phenolphthalein, methyl orange, methyl red,
# bromothymol blue: school tables of indicators; the others as handbooks print them, from memory.
RANGES = [
    ("phenolphthalein", 8.2, 10.0), ("methyl_orange", 3.1, 4.4), ("methyl_red", 4.2, 6.2),
    ("bromothymol_blue", 6.0, 7.6), ("phenol_red", 6.8, 8.2), ("cresol_red", 7.2, 8.8),
    ("thymol_blue", 8.0, 9.6), ("bromocresol_green", 3.8, 5.4), ("bromophenol_blue", 3.0, 4.6),
    ("bromocresol_purple", 5.2, 6.8),
]


@pytest.mark.parametrize("id, low, high", RANGES)
def test_the_constant_of_an_indicator_lies_in_its_range(id, low, high):
    assert low <= built_in(id).acid_base.pka[-1].value <= high


def test_phenolphthalein_loses_two_protons_and_only_the_last_form_is_pink():
    forms = built_in("phenolphthalein").optical.forms
    assert [bool(form.colourless) for form in forms] == [True, True, False]
    assert forms[-1].bands[0].lambda_max_nm == pytest.approx(552, abs=3)


# Source: constants at 25 C and zero ionic strength of MINTEQA2 version 4 (after NIST 46), as distributed
# with PHREEQC 3 (minteq.v4.dat), stepwise from its overall constants.
MINTEQ = [
    ("acetic_acid", [4.757]), ("formic_acid", [3.745]), ("citric_acid", [3.128, 4.761, 6.396]),
    ("sodium_carbonate", [16.681 - 10.329, 10.329]), ("ammonia_dissolved", [9.244]), ("boric_acid", [9.236]),
    ("phosphoric_acid_pure", [21.721 - 19.573, 19.573 - 12.375, 12.375]), ("sulfuric_acid_pure", [1.99]),
    ("tartaric_acid", [7.402 - 4.366, 4.366]), ("sodium_benzoate", [4.202]),
]


@pytest.mark.parametrize("id, pka", MINTEQ)
def test_dissociation_constants_are_those_of_the_database(id, pka):
    assert [number.value for number in built_in(id).acid_base.pka] == pytest.approx(pka, abs=1e-3)


# Source: Regulation (EC) No 1272/2008, Annex VI, Table 3: specific concentration limits in per cent by mass.
SPECIFIC_LIMITS = [
    ("sodium_hydroxide", "Skin Corr. 1A", 5.0), ("sodium_hydroxide", "Eye Irrit. 2", 0.5),
    ("benzisothiazolinone", "Skin Sens. 1A", 0.036), ("methylisothiazolinone", "Skin Sens. 1A", 0.0015),
    ("cmit_mit", "Skin Corr. 1C", 0.6), ("hydrogen_chloride_dissolved", "Skin Corr. 1B", 25.0),
    ("acetic_acid", "Skin Corr. 1A", 90.0), ("cadmium_sulfide", "STOT RE 1", 10.0),
]


@pytest.mark.parametrize("id, hazard_class, percent", SPECIFIC_LIMITS)
def test_specific_limits_are_those_of_the_law(id, hazard_class, percent):
    entries = {entry.hazard_class: entry for entry in built_in(id).hazards.entries}
    assert entries[hazard_class].specific_limit_percent == percent
