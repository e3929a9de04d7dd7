"""Two measured spectra against each other, from files to figures."""

import numpy as np
import pytest

from formcheck.check.compare import compare_spectra
from formcheck.check.sweep import sweep_shades, write_swept_spectra
from formcheck.colour.difference import delta_e_2000
from formcheck.report.compare import comparison_html
from formcheck.spectra.files import read_spectra
from formcheck.trouble import InputError

NM = np.arange(380.0, 741.0, 10.0)


def saved(folder, name, values):
    rows = "".join(f"{nm:g},{value!r}\n" for nm, value in zip(NM, values.tolist(), strict=True))
    (folder / name).write_text("wavelength_nm,reflectance (0 to 1)\n" + rows, encoding="utf-8")
    return folder / name


def reduction(strength, white=0.9, at=600.0):
    """An opaque reduction by the single constant, K/S = white's + strength times a band."""
    ratio = (1 - white) ** 2 / (2 * white) + strength * np.exp(-(((NM - at) / 50) ** 2))
    return 1 + ratio - np.sqrt(ratio**2 + 2 * ratio)


def test_the_same_spectrum_matches_wholly(tmp_path):
    path = saved(tmp_path, "a.csv", reduction(1.0))
    found = compare_spectra(path, path)
    assert all(one.value == pytest.approx(0, abs=1e-9) for light in found.lights for one in light.differences)
    assert found.match.rms == 0 and found.match.word == "excellent"
    assert all(index.index_de00 == pytest.approx(0, abs=1e-9) for index in found.match.metamerism)


def test_a_batch_of_80_percent_is_told_and_leaves_no_other_shade(tmp_path):
    """By the single constant K/S adds up, so strength is the ratio put in (ISO 787-24, ISO 18314-2)."""
    standard, batch = saved(tmp_path, "a.csv", reduction(1.0)), saved(tmp_path, "b.csv", reduction(0.8))
    white = saved(tmp_path, "w.csv", np.full(NM.size, 0.9))
    strength = compare_spectra(standard, batch, white=white).strength
    assert strength.at_maximum == pytest.approx(0.8, abs=0.005)
    assert strength.by_weights == pytest.approx(0.8, abs=0.005)
    assert strength.de00_at_equal_strength < 0.1


def test_figures_are_those_of_the_swatches(tmp_path):
    standard, sample = saved(tmp_path, "a.csv", reduction(1.0)), saved(tmp_path, "b.csv", reduction(1.0, at=570.0))
    found = compare_spectra(standard, sample, lights=["D50", "A"], observer_deg=2)
    assert [light.light for light in found.lights] == ["D50", "A"]
    for light in found.lights:
        assert light.differences[0].value == pytest.approx(float(delta_e_2000(light.standard.lab, light.sample.lab)))
        assert light.differences[0].words
    assert "http" not in comparison_html(found).replace("http-equiv", "")


@pytest.mark.parametrize("given, right", [({"lights": ["D56"]}, "did you mean"), ({"observer_deg": 5}, "2 (CIE 1931)")])
def test_wrong_words_are_refused(tmp_path, given, right):
    path = saved(tmp_path, "a.csv", reduction(1.0))
    with pytest.raises(InputError) as caught:
        compare_spectra(path, path, **given)
    assert right in str(caught.value)


@pytest.mark.parametrize("name", ["out.csv", "out.cxf"])
def test_predicted_spectra_are_written_and_read_back(tmp_path, name):
    from datetime import date

    from test_sweep import INK

    sweep = sweep_shades(INK, vary="harbour blue paste=4..8 % w/w", steps=3)
    write_swept_spectra(sweep, tmp_path / name, day=date(2026, 12, 1))
    back = read_spectra(tmp_path / name)
    assert len(back) == 3
    for one, shade in zip(back, sweep.shades, strict=True):
        assert one.values.tolist() == shade.value and one.quantity == "reflectance"
