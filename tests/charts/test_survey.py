"""The one survey of a sky holds what every page takes from it."""

import numpy as np
import pytest

from skychart.charts.aureole import distance_and_side
from skychart.charts.direction import direction_sheet
from skychart.charts.overview import overview
from skychart.charts.reading import reading
from skychart.charts.sheet import TABLE_AZIMUTH_DEG, TABLE_ELEVATION_DEG, elevation_sheet
from skychart.charts.survey import (
    DIRECTIONS,
    RELATIVE_AZIMUTH_DEG,
    VIEW_ELEVATION_DEG,
    azimuth_index,
    elevation_index,
)

from .conftest import SUNS_DEG


def test_tables_and_directions_lie_on_the_grid():
    """Every direction that a page prints was computed, not interpolated."""
    assert set(TABLE_ELEVATION_DEG) | {view.view_elevation_deg for view in DIRECTIONS} <= set(VIEW_ELEVATION_DEG)
    assert set(TABLE_AZIMUTH_DEG) | {view.relative_azimuth_deg for view in DIRECTIONS} <= set(RELATIVE_AZIMUTH_DEG)


def test_a_direction_off_the_grid_is_an_error():
    """No neighbour is taken quietly."""
    with pytest.raises(IndexError):
        elevation_index(44.0)
    with pytest.raises(IndexError):
        azimuth_index(2.0)


def test_sheet_direction_sheet_and_reading_agree(sky, found):
    """The same direction is the same number on both sheets and in a reading."""
    sun = SUNS_DEG.index(10.0)
    sheet = elevation_sheet(found, sun)
    view = next(direction for direction in DIRECTIONS if direction.stem == "view-45-beside")
    course = direction_sheet(found, view)
    row = next(row for row in sheet.table.rows if row.anchor == "e45a090")
    assert row.cells == course.table.rows[sun].cells
    single = reading(sky, 10.0, 45.0, 90.0)
    keys = [column.key for column in sheet.table.columns]
    assert float(row.cells[keys.index("luminance_cd_m2")]) == pytest.approx(float(single.luminance_cd_m2), rel=1e-3)
    assert row.cells[keys.index("srgb_hex")] == str(single.srgb_hex)


def test_zenith_is_one_block(found):
    """It has no azimuth: one block over the whole width, and one row of numbers."""
    sheet = elevation_sheet(found, 0)
    assert [block.span for block in sheet.block_rows[0].blocks] == [len(TABLE_AZIMUTH_DEG)]
    assert len(sheet.table.rows) == 1 + (len(TABLE_ELEVATION_DEG) - 1) * len(TABLE_AZIMUTH_DEG)
    assert sheet.aureole_rows == (), "the sun is not seen"
    anchors = [block.anchor for row in sheet.block_rows for block in row.blocks]
    assert anchors == [row.anchor for row in sheet.table.rows]


def test_shadow_is_the_sky_alone(found):
    """Lit to shadow is log₂ of both over the sky; nothing below the horizon."""
    by_sun = {sun: elevation_sheet(found, i).ground for i, sun in enumerate(SUNS_DEG)}
    assert by_sun[-2.0].sun_lx == 0
    assert by_sun[-2.0].lit_to_shadow_stops == 0
    high = by_sun[45.0]
    assert 2**high.lit_to_shadow_stops == pytest.approx((high.sun_lx + high.sky_lx) / high.sky_lx)
    assert 2**high.card_ev100 * 12.5 / 100 == pytest.approx(high.card_luminance_cd_m2)


def test_the_sun_has_a_spectrum_only_while_it_is_up(found):
    """Five directions always; the sun from the horizon on."""
    counts = {sun: len(elevation_sheet(found, i).spectra.curves) for i, sun in enumerate(SUNS_DEG)}
    assert counts == {-8.0: 5, -2.0: 5, 0.0: 6, 10.0: 6, 45.0: 6, 90.0: 6}
    for curve in elevation_sheet(found, 3).spectra.curves:
        assert np.interp(560, found.wavelength_nm, curve.relative) == pytest.approx(1)


