"""The sentences of answers, in plain words. None of them calls a mixture harmless or in order."""

from __future__ import annotations

from collections.abc import Sequence
from datetime import date
from math import inf

from formcheck.hazards.summed import Basis

BASES: dict[Basis, str] = {"mixture": "of the mixture", "dry_film": "of the dry film", "as_used": "as used"}


def number(value: float) -> str:
    """Three significant digits, without exponents where a maker would not write them."""
    if value and not 1e-4 <= abs(value) < 1e6:
        return f"{value:.3g}"
    text = f"{value:.3g}" if abs(value) < 1000 else f"{value:,.0f}"
    return f"{float(text):.10f}".rstrip("0").rstrip(".") if "e" in text else text


def amount(low: float, high: float, unit: str) -> str:
    """`640 mg/kg`, `between 0 and 1,200 mg/kg`, `at least 3 g/L`."""
    if high == inf:
        return f"at least {number(low)} {unit}" if low else f"an unknown amount in {unit}"
    if abs(high - low) <= 5e-4 * abs(high):
        return f"{number(high)} {unit}"
    return f"between {number(low)} and {number(high)} {unit}"


def listed(words: Sequence[str], *, most: int = 6) -> str:
    """`a`, `a and b`, `a, b and c`; what is too many is counted."""
    words = list(dict.fromkeys(words))
    if len(words) > most:
        words = [*words[: most - 1], f"{len(words) - most + 1} more"]
    return words[0] if len(words) == 1 else f"{', '.join(words[:-1])} and {words[-1]}" if words else "nothing"


def limit_sentence(answer: str, *, name: str, low: float, high: float, limit: float, unit: str, basis: Basis,
                   comparison: str, since: date) -> str:
    found = f"{name}: {amount(low, high, unit)} {BASES[basis]}"
    counted = "the limit is" if comparison == "more_than" else "the limit, to be stayed below, is"
    against = f"{counted} {number(limit)} {unit} since {since.isoformat()}"
    if answer == "cannot_tell":
        return f"{found}, and {against}: what is known does not tell on which side it lies"
    return f"{found}; {against}"


def window_sentence(answer: str, *, name: str, ph: tuple[float, float], window: tuple[float, float],
                    below: str, above: str) -> str:
    low, high = window
    stands = f"{name}: stands {_span(low, high)}"
    if ph == (-inf, inf):
        told = "the pH is unknown"
    elif abs(ph[1] - ph[0]) < 0.005:
        told = f"the pH is {ph[0]:.2f}"
    else:
        told = f"the pH lies between {ph[0]:.2f} and {ph[1]:.2f}"
    beyond = []
    if ph[0] < low and below:
        beyond.append(f"below it, {below}")
    if ph[1] > high and above:
        beyond.append(f"above it, {above}")
    may = "; it may be outside" if answer == "cannot_tell" else ""
    return f"{stands}; {told}{may}" + (f": {'; '.join(beyond)}" if beyond and answer != "within" else "")


def _span(low: float, high: float) -> str:
    if low == -inf:
        return f"a pH up to {number(high)}"
    if high == inf:
        return f"a pH from {number(low)}"
    return f"a pH from {number(low)} to {number(high)}"


def meeting_sentence(answer: str, *, first: Sequence[str], second: Sequence[str], first_name: str,
                     second_name: str, consequence: str, when: str) -> str:
    pair = (f"{listed(first)} ({first_name}) and {listed(second)} ({second_name})" if first and second
            else f"{first_name} and {second_name}")
    if answer == "no_flag":
        return f"{first_name} and {second_name} were not found together"
    if answer == "cannot_tell":
        return f"{pair} may meet{when}; then {consequence}"
    return f"{pair} meet{when}: {consequence}"


def caution_sentence(answer: str, *, names: Sequence[str], title: str) -> str:
    if answer == "no_flag":
        return f"{title}: no ingredient calls for it"
    if answer == "cannot_tell":
        return f"{title}: {listed(names)} may call for it; too little is known"
    return f"{title}: {listed(names)}"
