"""CSV and JSON of a sheet hold its numbers and say what they are."""

import csv
import json
from dataclasses import fields

import numpy as np
import pytest

from skychart.charts.reading import Reading
from skychart.charts.sheet import elevation_sheet
from skychart.charts.survey import survey
from skychart.config import AirSettings
from skychart.export.tables import plain, readings_json, table_csv
from tests.charts.fake_sky import FakeSky


@pytest.fixture(scope="module")
def sheet():
    """A sheet of the fake sky."""
    return elevation_sheet(survey(FakeSky(AirSettings()), (20.0,), "cie-1931-2"), 0)


def test_csv_reads_back(sheet):
    """Remarks, one line of names, a row for each direction; the numbers are the sheet's."""
    lines = table_csv(sheet.table, ("first", "second")).decode("utf-8").splitlines()
    assert lines[:2] == ["# first", "# second"]
    rows = list(csv.DictReader(lines[2:]))
    assert len(rows) == len(sheet.table.rows)
    assert [float(row["luminance_cd_m2"]) for row in rows] == pytest.approx(sheet.readings.luminance_cd_m2, rel=1e-3)
    views = [float(row["view_elevation_deg"]) for row in rows]
    assert views == pytest.approx(sheet.readings.view_elevation_deg, abs=0.005)
    assert len(set(rows[0])) == len(sheet.table.columns) + 2


def test_json_has_the_keys_of_a_reading(sheet):
    """Each key is an array over the directions, null where there is no value."""
    content = json.loads(readings_json({"title": "x"}, sheet.readings, sheet.ground, sheet.spectra))
    assert list(content["readings"]) == [field.name for field in fields(Reading)]
    count = len(sheet.table.rows)
    assert all(len(values) == count for key, values in content["readings"].items() if key not in (
        "atmosphere", "rgb", "in_gamut"))  # fmt: skip
    assert content["readings"]["rgb"]["acescg"][3] == pytest.approx(sheet.readings.rgb["acescg"][3], rel=1e-3)
    assert {curve["key"] for curve in content["spectra"]["curves"]} >= {"sun", "view-zenith"}
    assert content["level_ground"]["sky_lx"] == pytest.approx(sheet.ground.sky_lx, rel=1e-3)


def test_no_nan_reaches_json():
    """nan becomes null, at any depth."""
    assert plain({"a": np.array([np.nan, 1.23456])}) == {"a": [None, 1.235]}


def test_whole_numbers_have_no_point():
    """Thousands of `.0` would be bytes without meaning."""
    assert json.dumps(plain(np.array([18612.3, -0.0, 2.5]))) == "[18610, 0, 2.5]"
