"""Every command as a maker calls it: what it prints, where, and its exit code; a message for each mistake."""

from __future__ import annotations

import gc
import json
import os
import re
import subprocess
import sys
from pathlib import Path

import pytest
from jsonschema import Draft202012Validator

from formcheck import __version__
from formcheck.check.record import DEFERRAL, Check
from formcheck.check.record_estimate import Estimate
from formcheck.cli import HELD, NOTHING_HELD, UNUSABLE, main

TOP = Path(__file__).resolve().parents[2]
DEMO = TOP / "demo_formulations"
SOUND, HELD_BACK = str(DEMO / "midnight_black_ink.yaml"), str(DEMO / "heritage_sign_yellow.yaml")
DAY = ("--as-of", "2026-12-01")


@pytest.fixture
def run(monkeypatch, capsys):
    """Calls the console entry in this process: (exit code, stdout, stderr)."""

    def call(*words: object) -> tuple[int, str, str]:
        monkeypatch.setattr(sys, "argv", ["formcheck", *map(str, words)])
        try:
            main()
            code: object = 0
        except SystemExit as stopped:
            code = stopped.code
        finally:
            gc.enable()
        out, err = capsys.readouterr()
        assert "Traceback" not in out + err
        return int(code or 0), out, err

    return call


def real(*words: str, **environment: str) -> subprocess.CompletedProcess:
    """The command in a process of its own."""
    return subprocess.run([sys.executable, "-m", "formcheck", *words], cwd=TOP, capture_output=True,
                          env={**os.environ, **environment}, timeout=120)


# --- check -----------------------------------------------------------------------------------------------

def test_nothing_held_is_0_and_something_held_is_1(run):
    code, out, err = run("check", SOUND, *DAY)
    assert code == NOTHING_HELD and "Midnight black ink" in out and not err
    code, out, _ = run("check", HELD_BACK, *DAY)
    assert code == HELD and "us-lead-in-dry-film" in out


def test_the_deferral_ends_every_check(run):
    _, out, _ = run("check", SOUND, *DAY)
    assert " ".join(out.split()).endswith(DEFERRAL)


def test_what_cannot_be_used_is_2_with_a_message_on_stderr(run, tmp_path):
    path = tmp_path / "odd.yaml"
    path.write_text("formcheck: 1\ntitle: odd\nwhat: soluton\ningredients:\n  - {material: water, amount: 5}\n")
    code, out, err = run("check", path)
    assert code == UNUSABLE and not out
    assert "odd.yaml:3:1" in err and "did you mean 'solution'" in err and "odd.yaml:5:23" in err


def test_of_several_files_the_usable_ones_are_shown_and_the_others_told(run, tmp_path):
    code, out, err = run("check", SOUND, tmp_path / "none.yaml", HELD_BACK, *DAY)
    assert code == UNUSABLE and "no file of this name" in err
    assert "Midnight black ink" in out and "Heritage sign yellow" in out
    code, out, _ = run("check", SOUND, HELD_BACK, *DAY)
    assert code == HELD


def test_json_is_the_whole_check_by_its_schema(run):
    _, schema, _ = run("schema", "--check")
    validator = Draft202012Validator(json.loads(schema))
    for file in sorted(DEMO.glob("*.yaml")):
        code, out, err = run("check", file, "--json", *DAY)
        validator.validate(json.loads(out))
        read_back = Check.model_validate_json(out)
        assert json.loads(read_back.model_dump_json()) == json.loads(out)
        assert code == (HELD if read_back.held else NOTHING_HELD) and not err
        assert read_back.as_of.isoformat() == DAY[1] and read_back.deferral == DEFERRAL


def test_json_of_several_files_is_a_list_however_many_are_usable(run, tmp_path):
    code, out, _ = run("check", SOUND, HELD_BACK, "--json", *DAY)
    assert [one["title"] for one in json.loads(out)] == ["Midnight black ink", "Heritage sign yellow"]
    code, out, err = run("check", SOUND, tmp_path / "none.yaml", "--json", *DAY)
    assert code == UNUSABLE and [one["title"] for one in json.loads(out)] == ["Midnight black ink"] and err
    code, out, err = run("check", tmp_path / "none.yaml", "--json", *DAY)
    assert code == UNUSABLE and out == "" and err


