"""What the amounts of a recipe leave untold, why, and which datum would settle it; and what was assumed."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from formcheck.recipe.balance import BY_VOLUME, Floats
from formcheck.recipe.lines import SPECIFIC_VOLUME_RANGE_ML_G, Lines


@dataclass(frozen=True)
class Reason:
    """Something that could not be told of a recipe."""

    what: str
    why: str
    would_settle: str


def reasons_for(lines: Lines, *, mass_g: Floats, total_mass_g: float,
                total_volume_ml: float) -> tuple[Reason, ...]:
    """One reason for each unknown mass, and for the totals; masses (L,) NaN where unknown."""
    lacking = [n for n, why in enumerate(lines.lacks) if why]
    volumes_lack = "; ".join(dict.fromkeys(lines.lacks[n] for n in lacking))
    heaps = [lines.names[n] for n in np.flatnonzero(lines.heaped)]
    why_all = "; ".join(word for word in (volumes_lack, *(_heap(name) for name in heaps)) if word)
    settle_all = _listed([f"the density of {lines.names[n]}" for n in lacking]
                         + [f"the mass of {name}" for name in heaps])
    found = []
    for n in np.flatnonzero(np.isnan(mass_g)):
        name = lines.names[n]
        if lines.heaped[n]:
            found.append(Reason(f"mass of {name}", _heap(name), f"{name} by mass"))
        elif lines.lacks[n] and lines.kinds[n] in BY_VOLUME:
            found.append(Reason(f"mass of {name}", f"given by volume, and {lines.lacks[n]}",
                                f"the density of {name}, or its amount by mass"))
        else:
            found.append(Reason(f"mass of {name}", f"it hangs on what is not known: {why_all}", settle_all))
    if np.isnan(total_mass_g):
        found.append(Reason("mass of the batch and every mass fraction", why_all, settle_all))
    if np.isnan(total_volume_ml):
        found.append(Reason("volume of the batch", why_all,
                            f"{settle_all}, or a measured density of the mixture"))
    return tuple(found)


def notes_for(lines: Lines, *, total_volume_ml: float, small_unknowns: bool,
              said: Sequence[str]) -> tuple[str, ...]:
    """What was assumed on the way to masses and volumes, in sentences."""
    notes = list(said)
    if any(kind == "mass_fraction" and written.strip().endswith("%")
           for kind, written in zip(lines.kinds, lines.written, strict=True)):
        notes.append("A bare % is read as % w/w.")
    if small_unknowns:
        low, high = SPECIFIC_VOLUME_RANGE_ML_G
        names = _listed([name for name, why in zip(lines.names, lines.lacks, strict=True) if why])
        notes.append(f"The density of {names} is unknown; little of it is in, so any volume from {low} to "
                     f"{high} mL/g is allowed for and widens the volume of the batch.")
    if lines.density_g_cm3 is None and not np.isnan(total_volume_ml):
        notes.append("The volume of the batch is the sum of the ingredients' volumes.")
    return tuple(notes)


def _heap(name: str) -> str:
    return f"{name} is a dry powder given by volume, and a heap's volume does not tell its mass"


def _listed(words: Sequence[str]) -> str:
    unique = list(dict.fromkeys(words))
    return " and ".join(filter(None, [", ".join(unique[:-1]), *unique[-1:]]))
