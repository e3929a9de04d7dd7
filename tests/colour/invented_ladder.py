"""Ladders of drawdowns whose K, S and surface are known because they are invented; noise as of a real instrument."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from formcheck.colour import kubelka_munk, saunderson
from formcheck.colour.learning.panels import Ladder

NM = np.arange(400.0, 701.0, 20.0)
GROUNDS = np.array([np.full(len(NM), 0.86), np.full(len(NM), 0.055)])
# Volume fractions of colour, white and black in each film.
LADDER = np.array([[0.2, 0, 0], [0.0008, 0.2, 0], [0.004, 0.19, 0], [0.02, 0.17, 0], [0.08, 0.1, 0], [0, 0.2, 0],
                   [0, 0.195, 0.002], [0.15, 0, 0.003]])
HELD_OUT = np.array([[0.0018, 0.2, 0], [0.009, 0.18, 0], [0.045, 0.15, 0], [0.12, 0.05, 0], [0.01, 0.18, 0.001]])
THICKNESS_UM = 60.0
REPEATABILITY = 0.001


@dataclass(frozen=True)
class Invented:
    ladder: Ladder
    K: np.ndarray
    S: np.ndarray
    k1: float
    k2: float
    specular_included: bool

    def measured(self, fractions: np.ndarray, thickness_um: np.ndarray, ground_of: np.ndarray) -> np.ndarray:
        """By kubelka_munk.film and saunderson.to_measured, which the learning code does not use."""
        return measured(self.K, self.S, fractions, thickness_um, ground_of, self.k1, self.k2, self.specular_included)


def measured(K, S, fractions, thickness_um, ground_of, k1, k2, specular_included) -> np.ndarray:
    surface = {"k1": k1, "k2": k2, "specular_included": specular_included}
    below = saunderson.to_internal(GROUNDS[ground_of], **surface)
    inside = kubelka_munk.film(fractions @ K, fractions @ S, thickness_um=thickness_um, ground=below)
    return saunderson.to_measured(inside, **surface)


def invented(seed: int, *, films: np.ndarray = LADDER, k1: float = 0.04, k2: float = 0.596,
             specular_included: bool = True, thickness_sd: float = 0.02, thickness_known: bool = True,
             white_known: bool = False) -> Invented:
    """A colour, a white and a black drawn by `seed`; each film over both grounds, its thickness a little off."""
    rng = np.random.default_rng(seed)
    K, S = _colourants(rng)
    film_of, ground_of = np.repeat(np.arange(len(films)), 2), np.tile([0, 1], len(films))
    true_um = THICKNESS_UM * np.exp(thickness_sd * rng.standard_normal(len(films)))
    exact = measured(K, S, films[film_of], true_um[film_of], ground_of, k1, k2, specular_included)
    unknown = np.full(K.shape, np.nan)
    known_k, known_s = unknown.copy(), unknown.copy()
    if white_known:
        known_k[1], known_s[1] = K[1], S[1]
    ladder = Ladder(
        wavelength_nm=NM, reading=np.clip(_noisy(exact, rng), 0, 1), film_of=film_of, ground_of=ground_of,
        ground_reading=_noisy(GROUNDS, rng), volume_fraction=films,
        thickness_um=np.full(len(films), THICKNESS_UM if thickness_known else 1.0),
        thickness_relative_sd=np.full(len(films), thickness_sd if thickness_known else 0.3),
        thickness_known=thickness_known, known_k=known_k, known_s=known_s, known_relative_sd=np.full(3, 0.01),
        repeatability=REPEATABILITY, specular_included=specular_included)
    return Invented(ladder, K, S, k1, k2, specular_included)


def _colourants(rng: np.random.Generator) -> tuple[np.ndarray, np.ndarray]:
    centre, width = rng.uniform(430, 660), rng.uniform(25, 70)
    colour = 0.02 + rng.uniform(0.5, 3) * _bell(centre, width) + rng.uniform(0, 0.4) * _bell(centre - 90, 40)
    tilt = 1 + 0.3 * (NM - 550) / 150 * rng.uniform(-1, 1)
    K = np.array([colour, 0.0005 + 0.03 * _bell(385, 15), rng.uniform(3, 6) * (550 / NM) ** 0.2])
    S = np.array([rng.uniform(0.02, 0.15) * tilt, rng.uniform(0.6, 1.2) * (550 / NM) ** 0.8, np.full(len(NM), 0.05)])
    return K, S


def _bell(centre_nm: float, width_nm: float) -> np.ndarray:
    return np.exp(-(((NM - centre_nm) / width_nm) ** 2))


def _noisy(values: np.ndarray, rng: np.random.Generator) -> np.ndarray:
    return values + REPEATABILITY * rng.standard_normal(values.shape)
