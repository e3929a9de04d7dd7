"""`formcheck shade`: prediction alone, for a recipe as written or along a row of amounts, as one batch."""

from __future__ import annotations

import os
import re
from collections.abc import Sequence
from dataclasses import dataclass, replace
from datetime import date
from pathlib import Path

import numpy as np

from formcheck import __version__
from formcheck.check.acid import acid_state, form_shares
from formcheck.check.colorimetry import differences, hiding_of, match_of, munsell_of
from formcheck.check.colourants import colourants_of, model_error
from formcheck.check.layers import with_layers
from formcheck.check.model_error import model_error_covariance
from formcheck.check.parts import Parts, parts_of
from formcheck.check.prediction_model import Model, draws_of, inputs_of, prediction_model
from formcheck.check.record import Swatch, UnderLight, Wanted
from formcheck.check.record_sweep import Hiding, ShadeSweep, SweptShade
from formcheck.check.setting import Viewing, viewing_of
from formcheck.check.shade import (
    basis_with_shares,
    contrast_ratios,
    dominant,
    left_out,
    swatches_of,
    why_not,
    with_learned_surface,
)
from formcheck.check.volumes import FilmState, film_state
from formcheck.colour.cielab import lab
from formcheck.colour.difference import delta_e_2000, difference_words
from formcheck.colour.grounds import ground_names
from formcheck.colour.tristimulus import white_point, xyz
from formcheck.colour.uncertainty import difference_spread, probability_within, propagate
from formcheck.recipe.batch import Batch, Varied, build_batch, with_amounts
from formcheck.recipe.model import SpectrumReference
from formcheck.recipe.read import WrittenRecipe, read_recipe
from formcheck.spectra.grid import WAVELENGTH_NM
from formcheck.spectra.measured import MeasuredSpectrum
from formcheck.spectra.write_csv import write_spectra_csv
from formcheck.spectra.write_cxf import write_spectra_cxf
from formcheck.trouble import suggestion, trouble
from formcheck.units import UNITS, UnitKind, known_units, parse_amount

MOST_STEPS = 2000
USUAL_STEPS = 11
LEAST_DRAWS, MOST_DRAWS = 100, 100_000
VARIED = re.compile(r"\s*(.+?)\s*=\s*(\S.*?)\s*\.\.\s*(\S.*?)\s*")
NUMBER = re.compile(r"[-+]?[\d.]+(?:[eE][-+]?\d+)?")
EXPECTED = "'INGREDIENT=from..to' with a unit, such as 'harbour blue paste=2 % w/w..12 % w/w'"


@dataclass(frozen=True)
class Row:
    """The amounts that one ingredient runs through, in the unit as written."""

    name: str
    line: int
    kind: UnitKind
    unit: str
    amounts: np.ndarray


def sweep_shades(path: Path, *, vary: str | None = None, steps: int = USUAL_STEPS, grounds: Sequence[str] = (),
                 lights: Sequence[str] = (), draws: int = 0, shelf_folder: Path | None = None) -> ShadeSweep:
    """Shades of a recipe file on every ground named (its own where none is), under every light named.

    The uncertainty is of first order, or with `draws` that of so many draws of every uncertain input.

    Raises
    ------
    InputError
        the recipe cannot be used or its shade not be told; no such ingredient, ground or light; amounts
        that cannot be.
    """
    if draws and not LEAST_DRAWS <= draws <= MOST_DRAWS:
        raise trouble("--draws", str(draws), f"a whole number from {LEAST_DRAWS} to {MOST_DRAWS}")
    written = _looked_at(read_recipe(path), lights=lights)
    batch = build_batch([written], shelf_folder=shelf_folder)
    row = _row(vary, steps, batch) if vary else None
    if row:
        factor = UNITS[row.unit][1]
        batch = with_amounts(batch, [Varied(row.line, row.kind, row.amounts * factor)])
    shelf = batch.shelves[0]
    parts = parts_of(shelf, batch.materials)
    film = film_state(batch, parts, shelf)
    return _swept(written, batch, parts, film, row, grounds or [""], draws, shelf_folder)


