"""`formcheck shelf` in the terminal, on an invented shelf."""

from __future__ import annotations

import io
from pathlib import Path

import pytest
from rich.console import Console

from formcheck.materials.record import Material
from formcheck.materials.shelf import Found
from formcheck.report.record_rows import record_rows
from formcheck.report.shelf import hazards_text, optical_text, show_material, show_shelf
from formcheck.trouble import InputError

SOURCES = {"table": {"cite": "Invented Handbook, table 3", "kind": "handbook", "edition": "2nd"},
           "recall": {"cite": "an old notebook", "kind": "memory", "verified": False}}


def indicator() -> Material:
    return Material.model_validate({
        "id": "quay_indicator", "names": ["quay indicator", "QI"], "kind": "indicator",
        "cas": {"value": "50-00-0", "source": "table"},
        "density_g_cm3": {"value": 1.25, "low": 1.2, "high": 1.3, "source": "table", "note": "at 20 C"},
        "molar_mass_g_mol": {"value": 318.3, "sd": 0.1, "source": "recall"},
        "composition": [{"material": "quay_salt", "mass_fraction": 0.05, "source": "table"}],
        "acid_base": {"pka": [{"value": 9.3, "source": "table"}], "neutral": False, "source": "table"},
        "optical": {"forms": [
            {"name": "acid form", "colourless": {"value": "no band above 380 nm", "source": "table"}},
            {"name": "base form", "bands": [{"lambda_max_nm": 552, "epsilon_l_mol_cm": 31000,
                                             "half_height_nm": [525, 580], "source": "recall"}]}]},
        "hazards": {"status": "classified", "source": "table", "entries": [
            {"hazard_class": "Skin Sens. 1", "code": "H317", "source": "table"}]},
        "sources": SOURCES,
    })


def printed(material: Material) -> str:
    out = io.StringIO()
    show_material(Console(file=out, width=160, highlight=False),
                  Found(material, "your shelf", "shelf/quay_indicator.yaml", Path(".")))
    return out.getvalue()


def line_with(text: str, word: str) -> str:
    return next(line for line in text.splitlines() if word in line)


def test_every_datum_stands_beside_its_source():
    text = printed(indicator())
    assert "1.25 g/cm³ (1.2 to 1.3); at 20 C — Invented Handbook, table 3, edition 2nd" in text
    assert "318.30 ± 0.10 g/mol — an old notebook (from memory, not confirmed)" in text
    assert "Invented Handbook" in line_with(text, "50-00-0")
    assert "mass fraction 0.05 — Invented Handbook" in line_with(text, "quay_salt")
    assert "λmax 552 nm" in line_with(text, "31000")
    assert "525, 580 nm" in line_with(text, "31000") and "old notebook" in line_with(text, "31000")
    assert "H317" in text and "no band above 380 nm" in text


def test_what_is_absent_is_said_to_be_unknown():
    absent = " ".join(printed(indicator()).split("Not on record, so unknown")[1].split())
    assert "refractive index" in absent and "pH window" in absent and "density" not in absent


def test_a_record_without_hazards_is_unknown_not_harmless():
    assert hazards_text(indicator()) == "H317"
    assert hazards_text(indicator().model_copy(update={"hazards": None})) == "unknown"


def test_optical_data_in_a_word():
    assert optical_text(indicator()) == "bands, 2 forms"
    assert optical_text(indicator().model_copy(update={"optical": None})) == ""


def test_every_field_that_a_record_states_has_a_row():
    labels = {label for depth, label, _ in record_rows(indicator(), lambda key: key) if depth == 0}
    assert {"density", "molar mass", "composition", "acid and base", "optical", "hazards", "CAS"} <= labels


def write_shelf(folder: Path) -> Path:
    for name in ("one", "two"):
        (folder / f"quay_blue_{name}.yaml").write_text(
            f"id: quay_blue_{name}\nnames: [quay blue {name}]\nkind: pigment\n", encoding="utf-8")
    return folder


def shown(words: str, folder: Path) -> str:
    out = io.StringIO()
    show_shelf(words, folder, Console(file=out, width=120, highlight=False))
    return out.getvalue()


def test_several_matches_are_listed_and_one_is_shown_whole(tmp_path):
    listed = shown("quay_blue", write_shelf(tmp_path))
    assert "quay_blue_one" in listed and "quay_blue_two" in listed and "2 materials" in listed
    assert "On record" not in listed
    assert "Not on record, so unknown" in shown("quay blue two", tmp_path)


def test_no_match_is_an_error_that_suggests(tmp_path):
    with pytest.raises(InputError) as caught:
        shown("quay_blue_onne", write_shelf(tmp_path))
    assert "quay_blue_one" in str(caught.value) or "quay blue one" in str(caught.value)
