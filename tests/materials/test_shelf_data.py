"""A walk along the built-in shelf: every record reads, is plausible, and says where its data come from."""

import importlib.util
import json
import math
from pathlib import Path

import numpy as np
import pytest
import yaml

from formcheck.materials.builtin import DATA, SHELVES, built_in, index
from formcheck.materials.formula import molar_mass
from formcheck.materials.names import own_keys
from formcheck.materials.reading import read_material, read_sources
from formcheck.materials.record import Material, _source_keys
from formcheck.materials.shelf import expand, find, open_shelf

TOP = Path(__file__).resolve().parents[2]
IDS = sorted(index()["records"])
SHELF = open_shelf()
# The words that rules and records share.
VOCABULARY = yaml.safe_load((TOP / "hazard_rules" / "vocabulary.yaml").read_text(encoding="utf-8"))
# Classes and statements that carry no class of a mixture: gases under pressure, supplemental statements.
NOT_SUMMED = {"Press. Gas", "Supplemental"}


@pytest.fixture(scope="module")
def records() -> dict[str, Material]:
    return {id: built_in(id) for id in IDS}


def test_the_index_is_fresh_and_no_name_clashes():
    path = TOP / "scripts" / "build_shelf_index.py"
    spec = importlib.util.spec_from_file_location("build_shelf_index", path)
    script = importlib.util.module_from_spec(spec)
    spec.loader.exec_module(script)
    assert json.loads(json.dumps(script.build_index())) == index()


def test_every_file_is_in_the_index_under_its_own_id():
    files = {path.relative_to(DATA).as_posix() for shelf in SHELVES for path in (DATA / shelf).iterdir()}
    assert files == {entry["file"] for entry in index()["records"].values()}
    assert all(Path(entry["file"]).stem == id for id, entry in index()["records"].items())


def test_the_shelf_is_as_large_as_promised(records):
    kinds = [record.kind for record in records.values()]
    assert sum(kind in ("pigment", "extender") for kind in kinds) >= 20
    assert sum(kind in ("dye", "indicator") for kind in kinds) >= 25
    assert sum(kind not in ("pigment", "extender", "dye", "indicator") for kind in kinds) >= 35


def test_every_common_source_is_used_and_says_whether_it_was_read(records):
    used = set().union(*(_source_keys(record) for record in records.values()))
    sources = read_sources(DATA)
    assert used - {""} == set(sources)
    for key, source in sources.items():
        from_memory = source["kind"] in ("memory",) or "from memory" in source["cite"]
        assert not from_memory or source.get("verified") is False, key


def test_a_record_carries_only_the_citations_it_names(records):
    for record in records.values():
        assert set(record.sources) == _source_keys(record) - {""}


# Plausible ranges by field; one slip of a decimal point falls out of them.
RANGES = {
    "density_g_cm3": (0.6, 8.0), "refractive_index": (1.3, 3.0), "oil_absorption_g_100g": (5, 160),
    "nonvolatile_fraction": (0, 1), "boiling_point_c": (-100, 400), "flash_point_c": (-40, 250),
    "molar_mass_g_mol": (10, 1500), "solubility_water_g_l": (0.01, 3000),
}
DENSITY_OF_KIND = {
    "pigment": (1.2, 7.0), "extender": (2.2, 4.6), "dye": (1.1, 1.9), "indicator": (1.1, 1.9),
    "solvent": (0.65, 1.3), "water": (0.99, 1.0), "binder": (0.9, 1.7), "metal_powder": (2.5, 7.5),
}


@pytest.mark.parametrize("id", IDS)
def test_a_record_is_plausible(id, records):
    record = records[id]
    for field, (low, high) in RANGES.items():
        number = getattr(record, field)
        if number is not None:
            assert low <= number.value <= high, (field, number.value)
            assert number.low is None or number.low <= number.value
            assert number.high is None or number.value <= number.high
            assert math.isfinite(number.value)
    low, high = DENSITY_OF_KIND.get(record.kind, (0.6, 8.0))
    assert record.density_g_cm3 is None or low <= record.density_g_cm3.value <= high
    window = record.ph_window
    if window:
        ends = [end for end in (window.low, window.high) if end is not None]
        assert ends and ends == sorted(ends) and all(0 < end < 14 for end in ends)
        assert (window.low is None or window.below) and (window.high is None or window.above)


@pytest.mark.parametrize("id", IDS)
def test_molar_mass_agrees_with_the_formula(id, records):
    record = records[id]
    if record.molar_mass_g_mol:
        assert record.molar_mass_g_mol.value == pytest.approx(molar_mass(record.formula.value), abs=0.006)


def test_groups_and_hazard_classes_are_words_of_the_rules(records):
    for record in records.values():
        assert set(record.groups) <= set(VOCABULARY["groups"]), record.id
        for entry in record.hazards.entries if record.hazards else ():
            assert entry.hazard_class in NOT_SUMMED | set(VOCABULARY["hazard_classes"]), (record.id, entry)
            known = VOCABULARY["hazard_classes"].get(entry.hazard_class)
            assert known is None or entry.code[:4] in known["codes"], (record.id, entry)


