"""The archive of a sheet holds what its page says, with OpenEXR or without it, and fits the site."""

import io
import sys
import zipfile

import pytest

from skychart.charts.light import light_sheet
from skychart.charts.sheet import elevation_sheet
from skychart.charts.survey import survey
from skychart.config import NAMED_AIRS, AirSettings, Settings
from skychart.pages import build
from skychart.pages.render import sheet_files
from skychart.pages.sheet_archive import OPENEXR_LEFT_OUT, sheet_archive
from skychart.pages.site import make_atlas
from tests.charts.fake_sky import FakeSky

NIGHT = ("colours.cgats.txt", "contents.txt", "patches.exr", "ramp-beside-pq.png", "ramp-plane-srgb.png")


def archive_of(air, sun):
    """Archive of a sheet of the fake sky."""
    settings = Settings(atmospheres=(air,), solar_elevations_deg=(sun,))
    chart = elevation_sheet(survey(FakeSky(air), (sun,), settings.observer), 0)
    return sheet_archive(make_atlas(settings), chart)


def names_in(data):
    """Names of the files, each sound."""
    with zipfile.ZipFile(io.BytesIO(data)) as archive:
        assert archive.testzip() is None
        return archive.namelist()


def test_each_sheet_leads_to_its_archive(site):
    """With colours, spectra, patches, ramps and what they are; the sun's spectrum while it is up."""
    for sun, count in (("-08", 13), ("+20", 14)):
        data = (site / f"molecular/sun{sun}-files.zip").read_bytes()
        names = names_in(data)
        assert set(NIGHT) <= set(names)
        assert len(names) == count
        assert ("spectrum-sun.spdx" in names) == (sun == "+20")
        page = (site / f"molecular/sun{sun}.html").read_text(encoding="utf-8")
        assert f'href="sun{sun}-files.zip" download' in page
        assert "The blocks as an OpenEXR picture" in page


def test_an_archive_fits_the_site(site):
    """At most 30 kB, so that 84 of them stay below 2.6 MB."""
    sizes = [path.stat().st_size for path in site.rglob("*-files.zip")]
    assert len(sizes) == 4
    assert max(sizes) <= 30_000


def test_equal_sheets_have_equal_archives():
    """Byte by byte."""
    assert archive_of(AirSettings(), 20.0) == archive_of(AirSettings(), 20.0)


@pytest.mark.parametrize(
    ("air", "command"),
    [
        (NAMED_AIRS["clear"], "skychart map --sun -2.5 dome.exr --atmosphere clear"),
        (AirSettings("clear", ozone_du=350), None),
        (AirSettings("ridge", altitude_km=3), None),
    ],
)
def test_the_command_for_the_map_is_given_where_it_makes_the_same_sky(air, command):
    """That is, for an atmosphere that has this name and these settings everywhere."""
    assert archive_of(air, -2.5).map_command == command


def test_without_openexr_the_rest_is_there_and_the_build_says_so_once(tmp_path, fake_physics, monkeypatch):
    """The page does not promise what is not there."""
    monkeypatch.setitem(sys.modules, "OpenEXR", None)
    lines = []
    settings = Settings(atmospheres=(AirSettings(),), solar_elevations_deg=(-8.0, 20.0))
    build.build_site(settings, tmp_path / "site", 1, lines.append)
    assert lines.count(OPENEXR_LEFT_OUT) == 1
    assert "pip install 'sky-colour-charts[exr]'" in OPENEXR_LEFT_OUT
    data = (tmp_path / "site/molecular/sun+20-files.zip").read_bytes()
    assert "patches.exr" not in names_in(data)
    assert b"patches" not in zipfile.ZipFile(io.BytesIO(data)).read("contents.txt")
    page = (tmp_path / "site/molecular/sun+20.html").read_text(encoding="utf-8")
    assert "The blocks as an OpenEXR picture" not in page


def test_a_sheet_gives_its_archive_among_its_files():
    """Under the name that the page links to."""
    settings = Settings(atmospheres=(AirSettings(),), solar_elevations_deg=(5.0,))
    found = survey(FakeSky(AirSettings()), (5.0,), settings.observer)
    files = sheet_files(make_atlas(settings), elevation_sheet(found, 0), light_sheet(found).suns[0])
    assert "molecular/sun+05-files.zip" in files
