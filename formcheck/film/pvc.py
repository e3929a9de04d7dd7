"""Pigment volume concentration: what part of the dry film is pigment and extender."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from formcheck.film.bounds import Bounded, join_reasons, share
from formcheck.film.volumes import Volumes, summed


def pigment_volume_concentration(of: Volumes, pigment: ArrayLike) -> Bounded:
    """PVC of the dry film, pores not counted. (R,) [1]

    pigment (I,) bool: pigments and extenders. NaN where the film has no solids or a datum is missing.
    Source: ISO 4618:2023, pigment volume concentration.
    """
    mask = np.asarray(pigment, bool)
    reasons = join_reasons(of.missing_density, of.missing_nonvolatile)
    return share(summed(of.dry, mask), summed(of.dry, ~mask), reasons)
