"""The shade of one recipe: prediction, uncertainty, region, difference from what is wanted."""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from formcheck.check.acid import AcidState
from formcheck.check.colourants import (
    Colourants,
    colourants_of,
    learned_surface,
    missing_reasons,
    model_error,
)
from formcheck.check.model_error import model_error_covariance
from formcheck.check.parts import Parts
from formcheck.check.predict import Setting, pigment_volume_fraction
from formcheck.check.prediction_model import Model, draws_of, prediction_model
from formcheck.check.record import Shade, Spectrum, Swatch, UnderLight, Wanted
from formcheck.check.setting import SOLUTIONS, Viewing
from formcheck.check.volumes import FilmState
from formcheck.colour.cielab import lab, lch
from formcheck.colour.difference import delta_e_2000, difference_words
from formcheck.colour.grounds import ground, ground_record
from formcheck.colour.hiding import contrast_ratio
from formcheck.colour.lights import Light
from formcheck.colour.srgb import hex_code, srgb
from formcheck.colour.tristimulus import white_point, xyz
from formcheck.colour.uncertainty import difference_spread, probability_within, propagate
from formcheck.recipe.batch import Batch
from formcheck.spectra.grid import WAVELENGTH_NM

REGION_AT = (0.05, 0.25, 0.5, 0.75, 0.95)  # along the direction in which the shade is least sure


def shade_of(batch: Batch, parts: Parts, *, film: FilmState, acid: AcidState, viewing: Viewing,
             form_share: dict[int, np.ndarray | None], r: int = 0) -> tuple[Shade | None, str, Colourants]:
    """The Shade, or None with the reason; and the optical data it stands on."""
    fractions = parts.fractions(batch.mass_fraction)[r]
    known = colourants_of(parts, ~(fractions == 0))
    reason = why_not(batch, film, viewing, known, form_share, fractions, r)
    if reason:
        return None, reason, known
    assert viewing.setting is not None
    viewing = with_learned_surface(viewing, known)
    model = prediction_model(batch, parts, film, acid, viewing, known, r)
    return _shade(model, viewing, known, form_share, parts, batch, r), "", known


def with_learned_surface(viewing: Viewing, known: Colourants) -> Viewing:
    """The film seen under the surface that its pigments were learned with, where they share one."""
    constants, said = learned_surface(known)
    if viewing.setting is None or viewing.setting.ground is None or not (constants or said):
        return viewing
    setting = replace(viewing.setting, learned_surface=constants)
    return replace(viewing, setting=setting, notes=(*viewing.notes, *said))


def why_not(batch: Batch, film: FilmState, viewing: Viewing, known: Colourants, form_share, fractions, r: int) -> str:
    reasons = missing_reasons(known, form_share)
    if viewing.reason:
        reasons.append(viewing.reason)
    if np.isnan(fractions).any():
        reasons.append("amounts are unknown: " + "; ".join(dict.fromkeys(one.why for one in batch.reasons[r])))
    elif np.isnan(film.density_g_ml.value[r]):
        reasons.append(f"the density of the mixture is unknown: {film.density_g_ml.reasons[r]}")
    if known.pigments and viewing.setting and viewing.setting.path_length_cm is not None:
        reasons.append("a pigment makes the liquid turbid, which a clear cell does not hold")
    if known.pigments and viewing.setting and viewing.setting.takes_in:
        reasons.append("a pigment stays on a ground that takes the dye in, which the model does not hold")
    return "; ".join(dict.fromkeys(reasons))


