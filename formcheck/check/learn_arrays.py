"""From a file of drawdowns to a Ladder: spectra on one grid, parts to volume fractions, films to thickness."""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path

import numpy as np

from formcheck.check.learn_model import Constituent, LearnFile, Panel, SpectrumOf, relative
from formcheck.colour.learning.panels import UNKNOWN_THICKNESS_SD, Ladder
from formcheck.documents import Document, FieldPath, path_text, read_yaml, validate
from formcheck.materials.shelf import Found, data_file, find, open_shelf, suggest
from formcheck.recipe.model import Film
from formcheck.spectra.files import read_k_and_s, read_spectrum
from formcheck.spectra.grid import resample
from formcheck.spectra.measured import MeasuredSpectrum
from formcheck.trouble import InputError, Problem, shown, suggestion

FINEST_NM = 5.0  # finer readings tell the same thing several times over
MUST_REACH_NM = (420.0, 680.0)
THICKNESS_SD = 0.05  # relative, of a thickness given without one (common practice)
# What K and S are written for where nobody knows the thickness: a usual drawdown (common practice).
AS_IF_UM = 50.0
BARE_LEAST = 1e-3  # a bare ground is told apart from nothing by this


@dataclass(frozen=True)
class WrittenLadder:
    """The file, and its panels as arrays."""

    file: LearnFile
    document: Document
    ladder: Ladder
    ground_names: tuple[str, ...]
    notes: tuple[str, ...]


def read_drawdowns(document: Document, folder: Path, shelf_folder: Path | None = None) -> WrittenLadder:
    """The ladder that a document describes; relative paths start from `folder`.

    Raises
    ------
    InputError
        the file is none for learning, names what it does not list, or a spectrum or record cannot be used.
    """
    written = validate(LearnFile, document)
    _refuse_strangers(written, document)
    notes: list[str] = []
    bare = {name: _spectrum(one, folder, written, document, ("grounds", name, "spectrum"), notes)
            for name, one in written.grounds.items()}
    spectra = [_spectrum(reading, folder, written, document, ("panels", p, "readings", r, "spectrum"), notes)
               for p, panel in enumerate(written.panels) for r, reading in enumerate(panel.readings)]
    grid = _grid([*bare.values(), *spectra], document)
    ground_names = tuple(written.grounds)
    thickness, sd, known = _thickness(written, notes)
    known_k, known_s, known_sd = _known(written, document, folder, shelf_folder, grid)
    ladder = Ladder(
        wavelength_nm=grid,
        reading=_on(grid, spectra),
        film_of=np.repeat(np.arange(len(written.panels)), [len(panel.readings) for panel in written.panels]),
        ground_of=np.array([ground_names.index(r.ground) for panel in written.panels for r in panel.readings]),
        ground_reading=np.maximum(_on(grid, [bare[name] for name in ground_names]), BARE_LEAST),
        volume_fraction=np.array([_volume_fractions(written, panel) for panel in written.panels]),
        thickness_um=thickness, thickness_relative_sd=sd, thickness_known=known,
        known_k=known_k, known_s=known_s, known_relative_sd=known_sd,
        repeatability=relative(written.measured.repeatability),
        specular_included=written.measured.mirror == "included")
    _refuse_unseen(written, document, ladder)
    return WrittenLadder(written, document, ladder, ground_names, tuple(dict.fromkeys(notes)))


def read_learn_document(path: Path) -> Document:
    return read_yaml(path, what="a file for `formcheck learn`")


# --- names -----------------------------------------------------------------------------------------------


