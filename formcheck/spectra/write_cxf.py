"""Spectra as a CxF3 file (ISO 17972-1)."""

from __future__ import annotations

import re
from collections.abc import Sequence
from datetime import date
from pathlib import Path
from xml.sax.saxutils import escape, quoteattr

import numpy as np

from formcheck.files_out import write_text
from formcheck.spectra.measured import MeasuredSpectrum
from formcheck.spectra.read_cxf import CONDITIONS, NAMESPACE, NOT_STATED, SPHERE
from formcheck.spectra.scale import LEAST, MOST
from formcheck.spectra.write_csv import one_line
from formcheck.trouble import trouble

ELEMENTS = {"reflectance": ("ReflectanceSpectrum", "Spectrum_Reflectance"),
            "transmittance": ("TransmittanceSpectrum", "Spectrum_Transmittance")}
FIRST_NM = (360, 400)  # where a spectrum in even steps may begin, by the schema; others are written point by point
ANGLES = re.compile(r"(\d+(?:\.\d+)?) ?°?([ax]?) ?[:/] ?(\d+(?:\.\d+)?) ?°?([ax]?)")
NOT_XML = re.compile("[^\t\n\r\x20-\ud7ff\ue000-\ufffd\U00010000-\U0010ffff]")


def write_spectra_cxf(path: Path | str, spectra: Sequence[MeasuredSpectrum], *, created: date,
                      description: str = "") -> None:
    """Write reflectances and transmittances; `read_spectra` gives the same numbers back.

    Parameters
    ----------
    created : the day to put down as that of the file and of each spectrum, at 00:00 UTC.

    Raises
    ------
    InputError
        no spectra, a quantity for which CxF3 has no element, values outside -0.1 to 3, or a place that cannot
        be written to.
    """
    write_text(Path(path), cxf_text(spectra, str(path), created=created, description=description))


def cxf_text(spectra: Sequence[MeasuredSpectrum], file: str, *, created: date, description: str = "") -> str:
    """The text of such a file; InputError as for `write_spectra_cxf`."""
    if not spectra:
        raise trouble(file, "no spectra to write", "at least one")
    for one in spectra:
        _refuse_unfit(one, file)
    specifications: dict[str, str] = {}
    objects = []
    for n, one in enumerate(spectra, 1):
        reference = specifications.setdefault(_specification(one), f"S{len(specifications) + 1}")
        objects.append(_object(one, n, reference, created))
    about = f"    <cc:Description>{_text(description)}</cc:Description>\n" if description else ""
    return (f'<?xml version="1.0" encoding="UTF-8"?>\n<cc:CxF xmlns:cc="{NAMESPACE}">\n  <cc:FileInformation>\n'
            f"    <cc:Creator>formcheck</cc:Creator>\n    {_day(created)}\n{about}  </cc:FileInformation>\n"
            f"  <cc:Resources>\n    <cc:ObjectCollection>\n{''.join(objects)}    </cc:ObjectCollection>\n"
            "    <cc:ColorSpecificationCollection>\n"
            + "".join(f'      <cc:ColorSpecification Id="{reference}">\n        <cc:MeasurementSpec>\n{inner}'
                      "        </cc:MeasurementSpec>\n      </cc:ColorSpecification>\n"
                      for inner, reference in specifications.items())
            + "    </cc:ColorSpecificationCollection>\n  </cc:Resources>\n</cc:CxF>\n")


def _refuse_unfit(one: MeasuredSpectrum, file: str) -> None:
    if one.quantity not in ELEMENTS:
        raise trouble(file, f"{one.quantity or 'a quantity not known'} in {one.name[:60]!r}",
                      f"{' or '.join(ELEMENTS)}, the spectra that CxF3 holds; CSV holds any")
    if not ((one.values > LEAST) & (one.values < MOST)).all():
        raise trouble(file, f"values from {one.values.min():.3g} to {one.values.max():.3g} in {one.name[:60]!r}",
                      f"fractions between {LEAST:g} and {MOST:g}")


