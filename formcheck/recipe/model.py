"""The form of a recipe file, format version 1. Everything a maker may write stands here, once.

Amounts and lengths stay the text that was written; properties give them as numbers. Only `formcheck`,
`title`, `what` and `ingredients` must be there: whatever is left out is unknown, not assumed.
"""

from typing import Annotated, Any, Literal, Self, get_args

from pydantic import BeforeValidator, Discriminator, Field, Tag, model_validator

from formcheck.materials.record import Material
from formcheck.recipe.markets import Market
from formcheck.recipe.written import (
    AmountText,
    BatchText,
    LengthText,
    MassText,
    PurityText,
    fraction,
    length_um,
    mass_g,
)
from formcheck.strict import Strict, wrong
from formcheck.trouble import shown, suggestion

FORMAT_VERSION = 1

WhatWord = Literal["solution", "dye_bath", "ink", "stain", "coating"]
UseWord = Literal[
    "consumer", "professional", "industrial", "art_material", "toy", "childcare", "tattoo", "textile",
    "leather", "paper", "packaging", "food_contact", "furniture", "interior_wall", "exterior_wall", "wood",
    "metal", "plastic", "research",
]
ActWord = Literal[
    "dry_weighing", "stirring", "milling", "heating", "pouring_acid", "pouring_base", "spraying", "brushing",
    "rolling", "printing", "dipping", "baking", "sanding",
]


def _one_of(words: tuple[str, ...]) -> BeforeValidator:
    """Refuses a word outside the vocabulary with the nearest one that is in it."""

    def check(value: Any) -> Any:
        if isinstance(value, str) and value not in words:
            raise wrong(shown(value), suggestion(value[:60], words, most=len(words)))
        return value

    return BeforeValidator(check)


ScaleWord = Literal["percent", "fraction"]
SpectrumScale = Annotated[ScaleWord, _one_of(get_args(ScaleWord))]
What = Annotated[WhatWord, _one_of(get_args(WhatWord))]
Use = Annotated[UseWord, _one_of(get_args(UseWord))]
Act = Annotated[ActWord, _one_of(get_args(ActWord))]
Observer = Annotated[
    Literal[2, 10],
    BeforeValidator(lambda v: v if v in (2, 10) and not isinstance(v, bool) else _refuse_observer(v))]
Name = Annotated[str, Field(min_length=1, max_length=200, pattern=r"\S")]
Note = Annotated[str, Field(max_length=4000)]
FilePath = Annotated[str, Field(min_length=1, max_length=400)]


def _refuse_observer(value: Any) -> Any:
    raise wrong(shown(value), "2 (CIE 1931) or 10 (CIE 1964)")


class Ingredient(Strict):
    """One line of the recipe. The order of the lines is the order of addition."""

    material: Name = Field(description="A name the shelf knows, or the id or a name of one of `materials`.")
    amount: AmountText = Field(description=(
        "A number with its unit: g, kg, mg, mL, L, % w/w (also written %), % v/v, parts by mass, g/L of "
        "product; or `to make up` on one line, for the rest."))
    purity: PurityText | None = Field(default=None, description=(
        "Mass share of the named material in what is weighed, such as '92 %'. Absent: as on the record."))
    note: Note = Field(default="", description="Anything to remember about this line.")

    @property
    def purity_fraction(self) -> float | None:
        return None if self.purity is None else fraction(self.purity)


class Film(Strict):
    """Thickness of the layer: `wet` as applied or `dry` as left behind, one of the two."""

    wet: LengthText | None = Field(default=None, description="Thickness as applied, such as '30 um'.")
    dry: LengthText | None = Field(default=None, description="Thickness when dry, such as '12 um'.")
    sd: LengthText | None = Field(default=None, description=(
        "One standard deviation of that thickness from place to place, such as '2 um'."))

    @model_validator(mode="after")
    def _one_thickness(self) -> Self:
        if (self.wet is None) == (self.dry is None):
            found = "no thickness" if self.wet is None else "both a wet and a dry thickness"
            raise wrong(found, "one of `wet: 30 um` and `dry: 12 um`")
        if self.thickness_um > 1e5:
            raise wrong(f"a film of {self.thickness_um / 1e4:g} cm", "a thickness of at most 10 cm")
        return self

    @property
    def thickness_um(self) -> float:
        """The thickness as written, wet or dry. [um]"""
        return length_um(self.wet or self.dry or "0 um")

    @property
    def sd_um(self) -> float | None:
        return None if self.sd is None else length_um(self.sd)


