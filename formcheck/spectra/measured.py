"""A measured spectrum: what was measured, how, and what is to be said of it."""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import Literal

import numpy as np

Quantity = Literal["reflectance", "transmittance", "absorbance", "epsilon_l_mol_cm", "absorptivity_l_g_cm",
                   "relative_power"]
Scale = Literal["percent", "fraction"]
# Quantities that stand in for one another in headings: all three are called absorbance or extinction.
ABSORPTION = ("absorbance", "epsilon_l_mol_cm", "absorptivity_l_g_cm")
RATIOS = ("reflectance", "transmittance")  # the quantities that may be written as percent or as a fraction

# Words for the geometries of CIE 15:2018, 5.1 and ISO 13655, as instruments and standards write them.
SPECULAR_IN = re.compile(r"specular[ _-]*(component[ _-]*)?in\w*|mirror reflection included|"
                         r"\b(SCI|SPIN|RSIN|di:8|8:di)\b", re.IGNORECASE)
SPECULAR_OUT = re.compile(r"specular[ _-]*(component[ _-]*)?ex\w*|mirror reflection excluded|"
                          r"\b(SCE|SPEX|RSEX|de:8|8:de)\b|\b45 ?°?[acx]?\s*[:/]\s*0\b|\b0\s*[:/]\s*45", re.IGNORECASE)


@dataclass(frozen=True)
class How:
    """How a spectrum was measured, as far as the file says; empty or None where it does not."""

    geometry: str = ""
    instrument: str = ""
    illumination: str = ""
    specular_included: bool | None = None


@dataclass(frozen=True)
class MeasuredSpectrum:
    """One spectrum of a file, wavelengths rising.

    `values` are fractions of 1 for reflectance and transmittance, else as the file writes them; `quantity`
    is None where neither the file nor the caller says what was measured. `names` are those of all spectra
    in the file, `notes` what a reader of results should be told.
    """

    name: str
    wavelength_nm: np.ndarray
    values: np.ndarray
    quantity: Quantity | None = None
    geometry: str = ""
    instrument: str = ""
    illumination: str = ""
    specular_included: bool | None = None
    notes: tuple[str, ...] = ()
    names: tuple[str, ...] = ()
    file: str = ""

    @property
    def column(self) -> str:
        """The name; in a table that is the heading of its column."""
        return self.name

    @property
    def columns(self) -> tuple[str, ...]:
        return self.names


def specular_of(text: str) -> bool | None:
    """Whether a description of a geometry counts the mirror reflection in; None where it does not say."""
    within, without = SPECULAR_IN.search(text), SPECULAR_OUT.search(text)
    return None if bool(within) == bool(without) else bool(within)