def _refuse_strangers(written: LearnFile, document: Document) -> None:
    """Parts and grounds that the file does not list."""
    ids = [one.id for one in _constituents(written)]
    problems = _told_twice_or_without_density(written, document)
    for p, panel in enumerate(written.panels):
        for name in panel.parts:
            if name not in ids:
                problems.append(_problem(document, ("panels", p, "parts", name), f"parts of {shown(name)}",
                                         f"an id of `colourants` or `clear`: {suggestion(name, ids)}"))
        for r, reading in enumerate(panel.readings):
            if reading.ground not in written.grounds:
                problems.append(_problem(document, ("panels", p, "readings", r, "ground"), shown(reading.ground),
                                         f"one of `grounds`: {suggestion(reading.ground, list(written.grounds))}"))
        if not any(one.id in panel.parts for one in written.colourants):
            problems.append(_problem(document, ("panels", p, "parts"), "no colourant in it",
                                     "parts of at least one of `colourants`"))
    if problems:
        raise InputError(problems)


def _constituents(written: LearnFile) -> list[Constituent]:
    return [*written.colourants, *written.clear]


def _told_twice_or_without_density(written: LearnFile, document: Document) -> list[Problem]:
    problems, seen = [], set()
    places: list[FieldPath] = [("colourants", n) for n in range(len(written.colourants))]
    places += [("clear", n) for n in range(len(written.clear))]
    for place, one in zip(places, _constituents(written), strict=True):
        if one.id in seen:
            problems.append(_problem(document, (*place, "id"), f"the id {one.id} a second time", "each id once"))
        seen.add(one.id)
        if written.loadings == "mass" and one.density_g_cm3 is None and len(places) > 1:
            problems.append(_problem(document, place, f"no density of {one.id} with loadings by mass",
                                     "`density_g_cm3`, or `loadings: volume` with parts by volume"))
    names = [panel.name for panel in written.panels]
    problems += [_problem(document, ("panels", n, "name"), f"the panel {shown(name)} a second time", "each name once")
                 for n, name in enumerate(names) if name in names[:n]]
    if all(one.material for one in written.colourants):
        problems.append(_problem(document, ("colourants",), "no colourant to learn", "one without `material`"))
    return problems


def _refuse_unseen(written: LearnFile, document: Document, ladder: Ladder) -> None:
    for c, one in enumerate(written.colourants):
        if not (ladder.volume_fraction[:, c] > 0).any():
            raise InputError(_problem(document, ("colourants", c), f"{one.id}, which no panel holds",
                                      "a panel with it, or the list without it"))


def _problem(document: Document, path: FieldPath, found: str, expected: str) -> Problem:
    return Problem(document.place(path), found, expected, path_text(path))


# --- spectra ---------------------------------------------------------------------------------------------


def _spectrum(one: SpectrumOf, folder: Path, written: LearnFile, document: Document, path: FieldPath,
              notes: list[str]) -> MeasuredSpectrum:
    spectrum = read_spectrum(folder / one.spectrum, column=one.column, scale=written.measured.scale,
                             quantity="reflectance")
    for note in spectrum.notes:
        notes.append(f"{one.spectrum}: {note}")
    first, last = float(spectrum.wavelength_nm[0]), float(spectrum.wavelength_nm[-1])
    if first > MUST_REACH_NM[0] or last < MUST_REACH_NM[1] or len(spectrum.wavelength_nm) < 4:
        raise InputError(_problem(document, path, f"readings from {first:g} to {last:g} nm",
                                  f"at least {MUST_REACH_NM[0]:g} to {MUST_REACH_NM[1]:g} nm"))
    if spectrum.specular_included is not None and spectrum.specular_included != (written.measured.mirror == "included"):
        notes.append(f"{one.spectrum}: its heading has the mirror reflection "
                     f"{'in' if spectrum.specular_included else 'ex'}cluded; `measured` was believed")
    return spectrum


