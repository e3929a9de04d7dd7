"""How far two colours stand apart: CIEDE2000 and CIELAB with their parts, and the difference in plain words."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

TWENTY_FIVE_TO_7 = 25.0**7

# In units of CIEDE2000, of which 1 is about what an eye just sees (common practice).
TOO_SMALL_TO_NAME = 0.5
SLIGHTLY_BELOW, MUCH_FROM = 1.5, 5.0
SHARE_TO_NAME = 0.25  # of the greatest part: lesser ones are left unsaid
NEARLY_GREY = 5.0  # C*ab below which a hue has no meaning and the a*, b* directions are named instead
NO_DIFFERENCE = "no difference to speak of"


@dataclass(frozen=True)
class DifferenceParts:
    """A difference in parts, each shape (...): lightness, chroma and hue as the formula weighs them.

    total**2 = lightness**2 + chroma**2 + hue**2, in CIEDE2000 with its rotation x chroma x hue besides.
    Signs: second colour less the first; hue positive counter-clockwise (red, yellow, green, blue).
    """

    total: np.ndarray
    lightness: np.ndarray
    chroma: np.ndarray
    hue: np.ndarray


def delta_e_2000(
    lab1: ArrayLike, lab2: ArrayLike, kl: float = 1.0, kc: float = 1.0, kh: float = 1.0
) -> np.ndarray:
    """CIEDE2000 colour difference, shape (...), of L*, a*, b* (..., 3) that broadcast; symmetric. [1]

    kl, kc, kh: parametric factors; 1 for reference conditions, kl = 2 is common practice for textiles.

    Source: ISO/CIE 11664-6; G. Sharma, W. Wu & E. N. Dalal, Color Res. Appl. 30 (2005) 21.
    """
    return parts_2000(lab1, lab2, kl, kc, kh).total


def parts_2000(
    lab1: ArrayLike, lab2: ArrayLike, kl: float = 1.0, kc: float = 1.0, kh: float = 1.0
) -> DifferenceParts:
    """CIEDE2000 with its weighted lightness, chroma and hue parts; arguments as `delta_e_2000`."""
    L1, a1, b1 = np.moveaxis(np.asarray(lab1, dtype=float), -1, 0)
    L2, a2, b2 = np.moveaxis(np.asarray(lab2, dtype=float), -1, 0)
    stretch = 1 + _chroma_switch((np.hypot(a1, b1) + np.hypot(a2, b2)) / 2)
    C1, h1 = _chroma_hue(a1 * stretch, b1)
    C2, h2 = _chroma_hue(a2 * stretch, b2)
    grey = C1 * C2 == 0  # no hue difference where one of the two has no hue
    dh = np.where(grey, 0.0, (h2 - h1 + 180) % 360 - 180)
    # A difference of exactly 180 degrees keeps the sign of h2 - h1, as Sharma et al. define it.
    dh = np.where(~grey & (h2 - h1 == 180), 180.0, dh)
    L, C, h = (L1 + L2) / 2, (C1 + C2) / 2, _mean_hue(h1, h2, grey)

    S_L = 1 + 0.015 * (L - 50) ** 2 / np.sqrt(20 + (L - 50) ** 2)
    S_C = 1 + 0.045 * C
    S_H = 1 + 0.015 * C * _hue_term(h)
    lightness = (L2 - L1) / (kl * S_L)
    chroma = (C2 - C1) / (kc * S_C)
    hue = 2 * np.sqrt(C1 * C2) * np.sin(np.radians(dh) / 2) / (kh * S_H)
    squared = lightness**2 + chroma**2 + hue**2 + _rotation(C, h) * chroma * hue
    return DifferenceParts(np.sqrt(np.maximum(squared, 0)), lightness, chroma, hue)


def delta_e_ab(lab1: ArrayLike, lab2: ArrayLike) -> np.ndarray:
    """CIELAB colour difference DE*ab, shape (...), of L*, a*, b* (..., 3) that broadcast. [1]

    Source: ISO/CIE 11664-4.
    """
    return np.linalg.norm(np.asarray(lab2, dtype=float) - np.asarray(lab1, dtype=float), axis=-1)


def cielab_parts(lab1: ArrayLike, lab2: ArrayLike) -> DifferenceParts:
    """DE*ab with DL*, DC*ab and DH*ab = 2 sqrt(C1 C2) sin(dh/2), as ISO/CIE 11664-4; arguments as there."""
    L1, a1, b1 = np.moveaxis(np.asarray(lab1, dtype=float), -1, 0)
    L2, a2, b2 = np.moveaxis(np.asarray(lab2, dtype=float), -1, 0)
    turn = np.arctan2(b2, a2) - np.arctan2(b1, a1)
    turn = np.where(np.abs(turn) > np.pi, turn - np.copysign(2 * np.pi, turn), turn)
    C1, C2 = np.hypot(a1, b1), np.hypot(a2, b2)
    hue = 2 * np.sqrt(C1 * C2) * np.sin(turn / 2)
    return DifferenceParts(delta_e_ab(lab1, lab2), L2 - L1, C2 - C1, hue)


def _chroma_switch(chroma: np.ndarray) -> np.ndarray:
    """G: stretches a* near the grey axis, 0.5 there and 0 for vivid colours."""
    c7 = chroma**7
    return 0.5 * (1 - np.sqrt(c7 / (c7 + TWENTY_FIVE_TO_7)))


def _chroma_hue(a: np.ndarray, b: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    return np.hypot(a, b), np.degrees(np.arctan2(b, a)) % 360


def _mean_hue(h1: np.ndarray, h2: np.ndarray, grey: np.ndarray) -> np.ndarray:
    """Half way along the shorter arc; the sum where one colour is grey and its hue is 0 by definition."""
    total = h1 + h2
    far = np.abs(h1 - h2) > 180
    mean = np.where(far, np.where(total < 360, total + 360, total - 360), total) / 2
    return np.where(grey, total, mean)


def _hue_term(h: np.ndarray) -> np.ndarray:
    """T of the hue weight."""
    return (
        1
        - 0.17 * np.cos(np.radians(h - 30))
        + 0.24 * np.cos(np.radians(2 * h))
        + 0.32 * np.cos(np.radians(3 * h + 6))
        - 0.20 * np.cos(np.radians(4 * h - 63))
    )


def _rotation(C: np.ndarray, h: np.ndarray) -> np.ndarray:
    """R_T: couples chroma and hue in the blues."""
    turn = 30 * np.exp(-(((h - 275) / 25) ** 2))
    c7 = C**7
    return -2 * np.sqrt(c7 / (c7 + TWENTY_FIVE_TO_7)) * np.sin(np.radians(2 * turn))


def difference_words(
    lab_from: ArrayLike, lab_to: ArrayLike, parts: DifferenceParts | None = None
) -> str:
    """How `lab_to` looks beside `lab_from`, both L*, a*, b* of shape (3,): words by falling weight.

    Lightness, chroma and hue are weighed as CIEDE2000 weighs them, or as in `parts` (cmc.parts_cmc,
    cielab_parts) of the same two colours in the same order. Beside a nearly grey colour the
    shift is told as redder or greener, yellower or bluer; beside others as more vivid or duller, and
    by the way the hue turns. Parts below 0.5, or a quarter of the greatest, go unsaid.
    """
    first, second = np.asarray(lab_from, dtype=float), np.asarray(lab_to, dtype=float)
    parts = parts_2000(first, second) if parts is None else parts
    named = [("lighter" if parts.lightness > 0 else "darker", abs(float(parts.lightness)))]
    if np.hypot(first[1], first[2]) < NEARLY_GREY:
        named += _sideways(first, second, total=float(np.hypot(parts.chroma, parts.hue)))
    else:
        named.append(("more vivid" if parts.chroma > 0 else "duller", abs(float(parts.chroma))))
        named.append((_hue_word(first, second), abs(float(parts.hue))))
    return _told(named, float(parts.total))


def _told(named: list[tuple[str, float]], total: float) -> str:
    if total < TOO_SMALL_TO_NAME:
        return NO_DIFFERENCE
    named = sorted(named, key=lambda part: -part[1])
    least = max(TOO_SMALL_TO_NAME, SHARE_TO_NAME * named[0][1])
    kept = [part for part in named if part[1] >= least] or named[:1]
    return ", ".join(_with_degree(word, size) for word, size in kept)


def _with_degree(word: str, size: float) -> str:
    if size < SLIGHTLY_BELOW:
        return f"slightly {word}"
    return f"much {word}" if size >= MUCH_FROM else word


def _sideways(first: np.ndarray, second: np.ndarray, *, total: float) -> list[tuple[str, float]]:
    """The shift in the a*, b* plane along its two axes, sharing the CIEDE2000 size of that shift."""
    da, db = second[1:] - first[1:]
    size = total / max(float(np.hypot(da, db)), 1e-12)
    return [
        ("redder" if da > 0 else "greener", abs(float(da)) * size),
        ("yellower" if db > 0 else "bluer", abs(float(db)) * size),
    ]


def _hue_word(first: np.ndarray, second: np.ndarray) -> str:
    """Towards which of red, yellow, green, blue the hue turns: the axis its turning runs along most.

    So a red turns yellower or bluer, a yellow greener or redder, as the trade says.
    """
    h1, h2 = (np.arctan2(colour[2], colour[1]) for colour in (first, second))
    turn = (h2 - h1 + np.pi) % (2 * np.pi) - np.pi
    along_a, along_b = -np.sin(h1 + turn / 2) * np.sign(turn), np.cos(h1 + turn / 2) * np.sign(turn)
    if abs(along_a) > abs(along_b):
        return "redder" if along_a > 0 else "greener"
    return "yellower" if along_b > 0 else "bluer"
