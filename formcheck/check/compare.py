"""`formcheck compare`: two measured spectra, standard and sample, against each other."""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path

import numpy as np

from formcheck import __version__
from formcheck.check.colorimetry import differences, munsell_of
from formcheck.check.colourants import held_beyond
from formcheck.check.record import Spectrum
from formcheck.check.record_compare import Comparison, Strength, UnderOneLight
from formcheck.check.record_sweep import Match, Metamerism
from formcheck.check.shade import swatch_of
from formcheck.colour.cielab import lab
from formcheck.colour.difference import delta_e_2000, difference_words
from formcheck.colour.lights import Light, light_name, table
from formcheck.colour.metamerism import metamerism_index
from formcheck.colour.spectral_match import goodness_of_fit, match_word, rms_difference
from formcheck.colour.strength import (
    added_k_over_s,
    shades_at_equal_strength,
    strength_at_maximum,
    strength_by_weights,
)
from formcheck.colour.tristimulus import white_point, xyz
from formcheck.spectra.files import read_spectrum
from formcheck.spectra.grid import WAVELENGTH_NM, resample
from formcheck.spectra.measured import MeasuredSpectrum, Scale
from formcheck.trouble import trouble

USUAL_LIGHTS = ("D65", "A", "LED-B3")
LEAST, MOST = 1e-4, 1 - 1e-6  # of a reflectance whose K/S is asked for


def compare_spectra(standard: Path, sample: Path, *, white: Path | None = None, lights: Sequence[str] = (),
                    observer_deg: int = 10, columns: tuple[str | None, str | None] = (None, None),
                    scale: Scale | None = None) -> Comparison:
    """The Comparison of two spectrum files; with `white`, the reduction without colourant, their strengths too.

    Raises
    ------
    InputError
        a file that cannot be read, an unknown light, an observer other than 2 or 10.
    """
    if observer_deg not in (2, 10):
        raise trouble("--observer", str(observer_deg), "2 (CIE 1931) or 10 (CIE 1964)")
    first, other = (_read(path, column, scale) for path, column in zip((standard, sample), columns, strict=True))
    values = [_on_grid(one) for one in (first, other)]
    named = [_light(name) for name in lights or USUAL_LIGHTS]
    said = [f"{path}: {note}" for path, one in ((standard, first), (sample, other))
            for note in (*one.notes, *held_beyond("the spectrum", one.wavelength_nm))]
    strength = None
    if white is not None:
        strength = _strength(values, _on_grid(_read(white, None, scale)), named[0][1], observer_deg)
    return Comparison(
        formcheck_version=__version__, standard_file=str(standard), sample_file=str(sample), standard_name=first.name,
        sample_name=other.name, observer_deg=observer_deg,
        lights=[_under(name, light, values, observer_deg) for name, light in named],
        match=_match(values, named, observer_deg), munsell_standard=munsell_of(values[0]),
        munsell_sample=munsell_of(values[1]), strength=strength, standard=_spectrum(first, values[0]),
        sample=_spectrum(other, values[1]), notes=said)


def _read(path: Path, column: str | None, scale: Scale | None) -> MeasuredSpectrum:
    return read_spectrum(path, column=column, scale=scale, quantity=None if scale is None else "reflectance")


def _on_grid(one: MeasuredSpectrum) -> np.ndarray:
    return np.maximum(resample(one.wavelength_nm, one.values)[0], 0.0)


def _light(name: str) -> tuple[str, Light]:
    """A built-in light by its name, or one of the user's by the file of its power."""
    if Path(name).suffix:
        spectrum = read_spectrum(Path(name), quantity="relative_power")
        try:
            return Path(name).stem, table((spectrum.wavelength_nm, spectrum.values))
        except ValueError as error:
            found, _, expected = str(error).partition("; expected ")
            raise trouble(name, found, expected) from None
    try:
        return light_name(name), light_name(name)
    except ValueError as error:
        raise trouble("--light", repr(name[:60]), str(error).partition("; ")[2]) from None


def _under(name: str, light: Light, values: Sequence[np.ndarray], observer: int) -> UnderOneLight:
    standard, sample = (lab(xyz(one, light, observer), white_point(light, observer)) for one in values)
    return UnderOneLight(light=name, standard=swatch_of(standard, light, observer),
                         sample=swatch_of(sample, light, observer), differences=differences(standard, sample))


def _match(values: Sequence[np.ndarray], named: Sequence[tuple[str, Light]], observer: int) -> Match:
    fit = float(goodness_of_fit(values[1], values[0]))
    reference = named[0][1]
    seen = values[1].max() > 0
    index = [Metamerism(light=name, index_de00=float(metamerism_index(
        values[0], values[1], reference_light=reference, test_light=light, observer_deg=observer)))
        for name, light in named[1:] if seen]
    return Match(rms=float(rms_difference(values[1], values[0])), goodness_of_fit=fit, word=match_word(fit),
                 metamerism=index)


def _strength(values: Sequence[np.ndarray], white: np.ndarray, light: Light, observer: int) -> Strength:
    """Relative strength, and the shade that is left once the batch is dosed to equal strength."""
    standard, batch, bare = (np.clip(one, LEAST, MOST) for one in (*values, white))
    added = [added_k_over_s(one, white=bare) for one in (batch, standard)]
    strength = _known(strength_by_weights(*added, light=light, observer_deg=observer))
    de00, words = None, ""
    if strength is not None and strength > 0:
        shades = shades_at_equal_strength(*added, strength=strength, white_k_over_s=added_k_over_s(bare), light=light,
                                          observer_deg=observer)
        de00, words = float(delta_e_2000(*shades)), difference_words(*shades)
    return Strength(at_maximum=_known(strength_at_maximum(*added)), by_weights=strength,
                    de00_at_equal_strength=de00, words_at_equal_strength=words)


def _known(value: np.ndarray) -> float | None:
    return float(value) if np.isfinite(value) else None


def _spectrum(one: MeasuredSpectrum, values: np.ndarray) -> Spectrum:
    kept = values.tolist()
    return Spectrum(quantity="transmittance" if one.quantity == "transmittance" else "reflectance",
                    wavelength_nm=WAVELENGTH_NM.tolist(), value=kept, low=kept, high=kept)
