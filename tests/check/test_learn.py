"""`formcheck learn` from file to record: what it writes is read back, what it cannot use is refused with its place."""

from __future__ import annotations

import shutil
from pathlib import Path

import numpy as np
import pytest
import yaml

from formcheck.check.learn import learn_file
from formcheck.check.learn_arrays import read_drawdowns, read_learn_document
from formcheck.check.record_learned import Learned
from formcheck.check.sweep import sweep_shades
from formcheck.materials.shelf import data_file, find, open_shelf
from formcheck.spectra.files import read_k_and_s, read_spectrum
from formcheck.trouble import InputError

DEMO = Path(__file__).resolve().parents[2] / "demo_formulations"
LADDER = DEMO / "ladder" / "tidewater_blue.yaml"


@pytest.fixture(scope="module")
def taught(tmp_path_factory) -> tuple[Learned, Path]:
    """The demo ladder learned once, its records in a shelf folder with those of the workshop."""
    shelf = tmp_path_factory.mktemp("shop") / "shelf"
    shutil.copytree(DEMO / "shelf", shelf)
    shutil.copytree(DEMO / "spectra", shelf.parent / "spectra")
    return learn_file(LADDER, out=shelf / "tidewater_blue.yaml"), shelf


def changed(tmp_path: Path, change) -> Path:
    """The demo ladder with its data changed, beside its readings."""
    data = yaml.safe_load(LADDER.read_text(encoding="utf-8"))
    change(data)
    shutil.copy(LADDER.with_name("tidewater_readings.csv"), tmp_path)
    path = tmp_path / "ladder.yaml"
    path.write_text(yaml.safe_dump(data, sort_keys=False), encoding="utf-8")
    return path


def brief(data) -> None:
    """Fewer panels, for tests that look at something else than the fit."""
    data["panels"] = [one for one in data["panels"] if one["name"] in
                      ("masstone", "pale tint", "middle tint", "white", "grey", "darkened")]


def test_the_demo_ladder_is_learned_well(taught):
    learned, _ = taught
    assert learned.de00_fit_median < 0.1 and learned.de00_left_out_median < 0.3
    assert learned.model_error_de00 is not None and learned.model_error_de00 < 1.0
    assert [one.id for one in learned.colourants] == ["tidewater_blue", "tidewater_white", "tidewater_black"]
    assert learned.doubts == []


def test_records_are_read_back_by_the_shelf(taught):
    learned, folder = taught
    shelf = open_shelf(folder=folder)
    for colourant in learned.colourants:
        found = find(shelf, colourant.names[0])
        assert found is not None and found.material.optical is not None
        record = found.material.optical.k_and_s
        assert record is not None and record.model_error_de00 == pytest.approx(learned.model_error_de00, abs=1e-3)
        assert learned.surface and record.k1 == pytest.approx(learned.surface.k1, abs=1e-4)
        nm, k, s = read_k_and_s(data_file(found, record.file))
        np.testing.assert_allclose(k, colourant.K_per_um, rtol=1e-5)
        np.testing.assert_allclose(s, colourant.S_per_um, rtol=1e-5)
        sd = read_spectrum(data_file(found, record.file), column="K_sd", quantity="absorbance")
        np.testing.assert_allclose(sd.values, colourant.K_sd, rtol=1e-4)
        np.testing.assert_allclose(nm, colourant.wavelength_nm)


def test_a_recipe_that_uses_what_was_learned(taught):
    """The middle tint of the ladder as a recipe: the shade it had as a panel."""
    learned, folder = taught
    recipe = folder.parent / "middle.yaml"
    recipe.write_text("""formcheck: 1
title: middle tint
what: coating
ingredients:
  - {material: tidewater blue, amount: 5 g}
  - {material: tidewater white, amount: 35 g}
  - {material: quay acrylic polymer, amount: 60 g}
film: {dry: 42 um}
ground: {spectrum: readings.csv, column: bare white}
specular: included
binder_index: 1.5
""", encoding="utf-8")
    shutil.copy(LADDER.with_name("tidewater_readings.csv"), folder.parent / "readings.csv")
    sweep = sweep_shades(recipe, shelf_folder=folder)
    panel = next(one for one in learned.panels if one.name == "middle tint")
    measured = next(one for one in panel.readings if one.ground == "white").measured.lab
    assert np.linalg.norm(np.subtract(sweep.shades[0].swatch.lab, measured)) < 1.5


