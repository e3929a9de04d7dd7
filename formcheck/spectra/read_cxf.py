"""Spectra in CxF3 (ISO 17972-1), read with a plain XML parser that fetches nothing and expands nothing.

A document type is refused, and with it every entity of one's own; depth, number of elements and length of text are
limited. Reflectance and transmittance are fractions by the standard (1.0 is 100 %).
"""

from __future__ import annotations

import re
from dataclasses import dataclass, field
from xml.parsers import expat

from formcheck.cells import Cell
from formcheck.spectra.measured import How, Quantity, specular_of
from formcheck.spectra.written import NUMBER, Written, WrittenFile
from formcheck.trouble import InputError, shown, trouble

NAMESPACE = "http://colorexchangeformat.com/CxF3-core"
WHAT = "a CxF3 file (ISO 17972-1)"
MOST_DEPTH = 64
MOST_ELEMENTS = 400_000
MOST_TEXT = 100_000  # characters of one element
SPECTRA: dict[str, Quantity | None] = {"ReflectanceSpectrum": "reflectance", "TransmittanceSpectrum": "transmittance",
                                       "EmissiveSpectrum": "relative_power", "CustomSpectrum": None}
TYPES: dict[str, Quantity] = {
    "Spectrum_Reflectance": "reflectance", "Spectrum_Transmittance": "transmittance",
    "Spectrum_TotalTransmittance": "transmittance", "Spectrum_Emissive": "relative_power"}
PRIVATE = "PrivateSpectrum"
KEPT = {*SPECTRA, "SpectralPoint", "MeasurementType", "SphereGeometry", "SingleAngleConfiguration", "IlluminationAngle",
        "MeasurementAngle", "UnknownGeometry", "Manufacturer", "Model", "SerialNumber", "DeviceIllumination",
        "DeviceFilter", "BandpassCorrected", "Backing"}
NOT_STATED = "not stated"  # what a writer puts where a geometry must stand and none is known
SPHERE = {"Specular_Included": "sphere, specular included", "Specular_Excluded": "sphere, specular excluded",
          "Diffuse": "sphere, diffuse"}
CONDITIONS = {"M0_Incandescent": "M0", "M1_Daylight": "M1", "M2_UVExcluded": "M2", "M3_Polarized": "M3"}  # ISO 13655
RING = {"Annular": "a", "Uniplanar": ""}


@dataclass
class _Element:
    name: str
    attributes: dict[str, str]
    line: int
    column: int
    text: list[tuple[str, int, int]] = field(default_factory=list)  # pieces with line and column
    length: int = 0

    def plain(self) -> str:
        return "".join(piece for piece, _, _ in self.text)


@dataclass
class _Spectrum:
    element: _Element
    owner: dict[str, str]  # attributes of the object that it belongs to
    points: list[_Element] = field(default_factory=list)


@dataclass
class _Found:
    """What a walk over the elements picks up."""

    spectra: list[_Spectrum] = field(default_factory=list)
    specifications: dict[str, dict[str, str]] = field(default_factory=dict)
    private: int = 0


def read_cxf(raw: bytes, file: str) -> WrittenFile:
    """The spectra of a CxF3 file, as written.

    Raises
    ------
    InputError
        XML that is damaged, has a document type, is nested too deep or too large; another format; a spectrum
        whose specification, first wavelength or increment is missing; no spectra.
    """
    found = _Walk(file).over(raw)
    spectra = [_written(one, found, n, file) for n, one in enumerate(found.spectra, 1)]
    if not spectra:
        raise trouble(file, f"{found.private} spectra in a private coding" if found.private else "no spectrum",
                      "a CxF3 file with spectra (ReflectanceSpectrum, TransmittanceSpectrum, CustomSpectrum)", line=1)
    return WrittenFile(file, _told_apart(spectra), "spectrum", 1)