def _looked_at(written: WrittenRecipe, *, lights: Sequence[str] = (), ground: str = "") -> WrittenRecipe:
    """The recipe under other lights or on another ground than it names."""
    update: dict[str, object] = {"lights": [_by_file(one, written.folder) for one in lights]} if lights else {}
    if ground:
        update["ground"] = ground if ground in ground_names() else _by_file(ground, written.folder)
    return replace(written, recipe=written.recipe.model_copy(update=update)) if update else written


def _by_file(name: str, folder: Path) -> SpectrumReference | str:
    """A ground or light given on the command line by the file of its spectrum; other words stay names."""
    return SpectrumReference(spectrum=os.path.relpath(name, folder)) if Path(name).suffix else name


def _row(vary: str, steps: int, batch: Batch) -> Row:
    match = VARIED.fullmatch(vary)
    if not match:
        raise trouble("--vary", repr(vary[:60]), EXPECTED)
    name, first, last = match.groups()
    if not 2 <= steps <= MOST_STEPS:
        raise trouble("--steps", str(steps), f"a whole number from 2 to {MOST_STEPS}")
    lines = batch.lines[0]
    named = [n for n, line in enumerate(lines)
             if name.casefold() in (line.name.casefold(), batch.found[line.material].material.id)]
    if not named:
        raise trouble("--vary", f"the ingredient {name[:60]!r}", suggestion(name[:60], [line.name for line in lines]))
    unit_last = NUMBER.sub("", last, count=1).strip()
    if not NUMBER.sub("", first, count=1).strip():
        first = f"{first} {unit_last}"
    return _row_of(name, named[0], first, last)(steps)


def _row_of(name: str, line: int, first: str, last: str):
    """From two amounts in one unit to a row of any length."""
    kinds: tuple[UnitKind, ...] = ("mass", "volume", "mass_fraction", "volume_fraction", "parts", "mass_per_volume")
    try:
        low, high = parse_amount(first, *kinds), parse_amount(last, *kinds)
    except ValueError as error:
        found, _, expected = str(error).partition("|")
        raise trouble("--vary", found, expected or EXPECTED) from None
    if low.kind != high.kind:
        raise trouble("--vary", f"{first!r} to {last!r}", "two amounts in one unit")
    unit = next(one for one in known_units(high.kind) if last.replace(" ", "").endswith(one.replace(" ", "")))
    factor = UNITS[unit][1]
    return lambda steps: Row(name, line, high.kind, unit, np.linspace(low.value / factor, high.value / factor, steps))


