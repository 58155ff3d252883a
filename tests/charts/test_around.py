"""Directions all around measure solid angles and half-spaces as they are."""

import numpy as np
import pytest

from skychart.charts.around import directions_around, unit_vectors

SUNS_DEG = (-11.5, -0.4, 0.3, 5.2, 30.0, 61.0, 75.0, 90.0)
MIRRORED = np.array([1, -1, 1])


def whole_sphere(sun):
    """Vectors and solid angles of both halves."""
    around = directions_around(sun)
    vectors = np.concatenate([around.vectors, around.vectors * MIRRORED])
    return vectors, np.tile(around.solid_angle_sr, 2)


@pytest.mark.parametrize("sun", SUNS_DEG)
def test_the_sphere_is_whole(sun):
    """4 π sr, evenly about every axis: no first moment, and a third of the sphere in each second moment."""
    vectors, solid_angle = whole_sphere(sun)
    assert solid_angle.sum() == pytest.approx(4 * np.pi, rel=1e-9)
    np.testing.assert_allclose(solid_angle @ vectors, 0, atol=1e-6)
    np.testing.assert_allclose(vectors.T * solid_angle @ vectors, 4 * np.pi / 3 * np.eye(3), atol=1e-5)


@pytest.mark.parametrize("sun", SUNS_DEG)
def test_no_half_space_of_a_wall_or_of_the_sun_is_cut_roughly(sun):
    """The cosine over the half-space before each plane sums to π within 0.001 %, as that of a level plane does."""
    vectors, solid_angle = whole_sphere(sun)
    normals = unit_vectors(np.array([sun, 90, 0, 0, 0, -90]), np.array([0, 0, 0, 90, 180, 0]))
    np.testing.assert_allclose(solid_angle @ np.maximum(vectors @ normals.T, 0), np.pi, rtol=1e-5)


@pytest.mark.parametrize("sun", SUNS_DEG)
def test_directions_lie_inside(sun):
    """None on the horizon itself, so that each is sky or ground; azimuths of one half only."""
    around = directions_around(sun)
    assert np.all(around.solid_angle_sr >= 0)
    assert np.abs(around.elevation_deg).min() > 1e-3
    assert around.azimuth_deg.min() >= 0
    assert around.azimuth_deg.max() <= 180
    assert len(around.azimuth_deg) < 5000


def test_axes():
    """x toward the sun's azimuth, y at azimuth 90, z up."""
    np.testing.assert_allclose(unit_vectors([0, 0, 90], [0, 90, 0]), np.eye(3), atol=1e-12)
