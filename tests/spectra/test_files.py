"""Spectrum files: what is read, and what is refused where."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from formcheck.spectra.files import read_k_and_s, read_spectrum_csv
from formcheck.trouble import InputError

GOOD = [
    ("wavelength_nm,absorbance\n400,0.1\n410,0.25\n420,0.2\n", None),
    ("400,0.1\n410,0.25\n420,0.2\n", None),
    ("nm;A\n400;0,1\n410;0,25\n420;0,2\n", None),
    ("nm\tA\n400\t0,1\n410\t0.25\n420\t0.2\n", None),
    ("400 0.1\n410 0.25\n420 0.2\n", None),
    ("# cell 1 cm\r\nnm,A\r\n420,0.2\r\n410,0.25\r\n400,0.1\r\n", None),
    ("Sample: blue no. 2,\nTaken on a Monday,\nnm,A,\n400,0.1,\n410,0.25,\n420,0.2,\n", None),
    ("\ufeffnm,A,B\n400,0.1,9\n410,0.25,9\n\n420,0.2,9\n", "a"),
    ("nm,A,B\n400,x,0.1\n410,,0.25\n420,nan,0.2\n", "B"),
    ("nm,A,B\n400,7,0.1\n410,8,0.25\n420,9,0.2\n", "3"),
    ('"nm, in air","A, 1 cm"\n400,0.1\n410,"0.25"\n420,2e-1\n', None),
]


def written(tmp_path, text, name="a.csv"):
    path = tmp_path / name
    path.write_bytes(text if isinstance(text, bytes) else text.encode())
    return path


@pytest.mark.parametrize("text, column", GOOD)
def test_reads_the_ways_a_spectrum_is_written(tmp_path, text, column):
    spectrum = read_spectrum_csv(written(tmp_path, text), column=column)
    assert spectrum.wavelength_nm.tolist() == [400, 410, 420]
    assert spectrum.values.tolist() == [0.1, 0.25, 0.2]


def test_says_which_columns_there_are(tmp_path):
    spectrum = read_spectrum_csv(written(tmp_path, "nm,acid,base\n400,1,2\n410,3,4\n"), column="base")
    assert spectrum.column == "base" and spectrum.columns == ("acid", "base")


def test_reads_utf_16_as_some_spreadsheets_save_it(tmp_path):
    assert read_spectrum_csv(
        written(tmp_path, "nm\tA\n400\t1\n410\t2\n".encode("utf-16"))
    ).values.tolist() == [1, 2]


BAD = [
    (b"", None, "a.csv:1:1", "an empty file"),
    (b"\n  \n# only a note\n", None, "a.csv:1:1", "an empty file"),
    (b"hello\nworld\n", None, "a.csv:1:1", "no line that begins with a number"),
    (b"nm,A\n400,0.1\n410,abc\n", None, "a.csv:3:5", "'abc'"),
    (b"nm,A\n400,0.1\n410,\n420,1\n", None, "a.csv:3:5", "an empty cell"),
    (b"nm,A\n400,0.1\n410\n420,1\n", None, "a.csv:3:4", "a row of 1 cells"),
    (b"nm,A\n400,0.1\n410,NaN\n", None, "a.csv:3:5", "'NaN'"),
    (b"nm,A\n400,0.1\n410,1e999\n", None, "a.csv:3:5", "'1e999'"),
    (b"nm,A\n400,0.1\n410,1_0\n", None, "a.csv:3:5", "'1_0'"),
    (b"nm,A\n400,0.1\n41O,0.2\n", None, "a.csv:3:1", "'41O'"),
    (b"nm,A\n400,0.1\n410,0.2\n405,0.3\n420,0.1\n", None, "a.csv:4:1", "405 nm after 410 nm"),
    (b"nm,A\n400,0.1\n410,0.2\n410,0.3\n", None, "a.csv:4:1", "410 nm a second time (before in line 3)"),
    (b"nm,A\n0.4,0.1\n0.41,0.2\n", None, "a.csv:2:1", "a wavelength of 0.4"),
    (b"nm,A\n-400,0.1\n410,0.2\n", None, "a.csv:2:1", "a wavelength of -400"),
    (b"nm,A\n400,0.1\n", None, "a.csv:2:1", "a single row"),
    (b"400\n410\n420\n", None, "a.csv:1:1", "one column"),
    (b"nm,A\n400,0,1\n410,0,2\n", "A", "a.csv:2:7", "3 cells in a row where the header has 2"),
    (b"400,0.1\n410,0,2\n", None, "a.csv:2:7", "3 cells"),
    (b"nm,A,B\n400,1,2\n410,1,2\n", None, "a.csv:2", "2 value columns (A, B)"),
    (b"nm,acid,base\n400,1,2\n410,1,2\n", "bse", "a.csv:2", "no column 'bse'"),
    (b"nm,A,a\n400,1,2\n410,1,2\n", "a", "a.csv:2", "2 columns named 'a'"),
    (b"nm;A\n400;1.234,5\n410;2\n", None, "a.csv:2:5", "'1.234,5'"),
    (b"nm,A\n400,0.1\n410,\xff\n", None, "a.csv:3", "not UTF-8"),
    (b"\x89PNG\r\n\x1a\n\x00\x00", None, "a.csv:3", "a binary file"),
    (b"\xff\xfea", None, "a.csv", "UTF-16"),
]


@pytest.mark.parametrize("raw, column, place, found", BAD)
def test_refuses_with_the_place_and_what_was_found(tmp_path, monkeypatch, raw, column, place, found):
    monkeypatch.chdir(tmp_path)
    written(tmp_path, raw)
    with pytest.raises(InputError) as refusal:
        read_spectrum_csv("a.csv", column=column)
    problem = refusal.value.problems[0]
    assert str(problem.place) == place and found in problem.found and problem.expected


def test_refuses_a_file_of_50_mb_a_folder_and_no_file(tmp_path):
    big = tmp_path / "big.csv"
    with big.open("wb") as file:
        file.truncate(50_000_000)
    for path, found in (
        (big, "50,000,000 bytes"),
        (tmp_path, "a folder"),
        (tmp_path / "none.csv", "no file"),
    ):
        with pytest.raises(InputError) as refusal:
            read_spectrum_csv(path)
        assert found in refusal.value.problems[0].found


@given(st.binary(max_size=200))
@settings(max_examples=150, deadline=None)
def test_any_bytes_are_read_or_refused_and_nothing_else(tmp_path_factory, raw):
    path = written(tmp_path_factory.mktemp("any"), raw)
    try:
        spectrum = read_spectrum_csv(path)
    except InputError:
        return
    assert np.isfinite(spectrum.values).all() and (np.diff(spectrum.wavelength_nm) > 0).all()


@given(
    st.lists(
        st.sampled_from(["nm", "400", "410", "4,5", ".", ";", ",", "\t", "\n", '"', "-", "1e5", "#", " "]),
        max_size=30,
    )
)
@settings(max_examples=300, deadline=None)
def test_scraps_of_a_spectrum_are_read_or_refused_and_nothing_else(tmp_path_factory, scraps):
    path = written(tmp_path_factory.mktemp("scraps"), "".join(scraps))
    for read in (read_spectrum_csv, read_k_and_s):
        try:
            read(path)
        except InputError as refusal:
            assert str(refusal)


def test_k_and_s_by_name_in_any_order_and_direction(tmp_path):
    path = written(tmp_path, "# note\nwavelength_nm,S_per_um,K_per_um\n410,5,1\n400,6,2\n")
    wavelength, k, s = read_k_and_s(path)
    assert wavelength.tolist() == [400, 410] and k.tolist() == [2, 1] and s.tolist() == [6, 5]


@pytest.mark.parametrize(
    "raw, place, found",
    [
        (b"nm,K,S\n400,1,1\n410,-1,1\n", "a.csv:3:5", "K of -1"),
        (b"nm,K_per_mm,S_per_mm\n400,1,1\n410,1,1\n", "a.csv:2", "K_per_mm"),
        (b"400,1,1\n410,1,1\n", "a.csv:1", "the columns 1, 2, 3"),
    ],
)
def test_refuses_k_and_s_that_cannot_be(tmp_path, monkeypatch, raw, place, found):
    monkeypatch.chdir(tmp_path)
    written(tmp_path, raw)
    with pytest.raises(InputError) as refusal:
        read_k_and_s("a.csv")
    assert str(refusal.value.problems[0].place) == place and found in refusal.value.problems[0].found
