"""The optical data of the constituents of a batch: what each dye form and pigment stands on, or why it has none."""

from __future__ import annotations

from dataclasses import dataclass, field

import numpy as np

from formcheck.check.cited import cited_by
from formcheck.check.parts import Parts
from formcheck.check.record import ColourantBasis
from formcheck.materials.elements import molar_mass_of
from formcheck.materials.record import DyeForm, KubelkaMunkFile, Material, SpectrumFile
from formcheck.materials.shelf import Found, data_file
from formcheck.spectra.bands import (
    default_half_heights,
    lognormal_band,
    shape_doubt,
    statistics,
)
from formcheck.spectra.boxes import box_bands
from formcheck.spectra.files import MeasuredSpectrum, read_k_and_s, read_spectrum
from formcheck.spectra.grid import resample
from formcheck.spectra.ranges import held_beyond
from formcheck.trouble import trouble

# Wider than what is seen, so that a band whose position is unsure may move in from beyond.
WIDE_NM = np.arange(160.0, 1001.0, 5.0)
COLOURING_KINDS = ("pigment", "dye", "indicator", "metal_powder")
UNSEEN_SHARE = 0.002  # of a form whose spectrum is unknown: less than this is not seen


@dataclass(frozen=True)
class Absorber:
    """One band, or one measured spectrum, of one form of one dye."""

    constituent: int
    form: int
    epsilon: np.ndarray  # (len(WIDE_NM),), L/(mol cm)
    doubt: np.ndarray  # likewise: one standard deviation of what the shape of the band may miss
    strength_sd: float  # relative
    lambda_sd_nm: float
    name: str


@dataclass(frozen=True)
class PigmentOptics:
    constituent: int
    k: np.ndarray  # (W,), per um of pigment alone
    s: np.ndarray
    relative_sd: float
    density_g_ml: float
    most_volume_fraction: float | None
    name: str
    model_error_de00: float | None = None  # of panels left out in learning; it holds the doubt of K and S within it
    surface: tuple[float, float] | None = None  # k1, k2 learned with K and S
    thickness_known: bool = True


@dataclass
class Colourants:
    """What is known, what stands behind it, and what is missing (reason by constituent or form)."""

    absorbers: list[Absorber] = field(default_factory=list)
    pigments: list[PigmentOptics] = field(default_factory=list)
    basis: list[ColourantBasis] = field(default_factory=list)
    missing: dict[int, str] = field(default_factory=dict)
    missing_forms: dict[tuple[int, int], str] = field(default_factory=dict)
    fluorescent: list[str] = field(default_factory=list)
    held: list[str] = field(default_factory=list)  # what is to be said of spectra: where they end, and their notes


def colourants_of(parts: Parts, present: np.ndarray) -> Colourants:
    """Optics of every colouring constituent that is present (C,); InputError for a broken spectrum file."""
    known = Colourants()
    for c, found in enumerate(parts.found):
        if not present[c] or found is None:
            continue
        material = found.material
        if material.optical and material.optical.fluoresces:
            known.fluorescent.append(parts.names[c])
        if material.optical and material.optical.k_and_s:
            _add_pigment(known, found, c)
        elif material.optical and material.optical.forms:
            _add_dye(known, found, c)
        elif material.kind in COLOURING_KINDS:
            known.missing[c] = f"no optical data for {parts.names[c]}"
    return known


def _add_pigment(known: Colourants, found: Found, c: int) -> None:
    material = found.material
    assert material.optical and material.optical.k_and_s
    record = material.optical.k_and_s
    name = material.names[0]
    if material.density_g_cm3 is None:
        known.missing[c] = f"no density of {name}, so its volume in the film is unknown"
        return
    wavelength_nm, *k_and_s = read_k_and_s(data_file(found, record.file))
    k, s = (np.maximum(resample(wavelength_nm, values)[0], 0.0) for values in k_and_s)
    known.held += held_beyond(f"K and S of {name}", wavelength_nm)
    density = material.density_g_cm3.value
    surface = None if record.k1 is None or record.k2 is None else (record.k1, record.k2)
    known.pigments.append(PigmentOptics(
        c, k, s, record.relative_sd if record.model_error_de00 is None else 0.0, density,
        record.most_volume_fraction, name, record.model_error_de00, surface, record.thickness_known))
    source = cited_by(material, record.source)
    measured = source.kind in ("measured", "user", "invented_demo", "supplier")
    known.basis.append(ColourantBasis(
        material=name, basis="measured" if measured else "optical constants", source=source,
        error=_error_of(record)))


def _error_of(record: KubelkaMunkFile) -> str:
    if record.model_error_de00 is None:
        return f"K and S within {record.relative_sd:.0%} (one standard deviation)"
    return f"panels left out in learning were off by ΔE00 {record.model_error_de00:.2g} (root mean square)"


def model_error(known: Colourants) -> tuple[float, str]:
    """The largest error that any of the pigments showed in learning, in ΔE00, and whose it is; 0 where none did."""
    shown = [(one.model_error_de00, one.name) for one in known.pigments if one.model_error_de00 is not None]
    return max(shown, default=(0.0, ""))


def learned_surface(known: Colourants) -> tuple[tuple[float, float] | None, list[str]]:
    """Surface constants that all learned pigments share, or None; and what to say where they do not."""
    learned = {one.surface for one in known.pigments if one.surface}
    if len(learned) == 1 and all(one.surface for one in known.pigments):
        return learned.pop(), []
    if not learned:
        return None, []
    return None, ["the surface that K and S were learned with: the pigments do not share one, so the film's index "
                  "stands in for it"]


