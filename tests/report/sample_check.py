"""Checks to show in tests. Everything here is invented, limits and citations included."""

from __future__ import annotations

from datetime import date

from formcheck.check.record import (
    Check,
    Cited,
    ColourantBasis,
    Contribution,
    DyeForms,
    Figure,
    Finding,
    Line,
    Shade,
    Spectrum,
    Swatch,
    UnderLight,
    Unknown,
    Wanted,
)

ACT = Cited(cite="Invented Coatings Act 2000, s. 3(1)", kind="law", edition="2023-11-30")
MEMORY = Cited(cite="Invented Handbook of Dyes, table 9", kind="memory", verified=False)
PRACTICE = Cited(cite="invented common practice of the demo workshop", kind="common_practice")
SHEET = Cited(cite="Invented data sheet of the yellow paste, section 9", kind="supplier",
              edition="2026-02-03")
HANDBOOK = Cited(cite="Invented Handbook of Pigments, p. 12", kind="handbook", edition="4th")


def reflectance() -> Spectrum:
    """A made-up reflectance of a blue, with a band about it."""
    wavelength = [360.0 + 5 * step for step in range(85)]
    value = [0.05 + 0.45 / (1 + ((nm - 465) / 48) ** 2) + max(0.0, (nm - 690) / 750) for nm in wavelength]
    return Spectrum(quantity="reflectance", wavelength_nm=wavelength, value=value,
                    low=[one * 0.92 - 0.004 for one in value], high=[one * 1.08 + 0.004 for one in value])


def shade() -> Shade:
    return Shade(
        light="D65", observer_deg=10,
        swatch=Swatch(lab=(45.31, -8.42, -33.08), srgb_hex="#006fa3", in_gamut=False),
        xyz=(13.1, 14.8, 34.2), lch=(45.31, 34.13, 255.7), lab_sd=(0.83, 0.52, 1.14),
        spectrum=reflectance(), ground="chart_white",
        geometry="dry film of 12 µm over chart_white, specular included",
        wanted=Wanted(swatch=Swatch(lab=(46.0, -9.5, -34.5), srgb_hex="#0072a8", in_gamut=True),
                      light="D65", observer_deg=10, tolerance_de00=2.0),
        de00=1.41, de00_sd=0.367, probability_within=0.71, difference_words="darker, redder, duller",
        lights=[UnderLight(light="D65", de00_from_first=0.0,
                           swatch=Swatch(lab=(45.31, -8.42, -33.08), srgb_hex="#006fa3", in_gamut=False)),
                UnderLight(light="A", de00_from_first=3.87,
                           swatch=Swatch(lab=(42.0, -14.2, -36.9), srgb_hex="#006b9f", in_gamut=True)),
                UnderLight(light="LED-B3", de00_from_first=1.02,
                           swatch=Swatch(lab=(44.6, -9.3, -33.6), srgb_hex="#006ea3", in_gamut=True))],
        region=[Swatch(lab=(44.2, -7.8, -31.6), srgb_hex="#146c9d", in_gamut=True),
                Swatch(lab=(45.3, -8.4, -33.1), srgb_hex="#006fa3", in_gamut=True),
                Swatch(lab=(46.4, -9.0, -34.6), srgb_hex="#0072a9", in_gamut=True)],
        contrast_ratio=0.873, dominated_by="film thickness (61 % of the variance of ΔE00)",
        basis=[
            ColourantBasis(material="harbour_blue_paste", basis="optical constants",
                           error="K and S within 15 % against published films", source=HANDBOOK),
            ColourantBasis(material="demo_indicator", form="base form", share=0.9312, basis="handbook bands",
                           error="band strengths within 10 %, maxima within 4 nm", source=MEMORY),
            ColourantBasis(material="lemon_demo_yellow", basis="box model", error="maximum within 35 nm"),
        ],
        left_out=["fluorescence of demo_indicator", "gloss: the film is taken as smooth"],
    )


