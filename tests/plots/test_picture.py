"""Pictures show the sky the right way up, smooth between the nodes and exact on them."""

import numpy as np
import pytest

from skychart.charts.aureole import DISTANCE_DEG, arms, distance_and_side
from skychart.charts.exposure import Exposure
from skychart.charts.survey import RELATIVE_AZIMUTH_DEG, VIEW_ELEVATION_DEG, SkyView
from skychart.plots.picture import DOME_PIXELS, OVERLAP_PIXELS, RIM_PIXELS, day_band, half_dome, half_sky, sky_at

WHITE = Exposure("own", "", 1.0)
D65_XYZ = np.array([0.95047, 1.0, 1.08883])


def sky(brightness):
    """A grey sky without a sun from `brightness` of (view elevation, azimuth)."""
    values = np.broadcast_to(brightness, (len(VIEW_ELEVATION_DEG), len(RELATIVE_AZIMUTH_DEG)))
    return SkyView(values[..., None] * D65_XYZ, np.full((3, len(DISTANCE_DEG), 3), np.nan), -12.0)


def dome(brightness):
    """Picture of such a sky."""
    return half_dome(half_sky(sky(brightness)), WHITE)


def glow(sun, view, azimuth):
    """A hazy sky: a narrow bright peak at the sun, less blue near it, over a horizon brighter than the zenith."""
    distance, _ = distance_and_side(sun, np.asarray(view, float), np.asarray(azimuth, float))
    log = 1.5 * np.exp(-distance / 3) + 1.5 * np.exp(-distance / 20) - 0.01 * np.asarray(view)
    return np.exp(log[..., None] * np.array([1.0, 1.0, 0.9]))


def glowing(sun):
    """The same as a survey knows it."""
    view, azimuth = arms(sun)
    return SkyView(glow(sun, VIEW_ELEVATION_DEG[:, None], RELATIVE_AZIMUTH_DEG), glow(sun, view, azimuth), sun)


@pytest.mark.parametrize("sun", [0.5, 3.2, 10.0, 27.3, 50.0, 75.0, 90.0])
def test_the_aureole_is_right_between_the_nodes(sun):
    """At 1, 2, 5 and 10 degrees from the sun to every side within 2 %, of a peak twenty times as bright as the sky."""
    distance, turn = np.meshgrid(np.radians([1.0, 2, 5, 10]), np.radians(np.arange(0, 181, 15.0)))
    view = np.degrees(np.arcsin(
        np.sin(np.radians(sun)) * np.cos(distance) + np.cos(np.radians(sun)) * np.sin(distance) * np.cos(turn)
    ))  # fmt: skip
    azimuth = np.degrees(np.arctan2(
        np.sin(distance) * np.sin(turn),
        np.cos(np.radians(sun)) * np.cos(distance) - np.sin(np.radians(sun)) * np.sin(distance) * np.cos(turn),
    ))  # fmt: skip
    up = view >= 0
    found = sky_at(glowing(sun), view[up], azimuth[up])
    np.testing.assert_allclose(found, glow(sun, view[up], azimuth[up]), rtol=0.02)


@pytest.mark.parametrize("sun", [0.5, 10.0, 50.0])
def test_the_aureole_falls_without_steps(sun):
    """Going away from the sun, upward, the sky darkens at every quarter degree, and its slope never jumps."""
    away = np.arange(0.25, 30, 0.25)
    log = np.log(sky_at(glowing(sun), sun + away, np.zeros_like(away))[:, 1])
    assert np.all(np.diff(log) < 0)
    assert np.abs(np.diff(log, 2)).max() < 0.03


def test_dome_has_the_sun_at_the_bottom_and_the_surround_outside():
    """Bright toward the sun means bright below; corners are the panels' grey."""
    picture = dome(np.where(RELATIVE_AZIMUTH_DEG < 90, 0.9, 0.1))
    assert picture.shape == (DOME_PIXELS, DOME_PIXELS // 2 + OVERLAP_PIXELS, 3)
    assert picture[-20, 3].min() > picture[20, 3].max()
    assert (picture[0, -1] == 0x77).all()
    assert (picture[-1, -1] == 0x77).all()


def test_dome_has_the_zenith_in_the_middle():
    """Elevation falls from the middle of the left edge to the rim, equally fast to all sides."""
    picture = dome((VIEW_ELEVATION_DEG[:, None] + 1) / 100).astype(int)
    middle, radius = DOME_PIXELS // 2, DOME_PIXELS // 2 - RIM_PIXELS
    assert picture[middle, OVERLAP_PIXELS].max() == picture[..., 1].max()
    below, beside = picture[middle + radius // 2, OVERLAP_PIXELS], picture[middle, OVERLAP_PIXELS + radius // 2]
    assert abs(below - beside).max() <= 1


def test_pixels_on_a_constant_sky_are_constant():
    """No ripple comes from the interpolation."""
    picture = dome(0.5)
    inside = picture[DOME_PIXELS // 2, : DOME_PIXELS // 2 - RIM_PIXELS]
    assert len(np.unique(inside.reshape(-1, 3), axis=0)) == 1


def test_day_has_a_column_for_each_sun_with_the_horizon_below():
    """Columns have their own exposure; the horizon is the last row."""
    bright_low = (100 - VIEW_ELEVATION_DEG)[:, None] / 100
    skies = sky(bright_low), sky(1000 * bright_low)
    picture = day_band(skies, 0.0, (WHITE, Exposure("own", "", 1000.0)), column_pixels=4, height=30)
    assert picture.shape == (30, 8, 3)
    assert picture[-1, 0, 1] > picture[0, 0, 1]
    np.testing.assert_array_equal(picture[:, 0], picture[:, 7])


def test_darkness_is_black():
    """A sky without light is drawn, not complained about."""
    assert dome(0.0)[DOME_PIXELS // 2, 5].max() == 0


@pytest.mark.parametrize("node", [0, 5, 26])
def test_nodes_are_exact_in_the_day(node):
    """At a node of view elevation the pixel is the colour itself."""
    generator = np.random.default_rng(1)
    values = generator.uniform(0.1, 0.9, (len(VIEW_ELEVATION_DEG), len(RELATIVE_AZIMUTH_DEG)))
    picture = day_band((sky(values),), 90.0, (WHITE,), column_pixels=1, height=181)
    row = round(2 * (90 - VIEW_ELEVATION_DEG[node]))
    expected = np.rint(255 * WHITE.screen(values[node, list(RELATIVE_AZIMUTH_DEG).index(90)] * D65_XYZ))
    np.testing.assert_array_equal(picture[row, 0], expected)
