"""Chromaticity coordinates against published illuminants, from deep night to the solar disc."""

import numpy as np
import pytest

from skychart.colour.chromaticity import uv_1960, uv_prime, xy, xyz_of_xy
from skychart.library import colour_science

# CIE 015: chromaticities of D65, A and D50 (xy), and of D65 in u'v'.
D65, A, D50 = (0.31272, 0.32903), (0.44758, 0.40745), (0.34567, 0.35851)


def test_d65_has_its_published_chromaticities() -> None:
    """CIE 015 gives u' 0.1978, v' 0.4683 for (0.31272, 0.32903)."""
    XYZ = xyz_of_xy(D65)
    np.testing.assert_allclose(xy(XYZ), D65, atol=1e-12)
    np.testing.assert_allclose(uv_prime(XYZ), [0.1978, 0.4683], atol=5e-5)
    np.testing.assert_allclose(uv_1960(XYZ), [0.1978, 0.3122], atol=5e-5)


def test_coordinates_equal_those_of_the_library_on_a_grid() -> None:
    """Any shape, all of the positive octant."""
    colour = colour_science()
    XYZ = np.random.default_rng(2).uniform(0.01, 1, (4, 25, 3))
    np.testing.assert_allclose(xy(XYZ), colour.XYZ_to_xy(XYZ), rtol=1e-12)
    np.testing.assert_allclose(uv_prime(XYZ), colour.xy_to_Luv_uv(colour.XYZ_to_xy(XYZ)), rtol=1e-12)


@pytest.mark.parametrize("scale", [5e-324, 1e-300, 1e-9, 1.0, 2e9, 1e300])
def test_chromaticity_does_not_depend_on_brightness(scale: float) -> None:
    """The smallest and nearly the largest number included."""
    XYZ = np.array([1.0, 1.0, 1.0]) * scale
    np.testing.assert_allclose(xy(XYZ), [1 / 3, 1 / 3], rtol=1e-12)
    np.testing.assert_allclose(uv_prime(XYZ), [4 / 19, 9 / 19], rtol=1e-12)


@pytest.mark.parametrize("function", [xy, uv_prime, uv_1960])
def test_darkness_has_no_chromaticity(function: type[xy]) -> None:
    """nan, without a warning, and only where it is dark."""
    chromaticities = function([[0, 0, 0], [1, 1, 1], [-1, -1, -1]])
    np.testing.assert_array_equal(np.isnan(chromaticities), [[True, True], [False, False], [True, True]])
