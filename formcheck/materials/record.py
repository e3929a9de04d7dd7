"""What is known of one material. Every datum names its source; what is absent is unknown, not zero.

A record is a YAML file (see DEVELOPERS.md). `sources` at its foot maps short keys to citations and
each datum carries one of the keys. Nothing here decides anything: rooms above read it.
"""

import re
from typing import Annotated, Literal, Self, get_args

from pydantic import Field, ValidationInfo, field_validator, model_validator

from formcheck.materials.formula import atomic_weights, parse_formula
from formcheck.quantity import Provenance, Quantity, SourceKind, known, unknown
from formcheck.strict import Day, Strict, wrong

MaterialKind = Literal[
    "pigment", "dye", "indicator", "extender", "binder", "solvent", "water", "acid", "base", "salt",
    "thickener", "surfactant", "preservative", "plasticiser", "drier", "metal_powder", "mordant",
    "dispersion", "additive",
]
PhysicalForm = Literal["powder", "granules", "flake", "crystals", "paste", "liquid", "solution", "gas"]
Charge = Literal["anionic", "cationic", "nonionic", "amphoteric"]
Fraction = Annotated[float, Field(ge=0, le=1)]
Positive = Annotated[float, Field(gt=0, lt=1e6)]
BoxSize = Annotated[float, Field(ge=0.05, le=1000)]
IonCharge = Annotated[int, Field(ge=-50, le=50)]

# What no material goes beyond: a record outside of it holds a slip of the pen, or the wrong unit.
LEAST_AND_MOST = {
    "molar_mass_g_mol": (1.0, 1e8), "density_g_cm3": (1e-5, 25.0), "refractive_index": (1.0, 6.0),
    "oil_absorption_g_100g": (0.0, 5000.0), "nonvolatile_fraction": (0.0, 1.0), "boiling_point_c": (-273.15, 6500.0),
    "flash_point_c": (-273.15, 2000.0), "solubility_water_g_l": (0.0, 10000.0),
}
PKA_LEAST_AND_MOST = (-30.0, 60.0)
MG_KG_LEAST_AND_MOST = (0.0, 1e7)  # above 1e6 counts as all of it


def _refuse_crossed(low: float | None, value: float, high: float | None) -> None:
    if (low is not None and low > value) or (high is not None and high < value):
        raise wrong(f"{value:g} outside its own range {low} to {high}", "low <= value <= high")


def _refuse_beyond(number, least_and_most: tuple[float, float]) -> None:
    """Refuses a Number of which the value or an end of the range cannot be."""
    least, most = least_and_most
    for value in (number.value, number.low, number.high):
        if value is not None and not least <= value <= most:
            raise wrong(f"{value:g}", f"a value from {least:g} to {most:g}")


class Source(Strict):
    """A citation. `verified: false` says that nobody here read it: it is from memory."""

    cite: str
    kind: SourceKind
    edition: str = ""
    read_on: Day | None = None
    verified: bool = True


class Number(Strict):
    """A number with its source; `sd` is one standard deviation, `low`/`high` a published range."""

    value: float
    sd: Annotated[float, Field(ge=0, le=1e6)] | None = None
    low: float | None = None
    high: float | None = None
    source: str
    note: str = ""

    @model_validator(mode="after")
    def _range_holds_the_value(self) -> Self:
        _refuse_crossed(self.low, self.value, self.high)
        return self


class Text(Strict):
    value: str
    source: str
    note: str = ""


class Part(Strict):
    """One constituent of a material that is itself a mixture."""

    material: str
    mass_fraction: Fraction
    low: Fraction | None = None
    high: Fraction | None = None
    source: str

    @model_validator(mode="after")
    def _range_holds_the_value(self) -> Self:
        _refuse_crossed(self.low, self.mass_fraction, self.high)
        return self