def findings() -> list[Finding]:
    return [
        Finding(grade="note", rule_id="DEMO-KEEP-COOL", title="Store below 30 °C", answer="applies",
                said="sea_latex skins over when it is kept warm", what_to_do="store it below 30 °C",
                source=PRACTICE, who_decides="whoever keeps the store", place="sea_blue.yaml:12:5"),
        Finding(grade="stop", rule_id="XX-LEAD-DRY-FILM", title="Lead in the dry film of a consumer coating",
                answer="exceeds", value=640.2, value_low=640.2, value_high=702.0, limit=90.0, unit="mg/kg",
                basis="dry_film", said="lead is 640 mg/kg of the dry film, over the limit of 90 mg/kg",
                what_to_do="take out chrome_yellow_demo, or ask for an assay of its lead",
                who_decides="local regulation and the safety data sheets", jurisdiction="XX",
                in_force_from=date(2024, 1, 1), source=ACT,
                contributions=[Contribution(ingredient="chrome_yellow_demo", value=640.2, unit="mg/kg",
                                            place="sea_blue.yaml:9:5"),
                               Contribution(ingredient="harbour_blue_paste", value=None, unit="mg/kg",
                                            place="sea_blue.yaml:8:5")],
                would_settle=["an assay of lead in harbour_blue_paste"], place="sea_blue.yaml:9:5"),
        Finding(grade="hold", rule_id="XX-PRESERVATIVE", title="Preservative in a finger paint",
                answer="cannot_tell", value=None, value_low=0.0, value_high=0.02, limit=0.0015, unit="% w/w",
                basis="mixture", said="the share of the preservative is not known; the limit is 0.0015 % w/w",
                what_to_do="ask the maker of sea_latex for its preservative", who_decides="local regulation",
                jurisdiction="XX", in_force_from=date(2022, 5, 1), source=ACT,
                would_settle=["composition of sea_latex"], place="sea_blue.yaml:12:5"),
        Finding(grade="care", rule_id="DEMO-PH-WINDOW-BLUE", title="harbour_blue_paste outside its pH window",
                answer="exceeds", value=10.02, limit=10.0, unit="pH",
                said="the mixture is at pH 10.02; above 10 the paste clots within days", source=MEMORY,
                what_to_do="bring the pH below 10 before the paste goes in", who_decides="the maker",
                place="sea_blue.yaml:8:5"),
        Finding(grade="unknown", rule_id="DEMO-IONIC-CLASH", title="Anionic dye with a cationic partner",
                answer="cannot_tell", said="the charge of fixer_demo is not on its record", source=PRACTICE,
                would_settle=["charge of fixer_demo"], who_decides="the maker", place="sea_blue.yaml:14:5"),
    ]


