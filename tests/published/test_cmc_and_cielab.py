"""CMC(l:c) and DE*ab against colour-science and the rows of its own tests, kept in data/colorimetry.yaml."""

import colour
import numpy as np
import pytest

from formcheck.colour.cmc import delta_e_cmc, parts_cmc
from formcheck.colour.difference import cielab_parts, delta_e_ab

# L*a*b* of standard and sample, l, c, CMC; the rows of colour-science's test_delta_e.py
ROWS = [
    ((48.99183622, -0.10561667, 400.65619925), (50.65907324, -0.1167191, 402.82235718), 2, 1, 0.8996999757),
    ((100, 21.57210357, 272.2281935), (100, 426.67945353, 72.39590835), 1, 1, 172.70477129),
    ((100, 21.57210357, 272.2281935), (100, 74.05216981, 276.45318193), 1, 1, 20.59732717),
    ((100, 21.57210357, 272.2281935), (100, 8.32281957, -73.58297716), 1, 1, 121.71841479),
]


@pytest.mark.parametrize("standard, sample, l, c, printed", ROWS)
def test_cmc_rows(standard, sample, l, c, printed):
    assert delta_e_cmc(standard, sample, l=l, c=c) == pytest.approx(printed, abs=1e-8)


@pytest.mark.parametrize("l, c", [(2, 1), (1, 1), (1.3, 0.8)])
def test_agrees_with_colour_science_on_random_colours(l, c):
    rng = np.random.default_rng(5)
    first, second = rng.uniform([0, -90, -90], [100, 90, 90], (2, 3000, 3))
    np.testing.assert_allclose(
        delta_e_cmc(first, second, l=l, c=c), colour.delta_E(first, second, method="CMC", l=l, c=c), rtol=1e-9
    )
    np.testing.assert_allclose(
        delta_e_ab(first, second), colour.delta_E(first, second, method="CIE 1976"), rtol=1e-12
    )


def test_a_pair_by_hand():
    """Standard 50, 30, 0, sample 48, 36, 0 in CMC(2:1), by the formulas of ISO 105-J03:

    S_L = 2.04875/1.8825 = 1.08831, S_C = 1.914/1.393 + 0.638 = 2.01201; DL = -2/(2 S_L), DC = 6/S_C.
    """
    parts = parts_cmc([50.0, 30, 0], [48.0, 36, 0])
    assert parts.lightness == pytest.approx(-0.91885, abs=1e-5)
    assert parts.chroma == pytest.approx(2.98209, abs=1e-5)
    assert parts.hue == 0
    assert parts.total == pytest.approx(3.12043, abs=1e-5)


def test_parts_add_as_squares_in_both():
    rng = np.random.default_rng(6)
    first, second = rng.uniform([0, -90, -90], [100, 90, 90], (2, 500, 3))
    for parts in (cielab_parts(first, second), parts_cmc(first, second)):
        squares = parts.lightness**2 + parts.chroma**2 + parts.hue**2
        np.testing.assert_allclose(parts.total**2, squares, rtol=1e-9)
