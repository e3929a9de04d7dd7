"""Electron boxes: sum rules, selection rules, order of wavelengths, colours, refusals."""

from types import SimpleNamespace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from formcheck.colour.cielab import lab_of_spectrum
from formcheck.spectra import chain_box
from formcheck.spectra.bands import band_sum
from formcheck.spectra.boxes import (
    box_bands,
    box_errors,
    box_levels,
    drawn_spectra,
    spectrum_of_bands,
    transitions,
)
from formcheck.spectra.grid import WAVELENGTH_NM
from formcheck.trouble import InputError

BOND_NM = 0.139


def box(shape, n, size, *, v0=0.0, count=1):
    sizes = {"length_nm": None, "sides_nm": None, "circumference_nm": None}
    sizes[{"chain": "length_nm", "plate": "sides_nm", "ring": "circumference_nm"}[shape]] = size
    return SimpleNamespace(shape=shape, n_pi_electrons=n, bond_alternation_ev=v0, count=count, **sizes)


def first_nm(a_box):
    return transitions(a_box)[0].wavelength_nm


def solution_lab(boxes, *, peak_absorbance, seen_only=False):
    epsilon, _, _ = spectrum_of_bands(box_bands(boxes), WAVELENGTH_NM)
    strongest = epsilon.max() if seen_only else max(b.epsilon_l_mol_cm for b in box_bands(boxes))
    return lab_of_spectrum(10.0 ** -(peak_absorbance * epsilon / strongest))


@given(st.integers(1, 20).map(lambda i: 2 * i))
@settings(max_examples=20, deadline=None)
def test_chain_strengths_add_up_to_a_third_of_the_electrons(n):
    """Thomas, Reiche & Kuhn: one for each electron along the chain, a third on average over orientation."""
    total = sum(t.oscillator_strength for t in transitions(box("chain", n, n * BOND_NM)))
    assert total == pytest.approx(n / 3, rel=0.01)


@pytest.mark.parametrize(
    "n, sides", [(22, [1.0, 1.0]), (26, [1.0, 1.0]), (14, [0.9, 0.5]), (10, [0.7, 0.45])]
)
def test_plate_strengths_add_up_to_two_thirds_of_the_electrons(n, sides):
    total = sum(t.oscillator_strength for t in transitions(box("plate", n, sides)))
    assert total == pytest.approx(2 * n / 3, rel=0.01)


@pytest.mark.parametrize("n", [6, 8, 10, 12, 18, 20, 26])
def test_ring_strengths_add_up_to_a_third_of_the_electrons(n):
    """One coordinate, the angle: the sum rule in the plane is halved by the fixed radius."""
    total = sum(t.oscillator_strength for t in transitions(box("ring", n, n * BOND_NM)))
    assert total == pytest.approx(n / 3, rel=1e-9)


def test_chain_transition_length_is_the_integral_over_the_box():
    length, x = 1.2, np.linspace(0, 1.2, 200_001)
    for n, m in [(1, 2), (2, 3), (1, 4), (1, 3), (2, 4)]:
        psi = [np.sqrt(2 / length) * np.sin(q * np.pi * x / length) for q in (n, m)]
        integral = abs(np.trapezoid(psi[0] * x * psi[1], x))
        assert chain_box.transition_length([n], [m], side_nm=length)[0, 0] == pytest.approx(
            integral, abs=1e-8
        )


def test_ring_transition_length_is_the_integral_around_the_ring():
    phi = np.linspace(0, 2 * np.pi, 20_001)
    radius = 1.39 / (2 * np.pi)

    def squared(k, other):
        wave = np.exp(1j * (k - other) * phi) / (2 * np.pi)
        return sum(abs(np.trapezoid(wave * radius * f(phi), phi)) ** 2 for f in (np.cos, np.sin))

    from formcheck.spectra.ring_box import orbitals

    ring = orbitals(10, circumference_nm=1.39)
    names = {"k=0": 0} | {f"k={k:+d}": k for k in range(-5, 6) if k}
    for i, j in [(0, 1), (1, 3), (1, 2), (3, 4), (3, 5), (3, 6)]:
        k, other = names[ring.labels[i]], names[ring.labels[j]]
        assert ring.length2_nm2[i, j] == pytest.approx(squared(k, other), abs=1e-9)


