"""One number is one number: in the light sheet, its tables, its files, the box and the files of an elevation sheet."""

import csv
import json

import numpy as np
import pytest

from skychart.charts.light import BOTH, PARTS, SHADOW, SUN, light_sheet
from skychart.charts.light_box import light_box
from skychart.charts.light_tables import (
    coefficient_table,
    colour_table,
    full_table,
    illuminance_table,
    lamp_table,
    share_table,
)
from skychart.charts.numbers import significant, spaced
from skychart.charts.planes import LEVEL, PLANES
from skychart.charts.sheet import elevation_sheet
from skychart.charts.survey import survey
from skychart.colour.spaces import SPACES
from skychart.config import Settings
from skychart.export.light import CONVENTION, light_json
from skychart.export.tables import table_csv
from skychart.pages.light_page import light_files
from skychart.pages.render import sheet_files
from skychart.pages.site import make_atlas
from tests.charts.fake_sky import FakeSky

SUNS_DEG = (-8.0, 2.0, 30.0)


@pytest.fixture(scope="module")
def found():
    """A fake sky at three suns."""
    return survey(FakeSky(Settings().atmospheres[0]), SUNS_DEG, "cie-1931-2")


@pytest.fixture(scope="module")
def sheet(found):
    """Its light."""
    return light_sheet(found)


@pytest.fixture(scope="module")
def files(found, sheet):
    """Every file of the light sheet and of the elevation sheets."""
    settings = Settings(atmospheres=Settings().atmospheres[:1], solar_elevations_deg=SUNS_DEG)
    atlas = make_atlas(settings)
    made = light_files(atlas, sheet)
    for sun, light in enumerate(sheet.suns):
        made |= sheet_files(atlas, elevation_sheet(found, sun), light)
    return {path.partition("/")[2]: data for path, data in made.items()}


def rows_of(data):
    """Rows of a CSV file below its remarks."""
    return list(csv.DictReader(line for line in data.decode("utf-8").splitlines() if not line.startswith("#")))


def test_csv_has_every_plane_and_part(files, sheet):
    """A row each, with illuminance, chromaticity and RGB in four spaces to four digits; remarks say what is what."""
    rows = rows_of(files["light.csv"])
    assert len(rows) == len(SUNS_DEG) * len(PLANES) * len(PARTS)
    for row in rows:
        light = next(light for light in sheet.suns if light.solar_elevation_deg == float(row["solar_elevation_deg"]))
        at = [plane.key for plane in PLANES].index(row["plane"]), [key for key, _ in PARTS].index(row["part"])
        assert float(row["illuminance_lx"]) == pytest.approx(light.illuminance_lx[at], rel=6e-4)
        for space in SPACES:
            linear = [float(row[f"{space}_{channel}"]) for channel in "rgb"]
            assert linear == pytest.approx(light.rgb[space][at], rel=6e-4, abs=1e-9)
        assert (row["x"] == "") == (float(row["illuminance_lx"]) == 0)
    assert "part: sun = the beam alone" in files["light.csv"].decode("utf-8")


def test_one_walk_from_the_sheet_to_every_file(files, sheet):
    """The light of each sun is the same in light.json, light.csv, its sheet's JSON, its sheet and the light page."""
    whole = json.loads(files["light.json"])
    table = {(row["solar_elevation_deg"], row["plane"], row["part"]): row for row in rows_of(files["light.csv"])}
    page = files["light.html"].decode("utf-8")
    for light, told in zip(sheet.suns, whole["suns"], strict=True):
        own = json.loads(files[f"{light.stem}.json"])
        assert {key: value for key, value in own["light"].items() if key in told} == told
        assert own["light"]["planes"] == whole["about"]["planes"]
        assert own["light"]["coefficients"].keys() == {"XYZ", *SPACES}
        np.testing.assert_allclose(told["illuminance_lx"], light.illuminance_lx, rtol=6e-4, atol=1e-12)
        text = files[f"{light.stem}.html"].decode("utf-8")
        for index, plane in enumerate(PLANES):
            for part, (key, _) in enumerate(PARTS):
                row = table[f"{light.solar_elevation_deg:g}", plane.key, key]
                assert float(row["illuminance_lx"]) == pytest.approx(told["illuminance_lx"][index][part], rel=1e-9)
                lux = spaced(significant(float(light.illuminance_lx[index, part]), 3))
                if part == SHADOW:
                    assert f"<td>{lux}" in page
                    assert f"<b>{lux}</b>" in text
        assert own["level_ground"]["sky_lx"] == told["illuminance_lx"][LEVEL][SHADOW]
        assert own["level_ground"]["lit_to_shadow_stops"] == pytest.approx(
            told["lit_to_shadow_stops"]["level"], abs=1e-3
        )
        if light.solar_elevation_deg > 0:
            assert own["light"]["sun"]["illuminance_lx"] == told["illuminance_lx"][0][SUN]


def test_files_say_how_coefficients_are_meant(files):
    """Axes, order, sign and normalisation, so that the file alone is enough."""
    told = json.loads(files["light.json"])["about"]["coefficient_convention"]
    assert told == CONVENTION
    for words in (
        "x toward the sun's azimuth",
        "orthonormal",
        "L1-1 0.488603(y)",
        "2 pi/3",
        "without alternating sign",
    ):
        assert words in told
    short = json.loads(files["sun+30.json"])["light"]["coefficient_convention"]
    assert short.startswith("L0+0, L1-1, L1+0, L1+1, L2-2")
    assert "x toward the sun's azimuth" in short


def test_nothing_but_numbers_and_null(sheet):
    """A hidden sun is null in JSON and empty in CSV, never nan."""
    text = light_json({}, sheet).decode("utf-8")
    assert "NaN" not in text
    assert json.loads(text)["suns"][0]["sun"]["illuminance_lx"] is None
    rows = rows_of(table_csv(full_table(sheet), ()))
    assert not any("nan" in value for row in rows for value in row.values())


def test_tables_have_a_row_for_each_sun(sheet):
    """With the stem of its sheet, and planes that the sun never reaches only once."""
    for make in (illuminance_table, lamp_table, colour_table, coefficient_table, share_table):
        table = make(sheet)
        assert [row.anchor for row in table.rows] == [light.stem for light in sheet.suns]
        assert all(len(row.cells) == len(table.columns) for row in table.rows)
    assert [span for _, span in illuminance_table(sheet).groups] == [2, 2, 2, 1, 1, 1]


def test_the_box_shows_what_there_is(sheet):
    """Without a sun, its rows and facts are left out; where a plane turns away from the sun its cell is empty."""
    night, day = light_box(sheet.suns[0]), light_box(sheet.suns[2])
    assert [row.label for row in night.rows] == ["Sky and ground"]
    assert len(night.facts) == 1
    assert [row.label for row in day.rows] == [title for _, title in PARTS]
    assert [cell.swatch is not None for cell in day.rows[SUN].cells] == [True, True, True, False, False, False]
    assert all(cell.swatch for cell in day.rows[BOTH].cells)


def test_the_box_is_small(files):
    """At most 4 kB on each elevation sheet."""
    for sun in ("sun-08", "sun+02", "sun+30"):
        text = files[f"{sun}.html"].decode("utf-8")
        start = text.index('aria-labelledby="light-title"')
        assert 1500 < len(text[start : text.index("</section>", start)].encode("utf-8")) <= 4096
