"""Skies side by side: the same sun, one exposure, the numbers of each sky's own sheet."""

import dataclasses

import pytest

from skychart.charts.comparison import comparison
from skychart.charts.sheet import elevation_sheet
from skychart.charts.survey import DIRECTIONS
from skychart.config import AirSettings

from .conftest import SUNS_DEG


@pytest.fixture(scope="module")
def two(found):
    """The same sky twice, the second at double light."""
    brighter = {key: 2 * getattr(found, key) for key in ("stokes_XYZ", "aureole_XYZ", "sky_XYZ", "sun_XYZ", "beam_XYZ")}
    return found, dataclasses.replace(found, air=AirSettings("other"), **brighter)


def test_one_exposure_lies_midway(two):
    """Half a stop above the one that suits the darker sky, for a brighter one of twice its light."""
    page = comparison(two, SUNS_DEG.index(10.0))
    own = elevation_sheet(two[0], SUNS_DEG.index(10.0)).renderings[0].exposure.display_white_cd_m2
    assert page.exposure.display_white_cd_m2 == pytest.approx(2**0.5 * own)
    assert [shown.atmosphere for shown in page.skies] == ["molecular", "other"]


def test_blocks_lead_to_rows_of_the_sheet_and_say_the_same(two):
    """Each direction's luminance and chromaticity are those of the sheet, in a row that the sheet has."""
    sun = SUNS_DEG.index(10.0)
    sheet = elevation_sheet(two[0], sun)
    printed = {block.anchor: block.lines for row in sheet.block_rows for block in row.blocks}
    anchors = {row.anchor for row in sheet.table.rows}
    page = comparison(two, sun)
    assert [row.label for row in page.colours] == [direction.title for direction in DIRECTIONS]
    for row in page.colours:
        assert row.blocks[0].anchor in anchors
        assert printed.get(row.blocks[0].anchor, row.blocks[0].lines) == row.blocks[0].lines
        assert row.blocks[1].lines[1] == row.blocks[0].lines[1], "the same colour at double light"


def test_numbers_stand_in_the_order_of_the_skies(two):
    """Lit : shadow is the same for both, the illuminance of the second doubled; a sun below the horizon is told."""
    rows = {row.label: row.cells for row in comparison(two, SUNS_DEG.index(45.0)).numbers}
    facts = {fact.title: fact.text for fact in elevation_sheet(two[0], SUNS_DEG.index(45.0)).ground.facts()}
    assert all(rows[title][0] == text for title, text in facts.items())
    assert rows["Lit : shadow"][0] == rows["Lit : shadow"][1]
    assert rows["Sun seen at"][0] == rows["Sun seen at"][1]
    night = {row.label: row.cells for row in comparison(two, SUNS_DEG.index(-8.0)).numbers}
    assert night["Sun seen at"] == ("below the horizon",) * 2