def test_a_spreadsheet_says_the_same_as_the_yaml_of_it(run):
    _, of_yaml, _ = run("check", DEMO / "madder_rose_dye_bath.yaml", "--json", *DAY)
    _, of_csv, _ = run("check", DEMO / "madder_rose_dye_bath.csv", "--json", *DAY)
    one, other = json.loads(of_yaml), json.loads(of_csv)
    assert [line["mass_g"] for line in other["composition"]] == pytest.approx(
        [line["mass_g"] for line in one["composition"]])
    assert other["shade"]["swatch"] == one["shade"]["swatch"] and other["ph"]["value"] == one["ph"]["value"]


def test_the_day_decides_which_rules_are_in_force(run):
    """Lead in paint: the 0.009 % of 16 CFR 1303 took effect on 14 August 2009."""

    def lead(day: str) -> list[float]:
        _, out, _ = run("check", HELD_BACK, "--json", "--as-of", day)
        return [f["limit"] for f in json.loads(out)["findings"] if f["rule_id"] == "us-lead-in-dry-film"]

    assert lead("2009-08-13") == [] and lead("2009-08-14") == [pytest.approx(0.009)]


@pytest.mark.parametrize("day", ["2026-13-01", "yesterday", "01.12.2026", "", "2026-12-01T00:00"])
def test_a_wrong_day_is_refused(run, day):
    code, out, err = run("check", SOUND, "--as-of", day)
    assert code == UNUSABLE and not out and "--as-of" in err and "a date such as 2026-12-01" in err


def test_a_shelf_and_rules_of_ones_own(run, tmp_path):
    shelf, rules = tmp_path / "shelf", tmp_path / "rules"
    shelf.mkdir(), rules.mkdir()
    (shelf / "mystery.yaml").write_text("id: mystery_white\nnames: [mystery white]\nkind: pigment\n")
    recipe = tmp_path / "own.yaml"
    recipe.write_text("formcheck: 1\ntitle: own\nwhat: coating\ningredients:\n"
                      "  - {material: water, amount: 90 % w/w}\n  - {material: mystery white, amount: 10 % w/w}\n")
    code, _, err = run("check", recipe, *DAY)
    assert code == UNUSABLE and "'mystery white', which no shelf knows" in err
    rule = next((TOP / "hazard_rules" / "common_practice").glob("dust_of_powder.yaml")).read_text()
    (rules / "house_dust.yaml").write_text(rule.replace("id: cp-dust-of-powder", "id: house-dust"))
    code, out, _ = run("check", recipe, "--shelf", shelf, "--rules", rules, "--json", *DAY)
    found = json.loads(out)
    assert found["composition"][1]["record_from"] == "your shelf"
    assert "house-dust" in {finding["rule_id"] for finding in found["findings"]}
    code, out, _ = run("why", "house-dust", "--rules", rules)
    assert code == 0 and "house-dust" in out


# --- pages -----------------------------------------------------------------------------------------------

def test_a_page_is_one_file_that_asks_for_nothing(run, tmp_path):
    page = tmp_path / "out.html"
    code, _, err = run("check", SOUND, HELD_BACK, "--page", page, *DAY)
    assert code == HELD and f"wrote {page}" in err
    text = page.read_text(encoding="utf-8")
    assert text.lower().startswith("<!doctype html") and text.rstrip().endswith("</html>")
    assert "Midnight black ink" in text and "Heritage sign yellow" in text and "<svg" in text
    reached = re.findall(r"""(?:src|href)\s*=\s*["']([^"']*)""", text)
    assert all(place.startswith(("#", "data:")) for place in reached), "the page reaches outside itself"
    assert not re.search(r"url\((?!['\"]?(#|data:))|@import|<script", text)
    assert list(tmp_path.iterdir()) == [page], "nothing is left beside the page"


@pytest.mark.parametrize("place", ["none/out.html", "a_file/out.html", "a_folder", "x" * 300 + ".html"])
@pytest.mark.parametrize("words", [("check", SOUND), ("estimate", "--box", "ring 6 0.84 nm")])
def test_a_page_that_cannot_be_written_is_told_and_leaves_nothing(run, tmp_path, words, place):
    (tmp_path / "a_file").write_text("kept")
    (tmp_path / "a_folder").mkdir()
    before = sorted(tmp_path.rglob("*"))
    code, _, err = run(*words, "--page", tmp_path / place)
    assert code == UNUSABLE and "cannot be written to" in err and "expected a file name" in err
    assert sorted(tmp_path.rglob("*")) == before and (tmp_path / "a_file").read_text() == "kept"


