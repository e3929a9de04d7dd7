"""Numbers as they are shown: rounded to their own uncertainty, and never so far that a limit seems met.

Rounding follows the rule of the Particle Data Group (Review of Particle Physics, Introduction, "Rounding"):
take the three leading digits of the standard deviation; 100 to 354 keeps two digits, 355 to 949 one,
950 to 999 becomes 1000 with two; the value gets the same last place.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from decimal import ROUND_HALF_EVEN, Decimal

MINUS = "−"
MOST_DIGITS = 7  # of a value whose sd claims to be smaller still
DIGITS_OF_A_LIMIT = 10  # a limit is law: shown as written, less the dust of floating point
SUPERSCRIPTS = str.maketrans("-0123456789", "⁻⁰¹²³⁴⁵⁶⁷⁸⁹")
NORMAL_DIGITS = str.maketrans("⁻⁰¹²³⁴⁵⁶⁷⁸⁹", "-0123456789")


def with_sd(value: float | None, sd: float | None = None, *, digits: int = 3) -> str:
    """`0.83 ± 0.12`: value and standard deviation to the place the sd sets.

    Without an sd, `digits` significant digits. A missing or non-finite value is `unknown`.
    """
    if value is None or not math.isfinite(value):
        return "unknown"
    if sd is None or not math.isfinite(sd) or sd <= 0:
        return plain(value, digits)
    if sd < abs(value) * 10.0 ** -MOST_DIGITS:
        return plain(value, MOST_DIGITS)
    place = _place_of_sd(sd)
    power = _power_of_ten(max(abs(value), sd))
    scaled = (Decimal(repr(float(x))).scaleb(-power) for x in (value, sd))
    shown, spread = (_quantized(x, place - power) for x in scaled)
    return f"({shown} ± {spread}){_times_ten_to(power)}" if power else f"{shown} ± {spread}"


def plain(value: float | None, digits: int = 3) -> str:
    """A number to at most `digits` significant digits, no trailing zeros: none would mean anything.

    Whole numbers below a million keep every digit.
    """
    if value is None or math.isnan(value):
        return "unknown"
    if math.isinf(value):
        return "without bound" if value > 0 else f"{MINUS}∞"
    if value == 0:
        return "0"
    if float(value).is_integer() and abs(value) < 1e6:
        return _signed(str(int(value)))
    power = _power_of_ten(abs(value))
    place = _exponent(value) - digits + 1
    text = _quantized(Decimal(repr(float(value))).scaleb(-power), place - power)
    text = text.rstrip("0").rstrip(".") if "." in text else text
    return text + (_times_ten_to(power) if power else "")


def exact(value: float | None) -> str:
    """A limit as it was written: every digit that matters, none that floating point made up."""
    if value is None or not math.isfinite(value):
        return "unknown"
    text = format(Decimal(f"{value:.{DIGITS_OF_A_LIMIT}g}").normalize(), "f")
    return plain(value, DIGITS_OF_A_LIMIT) if len(text) > DIGITS_OF_A_LIMIT + 4 else _signed(text)


def beside_limit(value: float, limit: float, *, digits: int = 3) -> str:
    """The value with as many digits as it takes to stand apart from a limit it does not equal.

    90.04 against a limit of 90 is not `90.0`, which would read as met.
    """
    texts = (plain(value, enough) for enough in range(digits, 18))
    if value == limit:
        return next(texts)
    return next((text for text in texts if _read_back(text) != limit), plain(value, 17))


def interval(low: float | None, high: float | None, *, digits: int = 3) -> str:
    """`600 to 700`, `at least 600`, `at most 700`, or nothing where neither end is known."""
    low = None if low is None or not math.isfinite(low) else low
    high = None if high is None or not math.isfinite(high) else high
    if low is None and high is None:
        return ""
    if low is None or high is None:
        return f"at most {plain(high, digits)}" if low is None else f"at least {plain(low, digits)}"
    for enough in range(digits, 9):
        if low == high or plain(low, enough) != plain(high, enough):
            break
    return f"{plain(low, enough)} to {plain(high, enough)}"


def aligned(values: Sequence[float | None], *, digits: int = 4) -> list[str]:
    """A column of numbers with one number of decimals: `digits` for the largest, two for the smallest."""
    known = [abs(value) for value in values if value is not None and math.isfinite(value) and value]
    if not known:
        return [plain(value) for value in values]
    decimals = max(digits - 1 - _exponent(max(known)), 1 - _exponent(min(known)), 0)
    if decimals > MOST_DIGITS or max(known) >= 1e9:
        return [plain(value, digits) for value in values]
    return [plain(value) if value is None or not math.isfinite(value) else _signed(f"{value:.{decimals}f}")
            for value in values]


def percent(fraction: float | None, sd: float | None = None, *, digits: int = 3) -> str:
    """A fraction as a percentage."""
    if fraction is None or not math.isfinite(fraction):
        return "unknown"
    text = with_sd(100 * fraction, None if sd is None else 100 * sd, digits=digits)
    return f"({text}) %" if "±" in text else f"{text} %"


def probability(p: float) -> str:
    """A probability in whole per cent; never a flat 0 or 100, which no estimate can mean."""
    if p < 0.01:
        return "below 1 %"
    return "above 99 %" if p > 0.99 else f"{round(100 * p)} %"


def _place_of_sd(sd: float) -> int:
    """The power of ten of the last place that the sd, rounded by the rule above, reaches."""
    exponent = _exponent(sd)
    leading = int(Decimal(repr(float(sd))).scaleb(2 - exponent).to_integral_value(ROUND_HALF_EVEN))
    return exponent - 1 if leading <= 354 else exponent


def _exponent(value: float) -> int:
    return Decimal(repr(abs(float(value)))).adjusted() if value else 0


def _power_of_ten(size: float) -> int:
    """The power to pull out front; 0 where a number reads well as it stands."""
    exponent = _exponent(size)
    return 0 if -4 <= exponent < 6 else exponent


def _times_ten_to(power: int) -> str:
    return f" × 10{str(power).translate(SUPERSCRIPTS)}"


def _quantized(number: Decimal, place: int) -> str:
    text = format(number.quantize(Decimal(1).scaleb(place), ROUND_HALF_EVEN), "f")
    return _signed(text) if any(digit in text for digit in "123456789") else text.lstrip("-")


def _signed(text: str) -> str:
    return text.replace("-", MINUS)


def _read_back(text: str) -> float:
    """The number that `plain` printed."""
    mantissa, _, power = text.replace(MINUS, "-").partition(" × 10")
    return float(f"{mantissa}e{power.translate(NORMAL_DIGITS) or 0}")
