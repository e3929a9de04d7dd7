"""What a recipe says of how it is looked at: cell or film, ground, index, lights, wanted shade."""

from __future__ import annotations

from dataclasses import dataclass, field
from pathlib import Path

import numpy as np

from formcheck.check.parts import Parts
from formcheck.check.predict import Setting
from formcheck.check.volumes import FilmState, wet_film_um
from formcheck.colour.cielab import lab
from formcheck.colour.grounds import ground, ground_names, ground_record
from formcheck.colour.lights import Light, light_name, table
from formcheck.colour.tristimulus import white_point, xyz
from formcheck.documents import FieldPath, path_text
from formcheck.recipe.model import GroundReference, SpectrumReference, Wanted
from formcheck.recipe.read import WrittenRecipe
from formcheck.spectra.files import MeasuredSpectrum, read_spectrum
from formcheck.spectra.grid import resample
from formcheck.spectra.ranges import held_beyond
from formcheck.spectra.scale import ScaleNotSettled
from formcheck.trouble import InputError, Problem, shown, suggestion

USUAL_INDEX = 1.5  # of organic binders (common practice)
USUAL_LIGHT = "D65"
SOLUTIONS = ("solution", "dye_bath")


@dataclass(frozen=True)
class Viewing:
    """How the mixture is seen; `setting` is None with `reason` where the recipe does not say enough."""

    setting: Setting | None
    wet_thickness_um: float
    thickness_sd_um: float
    ground_name: str
    geometry: str
    lights: tuple[str, ...]  # the first is the one figures are given for
    observer_deg: int
    wanted_lab: tuple[float, float, float] | None
    tolerance: float | None
    notes: tuple[str, ...]
    reason: str = ""
    wanted_spectrum: np.ndarray | None = None

    light_of: dict[str, Light] = field(default_factory=dict)

    def light(self, name: str) -> Light:
        """What the colour room asks for to see under one of `lights`: its name, or its power."""
        return self.light_of.get(name, name)


def viewing_of(written: WrittenRecipe, parts: Parts, film: FilmState, r: int = 0) -> Viewing:
    """Everything of the recipe that seeing hangs on; InputError for an unknown light or ground, a broken file."""
    recipe = written.recipe
    lights, light_of = _lights(written)
    wanted = recipe.wanted
    observer = wanted.observer or recipe.observer if wanted else recipe.observer
    wanted_lab, wanted_spectrum, wanted_notes = _wanted_shade(written, light_of[lights[0]], observer)
    tolerance = wanted.tolerance if wanted else None

    def seen(setting: Setting | None, *, wet=0.0, sd=0.0, ground_name="", geometry="", notes=(), reason=""):
        return Viewing(setting, wet, sd, ground_name, geometry, lights, observer, wanted_lab, tolerance,
                       (*wanted_notes, *notes), reason, wanted_spectrum, light_of)

    if recipe.what in SOLUTIONS and recipe.film is None:
        path = recipe.path_length_cm
        if path is None:
            return seen(None, reason="no `path_length` given for the solution")
        return seen(Setting(path_length_cm=path), ground_name="none: light passes through",
                    geometry=f"cell of {path * 10:g} mm, the solvent as white")
    if recipe.film is None:
        return seen(None, reason="no `film` thickness given")
    wet, why = wet_film_um(recipe.film, film, r)
    if wet is None:
        return seen(None, reason=f"the wet film is unknown: {why}")
    if recipe.ground is None:
        return seen(None, reason="no `ground` given for the film")
    name, values, in_air, with_gloss, notes = _ground(written)
    index, index_note = _film_index(written, parts, film, r)
    notes += [index_note] if index_note else []
    gloss = recipe.specular == "included"
    in_air_gloss = gloss if with_gloss is None else with_gloss
    directional = recipe.geometry == "45:0"
    sd = (recipe.film.sd_um or 0.0) * wet / recipe.film.thickness_um
    takes_in = recipe.ground.takes_in if isinstance(recipe.ground, GroundReference) else None
    setting = Setting(ground=values, ground_in_air=in_air, ground_specular_included=in_air_gloss,
                      takes_in=(takes_in.depth_um, takes_in.scattering_per_um) if takes_in else None,
                      film_index=index, specular_included=gloss and not directional, directional=directional,
                      ground_directional=directional and with_gloss is None)
    if takes_in:
        return seen(setting, wet=wet, sd=sd, ground_name=name, notes=notes,
                    geometry=f"{wet:.3g} um laid on and taken in by {name} to {takes_in.depth}")
    return seen(setting, wet=wet, sd=sd, ground_name=name, notes=notes,
                geometry=f"film of {wet:.3g} um wet over {name}, "
                         + ("45:0" if directional else f"d:8, mirror reflection {recipe.specular}"))