def _swept(written: WrittenRecipe, batch: Batch, parts: Parts, film: FilmState, row: Row | None,
           grounds: Sequence[str], draws: int, shelf_folder: Path | None) -> ShadeSweep:
    n = len(batch.mass_fraction)
    acids = [acid_state(batch, batch.shelves[0], r) for r in range(n)]
    present = (parts.fractions(batch.mass_fraction) != 0).any(axis=0)
    known = colourants_of(parts, present)
    seen: dict[str, list[Viewing]] = {}
    for name in grounds:
        one = _looked_at(written, ground=name)
        viewings = [with_layers(one, viewing_of(one, parts, film, r), shelf_folder) for r in range(n)]
        for r, viewing in enumerate(viewings):
            share = form_shares(parts, present, acids[r])
            reason = why_not(batch, film, viewing, known, share, parts.fractions(batch.mass_fraction)[r], r)
            if reason:
                at = f" at {row.amounts[r]:g} {row.unit}" if row else ""
                raise trouble(written.document.file, f"a shade that cannot be told{at}: {reason}",
                              "what is named, on the recipe or on the record")
        seen[viewings[0].ground_name] = viewings
    seen = {name: [with_learned_surface(one, known) for one in viewings] for name, viewings in seen.items()}
    first = next(iter(seen.values()))[0]
    model = prediction_model(batch, parts, film, acids[0], first, known, 0)
    shades = [shade for name, viewings in seen.items()
              for shade in _on_ground(name, viewings, model, batch, parts, film, acids, known, row, draws)]
    wanted = None
    if first.wanted_lab is not None:
        wanted = Wanted(swatch=_swatch(first.wanted_lab, first), light=first.lights[0],
                        observer_deg=first.observer_deg, tolerance_de00=first.tolerance)
    return ShadeSweep(
        formcheck_version=__version__, file=written.document.file, title=written.recipe.title,
        varied=row.name if row else "", unit=row.unit if row else "", amounts=row.amounts.tolist() if row else [],
        grounds=list(seen), lights=list(first.lights), observer_deg=first.observer_deg, geometry=first.geometry,
        quantity="transmittance" if first.setting and first.setting.path_length_cm is not None else "reflectance",
        wavelength_nm=WAVELENGTH_NM.tolist(), uncertainty=f"{draws} draws" if draws else "first order",
        wanted=wanted, shades=shades,
        basis=basis_with_shares(known, form_shares(parts, present, acids[0]) if not row else {}, parts),
        left_out=left_out(model, first, known, parts, batch, 0), notes=list(batch.notes[0]))


def _on_ground(name: str, viewings: Sequence[Viewing], model: Model, batch: Batch, parts: Parts, film: FilmState,
               acids, known, row: Row | None, draws: int) -> list[SweptShade]:
    """All amounts on one ground at once."""
    first = viewings[0]
    setting, observer, light = first.setting, first.observer_deg, first.light(first.lights[0])
    assert setting is not None
    inputs = [inputs_of(batch, viewing, known, acids[r], film, r) for r, viewing in enumerate(viewings)]
    value, sd, lower = (np.stack([getattr(one, field) for one in inputs]) for field in ("value", "sd", "lower"))

    def labs(rows: np.ndarray) -> np.ndarray:
        return lab(xyz(model.spectra(rows, setting), light, observer), white_point(light, observer))

    moved = propagate(labs, value, sd, lower=lower)
    spectra = model.spectra(value, setting)
    under = _under_lights(spectra, first)
    is_film = setting.ground is not None and not setting.takes_in
    contrast = contrast_ratios(model, first, value) if is_film else [None] * len(value)
    error, whose = model_error(known)
    of_model = np.array([model_error_covariance(one, error) if error else np.zeros((3, 3)) for one in moved.value])
    covariance = moved.covariance + of_model
    drawn = [_drawn(labs(draws_of(one, draws)), extra)
             for one, extra in zip(inputs, of_model, strict=True) if draws]
    if drawn:
        covariance = np.array([np.cov(one.T) for one in drawn])
    sds = np.sqrt(np.diagonal(covariance, axis1=1, axis2=2))
    against = _against(moved.value, covariance, first)
    for told, one in zip(against, drawn, strict=False):
        told.update(_counted(one, first))
    swatches = swatches_of(moved.value, light, observer)
    hiding: list[Hiding] | list[None] = [None] * len(value)
    if setting.ground is not None and not (
            setting.learned_surface or setting.under or setting.over or setting.takes_in):
        hiding = hiding_of(model.optics, setting, model.variants(value), float(film.solids_volume.value[0]),
                           is_ink=batch.recipes[0].recipe.what == "ink")
    wanted = None if first.wanted_lab is None else np.array(first.wanted_lab)
    return [SweptShade(
        amount=float(row.amounts[r]) if row else None, ground=name, swatch=swatches[r],
        lab_sd=(float(sds[r, 0]), float(sds[r, 1]), float(sds[r, 2])), lights=under[r],
        contrast_ratio=contrast[r], dominated_by=dominant(
            moved.share_total[r], inputs[r].label, np.trace(moved.covariance[r]),
            (f"model of {whose}", float(np.trace(of_model[r])))),
        munsell=munsell_of(spectra[r]), match=match_of(spectra[r], first), hiding=hiding[r],
        differences=[] if wanted is None else differences(wanted, moved.value[r]),
        value=spectra[r].tolist(), **against[r]) for r in range(len(value))]


