"""The 2,000 broken recipe files of tests/recipe through the whole check, and files that a recipe leans on.

Each ends as a Check that can be shown and read back, or as a refusal with its places; never another exception,
never a hang. A few go through the real command as well.
"""

from __future__ import annotations

import contextlib
import random
import shutil
import subprocess
import sys
import time
import warnings
from pathlib import Path

import pytest
import yaml
from lessened import DAY

from formcheck.check.record import Check
from formcheck.check.run import check_file, check_recipe
from formcheck.documents import Document
from formcheck.hazards.book import load_book
from formcheck.materials import builtin
from formcheck.recipe.read import written_recipe
from formcheck.report.page import page_html
from formcheck.trouble import InputError
from tests.recipe.breaking import broken

TOP = Path(__file__).resolve().parents[2]
DEMO, DATA = TOP / "demo_formulations", TOP / "tests" / "recipe" / "data"
SAMPLES = sorted([*DEMO.glob("*.yaml"), *DEMO.glob("*.csv"), *DATA.glob("*.yaml"), *DATA.glob("*.csv")])
BOOK = load_book()
FILES, CHUNK = 2000, 200
MOST_SECONDS = 2.0  # of processor time, so that a busy machine fails no test
SHOWN_EACH = 7  # of so many checks one is written as a page


@pytest.fixture(scope="module")
def workshop(tmp_path_factory) -> Path:
    """A copy of the demo workshop, so that broken recipes still find its shelf and spectra."""
    folder = tmp_path_factory.mktemp("broken") / "workshop"
    shutil.copytree(DEMO, folder)
    return folder


def outcome(path: Path) -> Check | str:
    """The Check, or the message of the refusal. Anything else that is raised fails the test."""
    start = time.process_time()
    try:
        with warnings.catch_warnings():
            warnings.simplefilter("error", RuntimeWarning)  # a number that ran over, shown to no one
            found: Check | str = check_file(path, as_of=DAY, book=BOOK)
    except InputError as error:
        assert error.problems, "a refusal without a problem"
        assert all(problem.place.file and problem.found and problem.expected for problem in error.problems)
        found = str(error)
    assert time.process_time() - start < MOST_SECONDS
    return found


def assert_shows(check: Check) -> None:
    """What was checked can be written, read back, and holds no number that is none."""
    text = check.model_dump_json()
    assert "NaN" not in text and "Infinity" not in text
    assert Check.model_validate_json(text) == check


@pytest.mark.parametrize("first", range(0, FILES, CHUNK))
def test_broken_recipes_end_as_a_check_or_a_refusal(workshop, first):
    checked, refused = 0, []
    for seed in range(first, first + CHUNK):
        sample = SAMPLES[seed % len(SAMPLES)]
        path = workshop / f"broken{sample.suffix}"
        path.write_bytes(broken(sample.read_text(encoding="utf-8"), seed))
        found = outcome(path)
        if isinstance(found, str):
            refused.append(found)
            continue
        checked += 1
        assert_shows(found)
        if checked % SHOWN_EACH == 0:
            assert page_html(found).startswith("<!")
    assert checked > CHUNK // 50 and len(refused) > CHUNK // 2, "the edits break too little or too much"
    assert len(set(refused)) > CHUNK // 5


# --- recipes that are sound and strange ------------------------------------------------------------------

UNITS = ["% w/w", "% w/w", "% w/w", "g/L", "g", "mL", "parts", "% v/v", "mg"]


def strange_recipe(seed: int) -> dict:
    """Any materials of the shelf in any amounts, under any conditions that the form allows."""
    chance = random.Random(seed)
    names = sorted(builtin.index()["records"])
    lines = [{"material": name, "amount": f"{10 ** chance.uniform(-4, 1.2):.6g} {chance.choice(UNITS)}",
              **({"purity": f"{chance.uniform(1, 100):.3g} %"} if chance.random() < 0.15 else {})}
             for name in chance.sample(names, chance.randint(1, 7))]
    rest = {"material": "water" if chance.random() < 0.7 else chance.choice(names), "amount": "to make up"}
    optional = {
        "batch": chance.choice(["1 kg", "1 L", "10 mL", "200 kg", "5 g"]),
        "film": chance.choice([{"wet": "60 um", "sd": "5 um"}, {"dry": "10 um"}, {"dry": "1 nm"}, {"wet": "90 mm"}]),
        "path_length": chance.choice(["10 mm", "1 um", "1 m"]), "ground": chance.choice(["chart_black", "ideal_white"]),
        "wanted": {"lab": [chance.uniform(0, 100), chance.uniform(-100, 100), 0], "tolerance": 0.01},
        "lights": chance.sample(["D65", "A", "FL11", "LED-B3", "D50"], 2),
        "measured": {"ph": chance.uniform(-1, 15)}, "weighing": chance.choice(["0.01 g", "1 g", "1 mg"]),
        "binder_index": chance.choice([1.0, 1.3, 3.0]), "specular": "excluded",
        "use": chance.sample(["consumer", "toy", "tattoo", "textile", "metal"], 2), "sold_in": ["EU", "US", "CA"],
        "acts": ["milling", "spraying", "heating"]}
    chosen = {key: value for key, value in optional.items() if chance.random() < 0.6}
    what = chance.choice(["solution", "dye_bath", "ink", "stain", "coating"])
    return {"formcheck": 1, "title": "strange", "what": what, "ingredients": [*lines, rest], **chosen}


