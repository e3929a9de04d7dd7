"""The baked data files hold what colour-science holds; run scripts/bake_observers.py when they do not."""

import runpy
from pathlib import Path

import numpy as np
import pytest

from formcheck.colour import lights, tristimulus
from formcheck.colour.baked import read_baked

BAKE = runpy.run_path(str(Path(__file__).resolve().parents[2] / "scripts" / "bake_observers.py"))


@pytest.mark.parametrize("table, rows", [(tristimulus.TABLE, "observer_rows"), (lights.TABLE, "light_rows")])
def test_file_is_what_the_script_would_write(table, rows):
    columns = np.column_stack(list(read_baked(table).values()))
    np.testing.assert_allclose(columns, BAKE[rows](), rtol=1e-11)


def test_every_light_asked_for_is_there():
    assert lights.light_names() == BAKE["LIGHTS"]
    assert {"D65", "D50", "A", "FL11", "LED-B3"} <= set(lights.light_names())