def test_the_recipe_beside_the_ladder(taught):
    _, folder = taught
    sweep = sweep_shades(DEMO / "ladder" / "tidewater_wall_paint.yaml", shelf_folder=folder)
    assert len(sweep.shades) == 1 and 60 < sweep.shades[0].swatch.lab[0] < 80


def test_parts_by_mass_become_volume_fractions(tmp_path):
    """By hand: 18 g of 1.6 and 82 g of 1.12 g/cm3: 11.25 in 84.464 cm3. With 100 g of water, wet and dry."""
    def with_water(data) -> None:
        data["clear"].append({"id": "water", "density_g_cm3": 1.0, "evaporates": True})
        data["panels"][0]["parts"]["water"] = 100
        data["panels"][1]["parts"]["water"] = 100
        data["panels"][1]["film"] = {"wet": "100 um"}

    written = read_drawdowns(read_learn_document(changed(tmp_path, with_water)), tmp_path)
    assert written.ladder.volume_fraction[0, 0] == pytest.approx(11.25 / 84.464, rel=1e-4)
    white, rest = 45 / 4.1, 0.15 / 1.6 + 55 / 1.12 + 100
    assert written.ladder.volume_fraction[1, 1] == pytest.approx(white / (white + rest), rel=1e-6)
    assert written.ladder.thickness_um[1] == 100


def test_percent_is_read_as_percent(tmp_path):
    def in_percent(data) -> None:
        data["measured"]["scale"] = "percent"

    path = changed(tmp_path, in_percent)
    lines = (tmp_path / "tidewater_readings.csv").read_text(encoding="utf-8").splitlines()
    rows = [",".join([row.split(",")[0], *(f"{float(v) * 100:.2f}" for v in row.split(",")[1:])]) for row in lines[2:]]
    (tmp_path / "tidewater_readings.csv").write_text("\n".join([lines[1], *rows]), encoding="utf-8")
    found = read_drawdowns(read_learn_document(path), tmp_path).ladder.reading
    original = read_drawdowns(read_learn_document(LADDER), LADDER.parent).ladder.reading
    np.testing.assert_allclose(found, original, atol=1e-4)


def test_a_known_white_is_used_and_not_learned(taught, tmp_path):
    _, folder = taught

    def known(data) -> None:
        brief(data)
        data["colourants"][1] = {"id": "tidewater_white", "role": "white", "density_g_cm3": 4.1,
                                 "material": "tidewater white"}
        data["colourants"].pop()
        data["panels"] = [one for one in data["panels"] if "tidewater_black" not in one["parts"]]

    learned = learn_file(changed(tmp_path, known), shelf_folder=folder, out=tmp_path / "blue.yaml")
    assert [one.known for one in learned.colourants] == [False, True]
    assert [one.record_file for one in learned.colourants] == [str(tmp_path / "blue.yaml"), ""]
    assert "no mix with black" in [one.kind for one in learned.doubts]


def test_unknown_thickness_is_said_on_page_and_record(tmp_path):
    def unknown(data) -> None:
        brief(data)
        data["film"] = "unknown"
        for panel in data["panels"]:
            panel.pop("film")

    learned = learn_file(changed(tmp_path, unknown), out=tmp_path / "blue.yaml")
    assert not learned.thickness_known and learned.doubts[0].kind == "thickness unknown"
    assert "thickness_known: false" in (tmp_path / "blue.yaml").read_text(encoding="utf-8")
    assert all(panel.thickness_um is None for panel in learned.panels)