def test_hazards_are_classified_with_entries_or_found_to_be_none(records):
    for record in records.values():
        if record.hazards:
            assert (record.hazards.status == "classified") == bool(record.hazards.entries), record.id
            assert "annex_vi" in record.hazards.source or record.kind == "water"


def test_compositions_name_materials_of_the_shelf_and_leave_nothing_out(records):
    for record in records.values():
        whole = expand(SHELF, record)
        assert all(part.material is not None for part in whole.constituents), record.id
        assert whole.undeclared < 1e-9, record.id
        assert sum(part.low for part in whole.constituents) <= 1 + 1e-9
        assert sum(part.high for part in whole.constituents) >= 1 - 1e-9


def test_dye_forms_are_told_or_unknown_never_silently_colourless(records):
    for record in records.values():
        forms = record.optical.forms if record.optical else []
        for form in forms:
            assert not (form.colourless and form.bands), (record.id, form.name)
        charges = record.acid_base and record.acid_base.pka
        assert not charges or len(forms) in (0, len(record.acid_base.pka) + 1)


@pytest.mark.parametrize("id", [id for id in IDS if built_in(id).optical])
def test_bands_are_plausible_and_carry_an_error(id, records):
    for form in records[id].optical.forms:
        for band in form.bands:
            assert 380 <= band.lambda_max_nm <= 700
            assert 2_000 <= band.epsilon_l_mol_cm <= 200_000
            assert band.epsilon_relative_sd and band.medium
            if band.half_height_nm:
                assert 15 < band.half_height_nm[1] - band.half_height_nm[0] < 160


@pytest.mark.parametrize("id", [id for id in IDS if built_in(id).optical and built_in(id).optical.k_and_s])
def test_k_and_s_files_are_there_with_the_error_their_head_states(id, records):
    optics = records[id].optical.k_and_s
    path = DATA / optics.file
    head = " ".join(line for line in path.read_text(encoding="utf-8").splitlines() if line.startswith("#"))
    assert f"relative_sd {optics.relative_sd:.2f}" in head
    assert f"median diameter {optics.median_diameter_um:g} um" in head
    wavelength_nm, k, s = np.loadtxt(path, delimiter=",", comments=("#", "wavelength"), unpack=True)
    assert wavelength_nm[0] <= 380 and wavelength_nm[-1] >= 780
    assert (k >= 0).all() and (s > 0).all()


def test_every_file_of_optics_is_used(records):
    used = {record.optical.k_and_s.file for record in records.values()
            if record.optical and record.optical.k_and_s}
    assert used == {path.relative_to(DATA).as_posix() for path in (DATA / "optics").glob("*.csv")}


def test_solids_stay_in_the_film_and_volatility_follows_the_boiling_point(records):
    for record in records.values():
        fraction = record.nonvolatile_fraction
        if fraction and fraction.source == "boiling_rule" and record.boiling_point_c:
            assert fraction.value == (0 if record.boiling_point_c.value <= 250 else 1), record.id
        if fraction and fraction.source == "solid_rule":
            assert fraction.value == 1 and record.physical_form not in ("liquid", "gas", "solution")


def test_the_acid_base_data_are_electrically_possible(records):
    """A substance as supplied is neutral: some state of protonation balances its counter-ions."""
    for record in records.values():
        ions = record.acid_base
        if ions is None or ions.neutral or ions.buffers_unknowably or not ions.pka:
            continue
        most = ions.charge_fully_protonated + ions.counter_charge
        # Between every proton gone and one proton more than listed (the strong acid group of the free acid).
        assert most - len(ions.pka) - 1 <= 0 <= most + 1, record.id


def test_a_broken_built_in_record_would_be_told_with_its_place(tmp_path):
    text = (DATA / index()["records"]["water"]["file"]).read_text(encoding="utf-8")
    path = tmp_path / "water.yaml"
    path.write_text(text.replace("crc_inorganic", "crc_inorgani", 1), encoding="utf-8")
    with pytest.raises(Exception, match=r"(?s)water\.yaml:\d+.*crc_inorgani"):
        read_material(path, common=index()["sources"])


def test_own_names_are_unique_across_the_shelf(records):
    seen: dict[str, str] = {}
    for record in records.values():
        for key in own_keys(record):
            assert seen.setdefault(key, record.id) == record.id, key


def test_numbers_from_memory_show_it():
    binder = find(SHELF, "linseed oil").material.quantity("density_g_cm3", "g/cm3")
    assert binder.provenance.verified is False and "from memory" in str(binder.provenance)
    assert find(SHELF, "ethanol").material.quantity("density_g_cm3", "g/cm3").provenance.verified