class SpectrumReference(Strict):
    """A measured spectrum in a file beside the recipe."""

    spectrum: FilePath = Field(description=(
        "Path from the recipe file to a spectrum file: CSV, CGATS.17, CxF3 or .xlsx."))
    column: str | None = Field(default=None, max_length=200, description=(
        "Heading of the column, or name of the sample, to take, where the file has several."))
    scale: SpectrumScale | None = Field(default=None, description=(
        "Whether the file holds percent or a fraction of 1, where it does not say itself."))


class TakesIn(Strict):
    """A ground that a dye goes into, such as wood or textile, instead of lying on it."""

    depth: LengthText = Field(description="How deep the dye goes, such as '80 um'.")
    scattering_per_um: Annotated[float, Field(gt=0, le=10)] = Field(description=(
        "Kubelka-Munk S of the ground, per um, learnt from dyeings of known depth."))

    @property
    def depth_um(self) -> float:
        return length_um(self.depth)


class GroundReference(SpectrumReference):
    """The measured ground, and whether it takes the dye in."""

    takes_in: TakesIn | None = Field(default=None, description=(
        "For wood, paper and textile: the dye goes into the ground. Absent: it lies on it as a film."))


def _written_as(value: Any) -> str:
    return "mapping" if isinstance(value, dict | SpectrumReference) else "name"


Ground = Annotated[
    Annotated[str, Field(min_length=1, max_length=200), Tag("name")]
    | Annotated[GroundReference, Tag("mapping")],
    Discriminator(_written_as)]


GivenLight = Annotated[Annotated[Name, Tag("name")] | Annotated[SpectrumReference, Tag("mapping")],
                       Discriminator(_written_as)]


class Wanted(Strict):
    """The shade aimed at: `lab`, or a measured `spectrum`, one of the two."""

    lab: Annotated[list[float], Field(min_length=3, max_length=3)] | None = Field(
        default=None, examples=[[45, -10, -25]],
        description="CIELAB [L*, a*, b*] under `light` for `observer`.")
    spectrum: FilePath | None = Field(
        default=None, description="Path from the recipe file to a spectrum file.")
    column: str | None = Field(default=None, max_length=200, description=(
        "Heading of the column, or name of the sample, of that file, where it has several."))
    scale: SpectrumScale | None = Field(default=None, description=(
        "Whether that file holds percent or a fraction of 1, where it does not say itself."))
    light: Name = Field(default="D65", description="The light the shade is meant under.")
    observer: Observer | None = Field(default=None, description="2 or 10 degrees; absent: the recipe's own.")
    tolerance: Annotated[float, Field(gt=0, le=100)] | None = Field(
        default=None, description="The largest colour difference CIEDE2000 that is still right.")

    @model_validator(mode="after")
    def _one_target(self) -> Self:
        if (self.lab is None) == (self.spectrum is None):
            found = "no shade" if self.lab is None else "both `lab` and `spectrum`"
            raise wrong(found, "one of `lab: [L, a, b]` and `spectrum: FILE`")
        if self.lab and not (0 <= self.lab[0] <= 100 and all(abs(v) <= 200 for v in self.lab[1:])):
            raise wrong(f"lab {self.lab}", "L* from 0 to 100, a* and b* from -200 to 200")
        return self