def test_a_page_stays_as_it_was_when_nothing_could_be_used(run, tmp_path):
    page = tmp_path / "out.html"
    page.write_text("the page of yesterday")
    code, _, _ = run("check", tmp_path / "none.yaml", "--page", page)
    assert code == UNUSABLE and page.read_text() == "the page of yesterday"


# --- schema ----------------------------------------------------------------------------------------------

def test_both_schemas_are_sound_draft_2020_12(run):
    for words in (("schema",), ("schema", "--check")):
        code, out, _ = run(*words)
        assert code == 0
        Draft202012Validator.check_schema(json.loads(out))


def test_the_schema_of_a_recipe_takes_the_demo_and_refuses_a_slip(run):
    _, out, _ = run("schema")
    validator = Draft202012Validator(json.loads(out))
    data = {"formcheck": 1, "title": "x", "what": "ink", "ingredients": [{"material": "water", "amount": "1 g"}]}
    validator.validate(data)
    assert list(validator.iter_errors({**data, "whta": "ink"})) and list(validator.iter_errors({**data, "what": 3}))


# --- start -----------------------------------------------------------------------------------------------

def test_start_lays_out_the_workshop_whole(run, tmp_path):
    folder = tmp_path / "deep" / "my workshop"
    code, _, err = run("start", folder)
    assert code == 0 and "try: formcheck check" in err
    laid_out = {path.relative_to(folder) for path in folder.rglob("*") if path.is_file()}
    there = {path.relative_to(DEMO) for path in DEMO.rglob("*")
             if path.is_file() and path.suffix != ".py" and "__pycache__" not in path.parts}
    assert laid_out == there and Path("README.md") in laid_out
    assert list(folder.parent.iterdir()) == [folder]
    code, out, _ = run("check", folder / "harbour_blue_screen_ink.yaml", *DAY)
    assert code in (NOTHING_HELD, HELD) and "Harbour blue" in out


def test_start_touches_nothing_that_is_there(run, tmp_path):
    (tmp_path / "mine").mkdir()
    (tmp_path / "mine" / "recipe.yaml").write_text("mine")
    (tmp_path / "a_file").write_text("mine")
    for place, said in (("mine", "something of this name already"), ("a_file", "something of this name already"),
                        ("a_file/inside", "cannot be written to"), ("y" * 300, "cannot be written to")):
        code, _, err = run("start", tmp_path / place)
        assert code == UNUSABLE and said in err
    assert (tmp_path / "mine" / "recipe.yaml").read_text() == "mine"
    assert sorted(path.name for path in tmp_path.iterdir()) == ["a_file", "mine"]


# --- shelf, why, estimate, version -----------------------------------------------------------------------

def test_shelf_lists_finds_and_shows_one_whole(run):
    code, out, _ = run("shelf")
    assert code == 0 and "phenol_red" in out and "titanium_dioxide" in out
    code, out, _ = run("shelf", "indicator")
    assert code == 0 and "phenol_red" in out and "titanium_dioxide" not in out
    code, out, _ = run("shelf", "phenol", "red")
    assert code == 0 and "143-74-8" in out, "CAS of phenol red"
    code, _, err = run("shelf", "phenol rad")
    assert code == UNUSABLE and "did you mean 'phenol red'" in err
    code, _, err = run("shelf", "--shelf", DEMO / "none")
    assert code == UNUSABLE and "no folder of this name" in err
    code, out, _ = run("shelf", "harbour blue paste", "--shelf", DEMO / "shelf")
    assert code == 0 and "Lantern Quay" in out


def test_why_shows_a_rule_whole_and_suggests(run):
    code, out, _ = run("why", "us-lead-in-dry-film")
    words = " ".join(out.split())
    assert code == 0 and "16 CFR" in words and "0.009" in words and "2009-08-14" in words
    code, out, err = run("why", "us-lead-in-dry-flim")
    assert code == UNUSABLE and not out and "did you mean 'us-lead-in-dry-film'" in err
    code, _, err = run("why", "us-lead-in-dry-film", "--as-of", "soon")
    assert code == UNUSABLE and "--as-of" in err


def test_estimate_in_words(run):
    code, out, _ = run("estimate", "--box", "chain 8 1.2 nm", "--box", "2 x ring 6 0.84 nm", "--json")
    found = Estimate.model_validate_json(out)
    assert code == 0 and len(found.forms[0].boxes) == 2 and found.forms[0].boxes[1].count == 2
    assert not found.forms[0].colourless and any(band.lambda_max_nm > 400 for band in found.forms[0].bands)
    code, out, _ = run("estimate", "--box", "ring 6 0.84 nm")
    assert code == 0 and "colourless" in out


