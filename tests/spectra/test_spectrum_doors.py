"""One door for spectrum files: every format read, percent or fraction settled, hostile files refused."""

from __future__ import annotations

import io
import zipfile
from datetime import date

import numpy as np
import openpyxl
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from formcheck.spectra.files import read_spectra, read_spectrum
from formcheck.spectra.measured import MeasuredSpectrum
from formcheck.spectra.write_csv import write_spectra_csv
from formcheck.spectra.write_cxf import write_spectra_cxf
from formcheck.trouble import InputError

NM = np.arange(400.0, 701.0, 20.0)
FALLING = np.linspace(0.9, 0.1, NM.size)

# Keywords and data format after CGATS.17 / ISO 28178.
CGATS = """CGATS.17
ORIGINATOR "a test"
NUMBER_OF_FIELDS 6
BEGIN_DATA_FORMAT
SAMPLE_ID SAMPLE_NAME {names}
END_DATA_FORMAT
NUMBER_OF_SETS 2
BEGIN_DATA
1 blue {blue}
2 "pale red" {red}
END_DATA
"""


def cgats(keyword: str, factor: float) -> str:
    grid = np.arange(400, 701, 100)
    names = " ".join(f"{keyword}{nm}" for nm in grid)
    blue, red = np.array([0.5, 0.4, 0.2, 0.1]) * factor, np.array([0.1, 0.2, 0.6, 0.8]) * factor
    return CGATS.format(names=names, blue=" ".join(f"{v:g}" for v in blue), red=" ".join(f"{v:g}" for v in red))


def written(tmp_path, name: str, text: str | bytes):
    path = tmp_path / name
    path.write_bytes(text.encode() if isinstance(text, str) else text)
    return path


@pytest.mark.parametrize("keyword, factor", [("SPECTRAL_PCT_", 100.0), ("SPECTRAL_DEC_", 1.0)])
def test_cgats_says_itself_whether_it_is_percent(tmp_path, keyword, factor):
    spectra = read_spectra(written(tmp_path, "a.txt", cgats(keyword, factor)), quantity="reflectance")
    assert [one.name for one in spectra] == ["blue", "pale red"]
    assert spectra[0].wavelength_nm == pytest.approx([400, 500, 600, 700])
    assert spectra[1].values == pytest.approx([0.1, 0.2, 0.6, 0.8])


def test_a_table_runs_either_way(tmp_path):
    rows = zip(NM, FALLING, strict=True)
    long = "wavelength_nm,blue,red\n" + "".join(f"{nm:g},{v:.4f},{1 - v:.4f}\n" for nm, v in rows)
    wide = ("name," + ",".join(f"{nm:g}" for nm in NM) + "\n" + "blue," + ",".join(f"{v:.4f}" for v in FALLING)
            + "\nred," + ",".join(f"{1 - v:.4f}" for v in FALLING) + "\n")
    for text in (long, wide):
        spectra = read_spectra(written(tmp_path, "a.csv", text), scale="fraction", quantity="reflectance")
        assert [one.name for one in spectra] == ["blue", "red"]
        assert spectra[0].values == pytest.approx(FALLING, abs=1e-4)


def test_percent_is_asked_for_where_the_file_does_not_tell(tmp_path):
    rows = "".join(f"{nm:g},{100 * v:.2f}\n" for nm, v in zip(NM, FALLING, strict=True))
    path = written(tmp_path, "a.csv", "wavelength,reflectance\n" + rows)
    with pytest.raises(InputError, match="scale"):
        read_spectrum(path)
    assert read_spectrum(path, scale="percent").values == pytest.approx(FALLING, abs=1e-4)
    said = written(tmp_path, "b.csv", "wavelength,reflectance (%)\n" + rows)
    assert read_spectrum(said).values == pytest.approx(FALLING, abs=1e-4)


def test_a_workbook_reads_as_its_table(tmp_path):
    book = openpyxl.Workbook()
    book.active.append(["wavelength nm", "reflectance %"])
    for nm, value in zip(NM, FALLING, strict=True):
        book.active.append([float(nm), float(100 * value)])
    book.save(tmp_path / "a.xlsx")
    assert read_spectrum(tmp_path / "a.xlsx").values == pytest.approx(FALLING)


