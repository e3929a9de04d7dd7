"""2,000 broken recipe files: each reads fine or is refused with places; no other exception, no hang."""

from __future__ import annotations

import random
import shutil
import time
from pathlib import Path

import openpyxl
import pytest
from breaking import broken

from formcheck.recipe.batch import build_batch
from formcheck.recipe.read import read_recipe
from formcheck.trouble import InputError

HERE = Path(__file__).resolve().parent
DEMO = HERE.parents[1] / "demo_formulations"
SAMPLES = sorted([*DEMO.glob("*.yaml"), *DEMO.glob("*.csv"), *(HERE / "data").glob("*.yaml"),
                  *(HERE / "data").glob("*.csv")])
FILES, CHUNK = 2000, 100
MOST_SECONDS = 2.0  # of processor time, so that a busy machine fails no test


@pytest.fixture(scope="module")
def workshop(tmp_path_factory) -> Path:
    """A copy of the demo workshop, so that broken recipes still find its shelf and spectra."""
    folder = tmp_path_factory.mktemp("broken") / "workshop"
    shutil.copytree(DEMO, folder)
    return folder


def outcome(path: Path) -> str:
    """`read`, or the message of the refusal. Anything else that is raised fails the test."""
    start = time.process_time()
    try:
        build_batch([read_recipe(path)])
        said = "read"
    except InputError as error:
        assert error.problems, "a refusal without a problem"
        assert all(problem.place.file and problem.found and problem.expected for problem in error.problems)
        said = str(error)
    assert time.process_time() - start < MOST_SECONDS
    return said


@pytest.mark.parametrize("first", range(0, FILES, CHUNK))
def test_broken_files_read_fine_or_are_refused(workshop, first):
    said = []
    for seed in range(first, first + CHUNK):
        sample = SAMPLES[seed % len(SAMPLES)]
        path = workshop / f"broken{sample.suffix}"
        path.write_bytes(broken(sample.read_text(encoding="utf-8"), seed))
        said.append(outcome(path))
    refused = [message for message in said if message != "read"]
    assert len(refused) > CHUNK // 3, "the edits break too little to test anything"
    assert len(set(refused)) > CHUNK // 5
    assert all("broken" in message or ".yaml" in message for message in refused)
    assert all(len(message) < 20_000 for message in refused)


def test_samples_themselves_read_fine():
    for sample in SAMPLES:
        assert read_recipe(sample).recipe.ingredients


def test_fifty_megabytes_are_refused_by_their_size(tmp_path):
    for name in ("a.yaml", "a.csv", "a.xlsx"):
        path = tmp_path / name
        with path.open("wb") as file:
            file.write(b"note: " + b"x" * 50_000_000)
        assert "50,000,006 bytes" in outcome(path)
        path.unlink()


def test_broken_workbooks(tmp_path):
    book = openpyxl.Workbook()
    for row in (["what", "ink"], ["batch", "1 kg"], ["ingredient", "amount", "unit"], ["water", 1, "kg"]):
        book.active.append(row)
    path = tmp_path / "a.xlsx"
    book.save(path)
    whole = path.read_bytes()
    assert outcome(path) == "read"
    said = set()
    for seed in range(150):
        chance = random.Random(seed)
        raw = bytearray(whole)
        for _ in range(chance.choice([1, 3, 30])):
            raw[chance.randrange(len(raw))] = chance.randrange(256)
        path.write_bytes(raw[: chance.choice([len(raw), len(raw), chance.randrange(len(raw))])])
        said.add(outcome(path))
    assert len(said) > 10
