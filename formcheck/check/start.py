"""`formcheck start`: the demo workshop laid out in a folder of the user's."""

from __future__ import annotations

import shutil
import tempfile
from importlib.util import find_spec
from pathlib import Path

from formcheck.trouble import trouble

FIRST = "harbour_blue_screen_ink.yaml"
LEFT_OUT = shutil.ignore_patterns("__pycache__", "*.py")


def workshop_folder() -> Path:
    """Where the demo workshop is installed."""
    spec = find_spec("demo_formulations")
    if spec is None or not spec.submodule_search_locations:
        raise trouble("demo_formulations", "no installed package of this name", "formcheck installed with its demo")
    return Path(next(iter(spec.submodule_search_locations)))


def lay_out_workshop(folder: Path) -> Path:
    """Copy the workshop to `folder` whole or not at all; returns the recipe to begin with.

    Raises
    ------
    InputError
        something stands at `folder` already, or it cannot be written.
    """
    try:
        if folder.exists():
            raise trouble(str(folder), "something of this name already", "a folder that does not exist yet")
        folder.parent.mkdir(parents=True, exist_ok=True)
        beside = Path(tempfile.mkdtemp(dir=folder.parent, prefix=f".{folder.name}."))
        try:
            shutil.copytree(workshop_folder(), beside / "workshop", ignore=LEFT_OUT)
            (beside / "workshop").rename(folder)
        finally:
            shutil.rmtree(beside, ignore_errors=True)
    except OSError as error:
        raise trouble(str(folder), f"a place that cannot be written to ({error.strerror})",
                      "a folder in a place that may be written to") from None
    return folder / FIRST
