"""A cold `formcheck check` of a demo recipe against the bare import of the libraries it stands on.

Each run is a fresh process; the two take turns, so that a busy machine slows both alike. Printed: the median of
each, the ratio of the medians, and the median of the ratios of neighbouring runs. The aim is at most 3 (issue 2).

    python benchmarks/check_start.py [--runs 15] [RECIPE]
"""

from __future__ import annotations

import argparse
import statistics
import subprocess
import sys
import time
from pathlib import Path

TOP = Path(__file__).resolve().parent.parent
RECIPE = TOP / "demo_formulations" / "harbour_blue_screen_ink.yaml"
BARE = [sys.executable, "-c", "import numpy, pydantic, typer, rich"]
AIM = 3.0


def seconds(command: list[str]) -> float:
    """Wall time of one fresh process; a check that holds something ends with 1, which is no failure."""
    start = time.perf_counter()
    done = subprocess.run(command, cwd=TOP, stdout=subprocess.DEVNULL, stderr=subprocess.PIPE)
    taken = time.perf_counter() - start
    if done.returncode not in (0, 1) or done.stderr:
        raise SystemExit(f"{' '.join(command)} ended with {done.returncode}:\n{done.stderr.decode()}")
    return taken


def main() -> None:
    words = argparse.ArgumentParser(description=__doc__.splitlines()[0])
    words.add_argument("recipe", nargs="?", type=Path, default=RECIPE)
    words.add_argument("--runs", type=int, default=15)
    asked = words.parse_args()
    check = [sys.executable, "-m", "formcheck", "check", str(asked.recipe.resolve())]
    for command in (BARE, check):  # once for the disk and the byte code
        seconds(command)
    pairs = [(seconds(BARE), seconds(check)) for _ in range(asked.runs)]
    bare, whole = (statistics.median(times) for times in zip(*pairs, strict=True))
    neighbours = statistics.median(check_s / bare_s for bare_s, check_s in pairs)
    print(f"recipe                     {asked.recipe.name}")
    print(f"runs, taking turns         {asked.runs}")
    print(f"bare imports, median       {1000 * bare:.0f} ms")
    print(f"formcheck check, median    {1000 * whole:.0f} ms")
    print(f"ratio of the medians       {whole / bare:.2f}   (aim: at most {AIM:g})")
    print(f"median of the ratios       {neighbours:.2f}")


if __name__ == "__main__":
    main()