def sample_check() -> Check:
    return Check(
        formcheck_version="0.1.0", as_of=date(2026, 12, 1), file="recipes/sea_blue.yaml",
        title="Sea blue, waterborne screen ink", what="ink", use=["textile", "consumer_coating"],
        sold_in=["XX", "YY"], recipe_digest="8f14e45fceea167a5a36dedd4bea2543",
        composition=[
            Line(ingredient="harbour blue paste", material="harbour_blue_paste", written="12 % w/w",
                 mass_g=120.0, mass_fraction=0.12, dry_volume_fraction=0.141, place="sea_blue.yaml:8:5",
                 record_from="the recipe"),
            Line(ingredient="chrome_yellow_demo", material="chrome_yellow_demo", written="0.8 parts",
                 mass_g=8.0, mass_fraction=0.008, dry_volume_fraction=0.0051, place="sea_blue.yaml:9:5",
                 record_from="shelf/"),
            Line(ingredient="latex", material="sea_latex", written="300 mL", mass_g=None, mass_fraction=None,
                 place="sea_blue.yaml:12:5", record_from="built in"),
            Line(ingredient="water", material="water", written="to make up", mass_g=521.337,
                 mass_fraction=0.521337, dry_volume_fraction=0.0, place="sea_blue.yaml:15:5",
                 record_from="built in"),
        ],
        figures=[
            Figure(name="density", value=1.0832, unit="g/cm3", sd=0.0211, how="additive volumes",
                   source=SHEET),
            Figure(name="solids", value=41.27, unit="% w/w", sd=0.61, how="non-volatile fractions"),
            Figure(name="PVC", value=None, unit="%", low=4.0, high=19.0, reason="no density of sea_latex"),
            Figure(name="VOC, ready to use", value=12.4, unit="g/L", low=11.0, high=14.0, how="by formula"),
            Figure(name="dry film thickness", value=12.0, unit="um", sd=1.0, how="as written"),
        ],
        ph=Figure(name="pH", value=10.02, unit="", sd=0.05, how="measured by the maker"),
        ph_computed=Figure(name="pH computed", value=9.61, unit="", sd=0.3,
                           how="charge balance, Davies activities"),
        dye_forms=[
            DyeForms(material="demo_indicator", forms=["acid form", "base form"], shares=[0.0688, 0.9312],
                     pka=[8.9]),
            DyeForms(material="lemon_demo_yellow", forms=["azo", "hydrazone"], shares=None, pka=[],
                     reason="no pKa on its record"),
        ],
        shade=shade(), findings=findings(),
        unknowns=[Unknown(what="PVC and the film's solids by volume", why="sea_latex has no density",
                          would_settle="density_g_cm3 of sea_latex, with its source"),
                  Unknown(what="slow fading of demo_indicator at high pH",
                          why="no published rate is on record")],
        rules_applied=37, rules_not_applicable=121, within=["XX-CADMIUM", "XX-MERCURY", "YY-VOC"],
        sources=[ACT, SHEET],
    )


def bare_check() -> Check:
    """The least a Check can say: nothing known, nothing found."""
    return Check(
        formcheck_version="0.1.0", as_of=date(2026, 12, 1), file="bare.yaml", title="Bare", what="dye_bath",
        use=[], sold_in=[], recipe_digest="00", composition=[], figures=[],
        ph=Figure(name="pH", value=None, unit="", reason="the recipe states no water"),
        shade_reason="no colourant has a spectrum", findings=[], unknowns=[], rules_applied=1,
        rules_not_applicable=0,
    )


HOSTILE = "<script>alert(1)</script>\x1b[2J\x1b]0;owned\x07\u202egnp\ud800 \"'&]]>--> [bold red]x[/] :smile:"


def hostile_check() -> Check:
    """Every text a user may write is an attack on a page or a terminal."""
    check = sample_check()
    return check.model_copy(update={
        "title": HOSTILE, "file": HOSTILE, "what": HOSTILE, "use": [HOSTILE], "sold_in": [HOSTILE],
        "composition": [line.model_copy(update={"ingredient": HOSTILE, "written": HOSTILE, "place": HOSTILE,
                                                "material": HOSTILE, "record_from": HOSTILE})
                        for line in check.composition],
        "figures": [figure.model_copy(update={"name": HOSTILE, "how": HOSTILE, "unit": HOSTILE})
                    for figure in check.figures],
        "findings": [finding.model_copy(update={
            "title": HOSTILE, "said": HOSTILE, "what_to_do": HOSTILE, "place": HOSTILE, "rule_id": HOSTILE,
            "who_decides": HOSTILE, "unit": HOSTILE, "basis": HOSTILE, "would_settle": [HOSTILE],
            "source": Cited(cite=HOSTILE, kind="law", edition=HOSTILE)}) for finding in check.findings],
        "unknowns": [Unknown(what=HOSTILE, why=HOSTILE, would_settle=HOSTILE)],
        "shade": shade().model_copy(update={
            "ground": HOSTILE, "geometry": HOSTILE, "difference_words": HOSTILE, "left_out": [HOSTILE],
            "light": HOSTILE, "dominated_by": HOSTILE,
            "swatch": Swatch(lab=(1, 2, 3), srgb_hex='red"/><script>alert(2)</script>', in_gamut=True)}),
    })
