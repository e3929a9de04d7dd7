"""Rounding to the standard deviation, and numbers that face a limit."""

from __future__ import annotations

import math
from decimal import Decimal

import pytest
from hypothesis import given
from hypothesis import strategies as st

from formcheck.report.numbers import (
    aligned,
    beside_limit,
    exact,
    interval,
    percent,
    plain,
    probability,
    with_sd,
)

FINITE = st.floats(min_value=-1e12, max_value=1e12, allow_nan=False)
SPREAD = st.floats(min_value=1e-9, max_value=1e9)


def read_back(text: str) -> float:
    """A number as it was printed: `1.5 × 10⁻⁷` is 1.5e-7."""
    mantissa, _, power = text.replace("−", "-").partition(" × 10")
    digits = str.maketrans("⁻⁰¹²³⁴⁵⁶⁷⁸⁹", "-0123456789")
    return float(f"{mantissa}e{power.translate(digits) or 0}")


# Source: Particle Data Group, Review of Particle Physics, Introduction, section "Rounding": its two worked
# examples, and the bounds 100-354, 355-949, 950-999 that its text states (from memory, not confirmed).
@pytest.mark.parametrize("value, sd, printed", [
    (0.827, 0.119, "0.83 ± 0.12"),
    (0.827, 0.367, "0.8 ± 0.4"),
    (0.827, 0.354, "0.83 ± 0.35"),
    (0.827, 0.355, "0.8 ± 0.4"),
    (12.34, 0.949, "12.3 ± 0.9"),
    (12.34, 0.951, "12.3 ± 1.0"),
    (1234.0, 151.0, "1230 ± 150"),
])
def test_rounds_by_the_published_rule(value, sd, printed):
    assert with_sd(value, sd) == printed


@given(FINITE, SPREAD)
def test_what_is_shown_lies_within_a_fifth_of_the_sd(value, sd):
    """Half of the last place is at most 14 % of an sd rounded by the rule (0.5 of 3.55)."""
    text = with_sd(value, sd)
    if "±" not in text:
        assert sd < abs(value) * 1e-6
        return
    body, _, power = text.partition(")")
    shown = [read_back(part.strip(" (") + (power if power else "")) for part in body.split("±")]
    assert abs(shown[0] - value) <= 0.2 * sd + 1e-12 * abs(value)
    assert abs(shown[1] - sd) <= 0.2 * sd


@given(FINITE, st.integers(min_value=1, max_value=9))
def test_plain_keeps_the_significant_digits(value, digits):
    assert read_back(plain(value, digits)) == pytest.approx(value, rel=0.5 * 10 ** (1 - digits), abs=0)


@given(FINITE)
def test_no_trailing_zero_after_the_point(value):
    text = plain(value).split(" ")[0]
    assert "." not in text or text[-1] != "0"


@given(st.floats(min_value=1e-6, max_value=1e6), st.floats(min_value=-1e-3, max_value=1e-3))
def test_a_value_off_its_limit_never_reads_as_the_limit(limit, relative):
    value = limit * (1 + relative)
    if abs(value - limit) > limit * 1e-12:
        assert read_back(beside_limit(value, limit)) != limit


def test_a_value_just_over_its_limit():
    assert beside_limit(90.04, 90.0) == "90.04"
    assert beside_limit(640.21, 90.0) == "640"
    assert beside_limit(90.0, 90.0) == "90"


@pytest.mark.parametrize("limit, printed", [
    (0.0015, "0.0015"), (90.0, "90"), (0.1 + 0.2, "0.3"), (1000.0, "1000"), (0.0, "0"),
    (12345.678, "12345.678"),
])
def test_limits_keep_the_digits_of_the_law(limit, printed):
    assert exact(limit) == printed


@given(st.decimals(min_value=0, max_value=100000, places=4))
def test_limits_are_never_rounded(limit):
    assert Decimal(exact(float(limit)).replace("−", "-")) == limit.normalize()


def test_unknown_is_a_word():
    for nothing in (None, math.nan):
        assert plain(nothing) == with_sd(nothing) == percent(nothing) == exact(nothing) == "unknown"
    assert interval(None, None) == ""
    assert interval(None, math.inf) == ""
    assert interval(3.0, None) == "at least 3"
    assert interval(None, 4.0) == "at most 4"


def test_close_ends_of_an_interval_stay_apart():
    assert interval(41.271, 41.274) == "41.271 to 41.274"


def test_a_probability_is_never_certain():
    assert (probability(0.0), probability(0.634), probability(1.0)) == ("below 1 %", "63 %", "above 99 %")


def test_a_column_shares_its_decimals():
    assert aligned([120.0, 8.0, None, 521.337, 0.0]) == ["120.0", "8.0", "unknown", "521.3", "0.0"]
    assert aligned([0.8, 52.1337], digits=3) == ["0.80", "52.13"]
    assert aligned([None]) == ["unknown"]
