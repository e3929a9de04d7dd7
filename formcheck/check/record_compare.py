"""The Comparison of two measured spectra: everything `formcheck compare` says, as one record."""

from typing import Literal

from pydantic import Field

from formcheck.check.record import DEFERRAL, Part, Spectrum, Swatch
from formcheck.check.record_sweep import Difference, Match

VERSION = 1


class Strength(Part):
    """Strength of the batch over that of the standard, both as reductions with white; 1 is equal."""

    at_maximum: float | None
    by_weights: float | None
    de00_at_equal_strength: float | None
    words_at_equal_strength: str = ""


class UnderOneLight(Part):
    light: str
    standard: Swatch
    sample: Swatch
    differences: list[Difference]


class Comparison(Part):
    format: Literal["formcheck-comparison"] = "formcheck-comparison"
    version: int = VERSION
    formcheck_version: str
    standard_file: str
    sample_file: str
    standard_name: str
    sample_name: str
    observer_deg: int
    lights: list[UnderOneLight]
    match: Match
    munsell_standard: str = ""
    munsell_sample: str = ""
    strength: Strength | None = None
    standard: Spectrum
    sample: Spectrum
    notes: list[str] = Field(default_factory=list)
    deferral: str = DEFERRAL
