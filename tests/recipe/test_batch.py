"""Recipes side by side: shared materials, the records they come from, sweeps, unknown names."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
from recipe_samples import batch_of, written

from formcheck.documents import parse_yaml
from formcheck.recipe.batch import Varied, build_batch, with_amounts
from formcheck.recipe.read import written_recipe
from formcheck.trouble import InputError


def test_recipes_share_the_columns_of_the_materials_they_have_in_common():
    first = written({"water": "90 g", "ethanol": "10 g"})
    second = written({"glycerol": "3 parts", "water": "1 part"})
    batch = build_batch([first, second])
    assert [material.id for material in batch.materials] == ["water", "ethanol", "glycerol"]
    assert batch.mass_g == pytest.approx(np.array([[90, 10, 0], [25, 0, 75]]))
    assert batch.mass_fraction.sum(axis=1) == pytest.approx([1, 1])
    assert [line.material for line in batch.lines[1]] == [2, 0]
    assert {found.where for found in batch.found} == {"recipe"}
    for r, one in enumerate([first, second]):
        alone = build_batch([one])
        assert batch.total_volume_ml[r] == pytest.approx(alone.total_volume_ml[0], rel=1e-12)


def test_records_of_one_id_that_differ_stay_apart():
    one = written({"water": "100 g"}, densities={"water": 1.0})
    other = written({"water": "100 g"}, densities={"water": 1.1})
    batch = build_batch([one, other])
    assert batch.mass_g == pytest.approx(np.array([[100, 0], [0, 100]]))
    assert batch.total_volume_ml == pytest.approx([100, 100 / 1.1])


def test_two_lines_of_one_material_add_up():
    batch = batch_of([("water", "60 g"), ("ethanol", "10 g"), ("water", "30 g")])
    assert batch.line_mass_g[0].tolist() == [60, 10, 30]
    assert batch.mass_g[0] == pytest.approx([90, 10])
    assert batch.mass_fraction_high[0] == pytest.approx([0.9, 0.1])


def test_lines_carry_their_words_and_places():
    line = batch_of({"water": "9 g", "ethanol": "1 g, purity: 96 %, note: denatured"}).lines[0][1]
    assert (line.name, line.written, line.note) == ("ethanol", "1 g", "denatured")
    assert line.purity == pytest.approx(0.96) and str(line.place).startswith("sample.yaml:7:")


@pytest.mark.parametrize("kind, values, written_as", [
    ("mass_fraction", [0.05, 0.1, 0.3], "{:r} % w/w"),
    ("mass", [5.0, 40.0, 0.0], "{:r} g"),
    ("volume", [0.0, 10.0, 50.0], "{:r} mL"),
    ("mass_per_volume", [1.0, 0.0, 200.0], "{:r} g/L"),
])
def test_a_sweep_is_the_same_as_its_recipes_one_by_one(kind, values, written_as):
    def lines(amount: str) -> dict[str, str]:
        return {"water": "to make up", "glycerol": amount, "white": "5 % w/w"}

    swept = with_amounts(batch_of(lines("1 g"), head="batch: 500 g"), [Varied(1, kind, np.array(values))])
    factor = 100 if kind == "mass_fraction" else 1
    for r, value in enumerate(values):
        amount = written_as.replace("{:r}", repr(value * factor))
        alone = batch_of(lines(amount), head="batch: 500 g")
        assert swept.mass_g[r] == pytest.approx(alone.mass_g[0], rel=1e-12)
        assert swept.total_volume_ml[r] == pytest.approx(alone.total_volume_ml[0], rel=1e-12)
    assert len(swept.recipes) == len(swept.notes) == len(swept.lines) == 3


def test_a_sweep_over_what_has_no_density_knows_the_variant_without_it():
    batch = batch_of({"water": "100 g", "mystery": "10 mL"})
    swept = with_amounts(batch, [Varied(1, "volume", np.array([0.0, 0.05, 10.0]))])
    assert swept.total_mass_g[0] == 100 and np.isnan(swept.total_mass_g[2])
    assert np.isnan(swept.mass_g[1:, 1]).all() and swept.mass_g[0, 1] == 0
    assert swept.total_mass_g[1] == pytest.approx(100.06, abs=0.01)  # little enough to be allowed for
    assert swept.reasons[0] == () and swept.reasons[2]


def test_a_variant_that_cannot_be_is_named():
    batch = batch_of({"water": "to make up", "ethanol": "1 % w/w"}, head="batch: 1 kg")
    with pytest.raises(InputError, match=r"variant 3 of 3"):
        with_amounts(batch, [Varied(1, "mass", np.array([10.0, 900.0, 1100.0]))])


def test_ten_thousand_variants_balance():
    values = np.random.default_rng(7).uniform(0, 0.9, 10_000)
    batch = batch_of({"water": "to make up", "ethanol": "1 % w/w", "glycerol": "4 g/L"}, head="batch: 1 kg")
    swept = with_amounts(batch, [Varied(1, "mass_fraction", values)])
    assert swept.mass_fraction[:, 1] == pytest.approx(values, rel=1e-12)
    assert np.abs(swept.mass_g.sum(axis=1) - swept.total_mass_g).max() < 1e-9 * 1000


def test_names_that_no_shelf_knows_are_all_told_with_the_nearest():
    with pytest.raises(InputError) as caught:
        batch_of({"watter": "90 g", "ethanoll": "10 g", "water": "1 g"})
    first, second = caught.value.problems
    assert str(first.place) == "sample.yaml:6:6"
    assert "'watter'" in first.found and "'water'" in first.expected
    assert "'ethanol'" in second.expected and "materials:" in second.expected


def test_the_shelf_folder_named_by_the_recipe_is_used(tmp_path):
    (tmp_path / "mine").mkdir()
    (tmp_path / "mine" / "bog_oak_brown.yaml").write_text(
        "id: bog_oak_brown\nnames: [bog oak brown]\nkind: dye\ndensity_g_cm3: {value: 1.5, source: given}\n")
    text = "formcheck: 1\ntitle: x\nwhat: ink\ningredients: [{material: Bog-oak brown, amount: 3 g}]\n"
    recipe = written_recipe(parse_yaml(text + "shelf: mine\n", "x.yaml"), folder=tmp_path)
    batch = build_batch([recipe])
    assert batch.found[0].where == "your shelf" and batch.total_volume_ml[0] == pytest.approx(2)
    other = written_recipe(parse_yaml(text, "x.yaml"), folder=tmp_path)
    assert build_batch([other], shelf_folder=tmp_path / "mine").materials[0].id == "bog_oak_brown"
    for name in ("yours", "bog\\0oak", "x" * 300):
        lost = written_recipe(parse_yaml(text + f'shelf: "{name}"\n', "x.yaml"), folder=Path("."))
        with pytest.raises(InputError, match=r"x.yaml:5:1  shelf"):
            build_batch([lost])
