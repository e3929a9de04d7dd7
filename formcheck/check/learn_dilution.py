"""`formcheck learn` for a dye: from absorbances of a dilution series to its absorptivity."""

from __future__ import annotations

from pathlib import Path

import numpy as np

from formcheck import __version__
from formcheck.check.learn_files import record_paths, write_dye
from formcheck.check.learn_model import DilutionFile, grams_per_litre, relative
from formcheck.check.record import Cited
from formcheck.check.record_learned import Doubt, Learned, LearnedSolution, LearnedSpectrum
from formcheck.colour.beer_lambert import transmittance
from formcheck.colour.cielab import lab_of_spectrum
from formcheck.colour.difference import delta_e_2000
from formcheck.colour.learning.dilution import Dilution, learn_dilution
from formcheck.documents import Document, path_text, validate
from formcheck.recipe.written import length_um
from formcheck.spectra.files import read_spectrum
from formcheck.spectra.grid import resample
from formcheck.trouble import InputError, Problem

LIGHT, OBSERVER = "D65", 10
UM_PER_CM = 1e4
FINEST_NM = 1.0
STRAY_LIGHT_ABOVE = 2.0  # absorbance; beyond it stray light bends lines too (common practice)


def learn_from_dilution(document: Document, path: Path, *, out: Path | None = None) -> Learned:
    """The absorptivity that a dilution series teaches, and its record where `out` says.

    Raises
    ------
    InputError
        the file is none for a dilution, or a spectrum cannot be used.
    """
    written = validate(DilutionFile, document)
    target = record_paths(out, [written.dye.id])[written.dye.id] if out else None
    grid, absorbance = _absorbances(written, document, path.parent)
    concentration = np.array([grams_per_litre(one.concentration) for one in written.solutions])
    depth_cm = np.array([length_um(one.path or written.path) / UM_PER_CM for one in written.solutions])
    if len(np.unique(concentration)) < 2:
        raise InputError(Problem(document.place(("solutions",)), "one concentration alone",
                                 "solutions of at least two concentrations", "solutions"))
    found = _learn(written, absorbance, concentration, depth_cm)
    dye = LearnedSpectrum(
        id=written.dye.id, names=written.dye.names or [written.dye.id], wavelength_nm=grid.tolist(),
        absorptivity_l_g_cm=np.maximum(found.absorptivity, 0.0).tolist(), sd=found.sd.tolist(), bend=found.bend,
        bend_sd=found.bend_sd, shape_change=found.shape_change, shape_change_sd=found.shape_change_sd,
        weighing_sd=found.weighing_sd, record_file=str(target or ""))
    solutions = _solutions(written, found, grid, absorbance, concentration, depth_cm)
    off = [one.de00_left_out for one in solutions if one.de00_left_out is not None]
    source = {"cite": written.source.cite if written.source else f"{written.title}: own absorbances, learned by "
              "formcheck", "kind": written.source.kind if written.source else "measured"}
    record = Learned(
        formcheck_version=__version__, file=str(path), title=written.title, what="dilution", dye=dye,
        solutions=solutions, light=LIGHT, observer_deg=OBSERVER,
        de00_fit_median=float(np.median([one.de00_fit for one in solutions])),
        de00_left_out_median=float(np.median(off)) if off else None,
        de00_left_out_p90=float(np.percentile(off, 90)) if off else None,
        model_error_de00=float(np.sqrt(np.mean(np.square(off)))) if off else None,
        doubts=_doubts(written, found, absorbance), notes=_notes(written),
        sources=[Cited(cite=source["cite"], kind=source["kind"])])
    if target:
        write_dye(target, dye, molar_mass_g_mol=written.dye.molar_mass_g_mol, source=source)
    return record


def _learn(written: DilutionFile, absorbance: np.ndarray, concentration: np.ndarray, depth_cm: np.ndarray) -> Dilution:
    return learn_dilution(absorbance, concentration, path_length_cm=depth_cm, repeatability=written.repeatability,
                          weighing_relative_sd=relative(written.weighing))


