"""Pictures show the sky the right way up, smooth between the nodes and exact on them."""

import numpy as np
import pytest

from skychart.charts.exposure import Exposure
from skychart.charts.survey import RELATIVE_AZIMUTH_DEG, VIEW_ELEVATION_DEG
from skychart.plots.picture import DOME_PIXELS, OVERLAP_PIXELS, RIM_PIXELS, day_band, half_dome, spline

WHITE = Exposure("own", "", 1.0)
D65_XYZ = np.array([0.95047, 1.0, 1.08883])


def test_spline_meets_its_nodes_and_a_straight_line():
    """Values at nodes come back; a straight line stays one."""
    nodes = np.array([0.0, 0.5, 2, 5, 6, 10])
    np.testing.assert_allclose(spline(nodes, nodes), np.eye(6), atol=1e-12)
    fine = np.linspace(0, 10, 41)
    np.testing.assert_allclose(spline(nodes, fine) @ (3 - 2 * nodes), 3 - 2 * fine, atol=1e-12)


def test_spline_with_flat_ends_follows_a_cosine():
    """Zero slope at both ends, as symmetry asks around the sun's vertical: a cosine within 1e-4."""
    degrees = np.linspace(0, 180, 181)
    matrix = spline(RELATIVE_AZIMUTH_DEG, degrees, flat_ends=True)
    found = matrix @ np.cos(np.radians(RELATIVE_AZIMUTH_DEG))
    np.testing.assert_allclose(found, np.cos(np.radians(degrees)), atol=1e-4)


def grid(brightness):
    """A grey sky from `brightness` of (view elevation, azimuth)."""
    values = np.broadcast_to(brightness, (len(VIEW_ELEVATION_DEG), len(RELATIVE_AZIMUTH_DEG)))
    return values[..., None] * D65_XYZ


def test_dome_has_the_sun_at_the_bottom_and_the_surround_outside():
    """Bright toward the sun means bright below; corners are the panels' grey."""
    picture = half_dome(grid(np.where(RELATIVE_AZIMUTH_DEG < 90, 0.9, 0.1)), WHITE)
    assert picture.shape == (DOME_PIXELS, DOME_PIXELS // 2 + OVERLAP_PIXELS, 3)
    assert picture[-20, 3].min() > picture[20, 3].max()
    assert (picture[0, -1] == 0x77).all()
    assert (picture[-1, -1] == 0x77).all()


def test_dome_has_the_zenith_in_the_middle():
    """Elevation falls from the middle of the left edge to the rim, equally fast to all sides."""
    picture = half_dome(grid((VIEW_ELEVATION_DEG[:, None] + 1) / 100), WHITE).astype(int)
    middle, radius = DOME_PIXELS // 2, DOME_PIXELS // 2 - RIM_PIXELS
    assert picture[middle, OVERLAP_PIXELS].max() == picture[..., 1].max()
    below, beside = picture[middle + radius // 2, OVERLAP_PIXELS], picture[middle, OVERLAP_PIXELS + radius // 2]
    assert abs(below - beside).max() <= 1


def test_pixels_on_a_constant_sky_are_constant():
    """No ripple comes from the interpolation."""
    picture = half_dome(grid(0.5), WHITE)
    inside = picture[DOME_PIXELS // 2, : DOME_PIXELS // 2 - RIM_PIXELS]
    assert len(np.unique(inside.reshape(-1, 3), axis=0)) == 1


def test_day_has_a_column_for_each_sun_with_the_horizon_below():
    """Columns have their own exposure; the horizon is the last row."""
    bright_low = (100 - VIEW_ELEVATION_DEG)[:, None] * D65_XYZ / 100
    band = np.stack([bright_low, 1000 * bright_low])
    picture = day_band(band, (WHITE, Exposure("own", "", 1000.0)), column_pixels=4, height=30)
    assert picture.shape == (30, 8, 3)
    assert picture[-1, 0, 1] > picture[0, 0, 1]
    np.testing.assert_array_equal(picture[:, 0], picture[:, 7])


def test_darkness_is_black():
    """A sky without light is drawn, not complained about."""
    assert half_dome(grid(0.0), WHITE)[DOME_PIXELS // 2, 5].max() == 0


@pytest.mark.parametrize("node", [0, 5, 26])
def test_nodes_are_exact_in_the_day(node):
    """At a node of view elevation the pixel is the colour itself."""
    generator = np.random.default_rng(1)
    values = generator.uniform(0.1, 0.9, (1, len(VIEW_ELEVATION_DEG)))[..., None] * D65_XYZ
    picture = day_band(values, (WHITE,), column_pixels=1, height=181)
    row = round(2 * (90 - VIEW_ELEVATION_DEG[node]))
    np.testing.assert_array_equal(picture[row, 0], np.rint(255 * WHITE.screen(values[0, node])))
