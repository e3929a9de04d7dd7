"""Films of several recipes as one stack (Kubelka's composition); two films of one paint are one of their thickness."""

import pytest
import yaml
from recipes import DEMO, demo_data, shade

from formcheck.check.sweep import sweep_shades
from formcheck.trouble import InputError


def placed(data: dict, **changed) -> dict:
    """A demo recipe that can stand in another folder."""
    found = {**data, "shelf": str(DEMO / "shelf"), **changed}
    if isinstance(found.get("ground"), dict):
        found["ground"] = {"spectrum": str(DEMO / found["ground"]["spectrum"])}
    return found


def saved(tmp_path, name: str, data: dict) -> str:
    (tmp_path / name).write_text(yaml.safe_dump(data), encoding="utf-8")
    return name


INK = demo_data("harbour_blue_screen_ink.yaml")
VARNISH = {"formcheck": 1, "title": "Clear varnish", "what": "coating", "shelf": str(DEMO / "shelf"),
           "ingredients": [{"material": "quay acrylic dispersion", "amount": "100 g"}], "film": {"wet": "20 um"}}


def test_two_films_of_one_ink_are_one_of_their_thickness(tmp_path):
    lower = saved(tmp_path, "lower.yaml", placed(INK, film={"wet": "10 um"}))
    both = shade(placed(INK, film={"wet": "14 um"}, under=[lower]), tmp_path)
    one = shade(placed(INK, film={"wet": "24 um"}), tmp_path)
    assert both.swatch.lab == pytest.approx(one.swatch.lab, abs=1e-6)
    assert "over lower.yaml" in both.geometry


def test_a_clear_varnish_of_the_same_index_changes_nothing(tmp_path):
    varnish = saved(tmp_path, "varnish.yaml", VARNISH)
    plain = shade(placed(INK, binder_index=1.48), tmp_path)
    varnished = shade(placed(INK, binder_index=1.48, over=[varnish]), tmp_path)
    assert varnished.swatch.lab == pytest.approx(plain.swatch.lab, abs=1e-6)


def test_a_primer_that_hides_makes_the_ground_indifferent(tmp_path):
    primer = saved(tmp_path, "primer.yaml", placed(demo_data("quarry_white_wall_coating.yaml"), film={"wet": "900 um"}))
    over_black, over_white = (shade(placed(INK, ground=name, under=[primer]), tmp_path).swatch.lab
                              for name in ("chart_black", "chart_white"))
    assert over_black == pytest.approx(over_white, abs=0.05)


def test_the_order_of_the_films_counts(tmp_path):
    white = saved(tmp_path, "white.yaml", placed(demo_data("quarry_white_wall_coating.yaml"), film={"wet": "60 um"}))
    below, above = (shade(placed(INK, **{field: [white]}), tmp_path).swatch.lab for field in ("under", "over"))
    assert above[0] > below[0] + 20


@pytest.mark.parametrize("change, right", [
    ({"under": ["none.yaml"]}, "none.yaml"), ({"film": None, "path_length": "10 mm", "what": "solution"}, "`film`"),
])
def test_what_is_no_film_is_refused(tmp_path, change, right):
    varnish = saved(tmp_path, "varnish.yaml", VARNISH)
    data = {key: value for key, value in placed(INK, over=[varnish], **change).items() if value is not None}
    with pytest.raises(InputError, match=right):
        shade(data, tmp_path)


def test_a_stack_within_a_stack_is_refused(tmp_path):
    varnish = saved(tmp_path, "varnish.yaml", VARNISH)
    piled = saved(tmp_path, "piled.yaml", placed(INK, over=[varnish]))
    with pytest.raises(InputError, match=r"over\[0\]"):
        shade(placed(INK, over=[piled]), tmp_path)


def test_a_film_whose_shade_cannot_be_told_is_named(tmp_path):
    jar = saved(tmp_path, "jar.yaml", placed(demo_data("gift_jar_green.yaml")))
    with pytest.raises(InputError, match=r"jar.yaml: no optical data for gift jar powder"):
        shade(placed(INK, over=[jar]), tmp_path)


def test_a_sweep_keeps_the_stack(tmp_path):
    varnish = saved(tmp_path, "varnish.yaml", VARNISH)
    saved(tmp_path, "ink.yaml", placed(INK, over=[varnish]))
    sweep = sweep_shades(tmp_path / "ink.yaml", vary="harbour blue paste=4..8 % w/w", steps=2)
    assert "under varnish.yaml" in sweep.geometry and len(sweep.shades) == 2