def test_sound_recipes_of_any_materials_are_checked():
    shades = checks = 0
    for seed in range(110):
        data = strange_recipe(seed)
        try:
            found = check_recipe(written_recipe(Document("strange.yaml", data, {}), folder=DEMO), as_of=DAY, book=BOOK)
        except InputError:
            continue
        assert_shows(found)
        checks, shades = checks + 1, shades + (found.shade is not None)
    assert checks > 45 and shades > 5


# --- the real command ------------------------------------------------------------------------------------

def command(*words: str, folder: Path) -> subprocess.CompletedProcess:
    return subprocess.run([sys.executable, "-m", "formcheck", *words], cwd=folder, capture_output=True, text=True,
                          env={"PYTHONPATH": str(TOP), "PATH": "", "PYTHONIOENCODING": "utf-8"}, timeout=60)


@pytest.mark.parametrize("seed", range(12))
def test_the_command_refuses_without_a_traceback(workshop, seed):
    sample = SAMPLES[seed % len(SAMPLES)]
    path = workshop / f"real{seed}{sample.suffix}"
    path.write_bytes(broken(sample.read_text(encoding="utf-8"), seed))
    done = command("check", path.name, folder=workshop)
    assert done.returncode in (0, 1, 2)
    assert "Traceback" not in done.stderr + done.stdout
    if done.returncode == 2:
        assert path.name in done.stderr and "found" in done.stderr and not done.stdout


def test_the_command_refuses_bytes_folders_and_fifty_megabytes(tmp_path):
    (tmp_path / "bytes.yaml").write_bytes(bytes(range(256)))
    (tmp_path / "folder.yaml").mkdir()
    with (tmp_path / "large.yaml").open("wb") as file:
        file.write(b"note: " + b"x" * 50_000_000)
    done = command("check", "bytes.yaml", "folder.yaml", "large.yaml", "not there.yaml", "recipe.docx", folder=tmp_path)
    assert done.returncode == 2 and "Traceback" not in done.stderr
    for said in ("bytes.yaml", "a folder", "50,000,006 bytes", "no file of this name", "'.docx'"):
        assert said in done.stderr


# --- what a recipe leans on ------------------------------------------------------------------------------

def refusal(path: Path, **more) -> InputError:
    with pytest.raises(InputError) as caught:
        check_file(path, as_of=DAY, book=None if "rule_folders" in more else BOOK, **more)
    assert all(problem.found and problem.expected for problem in caught.value.problems)
    return caught.value


def edited(path: Path, old: str, new: str) -> int:
    """The file with one thing changed; returns its line."""
    text = path.read_text(encoding="utf-8")
    assert old in text
    path.write_text(text.replace(old, new, 1), encoding="utf-8")
    return text[: text.index(old)].count("\n") + 1


@pytest.fixture
def fresh(tmp_path) -> Path:
    folder = tmp_path / "workshop"
    shutil.copytree(DEMO, folder)
    return folder


HARBOUR = "harbour_blue_screen_ink.yaml"
BROKEN_K_S = {
    "NaN": ("0.3004", "NaN", "'NaN'"),
    "text": ("0.3004", "strong", "'strong'"),
    "cell gone": (",0.3004", "", "a row of 2 cells"),
    "negative": ("0.3004", "-0.3", "-0.3"),
    "infinite": ("0.3004", "1e999", "1e999"),
    "twice": ("390,", "380,", "a second time"),
    "turns back": ("400,", "385,", "after 390"),
    "micrometres": ("380,", "0.38,", "0.38"),
}