def _shade(model: Model, viewing: Viewing, known: Colourants, form_share, parts: Parts, batch: Batch, r: int) -> Shade:
    assert viewing.setting is not None
    setting, observer, light = viewing.setting, viewing.observer_deg, viewing.light(viewing.lights[0])
    x = model.inputs

    def labs(rows: np.ndarray) -> np.ndarray:
        return lab(xyz(model.spectra(rows, setting), light, observer), white_point(light, observer))

    moved = propagate(labs, x.value, x.sd, lower=x.lower)
    draws = draws_of(x)
    drawn_spectra = model.spectra(draws, setting)
    drawn = lab(xyz(drawn_spectra, light, observer), white_point(light, observer))
    estimated = any(one.basis == "box model" for one in known.basis)
    error, whose = model_error(known)
    of_model = model_error_covariance(moved.value, error) if error else np.zeros((3, 3))
    covariance = (np.cov(drawn.T) if estimated else moved.covariance) + of_model
    value = model.spectra(x.value[None, :], setting)[0]
    low, high = np.percentile(drawn_spectra, [15.9, 84.1], axis=0)
    is_film = setting.ground is not None and not setting.takes_in
    contrast = contrast_ratios(model, viewing, x.value[None, :])[0] if is_film else None
    wanted, de00, de00_sd, within, words = _against_wanted(viewing, moved.value, covariance)
    return Shade(
        light=viewing.lights[0], observer_deg=observer, swatch=swatch_of(moved.value, light, observer),
        xyz=_triple(xyz(value, light, observer)), lch=_triple(lch(moved.value)),
        lab_sd=_triple(np.sqrt(np.diag(covariance))),
        spectrum=Spectrum(
            quantity="transmittance" if setting.path_length_cm is not None else "reflectance",
            wavelength_nm=WAVELENGTH_NM.tolist(), value=value.tolist(),
            low=np.minimum(low, value).tolist(), high=np.maximum(high, value).tolist()),
        ground=viewing.ground_name, geometry=viewing.geometry, wanted=wanted, de00=de00, de00_sd=de00_sd,
        probability_within=within, difference_words=words,
        lights=_under_lights(value, viewing), region=_region(drawn, light, observer),
        contrast_ratio=contrast,
        dominated_by=dominant(moved.share_total, x.label, np.trace(moved.covariance),
                              (f"model of {whose}", float(np.trace(of_model)))),
        basis=basis_with_shares(known, form_share, parts), left_out=left_out(model, viewing, known, parts, batch, r))


def swatch_of(shade, light: Light, observer: int) -> Swatch:
    return swatches_of(np.asarray(shade, float)[None, :], light, observer)[0]


def swatches_of(shades: np.ndarray, light: Light, observer: int) -> list[Swatch]:
    """Swatches of many shades (N, 3) under one light."""
    rgb, inside = srgb(shades, light, observer)
    return [Swatch(lab=_triple(shade), srgb_hex=hex_code(one), in_gamut=bool(fits))
            for shade, one, fits in zip(shades, rgb, inside, strict=True)]


def _triple(values) -> tuple[float, float, float]:
    return float(values[0]), float(values[1]), float(values[2])


def _against_wanted(viewing: Viewing, shade: np.ndarray, covariance: np.ndarray):
    """(Wanted, DE00, its sd, P within tolerance, words); Nones where nothing is wanted."""
    if viewing.wanted_lab is None:
        return None, None, None, None, ""
    name, observer, target = viewing.lights[0], viewing.observer_deg, np.array(viewing.wanted_lab)
    within = None
    if viewing.tolerance is not None:
        within = float(probability_within(shade, covariance, target, viewing.tolerance))
    wanted = Wanted(swatch=swatch_of(target, viewing.light(name), observer), light=name, observer_deg=observer,
                    tolerance_de00=viewing.tolerance)
    _, spread = difference_spread(shade, covariance, target)
    return wanted, float(delta_e_2000(shade, target)), float(spread), within, difference_words(target, shade)


def _under_lights(spectrum: np.ndarray, viewing: Viewing) -> list[UnderLight]:
    observer = viewing.observer_deg
    lights = [viewing.light(name) for name in viewing.lights]
    labs = [lab(xyz(spectrum, light, observer), white_point(light, observer)) for light in lights]
    return [UnderLight(light=name, swatch=swatch_of(one, light, observer),
                       de00_from_first=float(delta_e_2000(labs[0], one)))
            for name, light, one in zip(viewing.lights, lights, labs, strict=True)]