class Elements(Strict):
    """Element content beyond what the formula says.

    `only` lists every element the material is made of (traces aside), so that any other counts as
    absent; `mg_kg` gives assays or upper bounds (`high`) for single elements, traces included.
    """

    only: list[str] | None = None
    mg_kg: dict[str, Number] = Field(default_factory=dict)
    source: str = ""

    @model_validator(mode="after")
    def _are_elements(self) -> Self:
        for symbol in (*(self.only or ()), *self.mg_kg):
            if symbol not in atomic_weights():
                raise wrong(f"the element {symbol[:20]!r}", "symbols of elements, such as Pb")
        for number in self.mg_kg.values():
            _refuse_beyond(number, MG_KG_LEAST_AND_MOST)
        if self.only is not None and not set(self.mg_kg) <= set(self.only):
            foreign = min(set(self.mg_kg) - set(self.only))
            raise wrong(f"an assay of {foreign}, which `only` leaves out",
                        f"`only` with {foreign}, or without the list")
        return self


class Band(Strict):
    """An absorption band: its maximum, its strength there, the two wavelengths at half its height."""

    lambda_max_nm: Annotated[float, Field(gt=150, lt=2000)]
    epsilon_l_mol_cm: Annotated[float, Field(gt=0, lt=1e7)]
    half_height_nm: Annotated[list[Annotated[float, Field(gt=100, lt=4000)]],
                              Field(min_length=2, max_length=2)] | None = None
    epsilon_relative_sd: Annotated[float, Field(ge=0, lt=5)] | None = None
    lambda_sd_nm: Annotated[float, Field(ge=0, le=500)] | None = None
    medium: str = ""
    source: str

    @model_validator(mode="after")
    def _half_heights_enclose_the_maximum(self) -> Self:
        if self.half_height_nm and not self.half_height_nm[0] < self.lambda_max_nm < self.half_height_nm[1]:
            raise wrong(f"half heights {self.half_height_nm} about {self.lambda_max_nm} nm",
                        "one half height below the maximum and one above")
        return self


class Box(Strict):
    """A free-electron box. Chain: length; plate: two sides; ring: circumference. All in nm."""

    shape: Literal["chain", "plate", "ring"]
    n_pi_electrons: Annotated[int, Field(ge=2, le=200)]
    length_nm: BoxSize | None = None
    sides_nm: Annotated[list[BoxSize], Field(min_length=2, max_length=2)] | None = None
    circumference_nm: BoxSize | None = None
    bond_alternation_ev: Annotated[float, Field(ge=0, le=10)] = 0.0
    count: Annotated[int, Field(ge=1, le=100)] = 1
    source: str = "given"

    @model_validator(mode="after")
    def _has_the_size_of_its_shape(self) -> Self:
        sizes = {"chain": self.length_nm, "plate": self.sides_nm, "ring": self.circumference_nm}
        names = {"chain": "length_nm", "plate": "sides_nm", "ring": "circumference_nm"}
        if [shape for shape, size in sizes.items() if size is not None] != [self.shape]:
            raise wrong(f"a {self.shape} with other sizes", f"`{names[self.shape]}` alone for a {self.shape}")
        if self.n_pi_electrons % 2:
            raise wrong(f"{self.n_pi_electrons} pi electrons", "an even number of pi electrons")
        return self


class SpectrumFile(Strict):
    """A measured spectrum beside the record: CSV, CGATS.17, CxF3 or .xlsx.

    `scale` says of a transmittance whether the file holds percent or a fraction, where the file does not.
    """

    file: str
    column: str | None = None
    scale: Literal["percent", "fraction"] | None = None
    quantity: Literal["epsilon_l_mol_cm", "absorbance", "absorptivity_l_g_cm", "transmittance"]
    concentration_g_l: Positive | None = None  # of the solution, for absorbance and transmittance
    path_length_cm: Positive | None = None
    relative_sd: Annotated[float, Field(ge=0, lt=5)] | None = None
    source: str


class DyeForm(Strict):
    """One form of a dye (acid, base, the only one): how it absorbs, or that it does not."""

    name: str
    bands: list[Band] = Field(default_factory=list)
    boxes: list[Box] = Field(default_factory=list)
    spectrum: SpectrumFile | None = None
    colourless: Text | None = None


