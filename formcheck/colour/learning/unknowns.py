"""What a ladder of drawdowns leaves open, laid out in two arrays: unknowns of each wavelength, and shared ones.

By wavelength (W, 2C + G): ln K and ln S of each colourant, so that neither falls below 0, and the logit of
each ground as met from inside. Shared (O,): k1, k2; then, each 0 where everything is as written, ln of
each film's thickness over the nominal, what its gloss adds to its readings, the same of each bare ground,
and ln of each loading in a mix over the nominal.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from formcheck.colour.learning.panels import LEAST_SD, Ladder

# What is believed before a reading is looked at. Wide, so that readings that say anything prevail.
K1_BELIEVED, K1_SD = 0.04, 0.02  # Fresnel at n = 1.5; matt and glossy films by either side (common practice)
K2_BELIEVED, K2_SD = 0.5, 0.1  # 0.596 for perfectly diffuse light, 0.4 to 0.6 as fitted to paints
K1_STRAYS, K2_STRAYS = 0.003, 0.03  # how far surfaces truly lie from these, for the bands alone
K1_MOST, K2_MOST = 0.10, 0.80
LN_K_SD, LN_S_SD = 6.0, 2.0  # about the mean of the ladder
SMOOTH_OVER_NM = 200.0
LEAST_LN, MOST_LN = -25.0, 12.0  # of K X or S X: beyond, no film shows a difference
LEAST_KNOWN = 1e-9  # of a known K or S times the mean thickness


@dataclass(frozen=True)
class Layout:
    """Where what stands. `mix_film`, `mix_colourant` (P,): the loadings that could be off."""

    colourants: int
    grounds: int
    films: int
    mix_film: np.ndarray
    mix_colourant: np.ndarray

    @property
    def k(self) -> slice:
        return slice(0, self.colourants)

    @property
    def s(self) -> slice:
        return slice(self.colourants, 2 * self.colourants)

    @property
    def ground(self) -> slice:
        return slice(2 * self.colourants, 2 * self.colourants + self.grounds)

    @property
    def thickness(self) -> slice:
        return slice(2, 2 + self.films)

    @property
    def gloss(self) -> slice:
        return slice(2 + self.films, 2 + 2 * self.films)

    @property
    def ground_gloss(self) -> slice:
        return slice(2 + 2 * self.films, 2 + 2 * self.films + self.grounds)

    @property
    def loading(self) -> slice:
        return slice(self.ground_gloss.stop, self.shared)

    @property
    def shared(self) -> int:
        return self.ground_gloss.stop + len(self.mix_film)

    @property
    def each(self) -> int:
        return self.ground.stop


def layout_of(ladder: Ladder) -> Layout:
    """Loadings may be off in mixes alone: in a film of one colourant they are its thickness."""
    present = ladder.volume_fraction > 0
    mixed = present & (present.sum(axis=1, keepdims=True) > 1)
    film, colourant = np.nonzero(mixed)
    return Layout(present.shape[1], len(ladder.ground_reading), len(present), film, colourant)


@dataclass(frozen=True)
class Spreads:
    """Standard deviations that the readings themselves tell, each with a most.

    model: of a reading, in units of its cube root, beyond repeatability. gloss: of a reading, from film to film.
    loading: relative, of a colourant in a mix (weighing, dispersing).
    """

    model: float
    gloss: float
    loading: float


@dataclass(frozen=True)
class Unknowns:
    each: np.ndarray  # (W, M)
    shared: np.ndarray  # (O,)


@dataclass(frozen=True)
class Beliefs:
    """Independent normal beliefs of the unknowns: centres and 1/sd**2 (0 for none)."""

    centre: np.ndarray  # (W, M)
    weight: np.ndarray
    shared_centre: np.ndarray  # (O,)
    shared_weight: np.ndarray


def beliefs_of(ladder: Ladder, layout: Layout, spreads: Spreads, each: np.ndarray) -> Beliefs:
    """`each` (W, M): the unknowns as they stand; K and S to be learned are believed to lie about their mean."""
    centre, weight = np.zeros_like(each), np.zeros_like(each)
    learned = ladder.learned
    for part, known, sd in ((layout.k, ladder.known_k, LN_K_SD), (layout.s, ladder.known_s, LN_S_SD)):
        ln_known = np.log(np.maximum(np.where(learned[:, None], 1.0, known), LEAST_KNOWN / mean_thickness(ladder)))
        known_sd = np.maximum(ladder.known_relative_sd, LEAST_SD)
        centre[:, part] = np.where(learned, each[:, part][:, learned].mean() if learned.any() else 0.0, ln_known.T)
        weight[:, part] = np.where(learned, sd * alike(ladder) ** 0.5, known_sd) ** -2.0
    shared_centre = np.zeros(layout.shared)
    shared_centre[:2] = K1_BELIEVED, K2_BELIEVED
    shared_sd = np.empty(layout.shared)
    shared_sd[:2] = K1_SD, K2_SD
    shared_sd[layout.thickness] = np.maximum(ladder.thickness_relative_sd, LEAST_SD)
    shared_sd[layout.gloss] = shared_sd[layout.ground_gloss] = spreads.gloss
    shared_sd[layout.loading] = spreads.loading
    return Beliefs(centre, weight, shared_centre, shared_sd**-2.0)


def alike(ladder: Ladder) -> float:
    """How many neighbouring wavelengths tell one thing of what varies smoothly: S, gloss, dispersion."""
    return max(1.0, len(ladder.wavelength_nm) * SMOOTH_OVER_NM / float(np.ptp(ladder.wavelength_nm)))


def mean_thickness(ladder: Ladder) -> float:
    return float(np.exp(np.log(ladder.thickness_um).mean()))
