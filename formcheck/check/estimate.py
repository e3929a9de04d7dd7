"""`formcheck estimate`: a dye described as electron boxes, to levels, bands, spectrum and swatch with its region."""

import re
from collections.abc import Sequence
from pathlib import Path
from typing import Annotated

import numpy as np
from pydantic import Field

from formcheck import __version__
from formcheck.check.record import Cited
from formcheck.check.record_estimate import (
    BoxLevel,
    BoxLevels,
    Estimate,
    EstimatedBand,
    EstimatedForm,
    EstimatedShade,
    EstimatedSpectrum,
)
from formcheck.check.shade import swatch_of
from formcheck.colour.beer_lambert import transmittance
from formcheck.colour.cielab import lab
from formcheck.colour.plain_name import plain_name
from formcheck.colour.tristimulus import white_point, xyz
from formcheck.documents import Document, parse_yaml, read_yaml, validate
from formcheck.materials.record import Box
from formcheck.spectra.boxes import box_bands, box_class, box_errors, box_levels, drawn_spectra, spectrum_of_bands
from formcheck.spectra.grid import WAVELENGTH_NM
from formcheck.strict import Strict
from formcheck.trouble import trouble

LIGHT, OBSERVER = "D65", 10
SHOWN_NM = np.arange(200.0, 1001.0, 5.0)
ULTRAVIOLET_NM = 380.0  # a dye all of whose bands lie below it is colourless
PEAK_ABSORBANCE = 1.0  # of the strongest form in the visible, where no concentration is given
USUAL_CONCENTRATION_MOL_L = 2e-5  # where nothing absorbs in the visible
REGION_AT = (0.05, 0.25, 0.5, 0.75, 0.95)
SOURCES = (
    Cited(cite="H. Kuhn, J. Chem. Phys. 17 (1949) 1198 (chain, bond alternation)", kind="paper"),
    Cited(cite="J. R. Platt, J. Chem. Phys. 17 (1949) 484 (ring)", kind="paper"),
    Cited(cite="S. J. Strickler & R. A. Berg, J. Chem. Phys. 37 (1962) 814 (strength from the integral)", kind="paper"),
)

NUMBER = r"(\d+(?:\.\d+)?|\.\d+)"
WORDS = re.compile(
    rf"\s*(?:(\d+)\s*[x*]\s*)?(chain|plate|ring)\s+(\d+)\s+{NUMBER}(?:\s*x\s*{NUMBER})?\s*nm"
    rf"(?:\s+{NUMBER}\s*eV)?\s*", re.IGNORECASE)
EXPECTED = ("'chain 8 1.2 nm', 'plate 14 0.9 x 0.5 nm' or 'ring 6 0.84 nm' (pi electrons, then size); "
            "'2 x ring 6 0.84 nm' for two of them, 'chain 8 1.2 nm 2 eV' with bond alternation")


class FormOfFile(Strict):
    name: str = "dye"
    boxes: Annotated[list[Box], Field(min_length=1, max_length=50)]


class BoxFile(Strict):
    """A file of boxes for `formcheck estimate`."""

    title: str = "A dye of boxes"
    forms: Annotated[list[FormOfFile], Field(min_length=1, max_length=10)]
    concentration_mol_l: Annotated[float, Field(gt=0, le=10)] | None = None
    path_length_cm: Annotated[float, Field(gt=0, le=100)] = 1.0


def estimate_boxes(words: Sequence[str], file: Path | None = None) -> Estimate:
    """The Estimate of boxes given in words or in a file, one of the two.

    Raises
    ------
    InputError
        neither or both given, a box that cannot be read or that no molecule has, a broken file.
    """
    if bool(words) == (file is not None):
        raise trouble("estimate", "boxes both in words and in a file" if words else "no box",
                      f"a file, or --box with {EXPECTED}")
    described = validate(BoxFile, read_yaml(file, what="a file of boxes")) if file else _from_words(words)
    concentration = described.concentration_mol_l or _usual_concentration(described)
    forms = [_form(form, concentration, described.path_length_cm) for form in described.forms]
    boxes = [box for form in described.forms for box in form.boxes]
    return Estimate(formcheck_version=__version__, title=described.title, file=str(file or ""), forms=forms,
                    error=_error_in_words(boxes), sources=list(SOURCES), notes=[
                        "An isolated molecule: no solvent, no neighbours. A guide to where a dye absorbs and why, not "
                        "a measurement."])


def _from_words(words: Sequence[str]) -> "BoxFile":
    boxes = "".join(f"\n      - {_box_from_words(text)}" for text in words)
    document: Document = parse_yaml(f"title: {' + '.join(' '.join(text.split()) for text in words)!r}\n"
                                    f"forms:\n  - name: dye\n    boxes:{boxes}\n", "--box")
    return validate(BoxFile, document)