class Measured(Strict):
    """What was measured on the mixture itself; it takes precedence over what is reckoned."""

    ph: Annotated[float, Field(ge=-2, le=16)] | None = Field(default=None, description="pH of the mixture.")
    ph_sd: Annotated[float, Field(gt=0, le=5)] | None = Field(
        default=None, description="One standard deviation of that pH.")
    density_g_cm3: Annotated[float, Field(ge=0.3, le=25)] | None = Field(
        default=None, description="Density of the mixture. [g/cm3]")
    temperature_c: Annotated[float, Field(ge=-50, le=300)] | None = Field(
        default=None, description="Temperature at which pH and density were measured. [deg C]")


class Recipe(Strict):
    """A recipe as written."""

    formcheck: Annotated[Literal[1], BeforeValidator(lambda v: _format_version(v))] = Field(
        description="Version of this file format: 1.")
    title: Name = Field(description="What the workshop calls it.")
    what: What = Field(description="What it is.")
    note: Note = Field(default="", description="Anything to remember about the recipe.")
    use: list[Use] = Field(default=[], max_length=20, description=(
        "Who uses it and on what: selects the rules that apply."))
    sold_in: list[Market] = Field(default=[], max_length=300, description=(
        "Where it will be sold: EU or the two letters of a country (ISO 3166-1). Selects the rules too."))
    ingredients: Annotated[list[Ingredient], Field(min_length=1, max_length=200)] = Field(
        description="The lines of the recipe in the order of addition.")
    batch: BatchText | None = Field(default=None, description=(
        "How much is made, by mass or volume. Left out where the amounts tell it or all are relative."))
    film: Film | None = Field(default=None, description="Thickness of the layer.")
    under: list[FilePath] = Field(default=[], max_length=8, description=(
        "Recipe files of the films that lie between the ground and this one, such as a primer; first applied first."))
    over: list[FilePath] = Field(default=[], max_length=8, description=(
        "Recipe files of the films put over this one, such as a varnish; first applied first."))
    path_length: LengthText | None = Field(default=None, description=(
        "Path of the light through a solution, such as '10 mm'."))
    ground: Ground | None = Field(default=None, description=(
        "What the layer lies on: the name of a built-in ground, or `spectrum: FILE` with its reflectance."))
    wanted: Wanted | None = Field(default=None, description="The shade aimed at.")
    lights: list[GivenLight] = Field(default=[], max_length=20, description=(
        "Lights to view it under, such as D65, A, or `spectrum: FILE` with the power of one of your own, which "
        "then goes by the name of its file; the first is the one figures are given for."))
    observer: Observer = Field(default=10, description="CIE observer: 2 (1931) or 10 (1964) degrees.")
    specular: Literal["included", "excluded"] = Field(default="included", description=(
        "Whether the shown reflectance holds the mirror reflection of the surface."))
    geometry: Literal["d:8", "45:0"] = Field(default="d:8", description=(
        "How the shown reflectance is measured: d:8 (sphere), or 45:0, which never holds the mirror reflection."))
    measured: Measured | None = Field(default=None, description="What was measured on the mixture.")
    binder_index: Annotated[float, Field(ge=1, le=3)] | None = Field(
        default=None, description="Refractive index of the dry binder. Absent: from the binder's record.")
    weighing: MassText | None = Field(default=None, description=(
        "The smallest step the balance shows, such as '0.01 g': taken into the uncertainty."))
    acts: list[Act] = Field(default=[], max_length=20, description=(
        "What is done in making and using it; cautions may hang on it."))
    materials: list[Material] = Field(default=[], max_length=100, description=(
        "Records of your own, for this recipe alone; a bare one has id, names and kind."))
    shelf: FilePath | None = Field(default=None, description=(
        "Path from the recipe file to a folder of your own material records."))

    @property
    def path_length_cm(self) -> float | None:
        return None if self.path_length is None else length_um(self.path_length) / 1e4

    @property
    def balance_step_g(self) -> float | None:
        return None if self.weighing is None else mass_g(self.weighing)


def _format_version(value: Any) -> Any:
    if value != FORMAT_VERSION or isinstance(value, bool):
        raise wrong(shown(value), f"{FORMAT_VERSION}, the format this formcheck reads")
    return FORMAT_VERSION