class _Walk:
    """The parser's calls. A class because they share the path of elements and the limits."""

    def __init__(self, file: str):
        self.file, self.path, self.found, self.elements = file, [], _Found(), 0
        self.owner: dict[str, str] = {}
        self.specification: dict[str, str] | None = None
        self.parser = expat.ParserCreate(namespace_separator=" ")
        self.parser.StartDoctypeDeclHandler = self.refuse_document_type
        self.parser.StartElementHandler = self.start
        self.parser.EndElementHandler = self.end
        self.parser.CharacterDataHandler = self.characters

    path: list[_Element]

    def over(self, raw: bytes) -> _Found:
        try:
            self.parser.Parse(raw, True)
        except expat.ExpatError as error:
            raise trouble(self.file, f"damaged XML ({expat.ErrorString(error.code)})", WHAT, line=error.lineno,
                          column=error.offset + 1) from None
        except (ValueError, LookupError) as error:
            raise trouble(self.file, f"XML in an unusable encoding ({str(error)[:80]})", f"{WHAT} in UTF-8",
                          line=1) from None
        return self.found

    def refused(self, found: str, expected: str) -> InputError:
        return trouble(self.file, found, expected, line=self.parser.CurrentLineNumber,
                       column=self.parser.CurrentColumnNumber + 1)

    def refuse_document_type(self, *_) -> None:
        raise self.refused("a document type (<!DOCTYPE ...>)", f"{WHAT}, which has none")

    def start(self, qualified: str, attributes: dict[str, str]) -> None:
        namespace, _, name = qualified.rpartition(" ")
        self.elements += 1
        if not self.path and (name != "CxF" or namespace != NAMESPACE):
            raise self.refused(f"a root element {shown(name)} of {shown(namespace) if namespace else 'no namespace'}",
                               f"{WHAT}: the root element CxF of {NAMESPACE}")
        if len(self.path) >= MOST_DEPTH or self.elements > MOST_ELEMENTS:
            raise self.refused(f"elements nested deeper than {MOST_DEPTH}" if len(self.path) >= MOST_DEPTH
                               else f"more than {MOST_ELEMENTS:,} elements", "a smaller CxF3 file")
        element = _Element(name if namespace == NAMESPACE else "", attributes, self.parser.CurrentLineNumber,
                           self.parser.CurrentColumnNumber + 1)
        self.path.append(element)
        self.begin(element)

    def begin(self, element: _Element) -> None:
        if element.name == "Object":
            self.owner = element.attributes
        elif element.name == "ColorSpecification":
            self.specification = self.found.specifications.setdefault(element.attributes.get("Id", ""), {})
        elif element.name == "WavelengthRange" and self.specification is not None:
            self.specification.update(element.attributes)
        elif element.name in SPECTRA:
            self.found.spectra.append(_Spectrum(element, self.owner))
        elif element.name == "SpectralPoint" and self.found.spectra:
            self.found.spectra[-1].points.append(element)
        elif element.name == PRIVATE:
            self.found.private += 1

    def characters(self, text: str) -> None:
        element = self.path[-1]
        if element.name not in KEPT:
            return
        element.length += len(text)
        if element.length > MOST_TEXT:
            raise self.refused(f"more than {MOST_TEXT:,} characters in {element.name}", "a spectrum of fewer values")
        element.text.append((text, self.parser.CurrentLineNumber, self.parser.CurrentColumnNumber + 1))

    def end(self, _: str) -> None:
        element = self.path.pop()
        if self.specification is not None and element.name in KEPT and element.name not in SPECTRA:
            custom = element.attributes.get("CustomType", "")
            self.specification[element.name] = custom.strip() or element.plain().strip()
        if element.name == "ColorSpecification":
            self.specification = None
        elif element.name == "Object":
            self.owner = {}


# --- one spectrum --------------------------------------------------------------------------------------


def _written(one: _Spectrum, found: _Found, n: int, file: str) -> Written:
    element = one.element
    reference = element.attributes.get("ColorSpecification", "")
    specification = found.specifications.get(reference)
    if specification is None:
        raise trouble(file, f"a spectrum of the specification {shown(reference)}, which is not in the file",
                      "the Id of a ColorSpecification", line=element.line, column=element.column)
    if element.name == "CustomSpectrum":
        wavelengths, values = _points(one)
        quantity = TYPES.get(specification.get("MeasurementType", ""))
    else:
        values = _tokens(element)
        wavelengths = _even_wavelengths(element, specification, len(values), file)
        quantity = SPECTRA[element.name]
    owner = one.owner
    name, own = owner.get("Name", "").strip(), element.attributes.get("Name", "").strip()
    names = tuple(dict.fromkeys(filter(None, (name, own, owner.get("Id", ""))))) or (str(n),)
    return Written(names, n, wavelengths, values, quantity, True, "fraction" if quantity != "relative_power" else None,
                   _how(specification), _notes(specification))


