"""What learning is said to have found: the one place that terminal and page take it from."""

from __future__ import annotations

from formcheck.check.record_learned import Learned, LearnedColourant, LearnedPanel, LearnedSolution
from formcheck.report.numbers import percent, plain, with_sd
from formcheck.report.shade_words import hex_text, observer_text
from formcheck.report.words import one_line

PANEL_COLUMNS = ("panel", "ground", "measured", "ΔE00 of fit", "ΔE00 left out")
SOLUTION_COLUMNS = ("solution", "g/L", "strength", "ΔE00 of fit", "ΔE00 left out")
CONSTANT_COLUMNS = ("colourant", "greatest K, 1/µm", "at", "within", "median S, 1/µm", "within")


def head_rows(learned: Learned) -> list[tuple[str, str]]:
    """Label and text of what was learned from what, and how far off it is."""
    rows = [("file", one_line(learned.file)), ("seen under", observer_text(learned.light, learned.observer_deg)),
            ("fit", f"ΔE00 {de00_text(learned.de00_fit_median)} in the median"),
            ("left out", left_out_text(learned))]
    if learned.model_error_de00 is not None:
        rows.append(("carried on", f"ΔE00 {de00_text(learned.model_error_de00)} (root mean square) as model "
                     "error of later predictions"))
    if surface := learned.surface:
        rows.append(("surface", f"k1 {with_sd(surface.k1, surface.k1_sd)}, k2 {with_sd(surface.k2, surface.k2_sd)}, "
                     f"mirror reflection {surface.mirror}"))
    if dye := learned.dye:
        rows.append(("line", f"strength changes by {percent(dye.bend, dye.bend_sd)} from the most dilute to the "
                     f"strongest, shape by {percent(dye.shape_change, dye.shape_change_sd)} of the peak"))
    rows += [("written", one_line(file)) for file in files_of(learned)]
    return rows


def left_out_text(learned: Learned) -> str:
    if learned.de00_left_out_median is None:
        return "unknown: too few to leave one out"
    return (f"each reckoned from the others is off by ΔE00 {de00_text(learned.de00_left_out_median)} in the "
            f"median, {de00_text(learned.de00_left_out_p90)} at nine in ten")


def files_of(learned: Learned) -> list[str]:
    found = [one.record_file for one in learned.colourants] + ([learned.dye.record_file] if learned.dye else [])
    return [file for file in found if file]


def constant_texts(colourant: LearnedColourant) -> list[str]:
    """A colourant as the texts of CONSTANT_COLUMNS."""
    most = max(range(len(colourant.K_per_um)), key=lambda n: colourant.K_per_um[n])
    s = sorted(colourant.S_per_um)[len(colourant.S_per_um) // 2]
    name = one_line(colourant.names[0]) + (" (known)" if colourant.known else "")
    return [name, plain(colourant.K_per_um[most]), f"{plain(colourant.wavelength_nm[most])} nm",
            percent(colourant.K_relative_sd, digits=2), plain(s), percent(colourant.S_relative_sd, digits=2)]


def panel_texts(panel: LearnedPanel) -> list[list[str]]:
    """A panel as rows of PANEL_COLUMNS, one for each ground."""
    return [[one_line(panel.name), one_line(reading.ground), hex_text(reading.measured),
             de00_text(reading.de00_fit), de00_text(reading.de00_left_out)] for reading in panel.readings]


def solution_texts(solution: LearnedSolution) -> list[str]:
    return [one_line(solution.name), plain(solution.concentration_g_l), plain(solution.strength),
            de00_text(solution.de00_fit), de00_text(solution.de00_left_out)]


def untold(learned: Learned) -> list[str]:
    """Why panels could not be left out, each reason once."""
    return list(dict.fromkeys(f"{one_line(panel.name)}: {panel.left_out_reason}" for panel in learned.panels
                              if panel.left_out_reason))


def de00_text(de00: float | None) -> str:
    """To a hundredth, far below what an eye sees; empty where unknown."""
    return "" if de00 is None else f"{de00:.2f}"