def _lights(written: WrittenRecipe) -> tuple[tuple[str, ...], dict[str, Light]]:
    """Names of the lights, that of the wanted shade first, and what each name stands for."""
    recipe = written.recipe
    given: dict[str, Light] = {}
    named: list[tuple[str, FieldPath]] = [(recipe.wanted.light, ("wanted", "light"))] if recipe.wanted else []
    for n, light in enumerate(recipe.lights):
        if isinstance(light, SpectrumReference):
            given[Path(light.spectrum).stem] = _given_light(written, light, n)
            named.append((Path(light.spectrum).stem, ("lights", n)))
        else:
            named.append((light, ("lights", n)))
    found: dict[str, Light] = {}
    for name, path in named or [(USUAL_LIGHT, ())]:
        try:
            own = name if name in given else light_name(name)
        except ValueError as error:
            raise _wrong(written, path, shown(name), str(error).partition("; ")[2]) from None
        found[own] = given.get(own, own)
    return tuple(found), found


def _given_light(written: WrittenRecipe, said: SpectrumReference, n: int) -> Light:
    """A light by the spectrum of its power; InputError where it does not reach over the visible."""
    path: FieldPath = ("lights", n, "spectrum")
    spectrum = read_spectrum(written.folder / said.spectrum, column=said.column, quantity="relative_power")
    try:
        return table((spectrum.wavelength_nm, spectrum.values))
    except ValueError as error:
        found, _, expected = str(error).partition("; expected ")
        raise _wrong(written, path, f"{found} ({said.spectrum})", expected) from None


def _wanted_shade(written: WrittenRecipe, light: Light, observer: int
                  ) -> tuple[tuple[float, float, float] | None, np.ndarray | None, list[str]]:
    """CIELAB of the wanted shade, the spectrum it comes from, and what to say of that."""
    wanted = written.recipe.wanted
    if wanted is None:
        return None, None, []
    if wanted.lab is not None:
        return (wanted.lab[0], wanted.lab[1], wanted.lab[2]), None, []
    _, values, notes = _measured(written, wanted, "wanted")
    found = lab(xyz(values, light, observer), white_point(light, observer))
    return (float(found[0]), float(found[1]), float(found[2])), values, notes


def _ground(written: WrittenRecipe) -> tuple[str, np.ndarray, bool, bool | None, list[str]]:
    """(name, reflectance, measured in air, with the mirror reflection or None as the recipe says, notes)."""
    ground_said = written.recipe.ground
    if isinstance(ground_said, SpectrumReference):
        spectrum, values, notes = _measured(written, ground_said, "ground")
        name = f"the ground of {ground_said.spectrum}"
        return name, np.minimum(values, 1.0), True, spectrum.specular_included, notes
    name = str(ground_said)
    if name not in ground_names():
        raise _wrong(written, ("ground",), shown(name), suggestion(name, ground_names())
                     + " or `{spectrum: FILE}` with the measured reflectance of your own")
    record = ground_record(name)
    return name, ground(name), record.measured_in_air, record.specular_included, []


def _measured(written: WrittenRecipe, said: SpectrumReference | Wanted, place: str
              ) -> tuple[MeasuredSpectrum, np.ndarray, list[str]]:
    """A measured reflectance, the same on the grid as a fraction, and what to say of it."""
    what = f"the reflectance of {said.spectrum}"
    try:
        spectrum = read_spectrum(written.folder / str(said.spectrum), column=said.column, scale=said.scale,
                                 quantity="reflectance")
    except ScaleNotSettled as error:
        raise _wrong(written, (place, "spectrum"), f"{error.problems[0].found} (in {error.problems[0].place})",
                     f"`scale: percent` or `scale: fraction` beside `spectrum: {said.spectrum}`") from None
    values, _ = resample(spectrum.wavelength_nm, spectrum.values)
    notes = [f"{what}: {note}" for note in spectrum.notes] + held_beyond(what, spectrum.wavelength_nm)
    return spectrum, np.maximum(values, 0.0), notes


def _film_index(written: WrittenRecipe, parts: Parts, film: FilmState, r: int) -> tuple[float, str]:
    """Index of the dry film: as given, or the volume mean over binders that have one, or the usual."""
    if written.recipe.binder_index is not None:
        return written.recipe.binder_index, ""
    share, weighted = 0.0, 0.0
    for c, material in enumerate(parts.materials):
        volume = film.dry_fraction[r, c]
        if material and material.kind == "binder" and material.refractive_index and np.isfinite(volume):
            share += volume
            weighted += volume * material.refractive_index.value
    if share > 0:
        return weighted / share, ""
    return USUAL_INDEX, f"the refractive index of the dry film is taken as {USUAL_INDEX}, as no binder gives one"


def _wrong(written: WrittenRecipe, path: FieldPath, found: str, expected: str) -> InputError:
    return InputError(Problem(written.document.place(path), found, expected, path_text(path)))