def test_a_panel_weighed_wrong_stands_apart(tmp_path):
    def wrong(data) -> None:
        brief(data)
        next(one for one in data["panels"] if one["name"] == "pale tint")["parts"]["tidewater_blue"] = 5.0

    learned = learn_file(changed(tmp_path, wrong))
    assert [one.said.split(" is ")[0] for one in learned.doubts if one.kind == "panel apart"] == ["pale tint"]


MISTAKES = [
    (lambda d: d["panels"][0]["parts"].update(tidewater_bleu=3), "tidewater_bleu", "did you mean 'tidewater_blue'?"),
    (lambda d: d["panels"][0]["readings"][0].update(ground="grey"), "'grey'", "one of `grounds`"),
    (lambda d: d["panels"][0]["readings"][0].update(column="masstone over wite"), "no", "masstone over white"),
    (lambda d: d["colourants"][0].pop("density_g_cm3"), "no density", "density_g_cm3"),
    (lambda d: d["colourants"].append({"id": "tidewater_blue", "density_g_cm3": 1.6}), "second time", "once"),
    (lambda d: d["colourants"].append({"id": "x", "density_g_cm3": 1.0}), "x, which no panel holds", "a panel"),
    (lambda d: d["panels"][1].update(name="masstone"), "second time", "once"),
    (lambda d: d["panels"][0]["parts"].clear(), "{}", "at least 1"),
    (lambda d: d["panels"][0].update(parts={"quay_polymer": 5}), "no colourant", "colourants"),
    (lambda d: d["measured"].update(repeatability=0.1), "without a unit", "0.1 %"),
    (lambda d: d["measured"].pop("mirror"), "no 'mirror'", "mirror"),
    (lambda d: d.update(film={"dry": 40}), "40 without a unit", "30 um"),
    (lambda d: d["colourants"][1].update(material="no such white"), "no such white", ""),
    (lambda d: d.update(formcheck_learn=2), "2", "1"),
    (lambda d: d["panels"][0]["readings"][0].update(spectrum="../gone.csv"), "no file", ""),
]


@pytest.mark.parametrize("mistake, found, expected", MISTAKES)
def test_every_mistake_has_its_place(tmp_path, mistake, found, expected):
    with pytest.raises(InputError) as caught:
        learn_file(changed(tmp_path, mistake))
    problem = caught.value.problems[0]
    assert found in problem.found and expected in problem.expected
    assert problem.place.file and (problem.place.line or "gone" in problem.place.file)


def test_an_out_file_that_cannot_be_written_is_refused_before_the_fit(tmp_path):
    for out in (tmp_path / "record.csv", tmp_path / "nowhere" / "record.yaml"):
        with pytest.raises(InputError, match=r"record (file|file in a folder)"):
            learn_file(LADDER, out=out)


def test_two_panels_over_one_ground_are_enough_to_begin(tmp_path):
    def least(data) -> None:
        data["panels"] = [one for one in data["panels"] if one["name"] in ("masstone", "middle tint")]
        data["colourants"].pop()
        data["film"] = "unknown"
        for panel in data["panels"]:
            panel.pop("film")
            panel["readings"].pop()

    learned = learn_file(changed(tmp_path, least))
    assert learned.de00_fit_median < 2.0 and learned.doubts
    assert learned.panels[0].left_out_reason == "" and learned.panels[1].left_out_reason != ""


def test_the_demo_dilution(tmp_path):
    learned = learn_file(DEMO / "ladder" / "quay_rose.yaml", out=tmp_path / "quay_rose.yaml")
    assert learned.dye
    assert max(learned.dye.absorptivity_l_g_cm) == pytest.approx(45.7, rel=0.02)  # at 540 nm, by the script
    assert learned.doubts == [] and learned.model_error_de00 is not None
    found = find(open_shelf(folder=tmp_path), "quay rose")
    assert found is not None and found.material.optical is not None
    spectrum = found.material.optical.forms[0].spectrum
    assert spectrum is not None
    read = read_spectrum(data_file(found, spectrum.file), column=spectrum.column, quantity=spectrum.quantity)
    np.testing.assert_allclose(read.values, learned.dye.absorptivity_l_g_cm, rtol=1e-5)
