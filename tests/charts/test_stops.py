"""Gradient stops of a sheet: the errors they claim, taken again by another way."""

import numpy as np
import pytest

from skychart.charts.dome import light_at
from skychart.charts.exposure import exposures
from skychart.charts.lines import BESIDE, PLANE
from skychart.charts.stops import COUNTS, positions, scaled_down, sheet_stops
from skychart.colour.adapt import balance
from skychart.colour.chromaticity import xyz_of_xy
from skychart.colour.differences import delta_e_2000, delta_e_itp
from skychart.colour.observers import D65_XY
from skychart.colour.spaces import rgb
from skychart.export.tables import table_csv

from .conftest import SUNS_DEG

SUNS = [SUNS_DEG.index(sun) for sun in (-8.0, 0.0, 10.0, 45.0)]


@pytest.fixture(scope="module")
def sheets(found):
    """Stops of four suns."""
    return {sun: sheet_stops(found, sun) for sun in SUNS}


@pytest.mark.parametrize("sun", SUNS)
def test_reported_errors_are_those_of_a_dense_evaluation(found, sheets, sun):
    """The largest of 18 001 places is the reported one or at most 1 % more, for CIEDE2000; ΔE_ITP within 1 %."""
    white = exposures(found.sky_XYZ[sun], found.card_XYZ[sun])[0].display_white_cd_m2
    d65 = white * xyz_of_xy(D65_XY)

    def shown(XYZ):
        top = rgb(XYZ, "srgb").max(axis=-1, keepdims=True)
        return np.where(top > white, XYZ * white / np.where(top > white, top, 1), XYZ)

    for gradient in sheets[sun].gradients:
        assert [stops.count for stops in gradient.sets] == list(COUNTS)
        for stops in gradient.sets:
            place = np.union1d(np.linspace(0, gradient.line.end_deg, 18_001), stops.position_deg)
            XYZ = light_at(found.sky_view(sun), *gradient.line.directions(place))
            straight = np.stack([np.interp(place, stops.position_deg, axis) for axis in stops.XYZ.T], axis=-1)
            errors = delta_e_2000(shown(straight), shown(XYZ), d65)
            assert stops.delta_e_2000 <= errors.max() * (1 + 1e-9) <= 1.01 * stops.delta_e_2000
            assert stops.delta_e_itp == pytest.approx(delta_e_itp(straight, XYZ).max(), rel=0.01)


@pytest.mark.parametrize("sun", SUNS)
def test_more_stops_are_never_worse(sheets, sun):
    """8 never worse than 5, nor 5 than 3; and the fewest for ΔE2000 1 fit in between."""
    for gradient in sheets[sun].gradients:
        errors = [stops.delta_e_2000 for stops in gradient.sets]
        assert errors[0] >= errors[1] >= errors[2] > 0
        for stops in gradient.sets:
            if gradient.fewest is None or gradient.fewest > stops.count:
                assert stops.delta_e_2000 > 1
            if gradient.fewest is not None and gradient.fewest <= stops.count:
                assert stops.delta_e_2000 <= 1.03, "between the half degrees that are judged there may be a little more"


@pytest.mark.parametrize("sun", SUNS)
def test_stops_have_the_skys_own_colours_and_hold_both_ends(found, sheets, sun):
    """Ascending places from end to end; colours those of the sky there; the zenith is the same on both lines."""
    for gradient in sheets[sun].gradients:
        for stops in gradient.sets:
            assert (np.diff(stops.position_deg) > 0).all()
            assert stops.position_deg[0] == 0
            assert stops.position_deg[-1] == gradient.line.end_deg
            own = light_at(found.sky_view(sun), *gradient.line.directions(stops.position_deg))
            np.testing.assert_allclose(stops.XYZ, own)


def test_a_file_has_every_stop_over_the_white_card(found, sheets):
    """Two lines of 16 stops; sRGB times the card is the light of the stop, to four digits."""
    sun = SUNS[2]
    lines = table_csv(sheets[sun].table, ()).decode("utf-8").splitlines()
    names, *rows = (line.split(",") for line in lines)
    assert len(rows) == 32
    sets = [stops for gradient in sheets[sun].gradients for stops in gradient.sets]
    light = rgb(np.concatenate([stops.XYZ for stops in sets]), "srgb")
    printed = np.array([[float(row[names.index(f"srgb_{part}")]) for part in "rgb"] for row in rows])
    np.testing.assert_allclose(printed * found.card_XYZ[sun, 1], light, rtol=6e-4)
    assert {row[0] for row in rows} == {"plane", "beside"}
    assert all(row[names.index("azimuth_deg")] == "90" for row in rows if row[0] == "beside")


def test_over_range_colours_keep_their_chromaticity():
    """Brought to where the largest sRGB component is the white, others left alone."""
    XYZ = np.array([[50.0, 60, 70], [500, 600, 300]])
    down = scaled_down(XYZ, 100.0)
    np.testing.assert_array_equal(down[0], XYZ[0])
    assert rgb(down[1], "srgb").max() == pytest.approx(100)
    np.testing.assert_allclose(down[1] / down[1].sum(), XYZ[1] / XYZ[1].sum())


def test_places_hold_the_sun_and_the_low_half_degrees():
    """A stop may stand at the sun; the vertical beside it knows no sun; all stops are places that are judged."""
    place, node = positions(PLANE, 20.0432)
    assert {0.0, 0.5, 4.5, 20.04, 90.0, 179.5, 180.0} <= set(place[node])
    assert 5.5 not in place[node]
    assert len(place) > 1.9 * len(node)
    place, node = positions(BESIDE, 20.0432)
    assert 20.04 not in place
    assert place[-1] == 90


def test_places_are_told_as_view_elevation_and_side():
    """Up to the zenith on the sun's side, then down on the other."""
    assert [PLANE.label(at) for at in (0.0, 4.5, 90.0, 150.0)] == ["0° toward", "4.5° toward", "zenith", "30° away"]
    assert [BESIDE.label(at) for at in (0.0, 90.0)] == ["0°", "zenith"]
    elevation, azimuth = PLANE.directions(np.array([10.0, 90, 170]))
    np.testing.assert_array_equal(elevation, [10, 90, 10])
    np.testing.assert_array_equal(azimuth, [0, 0, 180])


def test_balance_is_not_applied(found, sheets):
    """Stops are unadapted: under a coloured card the balanced colours would differ."""
    stops = sheets[SUNS[2]].gradients[0].sets[0]
    assert np.abs(balance(stops.XYZ, found.card_XYZ[SUNS[2]]) / stops.XYZ - 1).max() > 0.01
