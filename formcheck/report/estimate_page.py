"""An Estimate as one page: the region of the shade, the spectrum, the bands and the levels of the boxes."""

from __future__ import annotations

from formcheck.check.record_estimate import Estimate, EstimatedBand, EstimatedForm, EstimatedSpectrum
from formcheck.report.estimate_words import BAND_COLUMNS, band_texts, box_text, shade_rows
from formcheck.report.html import Column, Markup, definitions, joined, section, table, tag
from formcheck.report.level_diagram import level_diagram
from formcheck.report.numbers import plain
from formcheck.report.plot import Axis, Marker, Series, line_plot, visible_spectrum
from formcheck.report.sheet import at_both_widths, document
from formcheck.report.swatches import chip, chips
from formcheck.report.words import cited_text, one_line

MOST_MARKERS = 6  # the strongest bands are named in the plot; the table holds all


def estimate_html(estimate: Estimate) -> str:
    """One Estimate as a whole HTML page."""
    title = one_line(estimate.title)
    head = tag("header", tag("h1", title), tag("p", one_line(estimate.error), class_="counts"),
               tag("p", tag("code", one_line(estimate.file))) if estimate.file else None, class_="head")
    forms = [_form(form, alone=len(estimate.forms) == 1, id=f"f{place}")
             for place, form in enumerate(estimate.forms, 1)]
    main = tag("main", head, forms, _list("Notes", [one_line(note) for note in estimate.notes], id="notes"),
               _list("Sources", [cited_text(source) for source in estimate.sources], id="sources"))
    made_by = tag("p", f"Estimated by formcheck {one_line(estimate.formcheck_version)}.")
    footer = tag("footer", tag("p", one_line(estimate.deferral)), made_by)
    return document(f"{title} – formcheck estimate", main, footer)


def _form(form: EstimatedForm, *, alone: bool, id: str) -> Markup:
    """One form: under its own heading when there are several."""
    level = 2 if alone else 3
    parts = [_region(form, level=level, id=id), _spectrum(form, level=level, id=id),
             _bands(form.bands, level=level, id=id), _levels(form, level=level, id=id),
             [tag("p", one_line(note)) for note in form.notes]]
    return joined(parts) if alone else section(2, one_line(form.name), parts, id=id, class_="form")


def _region(form: EstimatedForm, *, level: int, id: str) -> Markup:
    """Shades within the error side by side: the shade lies among them, not at one of them."""
    shade = form.shade
    drawn = None
    if shade:
        within = shade.region or [shade.swatch]
        cells = [chip(one, f"possible {place}") for place, one in enumerate(within, 1)]
        title = "Region of the shade: " + "; ".join(cell.label for cell in cells)
        drawn = tag("figure", chips(cells, id=f"{id}-region", title=title, height=90),
                    tag("figcaption", "The shade lies somewhere in this strip. A screen only resembles it."))
    return section(level, "Shade as a region", drawn, definitions(shade_rows(form)), id=f"{id}-shade")


def _spectrum(form: EstimatedForm, *, level: int, id: str) -> Markup:
    plotted = at_both_widths(lambda width, height, end: spectrum_plot(
        form, id=f"{id}-plot-{end}", width=width, height=height))
    note = "Line: as estimated. Band: the region that the error of the method leaves open."
    return section(level, "Estimated spectrum", tag("figure", plotted, tag("figcaption", note)),
                   id=f"{id}-spectrum")


def spectrum_plot(form: EstimatedForm, *, id: str, width: int, height: int) -> Markup:
    """Molar absorption coefficient against wavelength, the strongest bands marked."""
    spectrum = form.spectrum
    curve = Series(spectrum.wavelength_nm, spectrum.value, low=spectrum.low, high=spectrum.high)
    return line_plot([curve], id=id, title=f"Estimated absorption of {one_line(form.name)}",
                     description=spectrum_in_words(spectrum), x=Axis("wavelength, nm"),
                     y=Axis("ε, L/(mol cm)", low=0.0), markers=_markers(form.bands, spectrum),
                     strip=visible_spectrum(), width=width, height=height)


def spectrum_in_words(spectrum: EstimatedSpectrum) -> str:
    most, where = max(zip(spectrum.value, spectrum.wavelength_nm, strict=True))
    return (f"From {plain(spectrum.wavelength_nm[0])} to {plain(spectrum.wavelength_nm[-1])} nm: highest "
            f"{plain(most)} L/(mol cm) at {plain(where)} nm.")


def _markers(bands: list[EstimatedBand], spectrum: EstimatedSpectrum) -> list[Marker]:
    low, high = spectrum.wavelength_nm[0], spectrum.wavelength_nm[-1]
    within = [band for band in bands if low <= band.lambda_max_nm <= high]
    strongest = sorted(within, key=lambda band: -band.epsilon_l_mol_cm)[:MOST_MARKERS]
    return [Marker(band.lambda_max_nm, f"{band.lambda_max_nm:.0f}") for band in strongest]


def _bands(bands: list[EstimatedBand], *, level: int, id: str) -> Markup:
    columns: list[Column] = [BAND_COLUMNS[0], *((name, "number") for name in BAND_COLUMNS[1:])]
    return section(level, "Bands", table("Absorption bands, one sd to either side", columns,
                                         [band_texts(band) for band in bands]), id=f"{id}-bands")


def _levels(form: EstimatedForm, *, level: int, id: str) -> Markup:
    diagrams = [tag("figure", level_diagram(box, id=f"{id}-box{place}"), tag("figcaption", box_text(box)))
                for place, box in enumerate(form.boxes)]
    return section(level, "Levels", tag("div", diagrams, class_="boxes"), id=f"{id}-levels")


def _list(title: str, lines: list[str], *, id: str) -> Markup | None:
    return section(2, title, tag("ul", [tag("li", line) for line in lines]), id=id) if lines else None
