"""The ShadeSweep: predicted shades of one recipe, as written or along a row of amounts, on grounds and under lights.

Terminal, JSON and page of `formcheck shade` all show this record and nothing else.
"""

from typing import Literal

from pydantic import Field

from formcheck.check.record import DEFERRAL, ColourantBasis, Part, Swatch, UnderLight, Wanted

VERSION = 1


class Difference(Part):
    """One difference formula with its lightness, chroma and hue parts, the parts in words."""

    formula: str
    value: float
    lightness: float
    chroma: float
    hue: float
    words: str


class Metamerism(Part):
    """Special metamerism index for a change from the first light to this one, in ΔE00."""

    light: str
    index_de00: float


class Match(Part):
    """Against a wanted spectrum."""

    rms: float
    goodness_of_fit: float
    word: str
    metamerism: list[Metamerism] = Field(default_factory=list)


class Hiding(Part):
    """Film that reaches the contrast ratio over the charts, and the area a litre then covers; or why none."""

    contrast: float
    wet_um: float | None = None
    dry_um: float | None = None
    spreading_m2_l: float | None = None
    transparency_um: float | None = None  # wet film for one unit of ΔE*ab over black, of inks; None where none shows
    reason: str = ""


class SweptShade(Part):
    """One amount on one ground. `shade` of the first light; `lights` holds every light."""

    amount: float | None  # in the unit of the sweep; None without a sweep
    ground: str
    swatch: Swatch
    lab_sd: tuple[float, float, float]
    lights: list[UnderLight]
    de00: float | None = None
    de00_sd: float | None = None
    probability_within: float | None = None
    difference_words: str = ""
    contrast_ratio: float | None = None
    dominated_by: str = ""
    munsell: str = ""
    differences: list[Difference] = Field(default_factory=list)
    match: Match | None = None
    hiding: Hiding | None = None
    value: list[float]  # reflectance or transmittance at the wavelengths of the sweep


class ShadeSweep(Part):
    format: Literal["formcheck-shade"] = "formcheck-shade"
    version: int = VERSION
    formcheck_version: str
    file: str
    title: str
    varied: str = ""  # the ingredient whose amount runs; empty without a sweep
    unit: str = ""
    amounts: list[float] = Field(default_factory=list)
    grounds: list[str]
    lights: list[str]
    observer_deg: int
    geometry: str
    quantity: Literal["reflectance", "transmittance"]
    wavelength_nm: list[float]
    uncertainty: str = "first order"  # or how many draws
    wanted: Wanted | None = None
    shades: list[SweptShade]  # ground by ground, amounts in order
    basis: list[ColourantBasis] = Field(default_factory=list)
    left_out: list[str] = Field(default_factory=list)
    notes: list[str] = Field(default_factory=list)
    deferral: str = DEFERRAL
