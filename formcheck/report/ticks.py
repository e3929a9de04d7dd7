"""Round numbers along an axis."""

from __future__ import annotations

import math
from itertools import pairwise

from formcheck.report.numbers import MINUS

SMALLEST_SPAN = 1e-290
ROUND_STEPS = (1.0, 2.0, 2.5, 5.0, 10.0)


def round_ticks(low: float, high: float, *, about: int = 6) -> list[float]:
    """Round numbers from `low` to `high`, about so many; both ends may lie between two of them."""
    if not (math.isfinite(low) and math.isfinite(high)):
        return []
    if no_span(low, high):
        return [low]
    rough = (high - low) / max(about, 1)
    power = 10.0 ** math.floor(math.log10(rough))
    step = next(power * one for one in ROUND_STEPS if power * one >= rough * (1 - 1e-9))
    first, last = math.ceil(low / step - 1e-9), math.floor(high / step + 1e-9)
    return [round(place * step, 12 - math.floor(math.log10(step))) for place in range(first, last + 1)]


def round_range(low: float, high: float, *, about: int = 6) -> tuple[float, float]:
    """The range widened to the round numbers on either side."""
    if no_span(low, high):
        half = abs(low) / 2 if abs(low) > SMALLEST_SPAN else 1.0
        low, high = low - half, high + half
    ticks = round_ticks(low, high, about=about)
    step = ticks[1] - ticks[0] if len(ticks) > 1 else high - low
    return math.floor(low / step + 1e-9) * step, math.ceil(high / step - 1e-9) * step


def no_span(low: float, high: float) -> bool:
    """Whether two ends lie too close for numbers between them."""
    return high - low <= max(1e-12 * max(abs(low), abs(high)), SMALLEST_SPAN)


def tick_labels(ticks: list[float]) -> list[str]:
    """The numbers, all with the decimals that their step needs."""
    if not ticks:
        return []
    largest = max(abs(tick) for tick in ticks)
    if largest >= 1e6 or 0 < largest < 1e-3:
        return [f"{tick:.3g}".replace("e+0", "e").replace("e-0", "e-").replace("-", MINUS) for tick in ticks]
    step = min((b - a for a, b in pairwise(ticks)), default=largest or 1.0)
    decimals = next((places for places in range(8) if abs(round(step, places) - step) < step * 1e-6), 8)
    return [f"{tick + 0.0:.{decimals}f}".replace("-", MINUS) for tick in ticks]
