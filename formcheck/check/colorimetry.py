"""What the shade record says besides CIELAB: other differences, metamerism, spectral match, Munsell, hiding."""

from __future__ import annotations

from typing import Any

import numpy as np

from formcheck.check.predict import Optics, Setting, Variants, dye_absorbance_per_cm, pigment_volume_fraction
from formcheck.check.record_sweep import Difference, Hiding, Match, Metamerism
from formcheck.check.setting import Viewing
from formcheck.colour.cmc import parts_cmc
from formcheck.colour.difference import cielab_parts, difference_words, parts_2000
from formcheck.colour.grounds import ground, ground_record
from formcheck.colour.hiding import COMPLETE_HIDING, thickness_for_contrast
from formcheck.colour.metamerism import metamerism_index
from formcheck.colour.munsell import hue_value_chroma_of_spectrum, notation
from formcheck.colour.spectral_match import goodness_of_fit, match_word, rms_difference
from formcheck.colour.transparency import transparency_of_film

UM_PER_CM = 1e4
TRANSPARENCY_OVER = (0.0, 0.25, 0.5, 0.75, 1.0)  # of the film: from the bare black on, as the growth levels off


def differences(wanted: np.ndarray, shade: np.ndarray) -> list[Difference]:
    """The shade (3,) against the wanted one by three formulas, each with its parts in words."""
    told = []
    for formula, parts in (("ΔE00", parts_2000(wanted, shade)), ("ΔE*ab", cielab_parts(wanted, shade)),
                           ("CMC(2:1)", parts_cmc(wanted, shade))):
        told.append(Difference(
            formula=formula, value=float(parts.total), lightness=float(parts.lightness), chroma=float(parts.chroma),
            hue=float(parts.hue), words=difference_words(wanted, shade, parts)))
    return told


def match_of(spectrum: np.ndarray, viewing: Viewing) -> Match | None:
    """Against a wanted spectrum: how alike, and how the match holds under the other lights; None without one."""
    if viewing.wanted_spectrum is None:
        return None
    fit = float(goodness_of_fit(spectrum, viewing.wanted_spectrum))
    first = viewing.light(viewing.lights[0])
    index = [Metamerism(light=name, index_de00=float(metamerism_index(
        viewing.wanted_spectrum, spectrum, reference_light=first, test_light=viewing.light(name),
        observer_deg=viewing.observer_deg))) for name in viewing.lights[1:]] if spectrum.min() > 0 else []
    return Match(rms=float(rms_difference(spectrum, viewing.wanted_spectrum)), goodness_of_fit=fit,
                 word=match_word(fit), metamerism=index)


def munsell_of(spectrum: np.ndarray) -> str:
    """Munsell notation under illuminant C for the 1931 observer; empty outside the renotation table."""
    return notation(hue_value_chroma_of_spectrum(spectrum)) or ""


def hiding_of(optics: Optics, setting: Setting, variants: Variants, solids_by_volume: float, *,
              is_ink: bool) -> list[Hiding]:
    """Film and spreading rate at a contrast ratio of 0.98 over the charts, and of inks the transparency.

    One for every variant. K, S and the dyes per um of wet film, so that the thickness found is the wet one.
    """
    volume = pigment_volume_fraction(optics, variants)
    black, white = (ground_record(name) for name in ("chart_black", "chart_white"))
    film: dict[str, Any] = {"k": (volume * variants.k_scale) @ optics.k, "s": (volume * variants.s_scale) @ optics.s,
            "dye_absorbance_per_um": dye_absorbance_per_cm(optics, variants) / UM_PER_CM}
    seen: dict[str, Any] = {"n": setting.film_index, "specular_included": setting.specular_included,
            "ground_in_air": black.measured_in_air, "ground_specular_included": black.specular_included}
    wet = thickness_for_contrast(**film, black=ground(black.name), white=ground(white.name), **seen)
    clear = np.full(len(wet), np.inf)
    if is_ink:
        over = float(variants.wet_thickness_um[0]) * np.array(TRANSPARENCY_OVER)
        clear = transparency_of_film(**film, thickness_um=over, black=ground(black.name), **seen)
    return [_hiding(float(um), float(number), solids_by_volume) for um, number in zip(wet, clear, strict=True)]


def _hiding(wet_um: float, transparency_um: float, solids_by_volume: float) -> Hiding:
    transparency = transparency_um if np.isfinite(transparency_um) else None
    if not np.isfinite(wet_um):
        return Hiding(contrast=COMPLETE_HIDING, transparency_um=transparency,
                      reason="no film of it hides: it scatters too little")
    if wet_um <= 0:
        return Hiding(contrast=COMPLETE_HIDING, transparency_um=transparency,
                      reason="the bare charts already reach it")
    dry = wet_um * solids_by_volume if np.isfinite(solids_by_volume) else None
    return Hiding(contrast=COMPLETE_HIDING, wet_um=wet_um, dry_um=dry, spreading_m2_l=1000.0 / wet_um,
                  transparency_um=transparency)
