"""A sweep is a batch: each of its shades is the shade of the recipe written so."""

from datetime import date
from pathlib import Path

import numpy as np
import pytest

from formcheck.check.run import check_file
from formcheck.check.sweep import sweep_shades
from formcheck.report.sweep_page import sweep_html
from formcheck.trouble import InputError

DEMO = Path(__file__).resolve().parents[2] / "demo_formulations"
INK = DEMO / "harbour_blue_screen_ink.yaml"


def written_with(tmp_path: Path, amount: str) -> Path:
    text = INK.read_text(encoding="utf-8").replace("shelf: shelf", f"shelf: {DEMO / 'shelf'}")
    text = text.replace("spectrum: spectra/", f"spectrum: {DEMO / 'spectra'}/")
    text = text.replace("amount: 80 g", f"amount: {amount}")
    path = tmp_path / f"{amount.split()[0]}.yaml"
    path.write_text(text, encoding="utf-8")
    return path


def test_a_sweep_equals_the_recipes_written_one_by_one(tmp_path):
    sweep = sweep_shades(INK, vary="harbour blue paste=3..9 % w/w", steps=3)
    assert sweep.amounts == [3.0, 6.0, 9.0]
    for amount, swept in zip(sweep.amounts, sweep.shades, strict=True):
        alone = check_file(written_with(tmp_path, f"{amount:g} % w/w"), as_of=date(2026, 12, 1)).shade
        assert swept.swatch.lab == pytest.approx(alone.swatch.lab, abs=1e-9)
        assert swept.lab_sd == pytest.approx(alone.lab_sd, abs=1e-6)
        assert swept.contrast_ratio == pytest.approx(alone.contrast_ratio, abs=1e-9)
        assert swept.de00 == pytest.approx(alone.de00, abs=1e-9)
        assert swept.probability_within == pytest.approx(alone.probability_within, abs=1e-9)


def test_without_a_row_it_is_the_shade_of_the_check():
    alone = check_file(INK, as_of=date(2026, 12, 1)).shade
    one = sweep_shades(INK)
    assert len(one.shades) == 1 and one.varied == ""
    assert one.shades[0].swatch.lab == pytest.approx(alone.swatch.lab)
    assert one.shades[0].value == pytest.approx(alone.spectrum.value, abs=1e-12)


def test_more_colour_is_darker_and_hides_more_on_every_ground():
    sweep = sweep_shades(INK, vary="harbour blue paste=1..12 % w/w", steps=12, grounds=["chart_white", "ideal_white"])
    assert sweep.grounds == ["chart_white", "ideal_white"]
    for ground in sweep.grounds:
        shades = [one for one in sweep.shades if one.ground == ground]
        assert (np.diff([one.swatch.lab[0] for one in shades]) < 0).all()
        assert (np.diff([one.contrast_ratio for one in shades]) > 0).all()


def test_the_first_light_named_is_the_one_of_the_figures():
    sweep = sweep_shades(DEMO / "tide_mark_indicator_ink.yaml", lights=["A", "D65"])
    assert sweep.lights == ["A", "D65"]
    assert sweep.shades[0].lights[0].swatch.lab == pytest.approx(sweep.shades[0].swatch.lab)
    assert sweep.shades[0].lights[1].de00_from_first > 1


@pytest.mark.parametrize("vary, right", [
    ("harbour blue paste", "INGREDIENT=from..to"),
    ("harbor blue paste=1..2 % w/w", "did you mean 'harbour blue paste'"),
    ("harbour blue paste=1..2 fathoms", "one of"),
    ("harbour blue paste=1 g..2 % w/w", "two amounts in one unit"),
    ("harbour blue paste=90..95 % w/w", "harbour_blue_screen_ink.yaml"),
])
def test_a_row_that_cannot_be_is_told(vary, right):
    with pytest.raises(InputError) as caught:
        sweep_shades(INK, vary=vary)
    assert right in str(caught.value)