class KubelkaMunkFile(Strict):
    """K and S per um of dry film for pigment alone (volume fraction 1): CSV wavelength_nm, K, S.

    Those that `formcheck learn` wrote carry more: K_sd and S_sd in the file, what the panels left out were off
    by, the surface constants they were learned with, and whether the films' thickness was known.
    """

    file: str
    median_diameter_um: Positive | None = None
    relative_sd: Annotated[float, Field(ge=0, lt=5)]
    most_volume_fraction: Fraction | None = None  # beyond it crowding is outside the model
    model_error_de00: Annotated[float, Field(ge=0, le=100)] | None = None
    k1: Annotated[float, Field(ge=0, lt=1)] | None = None
    k2: Annotated[float, Field(ge=0, lt=1)] | None = None
    thickness_known: bool = True  # False: K and S hold for films that hide, and beside others learned with them
    source: str


class Optical(Strict):
    """`forms` run from the most protonated to the least; there is one more form than pKa values."""

    forms: list[DyeForm] = Field(default_factory=list)
    k_and_s: KubelkaMunkFile | None = None
    fluoresces: Text | None = None


class AcidBase(Strict):
    """Proton exchange in water, by charge: enough to write the charge balance of a mixture.

    `pka` runs from the most acidic on; `charge_fully_protonated` is the charge of the form holding
    every proton; `counter_charge` that of the ions that come with it and take no part (Na+ of a
    sodium salt: +1; Cl- of a hydrochloride: -1). A strong acid or base has no pka: HCl is
    counter_charge -1, NaOH +1. `buffers_unknowably` marks latexes and the like.
    """

    pka: list[Number] = Field(default_factory=list)
    charge_fully_protonated: IonCharge = 0
    counter_charge: IonCharge = 0
    buffers_unknowably: bool = False
    neutral: bool = False  # takes no part in acid-base exchange between pH 0 and 14
    source: str = ""

    @model_validator(mode="after")
    def _pka_in_order(self) -> Self:
        for number in self.pka:
            _refuse_beyond(number, PKA_LEAST_AND_MOST)
        values = [number.value for number in self.pka]
        if values != sorted(values):
            raise wrong(f"pKa values {values}", "pKa values in rising order")
        return self


class Window(Strict):
    """Published pH range in which a material stays what it is, and what happens beyond each end."""

    low: Annotated[float, Field(ge=-5, le=20)] | None = None
    high: Annotated[float, Field(ge=-5, le=20)] | None = None
    below: str = ""
    above: str = ""
    source: str

    @model_validator(mode="after")
    def _is_a_window(self) -> Self:
        if self.low is None and self.high is None:
            raise wrong("a window with neither end", "`low`, `high` or both")
        if (self.below and self.low is None) or (self.above and self.high is None):
            raise wrong("what happens beyond an end that is not given", "`below` with `low`, `above` with `high`")
        if self.low is not None and self.high is not None and self.low > self.high:
            raise wrong(f"a window from pH {self.low:g} to {self.high:g}", "low <= high")
        return self


class HazardEntry(Strict):
    """One hazard class of the material, with its own limits where the law sets them."""

    hazard_class: str
    code: str  # H statement, such as H317
    specific_limit_percent: Annotated[float, Field(ge=1e-7, le=100)] | None = None
    m_factor: Annotated[int, Field(ge=1, le=10**9)] | None = None
    source: str


class Hazards(Strict):
    """`classified`, `not_classified` (someone looked and found nothing), or absent: unknown."""

    status: Literal["classified", "not_classified"]
    entries: list[HazardEntry] = Field(default_factory=list)
    source: str
    note: str = ""

    @model_validator(mode="after")
    def _entries_as_the_status_says(self) -> Self:
        if (self.status == "classified") != bool(self.entries):
            raise wrong(f"the status {self.status} with {len(self.entries)} entries",
                        "`classified` with entries, `not_classified` without; no `hazards` at all where unknown")
        return self