@pytest.mark.parametrize("case", BROKEN_K_S)
def test_a_broken_k_and_s_file_is_refused_at_its_line(fresh, case):
    old, new, found = BROKEN_K_S[case]
    line = edited(fresh / "spectra" / "phthalo_blue_k_s.csv", old, new)
    said = str(refusal(fresh / HARBOUR))
    assert f"phthalo_blue_k_s.csv:{line}:" in said and found in said


def test_a_k_and_s_file_with_other_columns(fresh):
    edited(fresh / "spectra" / "phthalo_blue_k_s.csv", "K_per_um", "absorption")
    said = str(refusal(fresh / HARBOUR))
    assert "phthalo_blue_k_s.csv:" in said and "the columns wavelength_nm, K_per_um, S_per_um" in said


def test_a_k_and_s_file_that_is_not_there(fresh):
    (fresh / "spectra" / "phthalo_blue_k_s.csv").unlink()
    assert "phthalo_blue_k_s.csv" in str(refusal(fresh / HARBOUR))


BROKEN_GROUNDS = {
    "percent": (lambda text: "wavelength_nm,reflectance\n400,80\n500,81\n600,82\n700,82\n",
                ["`scale: percent` or `scale: fraction`", f"{HARBOUR}:", "print_card.csv:4:5"]),
    "NaN": (lambda text: text.replace("0.8016", "NaN"), ["print_card.csv:4:"]),
    "text": (lambda text: text.replace("0.8016", "bright"), ["print_card.csv:4:", "'bright'"]),
    "empty": (lambda text: "", ["print_card.csv:1", "empty"]),
    "one row": (lambda text: "wavelength_nm,reflectance\n400,0.8\n", ["print_card.csv:2", "single row"]),
    "prose": (lambda text: "The card was white.\n", ["print_card.csv:1", "no line that begins with a number"]),
}


@pytest.mark.parametrize("case", BROKEN_GROUNDS)
def test_a_broken_ground_file_is_refused(fresh, case):
    change, expected = BROKEN_GROUNDS[case]
    path = fresh / "spectra" / "print_card.csv"
    path.write_text(change(path.read_text(encoding="utf-8")), encoding="utf-8")
    said = str(refusal(fresh / HARBOUR))
    for words in expected:
        assert words in said


def test_a_wanted_spectrum_in_percent_is_told_at_the_wanted_shade(fresh):
    (fresh / "wanted.csv").write_text("wavelength_nm,reflectance\n400,8\n500,9\n700,7\n", encoding="utf-8")
    text = (fresh / HARBOUR).read_text(encoding="utf-8").splitlines()
    text = ["wanted: {spectrum: wanted.csv}" if line.startswith("wanted:") else line for line in text]
    (fresh / HARBOUR).write_text("\n".join(text), encoding="utf-8")
    error = refusal(fresh / HARBOUR)
    assert error.problems[0].field == "wanted.spectrum" and error.problems[0].place.line == 1 + next(
        n for n, line in enumerate(text) if line.startswith("wanted:"))


@pytest.mark.parametrize("old, new, said", [
    ("lights: [D65, A, LED-B3]", "lights: [LED-B33, A]", ["lights[0]", "did you mean 'LED-B3'"]),
    ("light: D65", "light: D655", ["wanted.light", "did you mean 'D65"]),
    ("ground: {spectrum: spectra/print_card.csv}", "ground: chart_wite", ["ground", "did you mean 'chart_white'"]),
    ("ground: {spectrum: spectra/print_card.csv}", "ground: {spectrum: ../nowhere.csv}", ["nowhere.csv"]),
    ("material: harbour blue paste", "material: harbor blue paste", ["did you mean 'harbour blue paste'"]),
    ("shelf: shelf", "shelf: shelve", ["no folder 'shelve'"]),
])
def test_a_wrong_name_is_told_with_its_place(fresh, old, new, said):
    edited(fresh / HARBOUR, old, new)
    error = refusal(fresh / HARBOUR)
    assert all(words in str(error) for words in said)
    assert error.problems[0].place.line or "nowhere" in new


BROKEN_RECORDS = {
    "unknown key": ("density_g_cm3", "density_g_cm2", "did you mean 'density_g_cm3'"),
    "below nothing": ("density_g_cm3: {value: 1.6", "density_g_cm3: {value: -1.6", "-1.6"),
    "kg per m3": ("density_g_cm3: {value: 1.6", "density_g_cm3: {value: 1600.0", "1600"),
    "no such source": ("source: invented}", "source: hearsay}", "'hearsay'"),
    "no such element": ("formula: {value: C32H16CuN8", "formula: {value: C32H16XxN8", "Xx"),
    "classified as nothing": ("hazards: {status: not_classified", "hazards: {status: classified", "0 entries"),
    "window turned round": ("ph_window: {low: 2, high: 13", "ph_window: {low: 13, high: 2", "from pH 13 to 2"),
    "end without a figure": ("ph_window: {low: 2, high: 13", "ph_window: {low: 2", "`above` with `high`"),
    "an alias": ("kind: pigment", "kind: *pigment", "an alias"),
}


