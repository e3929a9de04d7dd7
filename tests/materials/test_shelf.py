"""Looking materials up, taking mixtures apart, and what is said when that fails."""

import random

import pytest

from formcheck.materials import builtin, reading
from formcheck.materials.record import Material
from formcheck.materials.shelf import (
    closest_names,
    data_file,
    expand,
    find,
    listing,
    open_shelf,
    suggest,
)
from formcheck.trouble import InputError

BARE = open_shelf()


def material(id: str, **more) -> Material:
    return Material.model_validate({"id": id, "names": [id.replace("_", " ")], "kind": "additive", **more})


def part(name: str, fraction: float, **more) -> dict:
    return {"material": name, "mass_fraction": fraction, "source": "given", **more}


SAME = [
    ("phthalocyanine_blue", ["PB15:3", "pb 15:3", "PB15_3", "Pigment Blue 15:3", "C.I. Pigment Blue 15:3",
                             "CI PIGMENT BLUE 15:3", "147-14-8", "CAS 147-14-8", "phthalo-blue"]),
    ("titanium_dioxide_rutile", ["titanium dioxide", "Titanium-Dioxide", "PW6", "C.I. Pigment White 6",
                                 "13463-67-7", "C.I. 77891", "titanium dioxide rutile"]),
    ("water", ["water", "WATER", "Deionised water", "7732-18-5"]),
    ("sodium_hydroxide", ["caustic soda", "1310-73-2", "CAS No. 1310-73-2"]),
    ("acid_orange_7", ["Acid Orange 7", "C.I. Acid Orange 7", "Orange II", "CI 15510"]),
    ("azorubine", ["Food Red 3", "C.I. Food Red 3", "azorubine"]),
    ("ammonia_solution_25", ["ammonia 25 %", "ammonia solution", "ammonia"]),
]


@pytest.mark.parametrize("id, name", [(id, name) for id, names in SAME for name in names])
def test_finds_a_material_under_each_way_to_write_it(id, name):
    found = find(BARE, name)
    assert found is not None and found.material.id == id and found.where == "built in"


def test_every_listed_name_finds_its_own_record_however_spaced_and_cased():
    change = random.Random(7)
    for line in listing(BARE):
        for name in (line.id, *line.names):
            loose = "".join(change.choice((c.upper(), c.lower())) for c in name)
            loose = loose.replace(" ", change.choice((" ", "-", "_", "")))
            found = find(BARE, loose)
            assert found is not None and found.material.id == line.id, (line.id, loose)


@pytest.mark.parametrize("name", ["", "  ", "-", "unobtainium", "🎨", "x" * 5000])
def test_what_is_not_there_is_not_found(name):
    assert find(BARE, name) is None
    assert suggest(BARE, name)


def test_a_number_that_several_records_bear_finds_none_and_names_them():
    assert find(BARE, "C.I. Pigment Brown 7") is None
    said = suggest(BARE, "PBr7")
    assert "burnt_umber" in said and "burnt_sienna" in said


def test_a_misspelt_name_is_answered_with_the_right_one():
    assert "titanium dioxide" in closest_names(BARE, "titanum dioxid")
    assert "'phenol red'" in suggest(BARE, "fenol red")


def test_looks_in_the_recipe_then_the_folder_then_the_built_in_shelf(tmp_path):
    (tmp_path / "water.yaml").write_text("{id: water, names: [workshop water], kind: water}\n")
    (tmp_path / "sub").mkdir()
    (tmp_path / "sub" / "paste.yaml").write_text("{id: paste, names: [blue paste], kind: dispersion}\n")
    shelf = open_shelf(own=[material("paste")], folder=tmp_path, own_file="r.yaml")
    places = [(find(shelf, name).where, find(shelf, name).material.names[0])
              for name in ("paste", "blue paste", "water", "workshop water", "ethanol")]
    assert places == [("recipe", "paste"), ("your shelf", "blue paste"), ("your shelf", "workshop water"),
                      ("your shelf", "workshop water"), ("built in", "ethanol")]
    lines = [line.where for line in listing(shelf) if line.id in ("paste", "water")]
    assert lines == ["recipe", "your shelf"]


def test_file_names_start_from_the_folder_of_their_shelf(tmp_path):
    (tmp_path / "sub").mkdir()
    (tmp_path / "sub" / "blue.yaml").write_text("{id: blue, names: [blue], kind: pigment}\n")
    shelf = open_shelf(own=[material("red")], folder=tmp_path, own_root="recipes")
    assert data_file(find(shelf, "blue"), "spectra/blue.csv") == tmp_path / "spectra" / "blue.csv"
    assert str(data_file(find(shelf, "red"), "red.csv")) == "recipes/red.csv"
    assert data_file(find(shelf, "zinc oxide"), "optics/zinc_oxide.csv").is_file()


def test_a_folder_may_bring_its_own_citations_and_use_the_built_in_ones(tmp_path):
    (tmp_path / "sources.yaml").write_text(
        "sources:\n  sheet: {cite: data sheet, kind: supplier, edition: rev 3}\n")
    (tmp_path / "a.yaml").write_text(
        "id: a\nnames: [a]\nkind: solvent\n"
        "density_g_cm3: {value: 0.9, source: sheet}\nboiling_point_c: {value: 90, source: crc_organic}\n")
    record = find(open_shelf(folder=tmp_path), "a").material
    assert record.quantity("density_g_cm3", "g/cm3").provenance.edition == "rev 3"
    assert record.quantity("boiling_point_c", "C").provenance.kind == "handbook"
    assert set(record.sources) == {"sheet", "crc_organic"}


