"""Differences told as colourists tell them (common practice): a red turns yellower, a yellow greener."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from formcheck.colour.cmc import parts_cmc
from formcheck.colour.difference import (
    NO_DIFFERENCE,
    cielab_parts,
    delta_e_2000,
    difference_words,
    parts_2000,
)

lightness, opponent = st.floats(0, 100), st.floats(-100, 100)
some_lab = st.tuples(lightness, opponent, opponent)


@pytest.mark.parametrize(
    "lab_from, lab_to, words",
    [
        ((50, 40, 20), (50, 40, 20), "no difference to speak of"),
        ((50, 40, 20), (50.2, 40.1, 20.1), "no difference to speak of"),
        ((50, 40, 20), (47.5, 40, 20), "darker"),
        ((50, 0, 0), (62, 0, 0), "much lighter"),
        ((50, 0, 0), (51, 0, 0), "slightly lighter"),
        ((50, 40, 0), (50, 39, 8), "yellower"),  # red towards orange
        ((50, 40, 0), (50, 39, -8), "bluer"),  # red towards purple
        ((80, 0, 60), (80, -6, 60), "greener"),  # yellow towards lemon
        ((80, 0, 60), (80, 6, 60), "redder"),  # yellow towards orange
        ((50, -40, 0), (50, -39, 8), "yellower"),  # green towards grass
        ((50, -40, 0), (50, -40, -6), "bluer"),  # green towards turquoise
        ((40, 0, -40), (40, 4, -40), "redder"),  # blue towards violet
        ((40, 0, -40), (40, -7, -39), "greener"),  # blue towards turquoise
        ((50, 30, 30), (50, 22, 22), "duller"),
        ((50, 30, 30), (50, 38, 38), "more vivid"),
        ((50, 0.5, 0), (50, 4, 0), "redder"),  # beside a grey
        ((50, 0.5, 0), (50, 0.5, -4), "bluer"),
        ((50, 40, 0), (44, 39, 8), "much darker, yellower"),
    ],
)
def test_words(lab_from, lab_to, words):
    assert difference_words(lab_from, lab_to) == words


@given(some_lab, some_lab)
def test_silent_exactly_when_the_difference_is_small(lab_from, lab_to):
    silent = difference_words(lab_from, lab_to) == NO_DIFFERENCE
    assert silent == (float(delta_e_2000(lab_from, lab_to)) < 0.5)


@given(some_lab, some_lab)
def test_never_a_word_and_its_opposite(lab_from, lab_to):
    said = difference_words(lab_from, lab_to)
    for one, other in (
        ("lighter", "darker"),
        ("redder", "greener"),
        ("yellower", "bluer"),
        ("vivid", "duller"),
    ):
        assert not (one in said and other in said)


@given(some_lab, some_lab)
def test_lightness_is_named_by_its_sign(lab_from, lab_to):
    said = difference_words(lab_from, lab_to)
    assert "lighter" not in said or lab_to[0] > lab_from[0]
    assert "darker" not in said or lab_to[0] < lab_from[0]


def test_parts_make_up_the_whole_where_nothing_is_rotated():
    """Outside the blues R_T vanishes (Sharma et al. 2005), so the parts add as squares."""
    parts = parts_2000([50, 40, 40], [55, 35, 50])
    whole = np.sqrt(parts.lightness**2 + parts.chroma**2 + parts.hue**2)
    assert parts.total == pytest.approx(whole, rel=1e-6) and parts.lightness > 0 and parts.hue > 0


@pytest.mark.parametrize(
    "lab_from, lab_to, sign",
    [
        ((50, 40, 0), (50, 39, 8), 1),  # red turning yellow: counter-clockwise
        ((50, 39, -8), (50, 39, 8), 1),  # across the seam at 0 degrees
        ((50, -39, 8), (50, -39, -8), 1),  # across the seam of the arctangent
        ((50, -39, -8), (50, -39, 8), -1),
    ],
)
def test_hue_has_one_sign_in_every_formula(lab_from, lab_to, sign):
    for parts in (cielab_parts, parts_cmc, parts_2000):
        assert np.sign(parts(lab_from, lab_to).hue) == sign


def test_words_by_the_weights_of_another_formula():
    """In CMC(2:1) lightness counts half, so a shift in both is told hue first."""
    standard, sample = (50, 40, 0), (47.6, 40, 4)
    assert difference_words(standard, sample).startswith("darker")
    assert difference_words(standard, sample, parts_cmc(standard, sample)) == "yellower, slightly darker"
    assert difference_words(standard, sample, cielab_parts(standard, sample)) == "yellower, darker"