def test_ring_of_six_has_two_allowed_ways_of_one_energy_and_keeps_its_sense():
    (only,) = (t for t in transitions(box("ring", 6, 6 * BOND_NM)) if t.wavelength_nm > 160)
    assert only.label == "k=+1 to +2, k=-1 to -2"
    levels = box_levels(box("ring", 6, 6 * BOND_NM))
    assert [(level.orbitals, level.electrons) for level in levels[:3]] == [(1, 2), (2, 4), (2, 0)]


def test_ring_of_eight_leaves_its_top_level_half_filled():
    levels = box_levels(box("ring", 8, 8 * BOND_NM))
    assert [(level.orbitals, level.electrons) for level in levels[:3]] == [(1, 2), (2, 4), (2, 2)]


def test_plate_changes_one_quantum_number_by_an_odd_step():
    for t in transitions(box("plate", 22, [1.0, 1.0])):
        if " and " in t.label:
            continue
        for way in t.label.replace("(", "").replace(")", "").split(", "):
            (a, b), (c, d) = ([int(q) for q in state.split(",")] for state in way.split(" to "))
            assert sorted([abs(a - c) % 2, abs(b - d)]) == [0, 1] or sorted([abs(a - c), abs(b - d) % 2]) == [
                0,
                1,
            ]


@given(st.integers(2, 12).map(lambda i: 2 * i), st.floats(0.1, 0.25), st.floats(1.02, 1.5))
@settings(max_examples=40, deadline=None)
def test_a_longer_box_absorbs_at_longer_wavelength(n, for_each, longer):
    length = n * for_each
    assert first_nm(box("chain", n, longer * length)) > first_nm(box("chain", n, length))
    assert first_nm(box("ring", n, longer * length)) > first_nm(box("ring", n, length))
    side = (n * 0.04) ** 0.5
    assert first_nm(box("plate", n, [longer * side, longer * side])) > first_nm(box("plate", n, [side, side]))


def test_one_more_double_bond_absorbs_at_longer_wavelength_and_alternation_at_shorter():
    for v0 in (0.0, 2.0):
        series = [first_nm(box("chain", n, n * BOND_NM, v0=v0)) for n in range(4, 24, 2)]
        assert series == sorted(series)
    assert first_nm(box("chain", 10, 1.39, v0=2.0)) < first_nm(box("chain", 10, 1.39))


def test_a_plate_far_longer_than_wide_absorbs_along_its_length_as_a_chain():
    plate = transitions(box("plate", 8, [1.4, 0.1]))[0]
    chain = transitions(box("chain", 8, 1.4))[0]
    assert plate.wavelength_nm == pytest.approx(chain.wavelength_nm)
    assert plate.oscillator_strength == pytest.approx(chain.oscillator_strength)


@pytest.mark.parametrize(
    "boxes",
    [
        [box("ring", 6, 6 * BOND_NM)],
        [box("ring", 6, 6 * BOND_NM, count=3), box("chain", 6, 6 * BOND_NM)],
        [box("ring", 10, 10 * BOND_NM), box("chain", 4, 0.578), box("chain", 8, 8 * BOND_NM, v0=2.0)],
    ],
)
def test_boxes_that_all_absorb_below_380_nm_are_colourless(boxes):
    assert max(b.lambda_max_nm for b in box_bands(boxes)) < 380
    L, a, b = solution_lab(boxes, peak_absorbance=1.0)
    assert L > 98.5 and np.hypot(a, b) < 3


def test_boxes_of_many_sizes_are_near_black():
    """Common practice: many chromophores together take all of the visible, one alone leaves a colour."""
    boxes = [box("chain", 10, length) for length in np.arange(1.08, 1.56, 0.02)]
    assert min(map(first_nm, boxes)) < 420 and max(map(first_nm, boxes)) > 680
    L, a, b = solution_lab(boxes, peak_absorbance=4.0, seen_only=True)
    assert L < 10 and np.hypot(a, b) < 10
    L, a, b = solution_lab(boxes[12:13], peak_absorbance=4.0, seen_only=True)
    assert L > 40 and np.hypot(a, b) > 50


