"""The Estimate: everything formcheck says of a dye described as electron boxes, as one record.

Terminal, JSON and page of `formcheck estimate` all show this record and nothing else.
"""

from typing import Literal

from pydantic import Field

from formcheck.check.record import DEFERRAL, Cited, Part, Swatch

VERSION = 1


class BoxLevel(Part):
    """Orbitals of one energy and the electrons in them, up to two to an orbital."""

    label: str  # quantum numbers, such as n=4
    energy_ev: float
    orbitals: int
    electrons: float


class BoxLevels(Part):
    """One box: what it is, how many of it the molecule holds, its levels from the lowest up."""

    label: str  # in words: chain of 1.20 nm
    shape: Literal["chain", "plate", "ring"]
    n_pi_electrons: int
    count: int = 1
    levels: list[BoxLevel]


class EstimatedBand(Part):
    """One band of the spectrum, with the error its method showed against published series."""

    label: str  # which box, from which level to which
    lambda_max_nm: float
    lambda_sd_nm: float | None = None
    epsilon_l_mol_cm: float
    epsilon_relative_sd: float | None = None
    oscillator_strength: float | None = None
    half_height_nm: tuple[float, float] | None = None


class EstimatedSpectrum(Part):
    """Molar absorption coefficient in L/(mol cm), with the region it lies in."""

    wavelength_nm: list[float]
    low: list[float]
    value: list[float]
    high: list[float]


class EstimatedShade(Part):
    """How a solution looks: the shade, and shades within the error, in an order the eye can follow."""

    light: str
    observer_deg: int
    concentration_mol_l: float
    path_length_cm: float
    swatch: Swatch
    region: list[Swatch]
    words: str = ""  # near black, pale yellow, ...


class EstimatedForm(Part):
    """One form of the dye (acid, base, the only one). Colourless: every band lies below 380 nm."""

    name: str
    boxes: list[BoxLevels]
    bands: list[EstimatedBand]
    spectrum: EstimatedSpectrum
    shade: EstimatedShade | None = None
    colourless: bool = False
    notes: list[str] = Field(default_factory=list)


class Estimate(Part):
    format: Literal["formcheck-estimate"] = "formcheck-estimate"
    version: int = VERSION
    formcheck_version: str
    title: str
    file: str = ""  # empty when the boxes came from the command line
    forms: list[EstimatedForm]
    error: str  # in words: how far off the method was against published bands
    notes: list[str] = Field(default_factory=list)
    sources: list[Cited] = Field(default_factory=list)
    deferral: str = DEFERRAL