def _tokens(element: _Element) -> list[Cell]:
    """The numbers in an element's text, each with its place, wherever the parser cut the text."""
    found, text = [], element.plain()
    begins, at = [], 0
    for piece, line, column in element.text:
        begins.append((at, line, column))
        at += len(piece)
    k = 0
    for match in re.finditer(r"\S+", text):
        while k + 1 < len(begins) and begins[k + 1][0] <= match.start():
            k += 1
        offset, line, column = begins[k]
        found.append(Cell(match.group(), line, column + match.start() - offset))
    return found


def _points(one: _Spectrum) -> tuple[list[Cell], list[Cell]]:
    wavelengths = [Cell(point.attributes.get("WL", ""), point.line, point.column) for point in one.points]
    return wavelengths, [Cell(point.plain().strip(), point.line, point.column) for point in one.points]


def _even_wavelengths(element: _Element, specification: dict[str, str], count: int, file: str) -> list[Cell]:
    first = element.attributes.get("StartWL") or specification.get("StartWL", "")
    step = specification.get("Increment", "")
    for word, text in (("StartWL", first), ("Increment", step)):
        if not NUMBER.fullmatch(text) or float(text.replace(",", ".")) <= 0:
            raise trouble(file, f"a spectrum whose {word} is {shown(text) if text else 'not given'}",
                          f"a WavelengthRange with {word} in nm", line=element.line, column=element.column)
    start, increment = float(first.replace(",", ".")), float(step.replace(",", "."))
    return [Cell(f"{start + i * increment:.10g}", element.line, element.column) for i in range(count)]


def _how(specification: dict[str, str]) -> How:
    sphere = SPHERE.get(specification.get("SphereGeometry", ""), "")
    angles = [specification.get(f"{word}Angle", "") for word in ("Illumination", "Measurement")]
    geometry = sphere or specification.get("UnknownGeometry", "")
    specular = specular_of(geometry)
    if all(NUMBER.fullmatch(angle) for angle in angles):
        lit, seen = (float(angle.replace(",", ".")) for angle in angles)
        ring = RING.get(specification.get("SingleAngleConfiguration", ""), "")
        geometry = f"{lit:g}{ring if lit else ''}:{seen:g}{ring if seen else ''}"
        specular = False if {round(lit), round(seen)} == {0, 45} else None
    instrument = " ".join(filter(None, (specification.get(word, "") for word in (
        "Manufacturer", "Model", "SerialNumber"))))
    light = [specification.get("DeviceIllumination", ""), specification.get("DeviceFilter", "")]
    light = [CONDITIONS.get(word, word) for word in light if word != "Filter_None"]
    return How("" if geometry == NOT_STATED else geometry, instrument, " ".join(filter(None, light)), specular)


def _notes(specification: dict[str, str]) -> tuple[str, ...]:
    backing = specification.get("Backing", "")
    uncorrected = specification.get("BandpassCorrected", "").casefold() in ("false", "0")
    return tuple([f"measured over {backing[:60]}"] * bool(backing)
                 + ["not corrected for the bandpass of the instrument"] * uncorrected)


def _told_apart(spectra: list[Written]) -> list[Written]:
    """Spectra of one object carry their light, quantity or number behind its name."""
    count: dict[str, int] = {}
    for one in spectra:
        count[one.names[0]] = count.get(one.names[0], 0) + 1
    found = []
    for one in spectra:
        if count[one.names[0]] > 1:
            mark = one.how.illumination or one.quantity or ""
            name = f"{one.names[0]} ({mark})" if mark else one.names[0]
            one = Written((name, *one.names[1:]), one.number, one.wavelengths, one.values, one.quantity, True,
                          one.scale, one.how, one.notes)
        found.append(one)
    return found
