"""What a ladder cannot settle, told from its readings alone: the grounds of a warning, as numbers."""

from __future__ import annotations

import numpy as np

from formcheck.colour import kubelka_munk, saunderson
from formcheck.colour.learning.ladder import LearnedLadder
from formcheck.colour.learning.panels import Ladder

SHOWS = 0.1  # of a colourant's greatest K or S: below, an error of it is not seen


def relative_sd(values: np.ndarray, sd: np.ndarray) -> np.ndarray:
    """Median over the wavelengths that matter of sd over value, (C,); values, sd (C, W)."""
    found = np.empty(len(values))
    for c, (value, one) in enumerate(zip(values, sd, strict=True)):
        matters = value >= SHOWS * value.max()
        found[c] = np.median(one[matters] / np.maximum(value[matters], 1e-300))
    return found


def palest_absorption(learned: LearnedLadder) -> np.ndarray:
    """Of each colourant, in its palest mix, the reflectance inside where that mix absorbs most, (C,).

    NaN for colourants that no mix holds. A strong pigment whose palest mix is dark there has its K told by
    films that hardly reflect, which are mostly surface.
    """
    ladder = learned.ladder
    inside = saunderson.to_internal(learned.reckoned, k1=learned.k1, k2=learned.k2,
                                    specular_included=ladder.specular_included)
    darkest = inside.min(axis=1)
    present = ladder.volume_fraction > 0
    mixed = present & (present.sum(axis=1, keepdims=True) > 1)
    found = np.full(present.shape[1], np.nan)
    for c in range(len(found)):
        rows = mixed[ladder.film_of, c]
        if rows.any():
            found[c] = darkest[rows].max()
    return found


def thickness_shows(learned: LearnedLadder) -> np.ndarray:
    """Of each film, the most that its reflectance inside changes from an ideal black to an ideal white, (F,)."""
    ladder = learned.ladder
    amount = ladder.volume_fraction * learned.thickness_um[:, None]
    K, S = amount @ learned.K, amount @ learned.S
    over = [kubelka_munk.film(K, S, thickness_um=1.0, ground=ground) for ground in (0.0, 1.0)]
    return (over[1] - over[0]).max(axis=1)


def grounds_of_films(ladder: Ladder) -> np.ndarray:
    """Over how many grounds each film was read, (F,)."""
    films = len(ladder.volume_fraction)
    return np.array([len(set(ladder.ground_of[ladder.film_of == f].tolist())) for f in range(films)])