def _absorbances(written: DilutionFile, document: Document, folder: Path) -> tuple[np.ndarray, np.ndarray]:
    """Wavelengths that all solutions reach (W,), and absorbances (N, W)."""
    spectra = [read_spectrum(folder / one.spectrum, column=one.column, quantity="absorbance")
               for one in written.solutions]
    first = max(float(one.wavelength_nm[0]) for one in spectra)
    last = min(float(one.wavelength_nm[-1]) for one in spectra)
    own = spectra[0].wavelength_nm
    if all(np.array_equal(one.wavelength_nm, own) for one in spectra):
        grid = own
    else:
        step = max(round(max(float(np.median(np.diff(one.wavelength_nm))) for one in spectra)), FINEST_NM)
        grid = np.arange(np.ceil(first / step) * step, last + 1e-6, step)
    if len(grid) < 4:
        raise InputError(Problem(document.place(("solutions",)), f"spectra that share {first:g} to {last:g} nm alone",
                                 "absorbances over the same wavelengths", path_text(("solutions",))))
    return grid, np.array([resample(one.wavelength_nm, one.values, grid)[0] for one in spectra])


def _solutions(written: DilutionFile, found: Dilution, grid: np.ndarray, absorbance: np.ndarray,
               concentration: np.ndarray, depth_cm: np.ndarray) -> list[LearnedSolution]:
    solutions = []
    for n, one in enumerate(written.solutions):
        amount = concentration[n] * depth_cm[n]
        others = np.arange(len(concentration)) != n
        left_out = None
        if len(np.unique(concentration[others])) > 1:
            refit = _learn(written, absorbance[others], concentration[others], depth_cm[others])
            left_out = _de00(grid, refit.absorptivity * amount, absorbance[n])
        solutions.append(LearnedSolution(
            name=one.name or one.concentration, concentration_g_l=float(concentration[n]),
            strength=float(found.strength[n]), de00_fit=_de00(grid, found.absorptivity * amount, absorbance[n]) or 0.0,
            de00_left_out=left_out))
    return solutions


def _de00(grid: np.ndarray, first: np.ndarray, second: np.ndarray) -> float | None:
    """Of the two solutions looked through; None where the spectra do not reach over the visible."""
    try:
        labs = [lab_of_spectrum(transmittance(np.maximum(one, 0.0)), LIGHT, OBSERVER, grid) for one in (first, second)]
    except ValueError:
        return None
    return float(delta_e_2000(labs[0], labs[1]))


def _doubts(written: DilutionFile, found: Dilution, absorbance: np.ndarray) -> list[Doubt]:
    doubts = []
    if found.bent:
        doubts.append(Doubt(
            kind="bent line", said=f"From the most dilute to the strongest solution the dye changes strength by "
            f"{found.bend:+.1%} (± {found.bend_sd:.1%}): Beer's law does not hold, as when dye molecules aggregate.",
            what_to_do="Learn from the dilutions near the one you use; look at heat, salt and solvent."))
    if found.changes_shape:
        doubts.append(Doubt(
            kind="spectrum changes", said=f"The shape of the spectrum changes with concentration by "
            f"{found.shape_change:.1%} of its peak (± {found.shape_change_sd:.1%}): more than one form is present, "
            "as of aggregates or of acid and base.", what_to_do="Buffer the solutions, dilute further, and compare."))
    if len(written.solutions) < 4:
        doubts.append(Doubt(
            kind="few solutions", said=f"{len(written.solutions)} solutions hardly tell a bent line from a slip in "
            "weighing.", what_to_do="Measure five or more, spread evenly over the logarithm of concentration."))
    if absorbance.max() > STRAY_LIGHT_ABOVE:
        doubts.append(Doubt(
            kind="absorbance too high",
            said=f"Absorbances reach {absorbance.max():.1f}, where stray light bends lines.",
            what_to_do=f"Keep peaks below {STRAY_LIGHT_ABOVE:g}: a shorter path or further dilution."))
    return doubts


def _notes(written: DilutionFile) -> list[str]:
    return [] if written.dye.molar_mass_g_mol else [
        "No molar mass of the dye: its record needs one before a recipe can use it."]