wavelengths = st.one_of(
    st.tuples(st.sampled_from([360.0, 380.0, 400.0]), st.sampled_from([5.0, 10.0, 20.0])).map(
        lambda start_step: np.arange(start_step[0], 741.0, start_step[1])),
    st.lists(st.integers(300, 1000), min_size=8, max_size=40, unique=True).map(lambda nm: np.array(sorted(nm), float)))


@settings(max_examples=60, deadline=None)
@given(nm=wavelengths, seed=st.integers(0, 999), name=st.text(min_size=1, max_size=20), specular=st.booleans())
def test_what_is_written_reads_back_the_same(tmp_path_factory, nm, seed, name, specular):
    values = np.random.default_rng(seed).uniform(0.02, 0.98, nm.size)
    one = MeasuredSpectrum(name, nm, values, "reflectance", geometry="di:8" if specular else "de:8",
                           specular_included=specular)
    folder = tmp_path_factory.mktemp("spectra")
    write_spectra_csv(folder / "a.csv", [one])
    write_spectra_cxf(folder / "a.cxf", [one], created=date(2026, 12, 1))
    for file in ("a.csv", "a.cxf"):
        back = read_spectrum(folder / file)
        assert np.array_equal(back.wavelength_nm, nm) and np.array_equal(back.values, values)
        assert back.quantity == "reflectance" and back.specular_included is specular


BOMB = ('<?xml version="1.0"?><!DOCTYPE x [<!ENTITY a "aaaaaaaaaa"><!ENTITY b "&a;&a;&a;&a;&a;&a;&a;&a;">'
        '<!ENTITY c "&b;&b;&b;&b;&b;&b;&b;&b;">]><cc:CxF xmlns:cc="http://colorexchangeformat.com/CxF3-core">&c;</cc:CxF>')
OUTSIDE = ('<?xml version="1.0"?><!DOCTYPE x [<!ENTITY a SYSTEM "file:///etc/hostname">]>'
           '<cc:CxF xmlns:cc="http://colorexchangeformat.com/CxF3-core">&a;</cc:CxF>')


def zip_bomb() -> bytes:
    raw = io.BytesIO()
    with zipfile.ZipFile(raw, "w", zipfile.ZIP_DEFLATED) as archive:
        archive.writestr("xl/worksheets/sheet1.xml", b"0" * 80_000_000)
    return raw.getvalue()


@pytest.mark.parametrize("name, text", [
    ("empty.csv", ""), ("binary.csv", bytes(range(256)) * 20), ("words.csv", "no,numbers\nat,all\n"),
    ("nan.csv", "wavelength,reflectance (%)\n400,10\n410,nan\n420,12\n"),
    ("turning.csv", "wavelength,reflectance (%)\n400,10\n420,11\n410,12\n"),
    ("twice.csv", "wavelength,reflectance (%)\n400,10\n400,11\n410,12\n"),
    ("uneven.csv", "wavelength,reflectance (%)\n400,10\n410\n420,12\n"),
    ("cut.txt", cgats("SPECTRAL_PCT_", 100.0)[:200]), ("bomb.cxf", BOMB), ("outside.cxf", OUTSIDE),
    ("cut.cxf", "<cc:CxF xmlns:cc='http://colorexchangeformat.com/CxF3-core'><cc:Res"),
    ("deep.cxf", "<a>" * 20_000), ("bomb.xlsx", zip_bomb()), ("not.xlsx", b"PK\x03\x04 nothing"),
])
def test_a_broken_file_is_one_clear_message(tmp_path, name, text):
    path = written(tmp_path, name, text)
    with pytest.raises(InputError) as caught:
        read_spectra(path)
    assert str(path) in str(caught.value) and "expected" in str(caught.value)
    assert "hostname" not in str(caught.value).replace("file:///etc/hostname", "")


def test_a_cut_file_never_reads_as_something_else(tmp_path):
    """Every beginning of a good file is refused or is a part of the same numbers."""
    one = MeasuredSpectrum("blue", NM, FALLING, "reflectance")
    write_spectra_cxf(tmp_path / "a.cxf", [one], created=date(2026, 12, 1))
    whole = (tmp_path / "a.cxf").read_bytes()
    for end in range(0, len(whole) - 12, 37):
        with pytest.raises(InputError):
            read_spectra(written(tmp_path, "cut.cxf", whole[:end]))
