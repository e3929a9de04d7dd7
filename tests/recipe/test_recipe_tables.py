"""Recipes from delimited text and workbooks: the same model, digest and messages as from YAML."""

from __future__ import annotations

import csv
import io
import zipfile
from datetime import date
from pathlib import Path

import openpyxl
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from formcheck.cells import delimited_rows
from formcheck.documents import parse_yaml
from formcheck.recipe.model import Film, Measured, Recipe, SpectrumReference, Wanted
from formcheck.recipe.read import digest, read_recipe, written_recipe
from formcheck.recipe.table import FIELDS
from formcheck.trouble import InputError

YAML = """\
formcheck: 1
title: Harbour blue
what: dye_bath
use: [consumer, textile]
sold_in: [EU, US]
batch: 2 kg
film: {wet: 30 um, sd: 2 um}
ground: chart_white
wanted: {lab: [45, -10.5, -25], light: D65, tolerance: 2.5}
measured: {ph: 7.5}
observer: 2
acts: [dry_weighing]
ingredients:
  - {material: water, amount: to make up, note: soft}
  - {material: blue paste, amount: 12.5 % w/w, purity: 90 %}
  - {material: glycol, amount: 40 g}
  - {material: "1,2-propanediol", amount: 3 mL}
"""
CSV = """\
Title,Harbour blue
what:,Dye bath
use,"consumer, textile",
Sold in,EU,US
batch,2 kg
film wet,30 um
film sd,2 um
ground,chart_white
lab,45,-10.5,-25
wanted light,D65
tolerance,2.5
pH,7.5
observer,2
acts,dry weighing

Ingredient,Amount,Unit,Note,Purity
water,to make up,,soft,
blue paste,12.5,% w/w,,90 %
glycol,40 g,,,
"1,2-propanediol",3,mL,,
"""


def with_semicolons() -> str:
    rows = [[cell.replace(".", ",") if cell[:1].isdigit() or cell[:1] == "-" else cell for cell in row]
            for row in csv.reader(io.StringIO(CSV))]
    out = io.StringIO()
    csv.writer(out, delimiter=";").writerows(rows)
    return out.getvalue()


def save(path: Path, text: str) -> Path:
    path.write_text(text, encoding="utf-8", newline="")
    return path


def workbook(path: Path, rows: list[list], *, formats: dict[str, str] | None = None,
             first_row: int = 1) -> Path:
    book = openpyxl.Workbook()
    sheet = book.active
    for r, row in enumerate(rows, start=first_row):
        for c, value in enumerate(row, start=1):
            sheet.cell(r, c, value)
    for cell, number_format in (formats or {}).items():
        sheet[cell].number_format = number_format
    book.save(path)
    return path


def as_numbers(row: list[str]) -> list:
    def value(cell: str):
        try:
            return float(cell)
        except ValueError:
            return cell or None
    return [value(cell) for cell in row]


def complaint(path: Path) -> str:
    with pytest.raises(InputError) as caught:
        read_recipe(path)
    return str(caught.value)


@pytest.fixture(scope="module")
def expected() -> Recipe:
    return written_recipe(parse_yaml(YAML, "x.yaml"), folder=Path(".")).recipe


def test_commas_semicolons_tabs_and_workbooks_say_what_yaml_says(tmp_path, expected):
    tabs = io.StringIO()
    csv.writer(tabs, delimiter="\t").writerows(csv.reader(io.StringIO(CSV)))
    rows = [as_numbers(row) for row in csv.reader(io.StringIO(CSV))]
    files = [save(tmp_path / "a.csv", CSV), save(tmp_path / "b.csv", with_semicolons()),
             save(tmp_path / "c.csv", "sep=;\r\n" + with_semicolons()),
             save(tmp_path / "d.csv", "\ufeff" + CSV.replace("\n", "\r\n")),
             save(tmp_path / "e.tsv", tabs.getvalue()), workbook(tmp_path / "f.xlsx", rows, first_row=4)]
    for path in files:
        written = read_recipe(path)
        assert written.recipe == expected, path.name
        assert written.digest == digest(expected), path.name


def test_the_digest_tells_recipes_apart_and_layouts_alike(expected):
    def of(text: str) -> str:
        return written_recipe(parse_yaml(text, "x.yaml"), folder=Path(".")).digest

    moved = "# a remark\n" + YAML.replace("observer: 2\n", "") + "observer: 2\nspecular: included\n"
    assert of(YAML) == of(moved)
    assert of(YAML) != of(YAML.replace("12.5 %", "12.6 %"))