@pytest.mark.parametrize("case", BROKEN_RECORDS)
def test_a_broken_record_of_the_shelf_is_told_with_its_place(fresh, case):
    old, new, found = BROKEN_RECORDS[case]
    line = edited(fresh / "shelf" / "harbour_blue_pigment.yaml", old, new)
    said = str(refusal(fresh / HARBOUR))
    assert f"harbour_blue_pigment.yaml:{line}:" in said and found in said


def test_a_composition_that_holds_itself_is_refused(fresh):
    edited(fresh / "shelf" / "harbour_blue_paste.yaml", "material: water", "material: harbour_blue_paste")
    assert "contains itself" in str(refusal(fresh / HARBOUR))


NUMBERS = [0, -1, 1e308, -1e308, 1e-308, 1e12]


def slots(data, path=()):
    for key, value in list(data.items() if isinstance(data, dict) else enumerate(data)):
        if isinstance(value, dict | list):
            yield from slots(value, (*path, key))
        elif isinstance(value, int | float) and not isinstance(value, bool):
            yield data, key, (*path, key)


@pytest.mark.parametrize("recipe, record", [
    ("tide_mark_indicator_ink.yaml", "phenol_red"), ("silver_lantern_paint.yaml", "quay_acrylic_dispersion"),
    ("brick_red_masonry_coating.yaml", "linseed_oil"), ("discharge_bleach_paste.yaml", "citric_acid"),
    ("heritage_sign_yellow.yaml", "lead_chromate"), ("estimated_cyanine_ink.yaml", "tin_lantern_cyanine"),
])
def test_no_number_in_a_record_breaks_a_formula(fresh, recipe, record):
    """Every number of a record in turn nothing, negative, huge or tiny: a Check or a refusal."""
    shelf_file = fresh / "shelf" / f"{record}.yaml"
    data = yaml.safe_load(shelf_file.read_text(encoding="utf-8")) if shelf_file.exists() else (
        builtin.built_in(record).model_dump(mode="json", exclude_unset=True))
    recipe_data = yaml.safe_load((fresh / recipe).read_text(encoding="utf-8"))
    tried = 0
    for holder, key, _ in slots(data):
        kept = holder[key]
        for number in NUMBERS:
            holder[key] = int(number) if isinstance(kept, int) else float(number)
            tried += 1
            document = Document(recipe, {**recipe_data, "materials": [data]}, {})
            with contextlib.suppress(InputError):
                assert_shows(check_recipe(written_recipe(document, folder=fresh), as_of=DAY, book=BOOK))
        holder[key] = kept
    assert tried >= 12


# --- rule packs ------------------------------------------------------------------------------------------

BROKEN_RULES = {
    "not a rule": ("title: x\n", "no `kind` here"),
    "unknown kind": ("kind: limit_on_sums\n", "did you mean 'limit_on_sum'"),
    "unknown key": ("kind: caution\nid: own-rule\nwher: {group: [x]}\n", "'wher'"),
    "not YAML": ("kind: [\n", "not YAML"),
    "empty": ("", "an empty file"),
}


@pytest.mark.parametrize("case", BROKEN_RULES)
def test_a_broken_rule_pack_is_told_with_its_file(fresh, tmp_path, case):
    text, found = BROKEN_RULES[case]
    pack = tmp_path / "pack"
    pack.mkdir()
    (pack / "own_rule.yaml").write_text(text, encoding="utf-8")
    said = str(refusal(fresh / HARBOUR, rule_folders=[pack]))
    assert "own_rule.yaml:" in said and found in said


def test_a_rule_pack_that_is_not_there(fresh, tmp_path):
    assert "no folder of this name" in str(refusal(fresh / HARBOUR, rule_folders=[tmp_path / "none"]))


def test_a_rule_whose_id_is_taken(fresh, tmp_path):
    taken = next(iter(BOOK.written.values()))
    pack = tmp_path / "pack"
    pack.mkdir()
    shutil.copy(taken.file, pack)
    said = str(refusal(fresh / HARBOUR, rule_folders=[pack]))
    assert taken.rule.id in said and "already in" in said
