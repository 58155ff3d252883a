"""Landmarks of the chromaticity diagram lie where their standards put them."""

import numpy as np

from skychart.charts.diagram import landmarks, uv_of_xy


def test_d65_and_primaries():
    """D65 at u'v' 0.1978, 0.4683 and BT.709 red at 0.4507, 0.5229 (ITU-R BT.709-6 by the CIE 1976 formula)."""
    marks = landmarks()
    np.testing.assert_allclose(marks.d65, (0.1978, 0.4683), atol=5e-5)
    np.testing.assert_allclose(marks.gamuts["srgb"][0], (0.4507, 0.5229), atol=5e-5)


def test_daylight_locus_passes_illuminant_d65_and_d50():
    """D65 at 6504 K and D50 at 5003 K lie on it within half a thousandth (CIE 15)."""
    daylight = landmarks().daylight
    for xy in ((0.31272, 0.32903), (0.34567, 0.35850)):
        v = np.interp(uv_of_xy(np.array(xy))[0], *daylight[::-1].T)
        assert abs(v - uv_of_xy(np.array(xy))[1]) < 5e-4


def test_triangles_and_locus_are_closed():
    """Each ends where it starts."""
    marks = landmarks()
    for curve in (marks.locus, *marks.gamuts.values()):
        np.testing.assert_array_equal(curve[0], curve[-1])
