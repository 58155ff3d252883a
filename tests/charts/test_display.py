"""Display sheet: renderings as they are stated, and tables that say what was found."""

import numpy as np
import pytest

from skychart.charts.bands import DEPTHS, banding
from skychart.charts.display import display_sheet, shown
from skychart.charts.dome import light_at
from skychart.charts.exposure import SURROUND_FACTOR, exposures
from skychart.charts.lines import LINES, PLANE
from skychart.charts.reach import PEAKS_CD_M2, reach
from skychart.colour.coding import BT1886, CODINGS, HLG, PQ, SRGB
from skychart.colour.spaces import rgb

from .conftest import SUNS_DEG

TEN = SUNS_DEG.index(10.0)


@pytest.fixture(scope="module")
def sheet(found):
    """The sheet of six suns."""
    return display_sheet(found)


def cells(table, key):
    """A column of a table as numbers, nan where there is none."""
    place = [column.key for column in table.columns].index(key)
    return np.array([float(row.cells[place] or "nan") for row in table.rows])


@pytest.mark.parametrize(("coding", "white"), [(SRGB, 100), (BT1886, 100), (PQ, 203), (HLG, 203)])
def test_each_coding_shows_its_white_where_it_is_stated(found, coding, white):
    """SDR: grey of the mean sky's luminance at 18.42 cd/m². HDR: a neutral card at 203 cd/m² (ITU-R BT.2408)."""
    own = exposures(found.sky_XYZ[TEN], found.card_XYZ[TEN])[0].display_white_cd_m2
    card, mean_sky = float(found.card_XYZ[TEN, 1]), float(found.sky_XYZ[TEN, 1]) / np.pi
    d65 = np.array([0.3127 / 0.3290, 1, 0.3583 / 0.3290])
    scene, expected = (card, white) if coding in (PQ, HLG) else (mean_sky, white * SURROUND_FACTOR)
    light = coding.light(shown(scene * d65, coding, own, card))
    np.testing.assert_allclose(light, np.full(3, expected), rtol=1e-4)


def test_steps_of_the_sheet_are_those_of_the_gradient(found, sheet):
    """The principal plane at 10° in PQ, from its own light; the sheet has the same numbers, rounded."""
    position = np.linspace(0, 180, 1801)
    XYZ = light_at(found.sky_view(TEN), *PLANE.directions(position))
    signal = PQ.signal(rgb(XYZ, "bt2020") * 203 / found.card_XYZ[TEN, 1])
    own = banding(position, signal, PQ)
    (_, steps), (_, bands) = sheet.step_tables[0], sheet.band_tables[0]
    for i, bits in enumerate(DEPTHS):
        assert cells(steps, f"plane_pq_{bits}_bits_largest_delta_e_itp")[TEN] == pytest.approx(own.largest[i], abs=6e-3)
        pixels = cells(bands, f"plane_pq_{bits}_bits_widest_px_of_1080")[TEN]
        assert pixels == pytest.approx(18 * own.widest[i], abs=0.51), "60° over 1080 lines are 18 to a degree"
    assert cells(steps, "plane_pq_least_bits")[TEN] == own.least_bits
    assert cells(steps, "plane_pq_cut_off_percent")[TEN] == pytest.approx(
        100 * (signal.max(axis=1) > 1).mean(), abs=0.1
    )


def test_two_bits_more_make_steps_a_quarter_as_large(sheet):
    """Nearly, at every sun, on both lines, in every coding.

    A widest band need not shrink: where a gradient turns, it depends on how the turn lies to the thresholds.
    """
    for coded in sheet.coded:
        for found in coded.bandings:
            assert found.largest[0] / found.largest[1] == pytest.approx(4, rel=0.25)
            assert found.largest[1] / found.largest[2] == pytest.approx(4, rel=0.1)
    assert len(sheet.coded) == len(LINES) * len(CODINGS)


def test_least_bits_of_both_gradients(sheet):
    """The larger need of the two, and with it no step of either passes 1."""
    for coding in CODINGS:
        own = [coded for coded in sheet.coded if coded.coding == coding]
        least = sheet.least_bits(coding)
        assert list(least) == [
            max(pair) for pair in zip(*([b.least_bits for b in c.bandings] for c in own), strict=True)
        ]
        step = sheet.largest_step(coding, 10)
        assert ((step <= 1) == (least <= 10)).all()


def test_stops_count_doublings_over_the_peak(found, sheet):
    """Brightest sky and white card against each peak; a share is of the whole sky."""
    for peak in PEAKS_CD_M2:
        own = [reach(found, sun, ("srgb",)).luminance for sun in range(len(SUNS_DEG))]
        stops = cells(sheet.luminance_table, f"brightest_over_{peak:g}_stops")
        np.testing.assert_allclose(2**stops * peak, [one.brightest_cd_m2 for one in own], rtol=0.04)
        stops = cells(sheet.luminance_table, f"white_card_over_{peak:g}_stops")
        np.testing.assert_allclose(2**stops * peak, found.card_XYZ[:, 1], rtol=0.04)
        share = cells(sheet.luminance_table, f"share_above_{peak:g}_percent")
        assert ((share > 0) <= (cells(sheet.luminance_table, f"brightest_over_{peak:g}_stops") > -0.06)).all()
        assert (share <= 100).all()


def test_a_sentence_for_each_gamut_is_true(sheet):
    """It names the space, and says that nothing is outside only where nothing is."""
    assert [text.partition(":")[0] for text in sheet.findings] == ["sRGB", "Display P3", "BT.2020"]
    for text, space in zip(sheet.findings, ("srgb", "display-p3", "bt2020"), strict=True):
        outside = (cells(sheet.gamut_table, f"{space}_beyond_delta_uv") > 0).any()
        assert ("every sky lies inside" in text) == (not outside)


def test_the_joint_table_has_every_column_once(sheet):
    """A row for each sun and a key for each column, which names it in files."""
    keys = [column.key for column in sheet.table.columns]
    assert len(set(keys)) == len(keys) == 15 + 8 + 15 + 2 * len(CODINGS) * 8
    assert [row.labels for row in sheet.table.rows] == [(f"{sun:g}",) for sun in SUNS_DEG]
    parts = [
        sheet.gamut_table,
        sheet.luminance_table,
        *(table for _, table in (*sheet.step_tables, *sheet.band_tables)),
    ]
    assert sum(len(table.columns) for table in parts) == len(keys)


def test_the_zenith_has_no_azimuth(sheet):
    """Where the darkest sky is overhead the cell is empty."""
    up = cells(sheet.luminance_table, "darkest_at_view_elevation_deg")
    around = cells(sheet.luminance_table, "darkest_at_azimuth_deg")
    np.testing.assert_array_equal(np.isnan(around), up == 90)
