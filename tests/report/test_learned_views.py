"""A Learned in the terminal and as a page."""

from __future__ import annotations

import io

from rich.console import Console

from formcheck.check.record import Cited, Swatch
from formcheck.check.record_learned import (
    Doubt,
    Learned,
    LearnedColourant,
    LearnedPanel,
    LearnedSolution,
    LearnedSpectrum,
    Offset,
    SurfaceConstants,
)
from formcheck.report.learned import show_learned
from formcheck.report.learned_page import learned_html
from tests.report.reading_html import read, words

NM = [400.0, 500.0, 600.0, 700.0]
GREY = Swatch(lab=(50.0, 1.0, 2.0), srgb_hex="#7a7675", in_gamut=True)


def sample(**more) -> Learned:
    blue = LearnedColourant(
        id="blue", names=["blue <b>paste</b>"], role="colour", wavelength_nm=NM, K_per_um=[0.5, 0.1, 2.5, 1.0],
        K_sd=[0.05, 0.01, 0.1, 0.1], S_per_um=[0.1, 0.12, 0.11, 0.1], S_sd=[0.02] * 4, K_relative_sd=0.04,
        S_relative_sd=0.18, record_file="shelf/blue.yaml")
    panels = [LearnedPanel(name="masstone", volume_fractions={"blue": 0.2}, readings=[
        Offset(ground="white", measured=GREY, de00_fit=0.12, de00_left_out=1.4),
        Offset(ground="black", measured=GREY, de00_fit=0.2)],
        left_out_reason="no other panel holds one of its colourants")]
    given = {
        "formcheck_version": "0", "file": "ladder.yaml", "title": "A ladder", "what": "drawdowns", "light": "D65",
        "observer_deg": 10, "colourants": [blue], "panels": panels, "de00_fit_median": 0.16,
        "surface": SurfaceConstants(k1=0.03, k1_sd=0.004, k2=0.55, k2_sd=0.02, mirror="included"),
        "de00_left_out_median": 1.4, "de00_left_out_p90": 2.25, "model_error_de00": 1.6,
        "doubts": [Doubt(kind="no pale tint", said="blue is strong.", what_to_do="Add a tint.")],
        "sources": [Cited(cite="own drawdowns", kind="measured")]}
    return Learned(**{**given, **more})


def rose() -> Learned:
    dye = LearnedSpectrum(id="rose", names=["rose"], wavelength_nm=NM, absorptivity_l_g_cm=[1.0, 40.0, 10.0, 0.0],
                          sd=[0.1] * 4, bend=-0.051, bend_sd=0.012, shape_change=0.08, shape_change_sd=0.004,
                          weighing_sd=0.01)
    solution = LearnedSolution(name="first", concentration_g_l=0.01, strength=0.98, de00_fit=0.31)
    return sample(what="dilution", colourants=[], panels=[], surface=None, dye=dye, solutions=[solution])


def printed(learned: Learned, width: int = 160) -> str:
    out = io.StringIO()
    show_learned(learned, Console(file=out, width=width, highlight=False))
    return " ".join(out.getvalue().split())


def test_the_terminal_says_how_far_off_and_what_is_not_settled():
    text = printed(sample())
    for said in ("ΔE00 1.40 in the median, 2.25 at nine in ten", "ΔE00 1.60 (root mean square)", "k1 0.030 ± 0.004",
                 "blue is strong.", "Add a tint.", "2.5", "600 nm", "masstone white #7a7675", "0.12 1.40",
                 "no other panel holds one of its colourants", "shelf/blue.yaml", "own drawdowns (measured)"):
        assert said in text, said


def test_a_dilution_tells_its_line():
    text = printed(rose())
    assert "strength changes by (−5.1 ± 1.2) %" in text and "first 0.01 0.98 0.31" in text


def test_lines_keep_to_a_narrow_terminal():
    out = io.StringIO()
    show_learned(sample(), Console(file=out, width=60, highlight=False))
    assert max(len(line) for line in out.getvalue().splitlines()) <= 60


def test_the_page_draws_k_and_s_and_escapes_names():
    page = learned_html(sample())
    assert "<b>paste" not in page
    said = words(read(page))
    for text in ("blue <b>paste</b>", "K of blue", "S of blue", "Not settled", "blue is strong. Add a tint."):
        assert text in said, text
    assert page.count("<svg") >= 5  # K and S at two widths, the strip of panels


def test_the_page_of_a_dye():
    said = words(read(learned_html(rose())))
    assert "Absorptivity of rose" in said and "Solutions" in said


def test_none_left_out_is_unknown_not_nought():
    text = printed(sample(de00_left_out_median=None, de00_left_out_p90=None, model_error_de00=None))
    assert "unknown: too few to leave one out" in text and "carried on" not in text
