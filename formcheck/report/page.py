"""A Check as one page: self-contained, printable, for light and dark, readable without sight or colour."""

from __future__ import annotations

from collections.abc import Sequence

from formcheck.check.record import DEFERRAL, Check
from formcheck.report.html import Child, Column, Markup, definitions, joined, section, table, tag
from formcheck.report.numbers import plain
from formcheck.report.page_findings import findings_section, untold_section
from formcheck.report.page_shade import basis_section, shade_head, spectrum_section
from formcheck.report.recipe_words import (
    composition_columns,
    figure_basis,
    figure_text,
    forms_text,
    ingredient_text,
)
from formcheck.report.shade_words import hex_text, observer_text
from formcheck.report.sheet import document
from formcheck.report.swatches import dot
from formcheck.report.words import (
    NOWHERE_SOLD,
    all_sources,
    cited_kind,
    counts_text,
    day_text,
    hex_colour,
    one_line,
    spelled,
)


def page_html(check: Check) -> str:
    """One Check as a whole HTML page."""
    return pages_html([check])


def pages_html(checks: Sequence[Check]) -> str:
    """One or several Checks as a whole HTML page; several are led by a table of them all."""
    if len(checks) == 1:
        title = one_line(checks[0].title)
        main = check_parts(checks[0], level=1, id="r1")
    else:
        title = f"{len(checks)} recipes checked"
        main = joined(tag("header", tag("h1", title), _overview(checks)),
                      [_recipe(check, id=f"r{place}") for place, check in enumerate(checks, 1)])
    deferrals = dict.fromkeys([one_line(check.deferral) for check in checks] or [DEFERRAL])
    footer = tag("footer", [tag("p", one) for one in deferrals])
    return document(f"{title} – formcheck", tag("main", main), footer)


def _recipe(check: Check, *, id: str) -> Markup:
    return tag("article", check_parts(check, level=2, id=id), class_="recipe", id=id,
               aria_labelledby=f"{id}-title")


def check_parts(check: Check, *, level: int, id: str) -> Markup:
    """Every section of one check, the headings from `level` down; ids begin with `id`."""
    below, shade = level + 1, check.shade
    return joined(
        tag("header", tag(f"h{level}", one_line(check.title), id=f"{id}-title"),
            tag("p", counts_text(check), class_="counts"), shade_head(check, id=id), class_="head"),
        _asked(check, level=below, id=id),
        findings_section(check, level=below, id=id),
        untold_section(check, level=below, id=id),
        _figures(check, level=below, id=id),
        _composition(check, level=below, id=id),
        spectrum_section(shade, level=below, id=id) if shade else None,
        basis_section(shade, level=below, id=id) if shade else None,
        _sources(check, level=below, id=id),
    )


def _asked(check: Check, *, level: int, id: str) -> Markup:
    """What was asked: of which file, for what use, where, as of which day, against which shade."""
    rows: list[tuple[str, Child]] = [
        ("file", tag("code", one_line(check.file))),
        ("kind", spelled(one_line(check.what))),
        ("use", ", ".join(spelled(one_line(word)) for word in check.use) or "not stated"),
        ("sold in", ", ".join(map(one_line, check.sold_in)) or NOWHERE_SOLD),
        ("rules as of", day_text(check.as_of)),
        ("wanted shade", _wanted_text(check)),
        ("recipe digest", tag("code", one_line(check.recipe_digest))),
        ("checked by", f"formcheck {one_line(check.formcheck_version)}"),
    ]
    return section(level, "What was asked", definitions(rows), id=f"{id}-asked")


def _wanted_text(check: Check) -> str:
    wanted = check.shade.wanted if check.shade else None
    if wanted is None:
        return "none stated, or no shade could be predicted to hold against it"
    tolerance = wanted.tolerance_de00
    within = "no tolerance stated" if tolerance is None else f"within ΔE00 {plain(tolerance)}"
    seen = observer_text(wanted.light, wanted.observer_deg)
    return f"{hex_text(wanted.swatch)} under {seen}; {within}"


def _figures(check: Check, *, level: int, id: str) -> Markup:
    ph = [check.ph, *([check.ph_computed] if check.ph_computed else [])]
    rows = [[one_line(one.name), figure_text(one), figure_basis(one)] for one in [*ph, *check.figures]]
    forms = [[one_line(one.material), forms_text(one)] for one in check.dye_forms]
    figures = table("Figures of the mixture and its film", ["figure", "value", "how"], rows)
    dyes = table("Forms of the dyes at this pH", ["dye", "shares"], forms) if forms else None
    return section(level, "Figures", figures, dyes, id=f"{id}-figures", class_="figures")


def _composition(check: Check, *, level: int, id: str) -> Markup:
    texts = zip(check.composition, *composition_columns(check.composition), strict=True)
    rows = [[[ingredient_text(line), tag("span", one_line(line.place), class_="place")],
             one_line(line.written), mass, share, dry, one_line(line.record_from)]
            for line, mass, share, dry in texts]
    numbers: list[Column] = [(name, "number") for name in ("g", "% w/w", "% of dry volume")]
    columns: list[Column] = ["ingredient", "as written", *numbers, "record from"]
    return section(level, "Composition", table("Ingredients as written and as reckoned", columns, rows),
                   id=f"{id}-composition")


def _sources(check: Check, *, level: int, id: str) -> Markup | None:
    items = [tag("li", one_line(one.cite), f", edition {one_line(one.edition)}" if one.edition else "",
                 tag("span", f" {cited_kind(one)}", class_="kind")) for one in all_sources(check)]
    return section(level, "Sources", tag("ol", items), id=f"{id}-sources") if items else None


def _overview(checks: Sequence[Check]) -> Markup:
    rows = []
    for place, check in enumerate(checks, 1):
        hex = hex_colour(check.shade.swatch) if check.shade else None
        shade = [dot(hex, f"predicted {hex}", id=f"o{place}"), " ", tag("code", hex)] if hex else "unknown"
        link = tag("a", one_line(check.title), href=f"#r{place}")
        rows.append([link, shade, counts_text(check), one_line(check.file)])
    return table("All recipes of this page", ["recipe", "shade", "findings", "file"], rows)