def _region(drawn: np.ndarray, light: Light, observer: int) -> list[Swatch]:
    """Shades along the direction in which the drawn ones spread most, from one end to the other."""
    _, axes = np.linalg.eigh(np.cov(drawn.T))
    order = np.argsort((drawn - drawn.mean(axis=0)) @ axes[:, -1])
    return swatches_of(drawn[[order[int(q * (len(order) - 1))] for q in REGION_AT]], light, observer)


def contrast_ratios(model: Model, viewing: Viewing, rows: np.ndarray) -> list[float]:
    """Y over black to Y over white of every row's film, over the charts of the standards, D65."""
    assert viewing.setting is not None
    y = []
    for name in ("chart_black", "chart_white"):
        record = ground_record(name)
        setting = Setting(ground=ground(name), ground_in_air=record.measured_in_air,
                          ground_specular_included=record.specular_included,
                          film_index=viewing.setting.film_index, specular_included=viewing.setting.specular_included)
        y.append(xyz(model.spectra(rows, setting), "D65", 10)[:, 1])
    return [float(ratio) for ratio in contrast_ratio(y_black=y[0], y_white=y[1])]


def dominant(share: np.ndarray, label: list[str], of_inputs: float, of_model: tuple[str, float]) -> str:
    """The source with the largest part of the variance of L*, a*, b* together.

    `share` (I,) of the variance `of_inputs` by input; `of_model` the name and variance of the model's own error.
    """
    variance = {of_model[0]: of_model[1]}
    for name, part in zip(label, share, strict=True):
        variance[name] = variance.get(name, 0.0) + float(part) * of_inputs
    name, whole = max(variance, key=lambda one: variance[one]), sum(variance.values())
    return f"{name} ({variance[name] / whole:.0%} of the variance)" if whole > 0 else ""


def basis_with_shares(known: Colourants, form_share, parts: Parts):
    basis = []
    for one in known.basis:
        share = None
        for c, shares in form_share.items():
            material = parts.materials[c]
            if one.form and shares is not None and material and material.names[0] == one.material and material.optical:
                forms = [form.name for form in material.optical.forms]
                share = float(shares[forms.index(one.form)])
        basis.append(one.model_copy(update={"share": share}))
    return basis


def left_out(model: Model, viewing: Viewing, known: Colourants, parts: Parts, batch: Batch, r: int) -> list[str]:
    said = list(viewing.notes)
    if batch.recipes[r].recipe.balance_step_g is None:
        said.append("the uncertainty of weighing, as the recipe gives no `weighing`")
    if viewing.setting and viewing.setting.ground is not None and viewing.thickness_sd_um == 0:
        said.append("the unevenness of the film, as the recipe gives no `sd` with it")
    said += known.held
    said += [f"films of {one.name} that do not hide: its K and S were learned without a known thickness"
             for one in known.pigments if not one.thickness_known]
    said += [f"the fluorescence of {name}" for name in known.fluorescent]
    if known.absorbers and batch.recipes[r].recipe.what not in SOLUTIONS:
        said.append("what drying does to the dyes: their spectra are those of solutions")
    said += _crowded(model, known)
    fraction = parts.fractions(batch.mass_fraction)[r]
    for c, material in enumerate(parts.materials):
        if material is None and fraction[c] > 0:
            said.append(f"the colour of the {parts.names[c]} ({fraction[c]:.1%}), taken as clear")
        elif material is not None and material.kind == "extender" and fraction[c] > 0 and \
                not (material.optical and material.optical.k_and_s):
            said.append(f"the scattering of {parts.names[c]}, which is small in a film without pores")
    return said


def _crowded(model: Model, known: Colourants) -> list[str]:
    """Pigments beyond the volume fraction up to which their K and S hold."""
    volume = pigment_volume_fraction(model.optics, model.variants(model.inputs.value[None, :]))[0]
    return [f"the crowding of {one.name}: {v:.0%} by volume of the wet film, K and S hold up to "
            f"{one.most_volume_fraction:.0%}" for one, v in zip(known.pigments, volume, strict=True)
            if one.most_volume_fraction is not None and v > one.most_volume_fraction]
