"""What a shade is said to be, label by label: the one place that terminal and page take it from."""

from __future__ import annotations

from collections.abc import Sequence

from formcheck.check.record import ColourantBasis, Shade, Swatch, Wanted
from formcheck.report.numbers import percent, plain, probability, with_sd
from formcheck.report.words import cited_text, hex_colour, one_line


def lab_text(lab: Sequence[float], sd: Sequence[float] | None = None) -> str:
    """`L* 31.4 ± 0.8, a* −2.1 ± 0.5, b* −28.0 ± 1.1`."""
    spreads = sd or (None, None, None)
    return ", ".join(f"{axis} {coordinate(value, spread)}"
                     for axis, value, spread in zip(("L*", "a*", "b*"), lab, spreads, strict=True))


def coordinate(value: float, sd: float | None = None) -> str:
    """A colour coordinate: to its sd, else to the one decimal that an eye can make use of."""
    if sd is not None and sd > 0:
        return with_sd(value, sd)
    text = f"{value:.1f}"
    return "0.0" if text == "-0.0" else text.replace("-", "−")


def observer_text(light: str, observer_deg: int) -> str:
    return f"{one_line(light)}, {observer_deg}° observer"


COLOUR_COLUMNS = ("", "hex", "L*", "a*", "b*", "ΔE00")


def colour_rows(shade: Shade) -> list[tuple[Swatch, list[str]]]:
    """Each colour the shade speaks of, with the texts of COLOUR_COLUMNS: predicted, wanted, other lights."""
    predicted = _lab_texts(shade.swatch, shade.lab_sd)
    rows = [(shade.swatch, ["predicted", hex_text(shade.swatch), *predicted, ""])]
    if shade.wanted:
        difference = "" if shade.de00 is None else with_sd(shade.de00, shade.de00_sd)
        swatch = shade.wanted.swatch
        rows.append((swatch, ["wanted", hex_text(swatch), *_lab_texts(swatch), difference]))
    first = shade.lights[0].light if shade.lights else shade.light
    note = "" if first == shade.light else f" from {one_line(first)}"
    rows += [(one.swatch, [f"under {one_line(one.light)}", hex_text(one.swatch), *_lab_texts(one.swatch),
                           f"{coordinate(one.de00_from_first)}{note}"])
             for one in shade.lights if one.light != shade.light]
    return rows


def shade_rows(shade: Shade) -> list[tuple[str, str]]:
    """Label and text of what is said of the shade beside its coordinates."""
    contrast = "" if shade.contrast_ratio is None else f"{shade.contrast_ratio:.3f}"
    drawn_in = [row[0] for swatch, row in colour_rows(shade) if not swatch.in_gamut]
    rows = [
        ("layer", one_line(shade.geometry)),
        ("ground", one_line(shade.ground)),
        ("seen under", observer_text(shade.light, shade.observer_deg)),
        ("wanted under", _other_light(shade)),
        ("chroma, hue", f"C* {coordinate(shade.lch[1])}, h {coordinate(shade.lch[2])}°"),
        ("difference", one_line(shade.difference_words)),
        ("tolerance", tolerance_text(shade, shade.wanted) if shade.wanted else ""),
        ("contrast ratio", contrast),
        ("least sure of", one_line(shade.dominated_by)),
        ("estimated", "not every colourant has a measured spectrum; see what the shade stands on"
                      if estimated(shade) else ""),
        ("drawn in", f"{', '.join(drawn_in)}: beyond what a screen shows" if drawn_in else ""),
    ]
    return [(label, text) for label, text in rows if text]


def _other_light(shade: Shade) -> str:
    """Light and observer of the wanted shade, where they are not those of the prediction."""
    wanted = shade.wanted
    if wanted is None or (wanted.light, wanted.observer_deg) == (shade.light, shade.observer_deg):
        return ""
    return observer_text(wanted.light, wanted.observer_deg)


def _lab_texts(swatch: Swatch, sd: Sequence[float] | None = None) -> list[str]:
    return [coordinate(*one) for one in zip(swatch.lab, sd or (None, None, None), strict=True)]


def tolerance_text(shade: Shade, wanted: Wanted) -> str:
    """`ΔE00 2; chance of being within it 63 %`."""
    if wanted.tolerance_de00 is None:
        return ""
    text = f"ΔE00 {plain(wanted.tolerance_de00)}"
    if shade.probability_within is None:
        return text
    return f"{text}; chance of being within it: {probability(shade.probability_within)}"


def hex_text(swatch: Swatch) -> str:
    """The hex, or that there is none to show."""
    return hex_colour(swatch) or "no colour"


def colourant_name(one: ColourantBasis) -> str:
    form = f", {one_line(one.form)}" if one.form else ""
    return f"{one_line(one.material)}{form}"


def colourant_basis(one: ColourantBasis) -> str:
    share = "" if one.share is None else f"{percent(one.share)} of it; "
    source = f"; {cited_text(one.source)}" if one.source else ""
    return f"{share}{one.basis}: {one_line(one.error)}{source}"


def estimated(shade: Shade) -> bool:
    """Whether any colourant of the shade stands on something other than a measurement."""
    return any(colourant.basis != "measured" for colourant in shade.basis)