BROKEN = {
    "unknown_key.yaml": ("id: a\nnames: [a]\nkind: dye\ncollor: red\n", "unknown_key.yaml:4:1"),
    "no_source.yaml": ("id: b\nnames: [b]\nkind: dye\ndensity_g_cm3: {value: 1, source: sheet}\n",
                       "no_source.yaml:4"),
    "formula.yaml": ("id: c\nnames: [c]\nkind: dye\nformula: {value: Qq2, source: given}\n",
                     "formula.yaml:4"),
    "crossed.yaml": ("id: f\nnames: [f]\nkind: dye\ndensity_g_cm3: {value: 1, low: 2, source: given}\n",
                     "crossed.yaml:4"),
    "element.yaml": ("id: d\nnames: [d]\nkind: dye\nelements: {only: [Zz]}\n", "element.yaml:4"),
    "empty.yaml": ("", "empty.yaml:1:1"),
    "list.yaml": ("- a\n- b\n", "list.yaml:1:1"),
    "binary.yaml": (b"\xff\xfe\x00id", "binary.yaml"),
    "alias.yaml": ("a: &x 1\nb: *x\n", "alias.yaml:1"),
    "sources_list.yaml": ("id: e\nnames: [e]\nkind: dye\nsources: [1]\n", "sources_list.yaml:4"),
}


def test_all_broken_files_of_a_folder_are_told_at_once_each_with_its_place(tmp_path):
    for name, (content, _) in BROKEN.items():
        (tmp_path / name).write_bytes(content if isinstance(content, bytes) else content.encode())
    with pytest.raises(InputError) as caught:
        open_shelf(folder=tmp_path)
    for name, (_, place) in BROKEN.items():
        assert place in str(caught.value), name


def test_a_shelf_folder_must_be_there_and_be_a_folder(tmp_path):
    (tmp_path / "file").write_text("x")
    for path in (tmp_path / "none", tmp_path / "file"):
        with pytest.raises(InputError, match="folder"):
            open_shelf(folder=path)


def test_two_records_of_one_level_may_not_share_a_name(tmp_path):
    with pytest.raises(InputError, match="name of both 'a' and 'b'"):
        open_shelf(own=[material("a"), material("b", names=["A"])])
    for id in "cd":
        (tmp_path / f"{id}.yaml").write_text(f"{{id: {id}, names: [same], kind: dye}}\n")
    with pytest.raises(InputError, match=r"d\.yaml"):
        open_shelf(folder=tmp_path)


def test_only_the_files_that_are_asked_for_are_read(monkeypatch):
    read = []

    def noted(path, *, common):
        read.append(path.name)
        return reading.read_material(path, common=common)

    monkeypatch.setattr(builtin, "read_material", noted)
    builtin.built_in.cache_clear()
    for name in ("water", "PB27", "water", "nothing like it"):
        find(open_shelf(), name)
    assert read == ["water.yaml", "prussian_blue.yaml"]


def test_a_pure_material_is_its_own_single_part():
    whole = expand(BARE, find(BARE, "ethanol").material)
    assert [(part.name, part.mass_fraction) for part in whole.constituents] == [("ethanol", 1.0)]
    assert whole.undeclared == 0


def test_a_mixture_comes_apart_down_to_pure_parts_with_what_is_undeclared():
    base = material("base", composition=[part("ammonia 28 %", 0.5), part("water", 0.2), part("secret", 0.1)])
    whole = expand(open_shelf(own=[base]), base)
    fractions = {one.name: one.mass_fraction for one in whole.constituents}
    assert fractions == pytest.approx({"ammonia_dissolved": 0.14, "water": 0.56, "secret": 0.1})
    assert whole.undeclared == pytest.approx(0.2)
    assert next(one for one in whole.constituents if one.name == "secret").material is None


def test_ranges_multiply_along_the_way():
    inner = material("inner", composition=[part("ethanol", 0.5, low=0.4, high=0.6), part("water", 0.5)])
    outer = material("outer", composition=[part("inner", 0.2, low=0.1, high=0.3), part("water", 0.8)])
    ethanol = expand(open_shelf(own=[inner, outer]), outer).constituents[0]
    assert (ethanol.low, ethanol.mass_fraction, ethanol.high) == pytest.approx((0.04, 0.1, 0.18))


def test_a_composition_may_not_contain_itself():
    ring = [material("a", composition=[part("b", 0.5)]), material("b", composition=[part("a", 0.5)])]
    with pytest.raises(InputError, match="contains itself: a > b > a"):
        expand(open_shelf(own=ring, own_file="r.yaml"), ring[0])
    with pytest.raises(InputError, match=r"r\.yaml"):
        expand(open_shelf(own=ring, own_file="r.yaml"), ring[1])


def test_compositions_may_not_be_nested_without_end():
    chain = [material(f"m{n}", composition=[part(f"m{n + 1}", 1.0)]) for n in range(12)]
    with pytest.raises(InputError, match="nested too deep"):
        expand(open_shelf(own=chain), chain[0])
    assert expand(open_shelf(own=chain), chain[6]).constituents[0].name == "m12"


def test_lists_by_words():
    assert {line.id for line in listing(BARE, ["isothiazolinone"])} == {
        "benzisothiazolinone", "methylisothiazolinone", "cmit_mit"}
    assert [line.id for line in listing(BARE, ["solvent", "108-88-3"])] == ["toluene"]
    assert listing(BARE, ["no such word"]) == []
