"""A build writes every page and file, the same each time, however many processes share the work."""

import json

import pytest

from skychart.charts.survey import DIRECTIONS
from skychart.pages import build
from skychart.pages.build import build_site

from .conftest import SMALL


def contents(folder):
    """Bytes of every file below a folder, by path."""
    return {path.relative_to(folder).as_posix(): path.read_bytes() for path in folder.rglob("*") if path.is_file()}


def test_every_page_is_there(site):
    """Start page, methods, sheets and directions of each atmosphere, with CSV and JSON beside them."""
    names = set(contents(site))
    stems = ["sun-08", "sun+20", *(view.stem for view in DIRECTIONS)]
    expected = {
        f"{air}/{stem}.{kind}" for air in ("molecular", "thin") for stem in stems for kind in ("html", "csv", "json")
    }
    expected |= {f"{air}/light.{kind}" for air in ("molecular", "thin") for kind in ("html", "csv", "json")}
    expected |= {f"compare/{stem}.html" for stem in ("sun-08", "sun+20")}
    assert expected | {"index.html", "thin/index.html", "methods.html", "static/skychart.css"} <= names


def test_two_builds_with_any_number_of_processes_are_equal(site, tmp_path, fake_physics):
    """Byte by byte, also when the sheets are drawn in two fresh processes."""
    lines = []
    report = build_site(SMALL, tmp_path / "again", 2, lines.append)
    assert contents(tmp_path / "again") == contents(site)
    assert report.files + 1 == len(contents(site)), "all files and the marker of the writer"
    assert (report.checks, report.checks_met) == (3, 2)
    assert f"{report.pages} pages" in str(report)
    assert lines[0] == "molecular: solving"
    assert lines[-1] == "writing"


def test_a_sheet_with_all_its_files_is_small(site):
    """Eighty-four have to fit in sixteen megabytes: at most 155 kB each; the start page 400 kB with its files."""
    found = contents(site)
    for stem in ("molecular/sun-08", "molecular/sun+20", "molecular/view-zenith"):
        assert sum(len(data) for name, data in found.items() if name.startswith(stem)) <= 155_000
    start = [name for name in found if name == "index.html" or name.startswith(("static/", "molecular/day"))]
    assert len(start) >= 6
    assert sum(len(found[name]) for name in start) <= 400_000


def test_json_names_the_air_and_the_observer(site):
    """A file that left the site still says where it comes from."""
    about = json.loads((site / "thin/sun-08.json").read_text(encoding="utf-8"))["about"]
    assert about["atmosphere"] == "thin"
    assert "200 Dobson units" in about["air"]
    assert about["observer"] == "cie-1931-2"
    assert about["solar_elevation_deg"] == -8


def test_a_failing_sheet_writes_nothing(tmp_path, fake_physics, monkeypatch):
    """An error in the middle reaches the caller, and the folder is not made."""

    def fail(*_):
        raise ValueError("no sheet")

    monkeypatch.setattr(build, "sheet_files", fail)
    with pytest.raises(ValueError, match="no sheet"):
        build_site(SMALL, tmp_path / "site", 1, lambda line: None)
    assert not (tmp_path / "site").exists()