def test_principal_plane_is_polarised_across_itself(found):
    """Single scattering has E across the plane everywhere: the signed degree is that of Rayleigh, 0.9 sin²/(1+cos²)."""
    sun = SUNS_DEG.index(10.0)
    plane = elevation_sheet(found, sun).principal_plane
    cosine = np.cos(np.radians(plane.arc_deg - 10.0))
    assert np.all(np.diff(plane.arc_deg) > 0)
    assert np.sum(abs(plane.arc_deg - plane.sun_arc_deg) < 3) >= 5, "fine steps near the sun"
    np.testing.assert_allclose(plane.degree, 0.9 * (1 - cosine**2) / (1 + cosine**2), atol=1e-6)
    assert plane.arc_deg[0] == 0
    assert plane.arc_deg[-1] == 180


def test_blocks_around_the_sun_are_readings_of_the_sky(sky, found):
    """Above and beside at 1, 2, 5 and 10 degrees from where the sun is seen, each the number of a reading there."""
    sheet = elevation_sheet(found, SUNS_DEG.index(10.0))
    assert [row.label for row in sheet.aureole_rows] == ["Above", "Beside"]
    assert sheet.aureole_labels == ("1°", "2°", "5°", "10°")
    rows = {row.anchor: number for number, row in enumerate(sheet.table.rows)}
    for arm, row in zip(("up", "beside"), sheet.aureole_rows, strict=True):
        for distance, block in zip((1, 2, 5, 10), row.blocks, strict=True):
            assert block.anchor == f"{arm}{distance:02d}"
            place = rows[block.anchor]
            view, azimuth = (
                float(angle[place])
                for angle in (sheet.readings.view_elevation_deg, sheet.readings.relative_azimuth_deg)
            )
            apart, side = distance_and_side(sheet.apparent_elevation_deg, np.array(view), np.array(azimuth))
            assert apart == pytest.approx(distance, abs=1e-6)
            assert side == pytest.approx(1 if arm == "up" else 0, abs=0.02)
            single = reading(sky, 10.0, view, azimuth)
            assert sheet.readings.luminance_cd_m2[place] == pytest.approx(float(single.luminance_cd_m2))


def test_the_seen_sun_stands_higher(found):
    """Sheets give the apparent elevation, and say so where the sun is below the horizon."""
    low, zenith = elevation_sheet(found, SUNS_DEG.index(0.0)), elevation_sheet(found, SUNS_DEG.index(90.0))
    assert (low.apparent, zenith.apparent) == ("0.50°", "90.00°")
    assert low.sky.sun_elevation_deg == low.principal_plane.sun_arc_deg == low.apparent_elevation_deg == 0.5
    assert elevation_sheet(found, SUNS_DEG.index(-8.0)).apparent == "below the horizon"


def test_deep_twilight_is_told(found):
    """The note on photopic colours stands on sheets from −6° down and only there."""
    told = [elevation_sheet(found, i).deep_twilight for i in range(len(SUNS_DEG))]
    assert told == [True, False, False, False, False, False]


def test_overview_has_a_column_and_a_row_for_each_sun(found):
    """Bands, columns and rows stand in the order of the suns."""
    day = overview(found)
    assert [row.anchor for row in day.rows] == [column.stem for column in day.columns]
    assert [column.label for column in day.columns] == ["−8°", "−2°", "0°", "10°", "45°", "90°"]
    assert [band.relative_azimuth_deg for band in day.bands] == [0, 90, 180]
    assert len(day.skies) == len(day.exposures) == len(SUNS_DEG)
    assert all(len(row.cells) == len(day.heads) for row in day.rows)


def test_the_ground_is_as_bright_as_what_falls_on_it(found):
    """From the ground: everywhere below the horizon 18 % of the light of the white card."""
    below = np.broadcast_to(0.18 * found.card_XYZ[:, None, None], found.below_XYZ.shape)
    np.testing.assert_allclose(found.below_XYZ, below, rtol=1e-9)