def _box_from_words(text: str) -> str:
    """One box as a YAML flow mapping, so that it is checked as a box of a file is."""
    match = WORDS.fullmatch(text)
    if not match:
        raise trouble("--box", repr(text[:60]), EXPECTED)
    count, shape, electrons, size, other, alternation = match.groups()
    shape = shape.lower()
    if (shape == "plate") != (other is not None):
        raise trouble("--box", repr(text[:60]), "two sides for a plate and one size for a chain or ring: " + EXPECTED)
    sizes = {"chain": f"length_nm: {size}", "ring": f"circumference_nm: {size}",
             "plate": f"sides_nm: [{size}, {other}]"}
    extra = f", bond_alternation_ev: {alternation}" if alternation else ""
    return f"{{shape: {shape}, n_pi_electrons: {electrons}, {sizes[shape]}, count: {count or 1}{extra}}}"


def _visible(bands) -> np.ndarray:
    middle, _, _ = spectrum_of_bands(bands, WAVELENGTH_NM)
    return middle[(WAVELENGTH_NM >= 400) & (WAVELENGTH_NM <= 700)]


def _usual_concentration(described: BoxFile) -> float:
    """Such that the strongest form has a peak absorbance of 1 in the visible."""
    forms = [box_bands(form.boxes) for form in described.forms]
    seen = [float(_visible(bands).max()) for bands in forms
            if any(band.lambda_max_nm >= ULTRAVIOLET_NM for band in bands)]
    if not seen or max(seen) <= 0:
        return USUAL_CONCENTRATION_MOL_L
    return PEAK_ABSORBANCE / (max(seen) * described.path_length_cm)


def _form(form: FormOfFile, concentration_mol_l: float, path_length_cm: float) -> EstimatedForm:
    bands = box_bands(form.boxes)
    colourless = all(band.lambda_max_nm < ULTRAVIOLET_NM for band in bands)
    middle, low, high = spectrum_of_bands(bands, SHOWN_NM)
    return EstimatedForm(
        name=form.name, boxes=[_levels(box) for box in form.boxes], bands=[_band(band) for band in bands],
        spectrum=EstimatedSpectrum(wavelength_nm=SHOWN_NM.tolist(), low=low.tolist(), value=middle.tolist(),
                                   high=high.tolist()),
        shade=_shade(bands, concentration_mol_l, path_length_cm), colourless=colourless,
        notes=[f"Every band of this form lies below {ULTRAVIOLET_NM:g} nm: the solution is colourless."]
        if colourless else [])


def _shade(bands, concentration_mol_l: float, path_length_cm: float) -> EstimatedShade:
    middle, _, _ = spectrum_of_bands(bands, WAVELENGTH_NM)
    spectra = np.vstack([middle, drawn_spectra(bands, WAVELENGTH_NM)])
    seen = transmittance(spectra * concentration_mol_l * path_length_cm)
    labs = lab(xyz(seen, LIGHT, OBSERVER), white_point(LIGHT, OBSERVER))
    return EstimatedShade(
        light=LIGHT, observer_deg=OBSERVER, concentration_mol_l=concentration_mol_l, path_length_cm=path_length_cm,
        swatch=swatch_of(labs[0], LIGHT, OBSERVER), words=plain_name(labs[0]), region=_region(labs[1:]))


def _region(labs: np.ndarray):
    _, axes = np.linalg.eigh(np.cov(labs.T))
    order = np.argsort((labs - labs.mean(axis=0)) @ axes[:, -1])
    return [swatch_of(labs[order[int(q * (len(order) - 1))]], LIGHT, OBSERVER) for q in REGION_AT]


def _band(band) -> EstimatedBand:
    return EstimatedBand(label=band.label, lambda_max_nm=band.lambda_max_nm, lambda_sd_nm=band.lambda_sd_nm,
                         epsilon_l_mol_cm=band.epsilon_l_mol_cm, epsilon_relative_sd=band.epsilon_relative_sd,
                         oscillator_strength=band.oscillator_strength, half_height_nm=band.half_height_nm)


def _levels(box: Box) -> BoxLevels:
    return BoxLevels(
        label=_in_words(box), shape=box.shape, n_pi_electrons=box.n_pi_electrons, count=box.count,
        levels=[BoxLevel(label=level.label, energy_ev=level.energy_ev, orbitals=level.orbitals,
                         electrons=level.electrons) for level in box_levels(box)])


def _in_words(box: Box) -> str:
    if box.shape == "chain":
        return f"chain of {box.length_nm:g} nm"
    if box.shape == "ring":
        return f"ring of {box.circumference_nm:g} nm around"
    assert box.sides_nm is not None
    return f"plate of {box.sides_nm[0]:g} by {box.sides_nm[1]:g} nm"


def _error_in_words(boxes: Sequence[Box]) -> str:
    said = []
    for name in dict.fromkeys(box_class(box) for box in boxes):
        errors = box_errors()[name]
        said.append(f"{name.replace('_', ' ')}: position within {errors['lambda_relative_sd']:.0%}, strength within "
                    f"{errors['strength_relative_sd']:.0%} (one standard deviation)")
    return "; ".join(said)
