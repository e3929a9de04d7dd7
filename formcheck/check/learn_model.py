"""The form of a file for `formcheck learn`, format version 1: measured drawdowns, or a dilution series.

Everything a maker may write stands here, once. What the films hold beyond the colourants goes into `clear`.
"""

from __future__ import annotations

from typing import Annotated, Any, Literal

from pydantic import BeforeValidator, Discriminator, Field, Tag

from formcheck.recipe.model import FilePath, Film, Name, Note
from formcheck.recipe.written import LengthText, fraction, read_amount
from formcheck.strict import Strict, wrong
from formcheck.trouble import shown
from formcheck.units import parse_amount

FORMAT_VERSION = 1
MOST_PANELS, MOST_COLOURANTS = 100, 12

Id = Annotated[str, Field(pattern=r"^[a-z0-9][a-z0-9_]*$", max_length=80)]
Density = Annotated[float, Field(ge=0.3, le=25)]
Part = Annotated[float, Field(gt=0, le=1e6)]


def _percent(example: str) -> BeforeValidator:
    return BeforeValidator(lambda value: read_amount(value, "mass_fraction", example=example, above_zero=True))


SmallText = Annotated[str, _percent("0.1 %"), Field(examples=["0.1 %"])]


class Constituent(Strict):
    """Anything that films hold."""

    id: Id = Field(description="The word that `parts` name it by; of a colourant also the id of its record.")
    density_g_cm3: Density | None = Field(default=None, description=(
        "As it lies in the film; needed where loadings are by mass. [g/cm3]"))


class Colourant(Constituent):
    """A colourant of the films: to be learned, or known by a record of the shelf (`material`)."""

    names: list[Name] = Field(default=[], max_length=40, description="Names for its record; absent: its id.")
    role: Literal["colour", "white", "black"] = Field(default="colour", description=(
        "A white reduces, a black darkens: warnings hang on it, the fit does not."))
    material: Name | None = Field(default=None, description=(
        "A material of the shelf whose K and S are known: they are used and not learned."))


class Clear(Constituent):
    """What else is in the films and neither absorbs nor scatters."""

    evaporates: bool = Field(default=False, description="Gone from the dry film: water, solvent.")


class SpectrumOf(Strict):
    """A reflectance or absorbance in a file beside this one."""

    spectrum: FilePath
    column: str | None = Field(default=None, max_length=200)


class Reading(SpectrumOf):
    ground: Id = Field(description="One of `grounds`.")


class Panel(Strict):
    """One drawdown: what is in it, how thick it is, its readings over one ground or several."""

    name: Name
    parts: Annotated[dict[str, Part], Field(min_length=1, max_length=30)] = Field(
        description="Parts of each colourant and of what is clear, by `loadings`.")
    film: Film | None = Field(default=None, description="Its own thickness; absent: that of all films.")
    readings: Annotated[list[Reading], Field(min_length=1, max_length=20)]


class Measured(Strict):
    """How the readings were taken."""

    mirror: Literal["included", "excluded"] = Field(description=(
        "Whether the readings hold the mirror reflection of the surface (sphere, gloss in), or not (45:0, gloss out)."))
    scale: Literal["percent", "fraction"] | None = Field(default=None, description=(
        "How reflectances are written, where the files do not say."))
    repeatability: SmallText = Field(default="0.1 %", description=(
        "One standard deviation of a reading, the instrument lifted and put down again."))


class Cite(Strict):
    """Who measured what, for the record."""

    cite: Name
    kind: Literal["measured", "supplier", "user", "paper", "database", "invented_demo"] = "measured"


def _unknown_or_film(value: Any) -> str:
    return "word" if isinstance(value, str) else "film"


FilmOrUnknown = Annotated[
    Annotated[Literal["unknown"], Tag("word")] | Annotated[Film, Tag("film")], Discriminator(_unknown_or_film)]


class LearnFile(Strict):
    """Measured drawdowns to learn K and S from."""

    formcheck_learn: Annotated[Literal[1], BeforeValidator(lambda v: _format_version(v))]
    what: Literal["drawdowns"] = "drawdowns"
    title: Name
    note: Note = ""
    loadings: Literal["mass", "volume"] = Field(description="What the `parts` of the panels are.")
    measured: Measured
    film: FilmOrUnknown = Field(description=(
        "Thickness of the films, `{dry: 40 um, sd: 2 um}` or wet, or `unknown`."))
    grounds: Annotated[dict[str, SpectrumOf], Field(min_length=1, max_length=10)]
    colourants: Annotated[list[Colourant], Field(min_length=1, max_length=MOST_COLOURANTS)]
    clear: list[Clear] = Field(default=[], max_length=20)
    panels: Annotated[list[Panel], Field(min_length=2, max_length=MOST_PANELS)]
    shelf: FilePath | None = Field(default=None, description="A folder of your own records, for known colourants.")
    source: Cite | None = None


class Dye(Strict):
    """The dye whose absorptivity is learned."""

    id: Id
    names: list[Name] = Field(default=[], max_length=40)
    molar_mass_g_mol: Annotated[float, Field(ge=10, le=1e6)] | None = None


class Solution(SpectrumOf):
    name: Name | None = None
    concentration: Annotated[str, BeforeValidator(lambda value: read_amount(
        value, "mass_per_volume", example="0.02 g/L", above_zero=True))]
    path: LengthText | None = Field(default=None, description="Its own path; absent: that of all solutions.")


class DilutionFile(Strict):
    """Absorbances of a dye at several concentrations."""

    formcheck_learn: Annotated[Literal[1], BeforeValidator(lambda v: _format_version(v))]
    what: Literal["dilution"]
    title: Name
    note: Note = ""
    dye: Dye
    path: LengthText = Field(description="Path of the light, such as '10 mm'.")
    repeatability: Annotated[float, Field(gt=0, lt=0.5)] = Field(
        default=0.002, description="One standard deviation of an absorbance.")
    weighing: SmallText = Field(default="1 %", description="One standard deviation of a concentration.")
    solutions: Annotated[list[Solution], Field(min_length=2, max_length=MOST_PANELS)]
    source: Cite | None = None


def relative(text: str) -> float:
    """`"0.1 %"` as 0.001."""
    return fraction(text)


def grams_per_litre(text: str) -> float:
    return parse_amount(text, "mass_per_volume").value


def _format_version(value: Any) -> Any:
    if value != FORMAT_VERSION or isinstance(value, bool):
        raise wrong(shown(value), f"{FORMAT_VERSION}, the format this formcheck reads")
    return FORMAT_VERSION


