"""Distance from a gamut triangle in u'v', from both sides."""

import numpy as np
import pytest

from skychart.colour.chromaticity import uv_prime, xyz_of_xy
from skychart.colour.observers import D65_XY
from skychart.colour.triangle import distance_beyond, lowest_over_luminance

SRGB_XY = np.array([(0.64, 0.33), (0.30, 0.60), (0.15, 0.06)])


def xyz_of_uv(uv):
    """Tristimulus values of Y = 1 with chromaticity u'v' (CIE 015:2018, equation 8.13)."""
    u, v = np.moveaxis(np.asarray(uv, float), -1, 0)
    x, y = 9 * u / (6 * u - 16 * v + 12), 4 * v / (6 * u - 16 * v + 12)
    return xyz_of_xy(np.stack([x, y], axis=-1))


def test_corners_lie_on_the_triangle():
    """The primaries of sRGB, to 1e-12."""
    assert distance_beyond(xyz_of_xy(SRGB_XY), "srgb") == pytest.approx(np.zeros(3), abs=1e-12)


def test_straight_out_of_an_edge_the_distance_is_the_step():
    """From the middle of each edge of sRGB by 0.01 across it, outward above 0 and inward below 0."""
    corner = uv_prime(xyz_of_xy(SRGB_XY))
    along = np.roll(corner, -1, axis=0) - corner
    middle = corner + along / 2
    across = np.stack([along[:, 1], -along[:, 0]], axis=-1) / np.hypot(*along.T)[:, None]
    outward = across * np.sign(np.sum(across * (middle - corner.mean(axis=0)), axis=-1))[:, None]
    for step in (0.01, -0.01):
        found = distance_beyond(xyz_of_uv(middle + step * outward), "srgb")
        assert found == pytest.approx(np.full(3, step), abs=1e-12)


def test_beyond_a_corner_the_distance_is_to_the_corner():
    """A quarter farther from the middle of the triangle than a corner is."""
    corner = uv_prime(xyz_of_xy(SRGB_XY))
    farther = corner + 0.25 * (corner - corner.mean(axis=0))
    expected = 0.25 * np.hypot(*(corner - corner.mean(axis=0)).T)
    assert distance_beyond(xyz_of_uv(farther), "srgb") == pytest.approx(expected, rel=1e-9)


def test_luminance_does_not_count():
    """The same chromaticity at a thousand times the light."""
    XYZ = xyz_of_xy([(0.16, 0.02), (0.3, 0.3)])
    for measure in (distance_beyond, lowest_over_luminance):
        np.testing.assert_allclose(measure(1000 * XYZ, "bt2020"), measure(XYZ, "bt2020"), rtol=1e-12)


def test_signs_of_both_measures_agree():
    """Outside a component is negative, inside none, for chromaticities all over the diagram and three spaces."""
    xy = np.random.default_rng(2).uniform(0.05, 0.6, (400, 2))
    XYZ = xyz_of_xy(xy[xy.sum(axis=1) < 0.95])
    for space in ("srgb", "display-p3", "bt2020"):
        outside = distance_beyond(XYZ, space) > 0
        assert 20 < outside.sum() < len(XYZ) - 20
        np.testing.assert_array_equal(outside, lowest_over_luminance(XYZ, space) < 0)


def test_white_is_neutral():
    """The lowest component of D65 is its luminance."""
    assert lowest_over_luminance(7 * xyz_of_xy(D65_XY), "srgb") == pytest.approx(1)