def _grid(spectra: list[MeasuredSpectrum], document: Document) -> np.ndarray:
    """The wavelengths that all spectra reach: those they share, or an even grid of the coarsest step."""
    first = max(float(one.wavelength_nm[0]) for one in spectra)
    last = min(float(one.wavelength_nm[-1]) for one in spectra)
    own = spectra[0].wavelength_nm
    step = max(float(np.median(np.diff(one.wavelength_nm))) for one in spectra)
    same = all(np.array_equal(one.wavelength_nm, own) for one in spectra)
    if same and step >= FINEST_NM:
        return own
    step = max(round(step), FINEST_NM)
    grid = np.arange(np.ceil(first / step) * step, last + 1e-6, step)
    if len(grid) < 4:
        raise InputError(_problem(document, ("panels",), f"spectra that share {first:g} to {last:g} nm alone",
                                  "readings over the same wavelengths"))
    return grid


def _on(grid: np.ndarray, spectra: list[MeasuredSpectrum]) -> np.ndarray:
    return np.clip(np.array([resample(one.wavelength_nm, one.values, grid)[0] for one in spectra]), 0.0, 1.0)


# --- films -----------------------------------------------------------------------------------------------


def _film(written: LearnFile, panel: Panel) -> Film | None:
    return panel.film or (written.film if isinstance(written.film, Film) else None)


def _volume_fractions(written: LearnFile, panel: Panel) -> list[float]:
    """Of each colourant in the film as its thickness counts it: wet with what evaporates, dry without."""
    film = _film(written, panel)
    wet = film is not None and film.wet is not None
    gone = {one.id for one in written.clear if one.evaporates and not wet}
    density = {one.id: one.density_g_cm3 or 1.0 for one in _constituents(written)}
    volume = {name: part / (density[name] if written.loadings == "mass" else 1.0)
              for name, part in panel.parts.items() if name not in gone}
    total = sum(volume.values())
    return [volume.get(one.id, 0.0) / total for one in written.colourants]


def _thickness(written: LearnFile, notes: list[str]) -> tuple[np.ndarray, np.ndarray, bool]:
    """Thickness, its relative spread, and whether any is known. A film nobody measured is as its fellows are."""
    films = [_film(written, panel) for panel in written.panels]
    measured = [film.thickness_um for film in films if film is not None]
    usual = float(np.exp(np.mean(np.log(measured)))) if measured else AS_IF_UM
    thickness = np.array([film.thickness_um if film else usual for film in films])
    sd = np.array([UNKNOWN_THICKNESS_SD if film is None else
                   (film.sd_um / film.thickness_um if film.sd_um is not None else THICKNESS_SD) for film in films])
    if any(film is not None and film.sd_um is None for film in films):
        notes.append(f"thickness given without `sd` is taken as known to {THICKNESS_SD:.0%}")
    return thickness, sd, bool(measured)


# --- known colourants ------------------------------------------------------------------------------------


def _known(written: LearnFile, document: Document, folder: Path, shelf_folder: Path | None, grid: np.ndarray
           ) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    """K and S (C, W) of colourants that a record knows, NaN for those to be learned; relative sd (C,)."""
    count = len(written.colourants)
    k, s, sd = np.full((count, len(grid)), np.nan), np.full((count, len(grid)), np.nan), np.zeros(count)
    if not any(one.material for one in written.colourants):
        return k, s, sd
    own_folder = shelf_folder or (folder / written.shelf if written.shelf else None)
    shelf = open_shelf(folder=own_folder)
    for c, one in enumerate(written.colourants):
        if one.material is None:
            continue
        place: FieldPath = ("colourants", c, "material")
        found: Found | None = find(shelf, one.material)
        if found is None:
            raise InputError(_problem(document, place, shown(one.material), suggest(shelf, one.material)))
        optical = found.material.optical
        if optical is None or optical.k_and_s is None:
            raise InputError(_problem(document, place, f"{one.material}, whose record has no K and S",
                                      "a material with `k_and_s`, or the line without `material`, to learn it"))
        nm, *values = read_k_and_s(data_file(found, optical.k_and_s.file))
        k[c], s[c] = (np.maximum(resample(nm, one_of, grid)[0], 0.0) for one_of in values)
        sd[c] = optical.k_and_s.relative_sd
    return k, s, sd
