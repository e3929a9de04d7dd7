"""Learned: everything `formcheck learn` says of a ladder of drawdowns or a dilution series, as one record.

Terminal, JSON and page all show this record and nothing else.
"""

from typing import Literal

from pydantic import Field

from formcheck.check.record import DEFERRAL, Cited, Part, Swatch

VERSION = 1


class LearnedColourant(Part):
    """K and S per um of the colourant alone, one standard deviation to either side."""

    id: str
    names: list[str]
    role: str
    known: bool = False  # taken from a record, not learned
    wavelength_nm: list[float]
    K_per_um: list[float]
    K_sd: list[float]
    S_per_um: list[float]
    S_sd: list[float]
    K_relative_sd: float  # median where K is not small, for use with the surface constants learned beside it
    S_relative_sd: float
    record_file: str = ""  # where it was written


class Offset(Part):
    """One reading of a panel: measured, as the fit has it, and as the other panels predict it."""

    ground: str
    measured: Swatch
    de00_fit: float
    de00_left_out: float | None = None


class LearnedPanel(Part):
    name: str
    volume_fractions: dict[str, float]  # of each colourant in the film
    thickness_um: float | None = None  # as fitted; None where it is not known
    between: bool = False  # its mix lies within what the other panels span
    readings: list[Offset]
    left_out_reason: str = ""  # why the others cannot predict it


class SurfaceConstants(Part):
    k1: float
    k1_sd: float
    k2: float
    k2_sd: float
    mirror: Literal["included", "excluded"]


class Doubt(Part):
    """A warning: what the ladder does not settle, and what would."""

    kind: str
    said: str
    what_to_do: str = ""


class LearnedSpectrum(Part):
    """Absorptivity of a dye in L/(g cm), one standard deviation to either side."""

    id: str
    names: list[str]
    wavelength_nm: list[float]
    absorptivity_l_g_cm: list[float]
    sd: list[float]
    bend: float  # relative change of strength from the most dilute to the strongest
    bend_sd: float
    shape_change: float
    shape_change_sd: float
    weighing_sd: float
    record_file: str = ""


class LearnedSolution(Part):
    name: str
    concentration_g_l: float
    strength: float  # over that of the series
    de00_fit: float
    de00_left_out: float | None = None


class Learned(Part):
    format: Literal["formcheck-learned"] = "formcheck-learned"
    version: int = VERSION
    formcheck_version: str
    file: str
    title: str
    what: Literal["drawdowns", "dilution"]
    colourants: list[LearnedColourant] = Field(default_factory=list)
    panels: list[LearnedPanel] = Field(default_factory=list)
    surface: SurfaceConstants | None = None
    thickness_known: bool = True
    dye: LearnedSpectrum | None = None
    solutions: list[LearnedSolution] = Field(default_factory=list)
    light: str
    observer_deg: int
    de00_fit_median: float
    de00_left_out_median: float | None = None
    de00_left_out_p90: float | None = None
    model_error_de00: float | None = None  # what later predictions carry
    condition: float | None = None  # median over wavelengths
    doubts: list[Doubt] = Field(default_factory=list)
    notes: list[str] = Field(default_factory=list)
    sources: list[Cited] = Field(default_factory=list)
    deferral: str = DEFERRAL