def _add_dye(known: Colourants, found: Found, c: int) -> None:
    material = found.material
    assert material.optical
    if molar_mass_of(material).value is None:
        known.missing[c] = f"no molar mass of {material.names[0]}, so its amount in moles is unknown"
        return
    for number, form in enumerate(material.optical.forms):
        absorbers, basis, error, key = _form_optics(known, found, c, number, form)
        if basis == "unknown":
            known.missing_forms[c, number] = f"no spectrum of the form {form.name!r} of {material.names[0]}"
        known.absorbers += absorbers
        known.basis.append(ColourantBasis(
            material=material.names[0], form=form.name if len(material.optical.forms) > 1 else "",
            basis=basis, error=error, source=cited_by(material, key) if key else None))


def _form_optics(known: Colourants, found: Found, c: int, number: int, form: DyeForm):
    """Absorbers of a form, its basis, its error in words, and the key of its source."""
    name = found.material.names[0]
    if form.spectrum:
        sd = form.spectrum.relative_sd or 0.0
        epsilon = _measured_epsilon(known, found, form.spectrum)
        measured = Absorber(c, number, epsilon, np.zeros_like(epsilon), sd, 0.0, name)
        return [measured], "measured", f"strength within {sd:.0%}", form.spectrum.source
    if form.bands:
        bands = [_absorber(c, number, band, name) for band in form.bands]
        first = bands[0]
        error = (f"strength within {first.strength_sd:.0%}, maximum within {first.lambda_sd_nm:.0f} nm, "
                 "flanks as log-normal bands miss them")
        return bands, "handbook bands", error, form.bands[0].source
    if form.boxes:
        bands = [_absorber(c, number, band, name) for band in box_bands(form.boxes)]
        error = "no band above 160 nm"
        if bands:
            error = f"position within {bands[0].lambda_sd_nm:.0f} nm, strength within {bands[0].strength_sd:.0%}"
        return bands, "box model", error, form.boxes[0].source
    if form.colourless:
        return [], "handbook bands", "published as colourless", form.colourless.source
    return [], "unknown", "no spectrum", ""


def _absorber(c: int, number: int, band, name: str) -> Absorber:
    """A log-normal band with the errors its record gives, else those that published bands show."""
    at, strength = band.lambda_max_nm, band.epsilon_l_mol_cm
    half = band.half_height_nm or default_half_heights(at, epsilon=strength)
    epsilon = lognormal_band(WIDE_NM, lambda_max_nm=at, epsilon=strength, half_height_nm=half)
    spread = statistics()
    doubt = spread["shape_sd_of_peak"]["value"] * strength * shape_doubt(WIDE_NM, epsilon / strength, at)
    strength_sd, lambda_sd = band.epsilon_relative_sd, band.lambda_sd_nm
    return Absorber(c, number, epsilon, doubt,
                    spread["epsilon_relative_sd"]["value"] if strength_sd is None else strength_sd,
                    spread["lambda_sd_nm"]["value"] if lambda_sd is None else lambda_sd, name)


def _measured_epsilon(known: Colourants, found: Found, record: SpectrumFile) -> np.ndarray:
    path = data_file(found, record.file)
    spectrum = read_spectrum(path, column=record.column, scale=record.scale, quantity=record.quantity)
    values, _ = resample(spectrum.wavelength_nm, _absorption(spectrum), WIDE_NM)
    what = f"the spectrum of {found.material.names[0]}"
    known.held += [f"{what}: {note}" for note in spectrum.notes] + held_beyond(what, spectrum.wavelength_nm)
    factor = _to_epsilon(found.material, record)
    if factor is None:
        raise trouble(str(path), f"a spectrum of {record.quantity} without what turns it into epsilon",
                      "`concentration_g_l` and `path_length_cm` with absorbance, and a molar mass")
    return np.maximum(values * factor, 0.0)


def _absorption(spectrum: MeasuredSpectrum) -> np.ndarray:
    """The values of a spectrum; of a transmittance its absorbance, -lg T."""
    if spectrum.quantity != "transmittance":
        return spectrum.values
    if (spectrum.values <= 0).any():
        nm = spectrum.wavelength_nm[np.argmax(spectrum.values <= 0)]
        raise trouble(spectrum.file, f"a transmittance of 0 or less at {nm:g} nm, which is no absorbance",
                      "a transmittance above 0, from a solution dilute enough to let light through")
    return -np.log10(spectrum.values)


def _to_epsilon(material: Material, record: SpectrumFile) -> float | None:
    """What turns the file's values into L/(mol cm)."""
    if record.quantity == "epsilon_l_mol_cm":
        return 1.0
    molar_mass = molar_mass_of(material).value
    if molar_mass is None:
        return None
    if record.quantity == "absorptivity_l_g_cm":
        return molar_mass
    if record.concentration_g_l is None or record.path_length_cm is None:
        return None
    return molar_mass / (record.concentration_g_l * record.path_length_cm)


def missing_reasons(known: Colourants, form_share: dict[int, np.ndarray | None]) -> list[str]:
    """Why the shade cannot be told: colourants without optics, dyes whose forms have shares nobody knows, and
    forms without a spectrum that are there."""
    reasons = list(known.missing.values())
    absorbing = {one.constituent: one.name for one in known.absorbers}
    reasons += [f"the share of each form of {name} is unknown, as the pH is" for c, name in absorbing.items()
                if form_share.get(c) is None]
    for (c, number), reason in known.missing_forms.items():
        share = form_share.get(c)
        if share is None:
            reasons.append(f"{reason}, and how much of it there is is unknown")
        elif share[number] > UNSEEN_SHARE:
            reasons.append(f"{reason} (share {share[number]:.0%})")
    return reasons
