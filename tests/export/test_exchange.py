"""Colour tables, spectra and archives are read back, by another reader or a strict one, to the same numbers."""

import io
import re
import zipfile
from xml.etree import ElementTree

import numpy as np
import pytest

from skychart.export.archive import zip_bytes
from skychart.export.cgats import table_cgats
from skychart.export.spectral import spectra_tm27
from skychart.library import colour_science

STANDARD_FIELDS = {"SAMPLE_ID", "SAMPLE_NAME", "XYZ_X", "XYZ_Y", "XYZ_Z", "XYY_X", "XYY_Y", "XYY_CAPY"}
TOKEN = re.compile(r'"([^"]*)"|(\S+)')


def cgats(data):
    """Keywords and rows of a CGATS.17 file; fails at whatever the format does not allow."""
    text = data.decode("ascii")
    assert text.endswith("\n")
    lines = [line for line in text.splitlines() if line and not line.startswith("#")]
    assert lines.pop(0) == "CGATS.17"
    keywords, fields, rows = {}, None, None
    while lines:
        line = lines.pop(0)
        if line == "BEGIN_DATA_FORMAT":
            end = lines.index("END_DATA_FORMAT")
            fields, lines = " ".join(lines[:end]).split(), lines[end + 1 :]
            assert len(fields) == int(keywords["NUMBER_OF_FIELDS"])
        elif line == "BEGIN_DATA":
            end = lines.index("END_DATA")
            rows, lines = [[a or b for a, b in TOKEN.findall(row)] for row in lines[:end]], lines[end + 1 :]
            assert len(rows) == int(keywords["NUMBER_OF_SETS"])
            assert not lines, "nothing after the data"
        else:
            keyword, value = line.split(maxsplit=1)
            assert re.fullmatch(r"[A-Z_]+", keyword)
            assert keyword not in keywords
            keywords[keyword] = value.strip('"')
    assert fields is not None
    assert all(len(row) == len(fields) for row in rows)
    return keywords, fields, rows


@pytest.mark.parametrize("sun", [-8, 20])
def test_a_colour_table_reads_back(sheets, sun):
    """Absolute XYZ to six digits, in the order of the sheet; xyY is the same colour; identifiers are the standard's."""
    chart = sheets[sun]
    keywords, fields, rows = cgats(table_cgats(chart, "skychart 1.2", "Sky colours"))
    assert list(keywords) == ["ORIGINATOR", "FILE_DESCRIPTOR", "CREATED", "NUMBER_OF_FIELDS", "NUMBER_OF_SETS"]
    assert (keywords["ORIGINATOR"], keywords["FILE_DESCRIPTOR"]) == ("skychart 1.2", "Sky colours")
    assert set(fields) == STANDARD_FIELDS
    columns = dict(zip(fields, zip(*rows, strict=True), strict=True))
    assert columns["SAMPLE_ID"] == tuple(str(number) for number in range(1, len(rows) + 1))
    XYZ = np.array([columns[f"XYZ_{axis}"] for axis in "XYZ"], float).T
    np.testing.assert_allclose(XYZ, chart.readings.XYZ, rtol=5e-6)
    xy = np.array([columns["XYY_X"], columns["XYY_Y"]], float).T
    np.testing.assert_allclose(xy, chart.readings.xy, atol=6e-7)
    assert columns["XYY_CAPY"] == columns["XYZ_Y"]
    names = [f"elevation {row.labels[0]} azimuth {row.labels[1]}" for row in chart.table.rows]
    assert list(columns["SAMPLE_NAME"]) == names
    assert len(set(names)) == len(names) > 45


@pytest.mark.parametrize("sun", [-8, 20])
def test_spectra_read_back_by_colour_science(sheets, tmp_path, sun):
    """Wavelengths, values to five digits, the quantity, and a header without the word None."""
    spectra = sheets[sun].spectra
    files = spectra_tm27(spectra, "skychart 1.2", "molecular, sun")
    assert list(files) == [curve.key for curve in spectra.curves]
    assert ("sun" in files) == (sun > 0)
    for curve in spectra.curves:
        path = tmp_path / f"{curve.key}.spdx"
        path.write_bytes(files[curve.key])
        read = colour_science().SpectralDistribution_IESTM2714(str(path)).read()
        np.testing.assert_array_equal(read.wavelengths, spectra.wavelength_nm)
        np.testing.assert_allclose(read.values, curve.absolute, rtol=6e-5)
        assert read.spectral_quantity == ("irradiance" if curve.key == "sun" else "radiance")
        assert read.bandwidth_FWHM == 10
        assert read.header.document_creator == "skychart 1.2"
        assert "molecular, sun" in read.header.description
        texts = [element.text for element in ElementTree.fromstring(files[curve.key]).iter()]
        assert "None" not in texts


def test_an_archive_holds_its_files_without_a_clock():
    """Sorted, deflated, dated as early as the format goes, the same bytes from the same files in any order."""
    files = {"b.txt": b"second" * 100, "a.txt": b"first"}
    data = zip_bytes(files)
    assert data == zip_bytes(dict(reversed(files.items())))
    with zipfile.ZipFile(io.BytesIO(data)) as archive:
        assert archive.testzip() is None
        assert archive.namelist() == ["a.txt", "b.txt"]
        assert {entry.date_time for entry in archive.infolist()} == {(1980, 1, 1, 0, 0, 0)}
        assert all(archive.read(name) == content for name, content in files.items())
    assert len(data) < 400