def test_places_are_those_of_the_cells(tmp_path):
    said = complaint(save(tmp_path / "a.csv", CSV.replace("12.5,% w/w", "12.5,pct")))
    assert said.startswith(f"{tmp_path / 'a.csv'}:18:12  ingredients[1].amount\n  found the unit 'pct'")
    rows = [as_numbers(row) for row in csv.reader(io.StringIO(CSV.replace("12.5,% w/w", "12.5,pct")))]
    assert complaint(workbook(tmp_path / "a.xlsx", rows)).startswith(f"{tmp_path / 'a.xlsx'}:18:2  ingr")


def test_a_plain_list_of_ingredients_needs_only_to_say_what_it_is(tmp_path):
    text = "ingredient,amount (g)\nwater,200\nblue paste,14.5\n"
    assert "no 'what' here" in complaint(save(tmp_path / "sea.csv", text))
    recipe = read_recipe(save(tmp_path / "sea.csv", "what,ink\n" + text)).recipe
    assert recipe.title == "sea" and [line.amount for line in recipe.ingredients] == ["200 g", "14.5 g"]


@pytest.mark.parametrize("old, new, found, expected", [
    ("Title,", "Titel,", "the unknown field 'Titel'", "'title'"),
    ("observer,2", "observer,two", "'two'", "2 (CIE 1931)"),
    ("observer,2", "observer,2,10", "a second value, '10'", "one value"),
    ("observer,2", "observer", "no value for 'observer'", "cell beside"),
    ("observer,2", "batch,3 kg", "'batch' a second time", "once"),
    ("observer,2", "ground spectrum,a.csv", "'ground.spectrum' beside 'ground'", "one of the two"),
    ("Amount,Unit", "Amount,Unt", "the unknown heading 'Unt'", "'unit'"),
    ("Amount,Unit", "Amount,Quantity", "a second column 'Quantity'", "once"),
    ("12.5,% w/w", "12.5,", "12.5 without a unit", "'300 g'"),
    ("12.5,% w/w", ",% w/w", "no 'amount' here", "amount"),
    ("glycol,40 g", "glycol,40 g,,,,,stray", "'stray' outside the columns", "heading above"),
    ("glycol,40 g", "Total,40 g", "a row 'Total'", "adds them up"),
    ("glycol,40 g", 'glycol,"40" g', "a quote", "both ends"),
    ("glycol,40 g", 'glycol,"40 g', "a quote", "both ends"),
    ("Ingredient,Amount", "Stuff,Amount", "no row with the headings", "ingredient, amount, unit"),
])
def test_mistakes_in_tables(tmp_path, old, new, found, expected):
    said = complaint(save(tmp_path / "a.csv", CSV.replace(old, new)))
    assert found in said and expected in said, said


def test_decimal_commas_and_points_in_one_file_are_refused(tmp_path):
    said = complaint(save(tmp_path / "a.csv", with_semicolons().replace("40 g", "1.000 g")))
    assert "'1.000 g' in a file with decimal commas" in said
    said = complaint(save(tmp_path / "b.csv", CSV.replace("40 g", '"1,000 g"')))
    assert "decimal point and no thousands mark" in said


def test_the_table_carries_every_field_but_lists_of_mappings():
    nested = {"film": Film, "wanted": Wanted, "measured": Measured}
    expected = {f"{name}.{inner}" for name, model in nested.items() for inner in model.model_fields}
    expected |= {name for name in Recipe.model_fields if name not in ("ingredients", "materials", *nested)}
    expected |= {f"ground.{inner}" for inner in SpectrumReference.model_fields}
    assert set(FIELDS) == expected


@settings(max_examples=200, deadline=None)
@given(st.lists(st.lists(st.text(alphabet='ab,;" \n1é', max_size=6).map(str.strip), min_size=1, max_size=4),
                min_size=1, max_size=5), st.sampled_from(",;\t"))
def test_delimited_rows_agree_with_the_standard_library(rows, delimiter):
    # Source: RFC 4180 as Python's csv module writes it.
    out = io.StringIO()
    csv.writer(out, delimiter=delimiter, quoting=csv.QUOTE_ALL, lineterminator="\n").writerows(rows)
    read = delimited_rows(out.getvalue(), delimiter, "x.csv")
    assert [[cell.value for cell in row] for row in read[:-1]] == rows
    assert [cell.value for cell in read[-1]] == [""]


# --- workbooks -------------------------------------------------------------------------------------------

PLAIN = [["what", "ink"], ["ingredient", "amount", "unit"], ["water", 950, "g"], ["blue", 0.05, "%"]]


