"""What the headings and notes of a spectrum file say: quantity, percent or fraction, wavelengths, names."""

from __future__ import annotations

import re
from typing import get_args

from formcheck.spectra.measured import ABSORPTION, How, Quantity, Scale, specular_of

LONGEST_LABEL = 40
LONGEST_NOTE = 300
SHORTEST_NM, LONGEST_NM = 150.0, 4000.0

QUANTITIES: tuple[tuple[Quantity, re.Pattern[str]], ...] = (
    ("reflectance", re.compile(r"reflect|remission|%\s*r\b|\br\s*[(\[]?\s*%")),
    ("transmittance", re.compile(r"transmi[st]|%\s*t\b|\bt\s*[(\[]?\s*%")),
    ("absorptivity_l_g_cm", re.compile(r"absorptivity,? (in )?l[ /(]+g\b")),
    ("epsilon_l_mol_cm", re.compile(r"epsilon|ε|molar (decadic )?(absorptivity|absorption|extinction)")),
    ("absorbance", re.compile(r"absorban|\babs\b|optical density|absorptivity|extinction")),
    ("relative_power", re.compile(r"\bpower\b|\bspd\b|irradiance|\bradiance|\bemissi")),
)
LETTERS: dict[str, Quantity] = {"r": "reflectance", "t": "transmittance", "a": "absorbance"}
# A share of something else ("5 % tint", "mass fraction 0.2") says nothing of the scale.
PERCENT = re.compile(r"(?<![\d.,])(?<!\d )%|(?<!\d )\bpercent|(?<!\d )\bper cent|\bpct\b|\b0 ?(-|–|to|\.\.+) ?100\b")
FRACTION = re.compile(r"(?<!mass )(?<!volume )(?<!weight )(?<!mole )\bfraction|\bdecimal\b|"
                      r"\b0(\.0)? ?(-|–|to|\.\.+) ?1(\.0+)?(?![\d.])|\bdec\b")
TELLS_OF_VALUES = re.compile(r"\b(values?|scales?|units?)\b")
LABEL = re.compile(
    r"[\s_.:%(\[-]*(?:(?:spectral|reflectance|transmittance|absorbance|reflection|transmission|remission|spec|nm|wl|"
    r"wavelength|lambda|λ|pct|dec|abs|r|t|a|x|w)[\s_.:%(\[-]*)*(\d{3,4}(?:[.,]\d{1,3})?)[\s_]*(?:nm)?[\s\])]*"
    r"(?:[(\[]?\s*%\s*[)\]]?)?", re.IGNORECASE)
WAVELENGTH = re.compile(r"wave ?length|^\s*(nm|λ|lambda|wl)\b", re.IGNORECASE)
OTHER_UNIT = re.compile(r"wave ?number|cm ?-1|cm\^|cm⁻|\bev\b|[µμ]m|\bum\b|micro|ngstr|\bthz\b", re.IGNORECASE)
NAME_HEADINGS = ("name", "sample name", "sample", "sample id", "id", "colour", "color", "patch", "panel", "label",
                 "title", "specimen")
TOLD = re.compile(r"\s*(?:measur\w+ |measurement )?(geometry|instrument|illumination|condition|specular|quantity|scale)"
                  r"\s*[:=]\s*(\S.*)", re.IGNORECASE)


def words(text: str) -> str:
    return text.replace("_", " ").strip().casefold()


def quantity_of(text: str) -> Quantity | None:
    """The quantity that a heading or note names; None for none or for several."""
    named = [quantity for quantity, pattern in QUANTITIES if pattern.search(words(text))]
    if len(named) == 2 and named[1] == "absorbance":
        return named[0] if named[0] in ABSORPTION else None
    return named[0] if len(named) == 1 else None


def letter_quantity(text: str) -> Quantity | None:
    """R, T or A standing alone."""
    return LETTERS.get(words(text))


def scale_of(text: str) -> Scale | None:
    """Percent or fraction, where a heading says one and not both."""
    percent, fraction = PERCENT.search(words(text)), FRACTION.search(words(text))
    if bool(percent) == bool(fraction):
        return None
    return "percent" if percent else "fraction"


def note_quantity(notes: list[str]) -> Quantity | None:
    """The quantity that notes name, where they name one."""
    named = {quantity for note in notes if (quantity := quantity_of(note[:LONGEST_NOTE]))}
    return named.pop() if len(named) == 1 else None


def note_scale(notes: list[str]) -> Scale | None:
    """Percent or fraction from those notes that speak of the values; None where they disagree."""
    said = {scale_of(note) for note in (note[:LONGEST_NOTE] for note in notes)
            if quantity_of(note) or TELLS_OF_VALUES.search(words(note))} - {None}
    return said.pop() if len(said) == 1 else None


def told(notes: list[str]) -> dict[str, str]:
    """What notes of the form `geometry: 45:0` tell, by the word before the colon."""
    found = (TOLD.match(note[:LONGEST_NOTE]) for note in notes)
    return {match[1].casefold(): match[2].strip() for match in found if match}


def told_quantity(notes: list[str]) -> Quantity | None:
    """The quantity of a note `quantity: ...`, which counts for more than any heading."""
    said = told(notes).get("quantity", "")
    exact: dict[str, Quantity] = {word: word for word in get_args(Quantity)}
    return exact.get(said.casefold().replace(" ", "_")) or quantity_of(said)


def told_scale(notes: list[str]) -> Scale | None:
    """The scale of a note `scale: percent` or `scale: fraction`, which counts for more than any heading."""
    return scale_of(told(notes).get("scale", ""))


def note_how(notes: list[str]) -> How:
    """Geometry, instrument and illumination from notes such as `geometry: 45:0`."""
    said = told(notes)
    geometry = said.get("geometry", "")
    speaking = [note[:LONGEST_NOTE] for note in notes if quantity_of(note[:LONGEST_NOTE]) == "reflectance"]
    specular = f"specular {said['specular']}" if "specular" in said else " ".join([geometry, *speaking])
    return How(geometry, said.get("instrument", ""), said.get("illumination", said.get("condition", "")),
               specular_of(specular))


def wavelength_label(text: object) -> str | None:
    """The wavelength in a heading such as 400, 400 nm, R400 or SPECTRAL_NM_400, as text; None for others."""
    if not isinstance(text, str):
        return f"{text:g}" if isinstance(text, float | int) and SHORTEST_NM <= text <= LONGEST_NM else None
    match = LABEL.fullmatch(text) if len(text) <= LONGEST_LABEL else None
    if not match or not SHORTEST_NM <= float(match[1].replace(",", ".")) <= LONGEST_NM:
        return None
    return match[1].replace(",", ".")


def names_wavelength(text: object) -> bool:
    return isinstance(text, str) and len(text) <= LONGEST_LABEL and bool(WAVELENGTH.search(text.replace("_", " ")))


def name_columns(headings: list[str]) -> list[int]:
    """Columns that hold names of samples, the best first."""
    found = [(NAME_HEADINGS.index(words(h)), i) for i, h in enumerate(headings) if words(h) in NAME_HEADINGS]
    return [i for _, i in sorted(found)]
