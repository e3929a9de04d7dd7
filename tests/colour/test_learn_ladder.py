"""A ladder of invented drawdowns teaches the K and S it was made from, and says truly how sure it is."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from formcheck.colour.cielab import lab_of_spectrum
from formcheck.colour.difference import delta_e_2000
from formcheck.colour.learning import doubts
from formcheck.colour.learning.ladder import fit_ladder
from formcheck.colour.learning.leave_one_out import leave_one_out, reckoned_without
from formcheck.colour.learning.panels import checked
from formcheck.colour.learning.reckon import reckoned_reflectance
from tests.colour.invented_ladder import HELD_OUT, LADDER, NM, THICKNESS_UM, invented

ROWS = np.repeat(np.arange(len(HELD_OUT)), 2)
GROUND_OF = np.tile([0, 1], len(HELD_OUT))
SURFACES = [(0.04, 0.596), (0.03, 0.5), (0.04, 0.596), (0.02, 0.45), (0.04, 0.596), (0.035, 0.55)]


def off(invention, learned) -> np.ndarray:
    """DE00 of the films that are not in the ladder."""
    um = np.full(len(ROWS), THICKNESS_UM if learned.ladder.thickness_known else 1.0)
    true = invention.measured(HELD_OUT[ROWS], np.full(len(ROWS), THICKNESS_UM), GROUND_OF)
    found = reckoned_reflectance(learned, volume_fraction=HELD_OUT[ROWS], thickness_um=um, ground_of=GROUND_OF)
    return delta_e_2000(lab_of_spectrum(found, "D65", 10, NM), lab_of_spectrum(true, "D65", 10, NM))


def test_held_out_loadings_and_coverage_of_the_bands():
    """0.1 % repeatability, thickness off by 2 %: DE00 0.3 on loadings between; 90 % bands hold 80 to 97 %."""
    within, far = [], []
    for seed, (k1, k2) in enumerate(SURFACES):
        invention = invented(seed, k1=k1, k2=k2)
        learned = fit_ladder(invention.ladder)
        far.append(off(invention, learned))
        within += [np.abs(learned.K - invention.K) <= 1.645 * learned.K_sd,
                   np.abs(learned.S - invention.S) <= 1.645 * learned.S_sd]
    assert np.max(far) < 0.3
    assert 0.80 <= np.mean(within) <= 0.97


@pytest.mark.parametrize("way", [{"specular_included": False}, {"white_known": True}])
def test_other_ways_of_measuring(way):
    invention = invented(21, **way)
    learned = fit_ladder(invention.ladder)
    assert off(invention, learned).max() < 0.3
    if way.get("white_known"):
        np.testing.assert_allclose(learned.S[1], invention.S[1], rtol=0.03)


def test_unknown_thickness_leaves_what_hides():
    """K and S per film: their ratios hold, and films alike in thickness are told nearly as well."""
    invention = invented(22, thickness_known=False, thickness_sd=0.1)
    learned = fit_ladder(invention.ladder)
    assert np.median(off(invention, learned)) < 0.3
    strength = learned.K[0].max() / learned.S[1].mean()
    assert strength == pytest.approx(invention.K[0].max() / invention.S[1].mean(), rel=0.1)


def test_leaving_one_out_and_what_it_needs():
    learned = fit_ladder(invented(23).ladder)
    told: list[int] = []
    left_out = leave_one_out(learned, progress=lambda: told.append(1))
    assert len(told) == len(LADDER)
    measured = lab_of_spectrum(learned.ladder.reading, "D65", 10, NM)
    de00 = {one.film: delta_e_2000(lab_of_spectrum(one.reckoned, "D65", 10, NM), measured[one.readings]).max()
            for one in left_out if one.reckoned is not None}
    assert max(de00[film] for film in (2, 3, 4)) < 0.5  # tints between tints
    assert [one.between for one in left_out] == [False, True, True, True, True, False, True, False]


def test_a_film_whose_colourant_no_other_holds_cannot_be_left_out():
    ladder = invented(24, films=LADDER[:6, :]).ladder
    films = np.vstack([ladder.volume_fraction[:5], [[0, 0.19, 0.002]]])  # one grey alone holds black
    learned = fit_ladder(replace(ladder, volume_fraction=films), with_bands=False)
    left_out = leave_one_out(learned)
    assert [one.reckoned is None for one in left_out] == [False] * 5 + [True]
    assert reckoned_without(learned, np.ones(6, bool)) is None


def test_an_outlying_reading_does_not_spoil_the_rest():
    invention = invented(25)
    reading = invention.ladder.reading.copy()
    reading[5, 7] = 0.9  # a slip at one wavelength of one panel
    spoilt, sound = fit_ladder(replace(invention.ladder, reading=reading)), fit_ladder(invention.ladder)
    others = np.arange(len(NM)) != 7
    np.testing.assert_allclose(spoilt.K[0][others], sound.K[0][others], rtol=0.03)


def test_a_strong_pigment_without_a_pale_tint_is_told():
    strong = LADDER.copy()
    pale = doubts.palest_absorption(fit_ladder(invented(33).ladder, with_bands=False))
    strong[1], strong[2], strong[3] = [0.08, 0.1, 0], [0.12, 0.06, 0], [0.15, 0.03, 0]
    dark = doubts.palest_absorption(fit_ladder(invented(33, films=strong).ladder, with_bands=False))
    assert pale[0] > 0.3 > 0.2 > dark[0]


def test_a_ladder_of_masstone_and_one_tint_is_less_sure():
    few, many = fit_ladder(invented(27, films=LADDER[[0, 3, 5, 6]]).ladder), fit_ladder(invented(27).ladder)
    for one in (few, many):
        assert np.isfinite(one.condition).all()
    doubt = [doubts.relative_sd(one.K, one.K_sd_together)[0] for one in (few, many)]
    assert doubt[0] > 1.5 * doubt[1]


@pytest.mark.parametrize("spoil", [
    {"reading": np.full((16, 16), 1.5)}, {"thickness_um": np.zeros(8)}, {"volume_fraction": np.zeros((8, 3))},
    {"film_of": np.zeros(3, int)}, {"repeatability": 0.0}])
def test_a_ladder_that_cannot_be_is_refused(spoil):
    with pytest.raises(ValueError, match="expected"):
        checked(replace(invented(0).ladder, **spoil))
