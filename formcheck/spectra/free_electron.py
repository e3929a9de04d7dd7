"""Electrons free in a box: what chain, plate and ring share.

Each shape gives its orbitals: a label, an energy and the squared transition lengths between them.
Here electrons are filled in from below and light lifts them, one electron at a time.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from formcheck.trouble import InputError, Place, Problem

# CODATA 2018: h = 6.62607015e-34 J s, m_e = 9.1093837015e-31 kg, e = 1.602176634e-19 C, c = 299792458 m/s
H2_OVER_8M_EV_NM2 = 0.37603016
HBAR2_OVER_2M_EV_NM2 = H2_OVER_8M_EV_NM2 / np.pi**2
HC_EV_NM = 1239.841984
SAME_ENERGY = 1e-9  # relative; nearer levels are one degenerate level
MOST_ORBITALS_EACH_WAY = (
    120  # kept below and above the highest filled one: the rest lies far in the ultraviolet
)


@dataclass(frozen=True)
class Orbitals:
    """Orbitals of an empty box, lowest first: labels, energies (n,), squared transition lengths (n, n)."""

    labels: Sequence[str]
    energy_ev: np.ndarray
    length2_nm2: np.ndarray


@dataclass(frozen=True)
class Level:
    """Orbitals of one energy and the electrons in them, up to two to an orbital."""

    label: str
    energy_ev: float
    orbitals: int
    electrons: float


@dataclass(frozen=True)
class Transition:
    """Light of one wavelength lifting electrons; `oscillator_strength` sums over the degenerate ways."""

    wavelength_nm: float
    oscillator_strength: float
    energy_ev: float
    label: str


def occupation(energy_ev: np.ndarray, n_electrons: int) -> np.ndarray:
    """Electrons in each orbital, from the lowest up; a level not filled shares evenly among its orbitals."""
    filled = np.zeros(energy_ev.size)
    left = float(n_electrons)
    for members in _degenerate(energy_ev):
        filled[members] = min(2.0, left / len(members))
        left -= filled[members].sum()
    return filled


def levels_of(orbitals: Orbitals, n_electrons: int, *, empty: int = 3) -> list[Level]:
    """All filled levels and the first `empty` ones above, lowest first."""
    filled = occupation(orbitals.energy_ev, n_electrons)
    levels = [
        Level(
            " ".join(orbitals.labels[i] for i in members),
            float(orbitals.energy_ev[members[0]]),
            len(members),
            float(filled[members].sum()),
        )
        for members in _degenerate(orbitals.energy_ev)
    ]
    highest = max(i for i, level in enumerate(levels) if level.electrons > 0)
    return levels[: highest + 1 + empty]


def transitions_of(orbitals: Orbitals, n_electrons: int, *, gap_ev: float = 0.0) -> list[Transition]:
    """Allowed one-electron transitions, longest wavelength first; `gap_ev` is added to each energy.

    f = (2 m dE / 3 hbar^2) |x|^2 for each electron that finds room, averaged over orientation [Mulliken].
    """
    filled = occupation(orbitals.energy_ev, n_electrons)
    start, end = _near_the_edge(filled)
    energy, filled, length2 = (
        orbitals.energy_ev[start:end],
        filled[start:end],
        orbitals.length2_nm2[start:end, start:end],
    )
    lift = energy[None, :] - energy[:, None]
    ways = (
        np.where(lift > SAME_ENERGY * energy.max(), filled[:, None] * (1 - filled[None, :] / 2), 0.0)
        * length2
    )
    from_, to = np.nonzero(ways > 0)
    de = lift[from_, to] + gap_ev
    strength = de * ways[from_, to] / (3 * HBAR2_OVER_2M_EV_NM2)
    labels = [
        f"{orbitals.labels[start + i]} to {orbitals.labels[start + j].split('=')[-1]}"
        for i, j in zip(from_.tolist(), to.tolist(), strict=True)
    ]
    return _merged(de, strength, labels)


def _near_the_edge(filled: np.ndarray) -> tuple[int, int]:
    highest = int(np.flatnonzero(filled > 0)[-1])
    return max(0, highest - MOST_ORBITALS_EACH_WAY), highest + 1 + MOST_ORBITALS_EACH_WAY


def _merged(energy_ev, strength, labels) -> list[Transition]:
    """One transition for each energy, lowest energy first."""
    order = np.argsort(energy_ev, kind="stable")
    found = []
    for members in _degenerate(energy_ev[order]):
        at = order[members]
        e = float(energy_ev[at[0]])
        found.append(Transition(HC_EV_NM / e, float(strength[at].sum()), e, _short([labels[i] for i in at])))
    return found


def _short(ways: list[str], most: int = 2) -> str:
    """The first ways, and how many more there are."""
    return ", ".join(ways[:most]) + (f" and {len(ways) - most} more" if len(ways) > most else "")


def _degenerate(energy_ev: np.ndarray) -> list[list[int]]:
    """Indices of a rising array, grouped by equal energy."""
    groups: list[list[int]] = []
    for i, e in enumerate(energy_ev):
        if groups and abs(e - energy_ev[groups[-1][0]]) <= SAME_ENERGY * max(abs(e), 1e-30):
            groups[-1].append(i)
        else:
            groups.append([i])
    return groups


def refuse_size(found: str, expected: str) -> InputError:
    """The error for a box that no molecule has: most often a size in another unit."""
    return InputError(Problem(Place("box"), found, f"{expected}; is the size in nm?"))
