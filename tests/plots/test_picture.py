"""Pictures show the sky the right way up, smooth between the nodes and exact on them."""

import numpy as np
import pytest

from skychart.charts.aureole import DISTANCE_DEG
from skychart.charts.exposure import Exposure
from skychart.charts.survey import BELOW_ELEVATION_DEG, RELATIVE_AZIMUTH_DEG, VIEW_ELEVATION_DEG, SkyView
from skychart.plots.picture import DOME_PIXELS, OVERLAP_PIXELS, RIM_PIXELS, day_band, half_dome, half_sky

WHITE = Exposure("own", "", 1.0)
D65_XYZ = np.array([0.95047, 1.0, 1.08883])


def sky(brightness):
    """A grey sky without a sun from `brightness` of (view elevation, azimuth)."""
    values = np.broadcast_to(brightness, (len(VIEW_ELEVATION_DEG), len(RELATIVE_AZIMUTH_DEG)))
    below = np.ones((len(BELOW_ELEVATION_DEG), len(RELATIVE_AZIMUTH_DEG), 3))
    return SkyView(values[..., None] * D65_XYZ, np.full((3, len(DISTANCE_DEG), 3), np.nan), below, -12.0)


def dome(brightness):
    """Picture of such a sky."""
    return half_dome(half_sky(sky(brightness)), WHITE)


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
