"""What a recipe, its figures and its dye forms are said to be: the one place for terminal and page."""

from __future__ import annotations

from collections.abc import Sequence

from formcheck.check.record import DyeForms, Figure, Line
from formcheck.report.numbers import aligned, interval, percent, plain, with_sd
from formcheck.report.words import cited_text, one_line, spelled, with_unit


def figure_text(figure: Figure) -> str:
    """`1.08 ± 0.02 g/mL`, `1.08 g/mL (1.0 to 1.2)`, or `unknown`; the reason is told apart."""
    if figure.value is None:
        bounds = interval(figure.low, figure.high)
        return with_unit(f"unknown, {bounds}", figure.unit) if bounds else "unknown"
    text = with_sd(figure.value, figure.sd)
    text = f"({text})" if "±" in text and figure.unit == "%" else text
    text = with_unit(text, figure.unit)
    bounds = "" if figure.sd else interval(figure.low, figure.high)
    if figure.low is not None and figure.high is not None and plain(figure.low) == plain(figure.high):
        bounds = ""  # a range narrower than the digits shown
    return f"{text} ({bounds})" if bounds else text


def figure_basis(figure: Figure) -> str:
    """How a figure was come by: the reason it is unknown, the method, the source."""
    said = [figure.reason if figure.value is None else "", figure.how,
            cited_text(figure.source) if figure.source else ""]
    return "; ".join(one_line(text) for text in said if text)


def forms_text(forms: DyeForms) -> str:
    pka = f"; pKa {', '.join(plain(value) for value in forms.pka)}" if forms.pka else ""
    if forms.shares is None:
        return f"unknown: {one_line(forms.reason)}{pka}"
    shares = zip(forms.forms, forms.shares, strict=True)
    return ", ".join(f"{one_line(name)} {percent(share)}" for name, share in shares) + pka


def ingredient_text(line: Line) -> str:
    """The ingredient's name, and the material it was taken for where that is called otherwise."""
    name, material = one_line(line.ingredient), one_line(line.material)
    same = not material or spelled(material).casefold() == spelled(name).casefold()
    return name if same else f"{name} ({material})"


def composition_columns(lines: Sequence[Line]) -> tuple[list[str], list[str], list[str]]:
    """Mass in g, mass fraction and dry volume fraction in %, each as a column of one precision."""
    return (aligned([line.mass_g for line in lines]),
            aligned([_times_100(line.mass_fraction) for line in lines], digits=3),
            aligned([_times_100(line.dry_volume_fraction) for line in lines], digits=3))


def _times_100(fraction: float | None) -> float | None:
    return None if fraction is None else 100 * fraction