def test_a_percent_cell_means_what_it_shows(tmp_path):
    # ISO/IEC 29500-1, 18.8.30: format 9 is 0 %, 10 is 0.00 %; a cell shown as 5 % holds 0.05.
    def amounts(path: Path) -> list[str]:
        return [line.amount for line in read_recipe(path).recipe.ingredients]

    assert amounts(workbook(tmp_path / "a.xlsx", PLAIN)) == ["950 g", "0.05 %"]
    assert amounts(workbook(tmp_path / "b.xlsx", PLAIN, formats={"B4": "0%"})) == ["950 g", "5 %"]
    assert amounts(workbook(tmp_path / "c.xlsx", PLAIN, formats={"B4": "0.000%"})) == ["950 g", "5 %"]
    assert amounts(workbook(tmp_path / "d.xlsx", PLAIN, formats={"B4": '0.0 "%"'})) == ["950 g", "0.05 %"]


def test_cells_without_a_plain_value_are_told(tmp_path):
    def with_cell(value):
        return workbook(tmp_path / "a.xlsx", [*PLAIN[:3], ["blue", value, "g"]])

    assert ":4:2  ingredients\n  found a formula whose value was not saved" in complaint(with_cell("=1+1"))
    assert "found a formula that ended in an error" in complaint(with_cell("#DIV/0!"))
    assert "2026-12-01" in complaint(with_cell(date(2026, 12, 1)))
    assert "True" in complaint(with_cell(True))


def test_the_recipe_may_stand_on_a_later_sheet(tmp_path):
    book = openpyxl.Workbook()
    book.active["A1"] = "nothing here"
    sheet = book.create_sheet("recipe")
    for row in PLAIN:
        sheet.append(row)
    book.save(tmp_path / "a.xlsx")
    assert len(read_recipe(tmp_path / "a.xlsx").recipe.ingredients) == 2


def rewritten(path: Path, change) -> Path:
    """A workbook whose parts went through `change(name, content)`."""
    with zipfile.ZipFile(path) as archive:
        parts = {name: archive.read(name) for name in archive.namelist()}
    with zipfile.ZipFile(path, "w", zipfile.ZIP_DEFLATED) as archive:
        for name, content in parts.items():
            archive.writestr(name, change(name, content))
    return path


@pytest.mark.parametrize("old, new, found", [
    (b'r="B3"', b'r="XFD1048576"', "reaches row 1,048,576"),
    (b'<row r="3">', b'<row r="1048576">', "reaches row 1,048,576"),
    (b'r="B3"', b'r="ZZZZ999999999"', "reaches row"),
    (b'r="B3"', b'r="-3"', "reaches row"),
    (b"<sheetData>", b"<sheetData><", "damaged XML"),
    (b"<worksheet", b'<!DOCTYPE x [<!ENTITY a "aa">]><worksheet', "a document type"),
])
def test_hostile_sheets_are_refused_before_they_are_opened(tmp_path, old, new, found):
    def change(name: str, content: bytes) -> bytes:
        if name.startswith("xl/worksheets/"):
            assert old in content
            return content.replace(old, new, 1)
        return content

    said = complaint(rewritten(workbook(tmp_path / "a.xlsx", PLAIN), change))
    assert found in said, said


def test_zip_bombs_are_refused_by_what_they_would_unpack_to(tmp_path):
    path = workbook(tmp_path / "a.xlsx", PLAIN)
    rewritten(path, lambda name, content: content + b" " * 30_000_000 if "sheet1" in name else content)
    assert path.stat().st_size < 100_000 and "unpacks to" in complaint(path)
    many = workbook(tmp_path / "b.xlsx", PLAIN)
    with zipfile.ZipFile(many, "a") as archive:
        for n in range(600):
            archive.writestr(f"xl/media/{n}.png", b"")
    assert "609 parts" in complaint(many) or "parts that unpacks" in complaint(many)


@pytest.mark.parametrize("content, found", [
    (b"", "not a readable workbook"), (b"PK\x03\x04 and no more", "not a readable workbook"),
    (b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1" * 99, "not a readable workbook"),
])
def test_what_is_no_workbook_is_told(tmp_path, content, found):
    (tmp_path / "a.xlsx").write_bytes(content)
    assert found in complaint(tmp_path / "a.xlsx")
    with zipfile.ZipFile(tmp_path / "b.xlsx", "w") as archive:
        archive.writestr("hello.txt", "hello")
    assert "without xl/workbook.xml" in complaint(tmp_path / "b.xlsx")


def test_a_file_of_another_kind_is_told(tmp_path):
    assert ".yaml, .yml" in complaint(tmp_path / "a.docx")
    assert "no file of this name" in complaint(tmp_path / "a.yaml")