def test_count_multiplies_the_strength_and_boxes_add():
    one, three = (box_bands([box("chain", 8, 1.112, count=c)]) for c in (1, 3))
    assert three[0].epsilon_l_mol_cm == pytest.approx(3 * one[0].epsilon_l_mol_cm)
    both = [box("chain", 8, 1.112), box("ring", 10, 1.39)]
    parts = [spectrum_of_bands(box_bands([b]), WAVELENGTH_NM)[0] for b in both]
    assert spectrum_of_bands(box_bands(both), WAVELENGTH_NM)[0] == pytest.approx(sum(parts))


def test_bands_carry_the_published_errors_of_their_class():
    for a_box, name in [
        (box("chain", 8, 1.1), "chain_equal_bonds"),
        (box("chain", 8, 1.1, v0=2.0), "chain_alternating"),
        (box("ring", 18, 2.5), "ring"),
        (box("plate", 26, [1.0, 1.0]), "plate"),
    ]:
        band = box_bands([a_box])[0]
        assert band.lambda_sd_nm == pytest.approx(
            box_errors()[name]["lambda_relative_sd"] * band.lambda_max_nm
        )
        assert band.epsilon_relative_sd == box_errors()[name]["strength_relative_sd"]
        assert band.half_height_nm[0] < band.lambda_max_nm < band.half_height_nm[1]


def test_low_and_high_enclose_the_spectrum_and_the_drawn_ones_vary():
    bands = box_bands([box("chain", 10, 10 * BOND_NM)])
    middle, low, high = spectrum_of_bands(bands, WAVELENGTH_NM)
    assert (low <= middle).all() and (middle <= high).all() and high.max() > middle.max() > low.max()
    drawn = drawn_spectra(bands, WAVELENGTH_NM, draws=400)
    peaks = WAVELENGTH_NM[drawn.argmax(axis=1)]
    assert np.std(peaks) == pytest.approx(bands[0].lambda_sd_nm, rel=0.2)
    assert (drawn == drawn_spectra(bands, WAVELENGTH_NM, draws=400)).all()


def test_certain_bands_leave_no_region():
    band = SimpleNamespace(
        lambda_max_nm=500.0,
        epsilon_l_mol_cm=1e4,
        half_height_nm=(470.0, 520.0),
        lambda_sd_nm=0.0,
        epsilon_relative_sd=0.0,
    )
    middle, low, high = spectrum_of_bands([band], WAVELENGTH_NM)
    assert low == pytest.approx(middle) and high == pytest.approx(middle)


def test_bands_of_boxes_enter_the_sum_of_bands():
    epsilon, sd = band_sum(WAVELENGTH_NM, box_bands([box("chain", 8, 1.112)]))
    assert epsilon.max() > 1e4 and sd[epsilon.argmax()] >= 0.39


@pytest.mark.parametrize(
    "wrong, found",
    [
        (box("chain", 8, 11.2), "a chain of 11.2 nm for 8 pi electrons"),  # in angstrom
        (box("chain", 8, 0.0112), "a chain of 0.0112 nm"),
        (box("ring", 6, 834.0), "a ring 834 nm around"),  # in pm
        (box("plate", 14, [9.0, 5.0]), "a plate of 9 x 5 nm"),
        (box("plate", 14, [30.0, 0.02]), "a plate of 30 x 0.02 nm"),
        (box("ring", 6, 0.834, v0=2.0), "bond_alternation_ev on a ring"),
        (SimpleNamespace(shape="ball", bond_alternation_ev=0.0, n_pi_electrons=6), "the shape 'ball'"),
    ],
)
def test_refuses_boxes_that_no_molecule_has(wrong, found):
    with pytest.raises(InputError) as refusal:
        box_bands([wrong])
    assert found in refusal.value.problems[0].found and refusal.value.problems[0].expected


@given(
    st.integers(1, 100).map(lambda i: 2 * i),
    st.sampled_from(["chain", "plate", "ring"]),
    st.floats(0.07, 0.5),
)
@settings(max_examples=30, deadline=None)
def test_any_box_of_a_molecule_gives_finite_bands(n, shape, for_each):
    size = [(n * for_each * 0.5) ** 0.5] * 2 if shape == "plate" else n * for_each
    for band in box_bands([box(shape, n, size)]):
        assert np.isfinite(band.epsilon_l_mol_cm) and band.epsilon_l_mol_cm > 0
        assert 0 < band.half_height_nm[0] < band.lambda_max_nm < band.half_height_nm[1]