def _even(one: MeasuredSpectrum) -> int | None:
    """The increment of wavelengths that the schema can hold as a first one and steps; None for others."""
    nm = one.wavelength_nm
    step = nm[1] - nm[0] if nm.size > 1 else 0.0
    fits = (step >= 1 and step == round(step) and nm[0] == round(nm[0]) and FIRST_NM[0] <= nm[0] <= FIRST_NM[1]
            and np.array_equal(nm, nm[0] + step * np.arange(nm.size)))
    return int(step) if fits else None


def _object(one: MeasuredSpectrum, n: int, reference: str, created: date) -> str:
    name, _ = ELEMENTS[str(one.quantity)]
    if _even(one) is not None:
        values = " ".join(repr(float(value)) for value in one.values)
        start = int(one.wavelength_nm[0])
        spectrum = f'<cc:{name} StartWL="{start}" ColorSpecification="{reference}">{values}</cc:{name}>'
    else:
        points = "".join(f'<cc:SpectralPoint WL="{float(nm)!r}">{float(value)!r}</cc:SpectralPoint>'
                         for nm, value in zip(one.wavelength_nm, one.values, strict=True))
        spectrum = f'<cc:CustomSpectrum ColorSpecification="{reference}">{points}</cc:CustomSpectrum>'
    name_and_id = f'Name={quoteattr(_plain(one.name))} Id="{n}"'
    return (f'      <cc:Object ObjectType="Trial" {name_and_id}>\n        {_day(created)}\n'
            f"        <cc:ColorValues>\n          {spectrum}\n        </cc:ColorValues>\n      </cc:Object>\n")


def _specification(one: MeasuredSpectrum) -> str:
    """The inside of a MeasurementSpec, its parts in the order of the schema."""
    step = _even(one)
    parts = [f"<cc:MeasurementType>{ELEMENTS[str(one.quantity)][1]}</cc:MeasurementType>",
             f"<cc:GeometryChoice>{_geometry(one)}</cc:GeometryChoice>"]
    if step is not None:
        parts.append(f'<cc:WavelengthRange StartWL="{int(one.wavelength_nm[0])}" Increment="{step}"/>')
    device = f"<cc:Model>{_text(one.instrument)}</cc:Model>" if _plain(one.instrument) else ""
    device += _illumination(_plain(one.illumination))
    parts += [f"<cc:Device>{device}</cc:Device>"] * bool(device)
    return "".join(f"          {part}\n" for part in parts)


def _geometry(one: MeasuredSpectrum) -> str:
    if match := ANGLES.fullmatch(one.geometry.strip()):
        ring = "Annular" if "a" in match[2] + match[4] else "Uniplanar"
        return (f"<cc:SingleAngle><cc:SingleAngleConfiguration>{ring}</cc:SingleAngleConfiguration>"
                f"<cc:IlluminationAngle>{match[1]}</cc:IlluminationAngle>"
                f"<cc:MeasurementAngle>{match[3]}</cc:MeasurementAngle></cc:SingleAngle>")
    known = {text: word for word, text in SPHERE.items()}.get(one.geometry)
    if known is None and one.specular_included is not None and re.match(r"(di?e?:8|8:d)", one.geometry):
        known = "Specular_Included" if one.specular_included else "Specular_Excluded"
    if known:
        return f"<cc:SphereGeometry>{known}</cc:SphereGeometry>"
    return f"<cc:UnknownGeometry>{_text(one.geometry) or NOT_STATED}</cc:UnknownGeometry>"


def _illumination(said: str) -> str:
    word = {short: long for long, short in CONDITIONS.items()}.get(said)
    if word:
        return f"<cc:DeviceIllumination>{word}</cc:DeviceIllumination>"
    return f"<cc:DeviceIllumination CustomType={quoteattr(said)}>Custom</cc:DeviceIllumination>" if said else ""


def _day(created: date) -> str:
    return f"<cc:CreationDate>{created:%Y-%m-%d}T00:00:00Z</cc:CreationDate>"


def _plain(text: str) -> str:
    return one_line(NOT_XML.sub(" ", text))


def _text(text: str) -> str:
    return escape(_plain(text))
