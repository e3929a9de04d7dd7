"""What an estimate from boxes is said to be: the one place that terminal and page take it from."""

from __future__ import annotations

from formcheck.check.record_estimate import BoxLevel, BoxLevels, EstimatedBand, EstimatedForm, EstimatedShade
from formcheck.report.numbers import interval, plain, with_sd
from formcheck.report.shade_words import hex_text, lab_text, observer_text
from formcheck.report.words import one_line

BAND_COLUMNS = ("band", "λmax, nm", "half heights, nm", "ε, L/(mol cm)", "f")
# No band that ends below this is seen.
VISIBLE_FROM_NM = 380.0


def box_text(box: BoxLevels) -> str:
    """`3 × chain of 1.20 nm, 8 pi electrons each`."""
    many = f"{box.count} × " if box.count > 1 else ""
    each = " each" if box.count > 1 else ""
    return f"{many}{one_line(box.label)}, {box.n_pi_electrons} pi electrons{each}"


def band_texts(band: EstimatedBand) -> list[str]:
    """A band as the texts of BAND_COLUMNS."""
    relative = band.epsilon_relative_sd
    epsilon_sd = None if relative is None else relative * band.epsilon_l_mol_cm
    strength = "" if band.oscillator_strength is None else plain(band.oscillator_strength, 2)
    return [one_line(band.label), with_sd(band.lambda_max_nm, band.lambda_sd_nm, digits=4),
            interval(*band.half_height_nm) if band.half_height_nm else "",
            with_sd(band.epsilon_l_mol_cm, epsilon_sd), strength]


def level_text(level: BoxLevel) -> str:
    """`4 electrons in 2 orbitals`, `empty`."""
    orbitals = "1 orbital" if level.orbitals == 1 else f"{level.orbitals} orbitals"
    if level.electrons == 0:
        return f"empty, {orbitals}"
    return f"{plain(level.electrons)} {'electron' if level.electrons == 1 else 'electrons'} in {orbitals}"


def shade_rows(form: EstimatedForm) -> list[tuple[str, str]]:
    """Label and text of how the solution looks, as a region."""
    shade = form.shade
    if shade is None:
        return [("looks", "colourless" if form.colourless else "unknown")]
    rows = [
        ("looks", _looks(form, shade)),
        ("shade", f"{hex_text(shade.swatch)}, {lab_text(shade.swatch.lab)}"),
        ("may be", "; ".join(f"{hex_text(one)}, {lab_text(one.lab)}" for one in shade.region)),
        ("solution", f"{plain(shade.concentration_mol_l)} mol/L, {plain(shade.path_length_cm)} cm of it; "
                     f"seen under {observer_text(shade.light, shade.observer_deg)}"),
    ]
    return [(label, text) for label, text in rows if text]


def _looks(form: EstimatedForm, shade: EstimatedShade) -> str:
    if form.colourless:
        return f"colourless: every band lies below {plain(VISIBLE_FROM_NM)} nm"
    return one_line(shade.words)
