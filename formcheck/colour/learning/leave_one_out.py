"""How far off a ladder's K and S are for films that they were not learned from."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np

from formcheck.colour.learning.ladder import LearnedLadder, fit_ladder
from formcheck.colour.learning.panels import only, without_film
from formcheck.colour.learning.reckon import reckoned_reflectance


@dataclass(frozen=True)
class LeftOut:
    """One film reckoned from all the others."""

    film: int
    readings: np.ndarray  # (n,), which of the ladder's readings are of this film
    reckoned: np.ndarray | None  # (n, W); None where the other films do not hold its colourants
    between: bool  # the other films hold less and more of each of its colourants
    relief: float = 1.0  # root mean square of the residuals of the others, without this film over with it


def leave_one_out(learned: LearnedLadder, *, surface: tuple[float, float] | None = None,
                  progress: Callable[[], None] = lambda: None) -> list[LeftOut]:
    """Each film reckoned with K, S and surface constants of a fit to all the other films.

    Thickness and loadings of the film left out are taken as written. `surface`: k1 and k2 held at these
    instead of fitted. `progress` is called after each film.

    Source: M. Stone, J. R. Statist. Soc. B 36 (1974) 111.
    """
    found = []
    for film in range(len(learned.ladder.volume_fraction)):
        found.append(_left_out(learned, film, surface))
        progress()
    return found


def _left_out(learned: LearnedLadder, film: int, surface: tuple[float, float] | None) -> LeftOut:
    ladder = learned.ladder
    readings = np.flatnonzero(ladder.film_of == film)
    others = np.delete(ladder.volume_fraction, film, axis=0)
    its = ladder.volume_fraction[film]
    if not len(others) or not _still_all(ladder.learned, others):
        return LeftOut(film, readings, None, False)
    refit = fit_ladder(without_film(ladder, film), begin=learned, surface=surface, with_bands=False)
    reckoned = reckoned_reflectance(
        refit, volume_fraction=np.repeat(its[None, :], len(readings), axis=0),
        thickness_um=np.full(len(readings), ladder.thickness_um[film]), ground_of=ladder.ground_of[readings])
    return LeftOut(film, readings, reckoned, _between(its, others), _relief(learned, refit, ladder.film_of != film))


def _relief(learned: LearnedLadder, refit: LearnedLadder, others: np.ndarray) -> float:
    """Well below 1 where the other films agree among themselves and not with this one."""
    before = learned.reckoned[others] - learned.ladder.reading[others]
    after = refit.reckoned - refit.ladder.reading
    noise = learned.ladder.repeatability
    return float(np.sqrt((np.mean(after**2) + noise**2) / (np.mean(before**2) + noise**2)))


def _still_all(learned: np.ndarray, others: np.ndarray) -> bool:
    return bool((others[:, learned] > 0).any(axis=0).all())


def _between(its: np.ndarray, others: np.ndarray) -> bool:
    """Whether the film's mix lies within what the others span, colourant by colourant."""
    share = its / its.sum()
    shares = others / others.sum(axis=1, keepdims=True)
    held = share > 0
    return bool(((shares[:, held].min(axis=0) <= share[held]) & (share[held] <= shares[:, held].max(axis=0))).all()
                and (share > 0).sum() > 1)


def reckoned_without(learned: LearnedLadder, films: np.ndarray) -> tuple[np.ndarray, np.ndarray] | None:
    """The readings of all films of a mask (F,) reckoned from the rest: their numbers (n,) and values (n, W).

    None where the rest does not hold every colourant to be learned.
    """
    ladder = learned.ladder
    kept = ~films
    if not films.any() or not kept.any() or not _still_all(ladder.learned, ladder.volume_fraction[kept]):
        return None
    read = kept[ladder.film_of]
    number = np.cumsum(kept) - 1
    refit = fit_ladder(only(ladder, films=kept, readings=read, film_of=number[ladder.film_of[read]]), begin=learned,
                       with_bands=False)
    rows = np.flatnonzero(~read)
    film = ladder.film_of[rows]
    return rows, reckoned_reflectance(refit, volume_fraction=ladder.volume_fraction[film],
                                      thickness_um=ladder.thickness_um[film], ground_of=ladder.ground_of[rows])
