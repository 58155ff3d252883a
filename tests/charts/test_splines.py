"""Splines go through their nodes and follow smooth curves."""

import numpy as np

from skychart.charts.splines import spline
from skychart.charts.survey import RELATIVE_AZIMUTH_DEG


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