class Material(Strict):
    """One material of the shelf. Absent fields are unknown."""

    id: Annotated[str, Field(pattern=r"^[a-z0-9][a-z0-9_]*$")]
    names: Annotated[list[str], Field(min_length=1)]
    kind: MaterialKind
    physical_form: PhysicalForm | None = None
    ci_generic_name: Text | None = None
    ci_constitution_number: Text | None = None
    cas: Text | None = None
    formula: Text | None = None
    molar_mass_g_mol: Number | None = None
    density_g_cm3: Number | None = None
    refractive_index: Number | None = None
    oil_absorption_g_100g: Number | None = None
    nonvolatile_fraction: Number | None = None
    boiling_point_c: Number | None = None
    flash_point_c: Number | None = None
    composition: list[Part] = Field(default_factory=list)
    elements: Elements | None = None
    groups: list[str] = Field(default_factory=list)  # families that rules speak of, such as carbonate
    charge: Text | None = None
    optical: Optical | None = None
    acid_base: AcidBase | None = None
    ph_window: Window | None = None
    solubility_water_g_l: Number | None = None
    hazards: Hazards | None = None
    note: str = ""
    sources: dict[str, Source] = Field(default_factory=dict)

    @field_validator(*LEAST_AND_MOST)
    @classmethod
    def _value_can_be(cls, number: Number | None, info: ValidationInfo) -> Number | None:
        if number is not None and info.field_name:
            _refuse_beyond(number, LEAST_AND_MOST[info.field_name])
        return number

    @field_validator("formula")
    @classmethod
    def _formula_can_be_read(cls, formula: Text | None) -> Text | None:
        try:
            parse_formula(formula.value if formula else "H2O")
        except ValueError as error:
            raise wrong(*str(error).rsplit("|", 1)) from None
        return formula

    @model_validator(mode="after")
    def _every_source_is_cited(self) -> Self:
        used = {text for text in _source_keys(self) if text}
        missing = sorted(used - set(self.sources) - {"given"})
        if missing:
            raise wrong(f"the source {missing[0]!r}, which `sources` does not list", "a key of `sources`")
        if self.charge and self.charge.value not in get_args(Charge):
            raise wrong(f"the charge {self.charge.value!r}", f"one of {', '.join(get_args(Charge))}")
        if sum(part.mass_fraction for part in self.composition) > 1 + 1e-9:
            raise wrong("parts of the composition that sum to more than 1",
                        "mass fractions of at most 1 in all")
        forms = self.optical.forms if self.optical else []
        n_pka = len(self.acid_base.pka) if self.acid_base else 0
        if len(forms) > 1 and len(forms) != n_pka + 1:
            raise wrong(f"{len(forms)} forms with {n_pka} pKa values", "one form more than pKa values")
        return self

    def quantity(self, field: str, unit: str) -> Quantity:
        """A Number field as a Quantity, or unknown with the reason."""
        number: Number | None = getattr(self, field)
        if number is None:
            return unknown(unit, f"no {field} on the record of {self.names[0]}")
        return known(number.value, unit, sd=spread(number), provenance=self.provenance(number.source))

    def provenance(self, key: str) -> Provenance:
        if key not in self.sources:
            return Provenance("user", "given by the user")
        source = self.sources[key]
        return Provenance(source.kind, source.cite, source.edition, source.verified)


def spread(number: Number) -> float | None:
    """One standard deviation: as given, or a quarter of a published range (about 95 % within it)."""
    if number.sd is not None:
        return number.sd
    if number.low is not None and number.high is not None:
        return (number.high - number.low) / 4
    return None


def _source_keys(model) -> set[str]:
    """Every `source` that anything inside a record names."""
    found: set[str] = set()
    for name, value in model:
        if name == "source" and isinstance(value, str):
            found.add(value)
            continue
        items = list(value.values()) if isinstance(value, dict) else value
        for item in items if isinstance(items, list) else [items]:
            if isinstance(item, Strict) and not isinstance(item, Source):
                found |= _source_keys(item)
    return found


# The usages that Colour Index generic names begin with, as `C.I. Acid Blue 9` does.
COLOUR_INDEX_USES = ("(pigment|acid|basic|cationic|direct|disperse|food|ingrain|mordant|natural|reactive"
                     "|solubilisedvat|solvent|sulphur|sulfur|vat)")


def name_key(name: str) -> str:
    """A name as look-up compares it: case, spaces, hyphens, colons and underscores aside.

    `PB 15:3`, `pb15_3` and `Pigment Blue 15:3` written `C.I. Pigment Blue 15:3` meet where a record
    lists them.
    """
    key = re.sub(r"[\s_\-:.,'()]+", "", name.casefold())
    return re.sub(r"^ci(?=" + COLOUR_INDEX_USES + ")", "", key)