def test_a_shade_that_cannot_be_told_says_why():
    with pytest.raises(InputError, match="no optical data for gift jar powder"):
        sweep_shades(DEMO / "gift_jar_green.yaml")


def test_the_page_asks_for_nothing_outside():
    page = sweep_html(sweep_shades(INK, vary="harbour blue paste=3..9 % w/w", steps=4))
    assert "http" not in page.replace("http-equiv", "")
    assert page.count('class="swatch chips"') == 1 and "L*" in page


def test_draws_and_first_order_agree():
    kwargs = {"vary": "harbour blue paste=6..10 % w/w", "steps": 3}
    first, drawn = sweep_shades(INK, **kwargs), sweep_shades(INK, draws=4000, **kwargs)
    assert first.uncertainty == "first order" and drawn.uncertainty == "4000 draws"
    for one, other in zip(first.shades, drawn.shades, strict=True):
        assert other.swatch == one.swatch
        assert other.lab_sd == pytest.approx(one.lab_sd, rel=0.15, abs=0.02)
        assert other.probability_within == pytest.approx(one.probability_within, abs=0.06)


def test_too_few_draws_are_refused():
    with pytest.raises(InputError, match="--draws"):
        sweep_shades(INK, draws=3)


def test_one_shade_carries_the_other_figures_of_the_trade(tmp_path):
    one = sweep_shades(DEMO / "quarry_white_wall_coating.yaml").shades[0]
    assert [other.formula for other in one.differences] == ["ΔE00", "ΔE*ab", "CMC(2:1)"]
    assert one.differences[0].value == pytest.approx(one.de00, abs=1e-9)
    for other in one.differences[:2]:
        parts = (other.lightness, other.chroma, other.hue)
        assert sum(part**2 for part in parts) == pytest.approx(other.value**2, rel=0.15)  # ΔE00 has a cross term
    assert one.munsell.endswith("1.2") and " 9.0/" in one.munsell


def test_the_film_that_hides_reaches_the_ratio(tmp_path):
    """Made at the thickness it names, the film over the charts has a contrast ratio of 0.98 (ISO 6504-3)."""
    path = DEMO / "quarry_white_wall_coating.yaml"
    hiding = sweep_shades(path).shades[0].hiding
    text = path.read_text(encoding="utf-8").replace("shelf: shelf", f"shelf: {DEMO / 'shelf'}")
    (tmp_path / "a.yaml").write_text(text.replace("wet: 100 um", f"wet: {hiding.wet_um:.6f} um"), encoding="utf-8")
    assert sweep_shades(tmp_path / "a.yaml").shades[0].contrast_ratio == pytest.approx(0.98, abs=1e-5)
    assert hiding.spreading_m2_l == pytest.approx(1000 / hiding.wet_um)


def test_a_wanted_spectrum_of_its_own_matches_wholly(tmp_path):
    one = sweep_shades(INK).shades[0]
    wavelength_nm = sweep_shades(INK).wavelength_nm
    rows = "".join(f"{nm:g},{value!r}\n" for nm, value in zip(wavelength_nm, one.value, strict=True))
    (tmp_path / "wanted.csv").write_text("wavelength_nm,reflectance (0 to 1)\n" + rows, encoding="utf-8")
    text = written_with(tmp_path, "80 g").read_text(encoding="utf-8")
    text = text.replace("lab: [37, -9, -32]", f"spectrum: {tmp_path / 'wanted.csv'}")
    (tmp_path / "b.yaml").write_text(text, encoding="utf-8")
    shade = sweep_shades(tmp_path / "b.yaml").shades[0]
    assert shade.de00 == pytest.approx(0, abs=1e-3) and shade.match.goodness_of_fit == pytest.approx(1, abs=1e-9)
    assert [index.light for index in shade.match.metamerism] == ["A", "LED-B3"]
    assert all(index.index_de00 < 1e-3 for index in shade.match.metamerism)
