"""The Check: everything formcheck says of one recipe, as one record.

Terminal, JSON, page and register all show this record and nothing else. `formcheck schema --check`
prints its JSON Schema; `version` rises when a field changes its meaning or goes.
"""

from datetime import date
from typing import Literal

from pydantic import BaseModel, ConfigDict

VERSION = 1

Grade = Literal["stop", "hold", "care", "note", "unknown"]
Answer = Literal["within", "exceeds", "cannot_tell", "applies"]
GRADES: tuple[Grade, ...] = ("stop", "hold", "care", "note", "unknown")

DEFERRAL = (
    "formcheck does not judge a mixture safe, compliant or approved: local regulations, the safety data "
    "sheets and competent persons decide."
)


class Part(BaseModel):
    model_config = ConfigDict(extra="forbid", defer_build=True)


class Cited(Part):
    """A source as shown: the words of the citation, its kind, and whether anyone read it."""

    cite: str
    kind: str
    edition: str = ""
    verified: bool = True


class Figure(Part):
    """A named number with its spread and source, or None with the reason."""

    name: str
    value: float | None
    unit: str
    sd: float | None = None
    low: float | None = None
    high: float | None = None
    reason: str = ""
    how: str = ""  # the method, or where it was measured
    source: Cited | None = None


class Line(Part):
    """One ingredient as written and as resolved; mass figures are None where they cannot be known."""

    ingredient: str
    material: str
    written: str
    mass_g: float | None
    mass_fraction: float | None
    dry_volume_fraction: float | None = None
    place: str
    record_from: str  # the recipe, a shelf folder, or "built in"


class Spectrum(Part):
    """Predicted reflectance or transmittance, with the one-standard-deviation band."""

    quantity: Literal["reflectance", "transmittance"]
    wavelength_nm: list[float]
    value: list[float]
    low: list[float]
    high: list[float]


class Swatch(Part):
    """A colour for the screen. `in_gamut` False: the true colour is outside sRGB and was drawn in."""

    lab: tuple[float, float, float]
    srgb_hex: str
    in_gamut: bool


class Wanted(Part):
    swatch: Swatch
    light: str
    observer_deg: int
    tolerance_de00: float | None


class UnderLight(Part):
    """The same spectrum under one light. `de00_from_first` is the change from the first light named."""

    light: str
    swatch: Swatch
    de00_from_first: float


class ColourantBasis(Part):
    """What the shade stands on for one colourant or dye form."""

    material: str
    form: str = ""
    share: float | None = None  # of the dye in this form
    basis: Literal["measured", "handbook bands", "optical constants", "box model", "unknown"]
    error: str  # in words: what error band the method carries
    source: Cited | None = None


class Shade(Part):
    light: str
    observer_deg: int
    swatch: Swatch
    xyz: tuple[float, float, float]
    lch: tuple[float, float, float]
    lab_sd: tuple[float, float, float]
    spectrum: Spectrum
    ground: str
    geometry: str  # how the layer was reckoned: cell of 10 mm, dry film of 12 um over white, ...
    wanted: Wanted | None = None
    de00: float | None = None
    de00_sd: float | None = None
    probability_within: float | None = None
    difference_words: str = ""  # darker, redder, ...
    lights: list[UnderLight] = []
    region: list[Swatch] = []  # shades within the uncertainty, in an order the eye can follow
    contrast_ratio: float | None = None
    dominated_by: str = ""  # the source of uncertainty that dominates
    basis: list[ColourantBasis] = []
    left_out: list[str] = []  # what the prediction does not hold


class DyeForms(Part):
    """Shares of the forms of one dye at the pH of the mixture; None when the pH is unknown."""

    material: str
    forms: list[str]
    shares: list[float] | None
    pka: list[float]
    reason: str = ""


class Contribution(Part):
    ingredient: str
    value: float | None
    unit: str
    place: str = ""


class Finding(Part):
    """One answer of one rule, or of formcheck's own reckoning (rule_id starts with `formcheck-`)."""

    grade: Grade
    rule_id: str
    title: str
    answer: Answer
    value: float | None = None
    value_low: float | None = None
    value_high: float | None = None
    limit: float | None = None
    unit: str = ""
    basis: str = ""
    said: str  # one plain sentence: what was found against what
    what_to_do: str = ""
    who_decides: str = ""
    jurisdiction: str = ""
    in_force_from: date | None = None
    source: Cited | None = None
    contributions: list[Contribution] = []
    would_settle: list[str] = []  # data that would turn cannot_tell into an answer
    faint: bool = False  # of a cannot_tell: nothing known points to the trouble, too little is known to rule it out
    place: str = ""


class Unknown(Part):
    """Something formcheck could not tell, why, and which datum would settle it."""

    what: str
    why: str
    would_settle: str = ""


class Check(Part):
    format: Literal["formcheck-check"] = "formcheck-check"
    version: int = VERSION
    formcheck_version: str
    as_of: date
    file: str
    title: str
    what: str
    use: list[str]
    sold_in: list[str]
    recipe_digest: str
    composition: list[Line]
    figures: list[Figure]  # density, solids, PVC, VOC, film thickness, ...
    ph: Figure
    ph_computed: Figure | None = None
    dye_forms: list[DyeForms] = []
    shade: Shade | None = None
    shade_reason: str = ""
    findings: list[Finding]
    unknowns: list[Unknown]
    rules_applied: int
    rules_not_applicable: int
    within: list[str] = []  # ids of the rules answered within
    sources: list[Cited] = []
    deferral: str = DEFERRAL

    @property
    def held(self) -> bool:
        """Whether anything is graded stop or hold."""
        return any(finding.grade in ("stop", "hold") for finding in self.findings)
