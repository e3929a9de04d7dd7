"""The shade on the page: the swatch beside the wanted one, its figures, its spectrum, what it stands on."""

from __future__ import annotations

from formcheck.check.record import Check, Shade, Spectrum
from formcheck.report.html import Child, Column, Markup, definitions, section, table, tag
from formcheck.report.numbers import percent, plain
from formcheck.report.plot import Axis, Series, line_plot, visible_spectrum
from formcheck.report.shade_words import COLOUR_COLUMNS, colour_rows, shade_rows
from formcheck.report.sheet import at_both_widths
from formcheck.report.swatches import chip, dot, pair
from formcheck.report.words import cited_text, hex_colour, one_line

TABLE_STEP_NM = 20


def shade_head(check: Check, *, id: str) -> Markup:
    """The swatches and the figures of the shade, for the head of a check."""
    shade = check.shade
    if shade is None:
        why = check.shade_reason or "no reason was recorded"
        return tag("p", tag("strong", "Shade unknown: "), one_line(why), class_="shade-unknown")
    figures = tag("div", _colours(shade, id=id), definitions(shade_rows(shade)))
    return tag("div", _swatches(shade, id=id), figures, class_="shade")


def _swatches(shade: Shade, *, id: str) -> Markup:
    """Predicted beside wanted, and in words which is which."""
    wanted = chip(shade.wanted.swatch, "wanted") if shade.wanted else None
    region = [chip(one, "within its uncertainty") for one in shade.region]
    sides = [tag("span", "predicted"), tag("span", "wanted") if wanted else None]
    below = "The strip under it: shades within its uncertainty. " if len(region) > 1 else ""
    screen = "" if shade.swatch.in_gamut else "No screen shows this colour; it was drawn in. "
    return tag("figure", tag("div", sides, class_="sides"),
               pair(chip(shade.swatch, "predicted"), wanted, region, id=f"{id}-pair"),
               tag("figcaption", f"{below}{screen}A screen only resembles it.".strip()))


def _colours(shade: Shade, *, id: str) -> Markup:
    """The coordinates of each colour, a small swatch before those of other lights."""
    rows: list[list[Child]] = []
    for place, (swatch, texts) in enumerate(colour_rows(shade)):
        small = dot(hex_colour(swatch), f"{texts[0]}: {texts[1]}", id=f"{id}-c{place}")
        rows.append([texts[0], [small, " ", tag("code", texts[1])], *texts[2:]])
    columns: list[Column] = ["colour", "on a screen", *((name, "number") for name in COLOUR_COLUMNS[2:])]
    return table("CIELAB; ΔE00 counted from the predicted colour", columns, rows, class_="colours")


def spectrum_section(shade: Shade, *, level: int, id: str) -> Markup:
    spectrum = shade.spectrum
    title = f"Predicted {spectrum.quantity}"
    plotted = at_both_widths(lambda width, height, end: spectrum_plot(
        spectrum, id=f"{id}-plot-{end}", width=width, height=height))
    note = "Line: as predicted. Band: one standard deviation to either side."
    values = tag("details", tag("summary", "The figures of this plot"), _spectrum_table(spectrum))
    return section(level, title, tag("figure", plotted, tag("figcaption", note)), values, id=f"{id}-spectrum")


def spectrum_plot(spectrum: Spectrum, *, id: str, width: int, height: int) -> Markup:
    """The spectrum with its band, over the look of the wavelengths."""
    curve = Series(spectrum.wavelength_nm, spectrum.value, low=spectrum.low, high=spectrum.high)
    highest = max([1.0, *spectrum.high])
    return line_plot([curve], id=id, title=f"Predicted {spectrum.quantity} against wavelength",
                     description=spectrum_in_words(spectrum), x=Axis("wavelength, nm"),
                     y=Axis(spectrum.quantity, low=0.0, high=highest),
                     strip=visible_spectrum(), width=width, height=height)


def spectrum_in_words(spectrum: Spectrum) -> str:
    """The plot for who cannot see it: its ends, its highest and its lowest place."""
    points = sorted(zip(spectrum.value, spectrum.wavelength_nm, strict=True))
    (least, where_least), (most, where_most) = points[0], points[-1]
    ends = f"{plain(spectrum.wavelength_nm[0])} to {plain(spectrum.wavelength_nm[-1])} nm"
    return (f"From {ends}: lowest {percent(least)} at {plain(where_least)} nm, "
            f"highest {percent(most)} at {plain(where_most)} nm.")


def _spectrum_table(spectrum: Spectrum) -> Markup:
    """Every 20 nm or so, since a table of all of it helps nobody."""
    rows, before = [], float("-inf")
    for nm, value, low, high in zip(spectrum.wavelength_nm, spectrum.value, spectrum.low, spectrum.high,
                                    strict=True):
        if nm - before >= TABLE_STEP_NM:
            rows.append([plain(nm), f"{value:.3f}", f"{low:.3f}", f"{high:.3f}"])
            before = nm
    columns: list[Column] = [(name, "number") for name in (
        "wavelength, nm", spectrum.quantity, "less one sd", "plus one sd")]
    return table(f"Predicted {spectrum.quantity}", columns, rows)


def basis_section(shade: Shade, *, level: int, id: str) -> Markup | None:
    """Which spectra the shade stands on, with which error; what it leaves out."""
    if not shade.basis and not shade.left_out:
        return None
    rows = [[one_line(one.material), one_line(one.form),
             "" if one.share is None else percent(one.share), one.basis, one_line(one.error),
             cited_text(one.source) if one.source else "none given"] for one in shade.basis]
    columns: list[Column] = ["colourant", "form", ("share", "number"), "stands on", "error", "source"]
    left_out = [tag("p", "The prediction leaves out:"),
                tag("ul", [tag("li", one_line(one)) for one in shade.left_out])] if shade.left_out else []
    spectra = table("Spectra behind the shade", columns, rows) if rows else None
    return section(level, "What the shade stands on", spectra, left_out, id=f"{id}-basis")