def test_estimate_of_a_file_with_an_acid_and_a_base(run, tmp_path):
    path = tmp_path / "dye.yaml"
    path.write_text("title: two forms\nforms:\n"
                    "  - {name: acid, boxes: [{shape: ring, n_pi_electrons: 6, circumference_nm: 0.84}]}\n"
                    "  - {name: base, boxes: [{shape: chain, n_pi_electrons: 10, length_nm: 1.4}]}\n")
    page = tmp_path / "dye.html"
    code, out, _ = run("estimate", path, "--json", "--page", page)
    acid, base = Estimate.model_validate_json(out).forms
    assert code == 0 and acid.colourless and not base.colourless
    assert "two forms" in page.read_text(encoding="utf-8")


@pytest.mark.parametrize("words, said", [
    ((), "no box"), (("--box", "chain 8"), "'chain 8'"), (("--box", "chain eight 1.2 nm"), "chain eight"),
    (("--box", "plate 14 0.9 nm"), "two sides for a plate"), (("--box", "chain 7 1.2 nm"), "an even number"),
    (("--box", "chain 8 0 nm"), "0"), (("--box", "chain 8 900000 nm"), "900000"),
    (("--box", "chain 999 1.2 nm"), "999"),
    (("none.yaml",), "no file of this name"), (("--box", "ring 6 0.84 nm", "some.yaml"), "both in words and in a file"),
])
def test_estimate_refuses_what_is_no_box(run, words, said):
    code, out, err = run("estimate", *words)
    assert code == UNUSABLE and not out and said in err and "expected" in err


@pytest.mark.parametrize("text, said", [
    ("forms: []\n", "forms"), ("form: x\n", "did you mean 'forms'"), ("- 1\n", "a mapping"), ("", "empty"),
    ("forms:\n  - {boxes: [{shape: chain, n_pi_electrons: 8, circumference_nm: 1}]}\n", "`length_nm` alone"),
    ("forms:\n  - {boxes: [{shape: disc, n_pi_electrons: 8}]}\n", "disc"),
])
def test_estimate_refuses_a_broken_file_at_its_place(run, tmp_path, text, said):
    path = tmp_path / "dye.yaml"
    path.write_text(text)
    code, _, err = run("estimate", path)
    assert code == UNUSABLE and said in err and "dye.yaml:" in err


def test_version_and_help(run):
    assert run("--version")[:2] == (0, f"formcheck {__version__}\n")
    code, out, _ = run("--help")
    assert code == 0
    for name in ("check", "estimate", "shelf", "why", "schema", "start"):
        assert name in out
        assert run(name, "--help")[0] == 0


@pytest.mark.parametrize("words", [("chek",), ("check",), ("check", "--jason", SOUND), ("why",), ("start",)])
def test_words_that_are_no_command_are_2(run, words):
    code, _, err = run(*words)
    assert code == UNUSABLE and err


# --- a process of its own --------------------------------------------------------------------------------

def test_a_terminal_that_speaks_ascii_alone(tmp_path):
    recipe = tmp_path / "oel.yaml"
    recipe.write_text(Path(SOUND).read_text(encoding="utf-8").replace("Midnight black ink", "Tinte für Öl Δ"),
                      encoding="utf-8")
    shown = real("check", str(recipe), PYTHONIOENCODING="ascii")
    assert shown.returncode == 0 and b"Traceback" not in shown.stderr and shown.stdout.isascii()
    as_json = real("check", str(recipe), "--json", PYTHONIOENCODING="ascii")
    assert json.loads(as_json.stdout.decode("utf-8"))["title"] == "Tinte für Öl Δ"


def test_a_reader_that_turns_away_early():
    with subprocess.Popen([sys.executable, "-m", "formcheck", "shelf"], cwd=TOP, stdout=subprocess.PIPE,
                          stderr=subprocess.PIPE) as process:
        assert process.stdout is not None and process.stderr is not None
        process.stdout.readline()
        process.stdout.close()
        assert b"Traceback" not in process.stderr.read()


@pytest.mark.skipif(not Path("/dev/full").exists(), reason="no device that is always full")
def test_a_full_disk_is_told():
    with open("/dev/full", "wb") as full:
        done = subprocess.run([sys.executable, "-m", "formcheck", "check", SOUND], cwd=TOP, stdout=full,
                              stderr=subprocess.PIPE)
    assert done.returncode == UNUSABLE and b"Traceback" not in done.stderr and b"cannot write" in done.stderr
