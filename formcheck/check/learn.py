"""`formcheck learn`: from a file of measured drawdowns or solutions to what they teach, and how sure that is."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

import numpy as np

from formcheck import __version__
from formcheck.check.learn_arrays import WrittenLadder, read_drawdowns, read_learn_document
from formcheck.check.learn_dilution import learn_from_dilution
from formcheck.check.learn_doubts import ladder_doubts
from formcheck.check.learn_files import record_paths, write_colourant
from formcheck.check.record import Cited
from formcheck.check.record_learned import Learned, LearnedColourant, LearnedPanel, Offset, SurfaceConstants
from formcheck.check.shade import swatch_of
from formcheck.colour.cielab import lab_of_spectrum
from formcheck.colour.difference import delta_e_2000
from formcheck.colour.learning import doubts
from formcheck.colour.learning.ladder import LearnedLadder, fit_ladder
from formcheck.colour.learning.leave_one_out import LeftOut, leave_one_out, reckoned_without
from formcheck.colour.saunderson import k1_from_index, k2_from_index

LIGHT, OBSERVER = "D65", 10
USUAL_INDEX = 1.5  # whose surface constants are tried instead of the fitted ones, to say what that would cost

Progress = Callable[[str, int, int], None]  # what is being done, done, of how many


def learn_file(path: Path, *, out: Path | None = None, shelf_folder: Path | None = None,
               progress: Progress = lambda what, done, of: None) -> Learned:
    """Learn from a file, and write the records to `out` and beside it where one is given.

    Raises
    ------
    InputError
        the file, a spectrum or a record that it names cannot be used, with place; or `out` not written.
    """
    document = read_learn_document(path)
    if isinstance(document.data, dict) and document.data.get("what") == "dilution":
        return learn_from_dilution(document, path, out=out)
    written = read_drawdowns(document, path.parent, shelf_folder)
    ids = _learned_first(written)
    paths = record_paths(out, ids) if out else {}
    record = learn_ladder(written, file=str(path), progress=progress)
    for c, colourant in enumerate(record.colourants):
        if colourant.id in paths:
            colourant.record_file = str(paths[colourant.id])
            write_colourant(paths[colourant.id], colourant, record, source=_source(written),
                            density_g_cm3=written.file.colourants[c].density_g_cm3,
                            most_volume_fraction=float(written.ladder.volume_fraction[:, c].max()))
    return record


def learn_ladder(written: WrittenLadder, *, file: str, progress: Progress = lambda what, done, of: None) -> Learned:
    """What the panels of a ladder teach, as a record."""
    films = len(written.ladder.volume_fraction)
    steps = _Steps(progress, 2 * films + 2)
    learned = fit_ladder(written.ladder)
    steps.next()
    left_out = leave_one_out(learned, progress=steps.next)
    assumed = _assumed_surface(learned, steps)
    panels = _panels(written, learned, left_out)
    off = [_mean([one.de00_left_out for one in panel.readings]) for panel in panels]
    known = [one for one in off if one is not None]
    return Learned(
        formcheck_version=__version__, file=file, title=written.file.title, what="drawdowns",
        colourants=_colourants(written, learned), panels=panels,
        surface=SurfaceConstants(k1=learned.k1, k1_sd=learned.k1_sd, k2=learned.k2, k2_sd=learned.k2_sd,
                                 mirror=written.file.measured.mirror),
        thickness_known=written.ladder.thickness_known, light=LIGHT, observer_deg=OBSERVER,
        de00_fit_median=float(np.median([one.de00_fit for panel in panels for one in panel.readings])),
        de00_left_out_median=float(np.median(known)) if known else None,
        de00_left_out_p90=float(np.percentile(known, 90)) if known else None,
        model_error_de00=_model_error(panels, off), condition=float(np.median(learned.condition)),
        doubts=ladder_doubts(learned, written.file.colourants, [one.name for one in panels], left_out=off,
                             relief=[one.relief for one in left_out], between=[one.between for one in left_out],
                             without_black=_without_black(written, learned)),
        notes=[*_surface_note(learned, panels, assumed), *_spread_notes(learned), *_density_notes(written),
               *written.notes],
        sources=[Cited(cite=_source(written)["cite"], kind=_source(written)["kind"])])


class _Steps:
    """Tells how far a long fit has come. A class because it counts."""

    def __init__(self, progress: Progress, of: int):
        self.progress, self.of, self.done = progress, of, 0

    def next(self) -> None:
        self.done += 1
        self.progress("learning", self.done, self.of)


def _learned_first(written: WrittenLadder) -> list[str]:
    """Ids of the colourants to be learned, colours before whites and blacks: the first gives the record its name."""
    learned = [one for one in written.file.colourants if one.material is None]
    return [one.id for one in sorted(learned, key=lambda one: one.role != "colour")]


def _source(written: WrittenLadder) -> dict[str, str]:
    said = written.file.source
    return {"cite": said.cite if said else f"{written.file.title}: own drawdowns, learned by formcheck",
            "kind": said.kind if said else "measured"}


def _colourants(written: WrittenLadder, learned: LearnedLadder) -> list[LearnedColourant]:
    k_sd = doubts.relative_sd(learned.K, learned.K_sd_together)
    s_sd = doubts.relative_sd(learned.S, learned.S_sd_together)
    return [LearnedColourant(
        id=one.id, names=one.names or [one.id], role=one.role, known=one.material is not None,
        wavelength_nm=learned.ladder.wavelength_nm.tolist(), K_per_um=learned.K[c].tolist(),
        K_sd=learned.K_sd[c].tolist(), S_per_um=learned.S[c].tolist(), S_sd=learned.S_sd[c].tolist(),
        K_relative_sd=float(k_sd[c]), S_relative_sd=float(s_sd[c]))
        for c, one in enumerate(written.file.colourants)]


def _labs(ladder, reflectance: np.ndarray) -> np.ndarray:
    return lab_of_spectrum(reflectance, LIGHT, OBSERVER, ladder.wavelength_nm)


def _panels(written: WrittenLadder, learned: LearnedLadder, left_out: list[LeftOut]) -> list[LearnedPanel]:
    ladder = written.ladder
    measured, fitted = _labs(ladder, ladder.reading), _labs(ladder, np.clip(learned.reckoned, 0, 1))
    panels = []
    for f, (panel, one) in enumerate(zip(written.file.panels, left_out, strict=True)):
        out = None if one.reckoned is None else delta_e_2000(_labs(ladder, one.reckoned), measured[one.readings])
        readings = [Offset(
            ground=written.ground_names[ladder.ground_of[row]], measured=swatch_of(measured[row], LIGHT, OBSERVER),
            de00_fit=float(delta_e_2000(fitted[row], measured[row])),
            de00_left_out=None if out is None else float(out[n])) for n, row in enumerate(one.readings)]
        fractions = {colourant.id: float(ladder.volume_fraction[f, c])
                     for c, colourant in enumerate(written.file.colourants) if ladder.volume_fraction[f, c] > 0}
        panels.append(LearnedPanel(
            name=panel.name, volume_fractions=fractions, between=one.between, readings=readings,
            thickness_um=float(learned.thickness_um[f]) if ladder.thickness_known else None,
            left_out_reason="" if one.reckoned is not None else "no other panel holds one of its colourants"))
    return panels


def _model_error(panels: list[LearnedPanel], off: list[float | None]) -> float | None:
    """Root mean square of the panels left out whose mixes lie between the others; of all where none does."""
    between = [one for panel, one in zip(panels, off, strict=True) if one is not None and panel.between]
    used = between or [one for one in off if one is not None]
    return float(np.sqrt(np.mean(np.square(used)))) if used else None


def _assumed_surface(learned: LearnedLadder, steps: _Steps) -> float | None:
    """Median DE00 of the panels left out, k1 and k2 held at those of a usual index instead of fitted."""
    surface = (float(k1_from_index(USUAL_INDEX)), float(k2_from_index(USUAL_INDEX)))
    found = leave_one_out(learned, surface=surface, progress=steps.next)
    steps.next()
    off = [_mean(delta_e_2000(_labs(learned.ladder, one.reckoned),
                              _labs(learned.ladder, learned.ladder.reading[one.readings])).tolist())
           for one in found if one.reckoned is not None]
    return float(np.median([one for one in off if one is not None])) if off else None


def _without_black(written: WrittenLadder, learned: LearnedLadder) -> float | None:
    """Median DE00 of the mixes of colour and black, reckoned from all other panels."""
    roles = np.array([one.role for one in written.file.colourants])
    held = written.ladder.volume_fraction > 0
    black, colour = held[:, roles == "black"].any(axis=1), held[:, roles == "colour"].any(axis=1)
    found = reckoned_without(learned, np.logical_and(black, colour))
    if found is None:
        return None
    rows, reckoned = found
    return float(np.median(delta_e_2000(_labs(written.ladder, reckoned),
                                        _labs(written.ladder, written.ladder.reading[rows]))))


def _surface_note(learned: LearnedLadder, panels: list[LearnedPanel], assumed: float | None) -> list[str]:
    fitted = [_mean([one.de00_left_out for one in panel.readings]) for panel in panels]
    known = [one for one in fitted if one is not None]
    if assumed is None or not known:
        return []
    return [f"Surface constants are fitted, not assumed: with those of an index of {USUAL_INDEX:g} the panels left out "
            f"would be off by ΔE00 {assumed:.2f} in the median instead of {np.median(known):.2f}."]


def _spread_notes(learned: LearnedLadder) -> list[str]:
    spreads = learned.spreads
    return [f"Beyond repeatability, films differ from one another by {spreads.gloss:.1%} of reflectance in gloss and "
            f"by {spreads.loading:.1%} in loading, as far as the readings tell."]


def _density_notes(written: WrittenLadder) -> list[str]:
    bare = [one.id for one in written.file.colourants if one.material is None and one.density_g_cm3 is None]
    return [f"No density of {', '.join(bare)}: a recipe by mass needs one on the record."] if bare else []


def _mean(values: list[float | None]) -> float | None:
    known = [one for one in values if one is not None]
    return float(np.mean(known)) if known else None