def _under_lights(spectra: np.ndarray, viewing: Viewing) -> list[list[UnderLight]]:
    """For every spectrum, its shade under every light."""
    observer = viewing.observer_deg
    lights = [viewing.light(name) for name in viewing.lights]
    labs = [lab(xyz(spectra, light, observer), white_point(light, observer)) for light in lights]
    swatches = [swatches_of(one, light, observer) for one, light in zip(labs, lights, strict=True)]
    changes = [delta_e_2000(labs[0], one) for one in labs]
    return [[UnderLight(light=name, swatch=swatches[n][r], de00_from_first=float(changes[n][r]))
             for n, name in enumerate(viewing.lights)] for r in range(len(spectra))]


def _drawn(labs: np.ndarray, of_model: np.ndarray, seed: int = 21) -> np.ndarray:
    """Drawn shades (draws, 3), each off besides by what the model may be off."""
    if not of_model.any():
        return labs
    return labs + np.random.default_rng(seed).multivariate_normal(np.zeros(3), of_model, size=len(labs))


def _counted(drawn: np.ndarray, viewing: Viewing) -> dict:
    """Spread of the difference and chance to be in tolerance, counted among drawn shades (draws, 3)."""
    if viewing.wanted_lab is None:
        return {}
    de00 = delta_e_2000(drawn, np.array(viewing.wanted_lab))
    within = None if viewing.tolerance is None else float((de00 <= viewing.tolerance).mean())
    return {"de00_sd": float(de00.std()), "probability_within": within}


def _against(value: np.ndarray, covariance: np.ndarray, viewing: Viewing) -> list[dict]:
    """Difference from the wanted shade of every amount; nothing where none is wanted."""
    n = len(value)
    if viewing.wanted_lab is None:
        return [{} for _ in range(n)]
    target = np.broadcast_to(np.array(viewing.wanted_lab), (n, 3))
    de00 = delta_e_2000(value, target)
    spread = difference_spread(value, covariance, target)[1]
    tolerance = viewing.tolerance
    within = None if tolerance is None else probability_within(value, covariance, target, np.full(n, tolerance))
    words = [difference_words(one, shade) for one, shade in zip(target, value, strict=True)]
    return [{"de00": float(de00[r]), "de00_sd": float(spread[r]), "difference_words": words[r],
             "probability_within": None if within is None else float(within[r])} for r in range(n)]


def _swatch(shade, viewing: Viewing) -> Swatch:
    return swatches_of(np.array([shade]), viewing.light(viewing.lights[0]), viewing.observer_deg)[0]


def write_swept_spectra(sweep: ShadeSweep, path: Path, *, day: date) -> None:
    """Write the predicted spectra to a file, CxF3 where its name ends in .cxf, else CSV.

    Raises
    ------
    InputError
        a place that cannot be written to.
    """
    spectra = [MeasuredSpectrum(
        _spectrum_name(sweep, one), np.array(sweep.wavelength_nm), np.array(one.value), sweep.quantity,
        instrument=f"predicted by formcheck {sweep.formcheck_version}") for one in sweep.shades]
    if path.suffix.lower() == ".cxf":
        write_spectra_cxf(path, spectra, created=day, description=f"{sweep.title}, predicted")
    else:
        write_spectra_csv(path, spectra)


def _spectrum_name(sweep: ShadeSweep, one: SweptShade) -> str:
    amount = f"{one.amount:g} {sweep.unit}" if one.amount is not None else "as written"
    return f"{sweep.title}, {amount}" + (f", {one.ground}" if len(sweep.grounds) > 1 else "")
