"""Measured drawdowns as arrays: films of known loadings, read over grounds of known reflectance."""

from __future__ import annotations

from dataclasses import dataclass, fields, replace

import numpy as np

from formcheck.colour.refuse import refuse_where

UNKNOWN_THICKNESS_SD = 0.3  # relative, of films drawn alike when nobody measured them (common practice)
LEAST_SD = 1e-3  # of a thickness or a known K and S said to be exact; keeps the equations solvable


@dataclass(frozen=True)
class Ladder:
    """F films of C colourants, N readings of them over G grounds, at W wavelengths.

    Where thickness is unknown, `thickness_um` is 1 for every film and K and S are learned per film
    instead of per um: `thickness_known` says which.
    """

    wavelength_nm: np.ndarray  # (W,)
    reading: np.ndarray  # (N, W), reflectance in air, 0 to 1
    film_of: np.ndarray  # (N,), whole numbers
    ground_of: np.ndarray  # (N,)
    ground_reading: np.ndarray  # (G, W), the bare grounds measured in the same way
    volume_fraction: np.ndarray  # (F, C), of each colourant in the film; what is clear makes up the rest
    thickness_um: np.ndarray  # (F,)
    thickness_relative_sd: np.ndarray  # (F,)
    thickness_known: bool
    known_k: np.ndarray  # (C, W), NaN for colourants to be learned
    known_s: np.ndarray
    known_relative_sd: np.ndarray  # (C,)
    repeatability: float  # one standard deviation of a reading, as a fraction
    specular_included: bool

    @property
    def learned(self) -> np.ndarray:
        """(C,): the colourants whose K and S are not known."""
        return np.isnan(self.known_k).any(axis=1)


def checked(ladder: Ladder) -> Ladder:
    """The same; ValueError where shapes do not fit or a value cannot be."""
    L = ladder
    F, C = L.volume_fraction.shape
    N, W = L.reading.shape
    wanted = {
        "wavelength_nm": (W,), "film_of": (N,), "ground_of": (N,), "thickness_um": (F,),
        "thickness_relative_sd": (F,), "known_k": (C, W), "known_s": (C, W), "known_relative_sd": (C,),
        "ground_reading": (len(L.ground_reading), W),
    }
    for name, shape in wanted.items():
        if getattr(L, name).shape != shape:
            raise ValueError(f"{name} of shape {getattr(L, name).shape}; expected {shape}")
    refuse_where(~((L.reading >= 0) & (L.reading <= 1)), L.reading, "reading", "a reflectance from 0 to 1")
    refuse_where(~((L.ground_reading > 0) & (L.ground_reading <= 1)), L.ground_reading, "ground_reading",
                 "a reflectance above 0 and at most 1")
    refuse_where(~(L.volume_fraction >= 0), L.volume_fraction, "volume_fraction", "at least 0")
    refuse_where(~(L.thickness_um > 0), L.thickness_um, "thickness_um", "above 0 um")
    empty = L.volume_fraction.sum(axis=1) <= 0
    refuse_where(empty, L.volume_fraction.sum(axis=1), "volume_fraction (summed)", "some colourant in each film")
    absent = ~(L.volume_fraction > 0).any(axis=0) & L.learned
    refuse_where(absent, L.volume_fraction.max(axis=0), "volume_fraction (greatest)",
                 "each colourant to be learned in some film")
    if not L.learned.any():
        raise ValueError("K and S of every colourant known; expected one to be learned")
    if not L.repeatability > 0:
        raise ValueError(f"repeatability {L.repeatability}; expected above 0")
    return ladder


def without_film(ladder: Ladder, film: int) -> Ladder:
    """The ladder as it would be had this film not been drawn."""
    kept = np.arange(len(ladder.volume_fraction)) != film
    read = ladder.film_of != film
    number = np.cumsum(kept) - 1
    return only(ladder, films=kept, readings=read, film_of=number[ladder.film_of[read]])


def only(ladder: Ladder, *, films: np.ndarray, readings: np.ndarray, film_of: np.ndarray) -> Ladder:
    """The films and readings where the masks hold; `film_of` (kept readings,) numbers the kept films."""
    by_film = ("volume_fraction", "thickness_um", "thickness_relative_sd")
    by_reading = ("reading", "ground_of")
    cut = {name: getattr(ladder, name)[films] for name in by_film}
    cut |= {name: getattr(ladder, name)[readings] for name in by_reading}
    assert set(cut) <= {field.name for field in fields(ladder)}
    return replace(ladder, **cut, film_of=film_of)
