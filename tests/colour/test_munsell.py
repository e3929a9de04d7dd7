"""Munsell notation against colour-science, and against rows of the renotation of 1943."""

import runpy
from pathlib import Path

import colour
import numpy as np
import pytest
from colour.notation import munsell as theirs
from hypothesis import given
from hypothesis import strategies as st

from formcheck.colour import munsell
from formcheck.colour.baked import read_baked
from formcheck.colour.munsell import (
    hue_value_chroma,
    hue_value_chroma_of_spectrum,
    luminance_of_value,
    notation,
    value_of_luminance,
    xy_of,
)

TOP = Path(__file__).resolve().parents[2]
NOTATIONS = TOP / "tests" / "published" / "data" / "munsell_notations.csv"  # by scripts/bake_munsell.py

# Renotation rows as colour-science carries them: hue, value, chroma, x, y, Y of the table
ROWS = [
    (5, 5, 10, 0.4747, 0.3227, 19.77),
    (5, 4, 12, 0.5385, 0.3129, 12.0),
    (25, 8, 12, 0.4562, 0.4788, 59.1),
    (25, 5, 10, 0.4777, 0.4876, 19.77),
    (75, 4, 12, 0.1773, 0.1659, 12.0),
    (75, 5, 10, 0.208, 0.2041, 19.77),
]


def test_file_is_what_the_script_would_write():
    script = TOP / "scripts" / "bake_munsell.py"
    columns = np.column_stack(list(read_baked(munsell.TABLE).values()))
    np.testing.assert_allclose(columns, runpy.run_path(str(script))["munsell_rows"](), rtol=1e-5)


@pytest.mark.parametrize("hue, value, chroma, x, y, table_Y", ROWS)
def test_rows_of_the_table_come_back(hue, value, chroma, x, y, table_Y):
    """The table's Y is of magnesium oxide: 0.975 of it is that of the perfect diffuser [ASTM D1535]."""
    np.testing.assert_allclose(hue_value_chroma([x, y, 0.975 * table_Y]), [hue, value, chroma], atol=0.01)
    assert hue_value_chroma([x, y, table_Y])[1] - value > 0.03  # the trap: the table's own scale reads lighter
    np.testing.assert_allclose(xy_of(hue, value, chroma), [x, y], atol=1e-9)


def test_luminance_of_values():
    """ASTM D1535 on the perfect diffuser, by colour-science."""
    values = np.linspace(0, 10, 41)
    np.testing.assert_allclose(luminance_of_value(values), theirs.luminance_ASTMD1535(values), rtol=1e-12)
    np.testing.assert_allclose(value_of_luminance(luminance_of_value(values)), values, atol=1e-9)
    assert np.isnan(value_of_luminance(100.5))


def test_agrees_with_colour_science_on_random_colours():
    """200 surface colours. Theirs goes straight or along arcs between hues, as Newhall et al. drew them."""
    row = read_baked(NOTATIONS)
    assert len(row["x"]) == 200
    found = hue_value_chroma(np.stack([row["x"], row["y"], row["Y"]], axis=-1))
    turn = (found[:, 0] - row["hue"] + 50) % 100 - 50
    apart = np.abs([turn, found[:, 1] - row["value"], found[:, 2] - row["chroma"]])
    assert (apart.max(axis=1) < [0.3, 1e-3, 0.3]).all()
    assert (np.median(apart, axis=1) < [0.05, 1e-3, 0.02]).all()


@pytest.mark.parametrize("row", [0, 77])
def test_the_notations_are_those_of_the_library_at_hand(row):
    kept = {name: column[row] for name, column in read_baked(NOTATIONS).items()}
    hue, value, chroma, code = theirs.xyY_to_munsell_specification([kept["x"], kept["y"], kept["Y"] / 100])
    live = [theirs.hue_to_ASTM_hue([hue, code]), value, chroma]
    np.testing.assert_allclose(live, [kept["hue"], kept["value"], kept["chroma"]], atol=1e-3)


@given(st.floats(0.01, 100), st.floats(0.5, 10), st.floats(0.1, 20))
def test_there_and_back(hue, value, chroma):
    xy = xy_of(hue, value, chroma)
    if np.isfinite(xy).all():
        found = hue_value_chroma([*xy, luminance_of_value(value)])
        assert (found[0] - hue + 50) % 100 - 50 == pytest.approx(0, abs=1e-3)
        np.testing.assert_allclose(found[1:], [value, chroma], atol=1e-3)


@pytest.mark.parametrize(
    "hvc, written",
    [
        ((5.0, 4.0, 12.0), "5.0R 4.0/12.0"),
        ((17.5, 6.25, 3.97), "7.5YR 6.2/4.0"),
        ((100.0, 5.0, 8.0), "10.0RP 5.0/8.0"),
        ((0.01, 5.0, 8.0), "10.0RP 5.0/8.0"),
        ((10.0, 5.0, 8.0), "10.0R 5.0/8.0"),
        ((10.1, 5.0, 8.0), "0.1YR 5.0/8.0"),
        ((43.0, 9.5, 0.04), "N 9.5/"),
        ((np.nan, np.nan, np.nan), None),
    ],
)
def test_notation(hvc, written):
    assert notation(hvc) == written


def test_no_chip_beyond_the_table():
    assert np.isnan(hue_value_chroma([0.7, 0.29, luminance_of_value(9.0)])).all()
    assert np.isnan(hue_value_chroma([0.31, 0.316, 101.0])).all()
    assert np.isnan(hue_value_chroma([np.nan, 0.316, 50.0])).all()
    with pytest.raises(ValueError, match="Y is -1"):
        hue_value_chroma([0.31, 0.316, -1.0])


def test_spectra_of_a_measured_chart():
    """Patches of the 24-patch chart and the notations printed for them by C. S. McCamy et al. 1976 (from
    memory): hue family, value and chroma; the patches of other makings stray by a step or so."""
    printed = {"moderate red": ("R", 5, 10), "yellow": ("Y", 8, 11.1), "blue": ("PB", 2.9, 12.7),
               "neutral 5 (.70 D)": ("N", 5, 0)}
    for patch, (family, value, chroma) in printed.items():
        sd = colour.SDS_COLOURCHECKERS["BabelColor Average"][patch]
        found = hue_value_chroma_of_spectrum(sd.values, sd.wavelengths)
        assert found[1] == pytest.approx(value, abs=0.3) and found[2] == pytest.approx(chroma, abs=1.5)
        assert chroma == 0 or notation(found).split()[0].lstrip("0123456789.") == family


def test_grey_and_black_spectra():
    assert notation(hue_value_chroma_of_spectrum(np.full(85, 0.1977 * 0.975))) == "N 5.0/"
    assert notation(hue_value_chroma_of_spectrum(np.zeros(85))) == "N 0.0/"
    assert notation(hue_value_chroma_of_spectrum(np.ones(85))) == "N 10.0/"
    assert hue_value_chroma_of_spectrum(np.full((2, 3, 85), 0.5)).shape == (2, 3, 3)
