"""Spherical shells: geometry of straight rays and columns along them."""

import numpy as np
import pytest
from scipy.integrate import quad

from skychart.sky.atmosphere import EARTH_RADIUS_KM, Atmosphere
from skychart.sky.shells import Shells, distance_from_tangent, level_altitudes, subdivide, tangent_altitude

HEIGHT_KM = 8.0


def exponential(radius_km: float = EARTH_RADIUS_KM, top_km: float = 80.0) -> Atmosphere:
    """One unit of optical depth of an exponential air, in layers of 1 km."""
    altitude = np.linspace(0, top_km, int(top_km) + 1)
    below = 1 - np.exp(-altitude / HEIGHT_KM)
    depth = np.diff(below)[:, None] / below[-1]
    return Atmosphere(altitude, np.array([500.0]), depth, 0 * depth, 0.0, 0.0, radius_km)


@pytest.fixture(scope="module")
def shells() -> Shells:
    """The exponential air on fine boundaries."""
    return Shells.of(exponential(), subdivide(level_altitudes(80, 28), 5))


def test_redistribution_keeps_the_whole_depth(shells: Shells) -> None:
    """What is spread over the solver's layers is what the air held; each layer holds its share within 0.4 %."""
    assert shells.scattering_depth[0].sum() == pytest.approx(1, rel=1e-12)
    edges = np.exp(-shells.altitude_km / HEIGHT_KM)
    share = -np.diff(edges) / (1 - edges[-1])
    np.testing.assert_allclose(shells.scattering_depth[0][:, 0], share, rtol=4e-3)


@pytest.mark.parametrize("cos_zenith", [1.0, 0.5, 0.1, 0.02, 0.0])
def test_slant_column_of_an_exponential_air(shells: Shells, cos_zenith: float) -> None:
    """Against adaptive quadrature of the density along the straight ray, within 0.1 %."""
    radius = EARTH_RADIUS_KM

    def density(distance: float) -> float:
        altitude = np.sqrt(radius**2 + distance**2 + 2 * radius * distance * cos_zenith) - radius
        return float(np.exp(-altitude / HEIGHT_KM))

    end = distance_from_tangent(80.0, tangent_altitude(0.0, cos_zenith, radius), radius) - radius * cos_zenith
    expected = quad(density, 0, end, limit=200)[0] / quad(lambda z: np.exp(-z / HEIGHT_KM), 0, 80)[0]
    factors = shells.slant_factors(tangent_altitude(0.0, np.array(cos_zenith), radius))
    assert (factors @ shells.scattering_depth[0])[0] == pytest.approx(expected, rel=1e-3)


def test_layers_below_the_tangent_point_are_not_crossed(shells: Shells) -> None:
    """Their slant factor is zero; the layer that holds the tangent point is crossed in part."""
    tangent = 10.3
    factors = shells.slant_factors(np.array(tangent))
    assert np.all(factors[shells.altitude_km[1:] <= tangent] == 0)
    assert np.all(factors[shells.altitude_km[1:] > tangent] > 1)


def test_a_huge_planet_is_flat() -> None:
    """On a planet a thousand times the earth's size slant factors are secants, to seven digits near the zenith."""
    shells = Shells.of(exponential(EARTH_RADIUS_KM * 1000), level_altitudes(80, 28))
    for cosine in (1.0, 0.5, 0.2):
        factors = shells.slant_factors(tangent_altitude(0.0, np.array(cosine), shells.planet_radius_km))
        np.testing.assert_allclose(factors, 1 / cosine, rtol=4e-4 if cosine < 0.5 else 5e-5)


def test_levels_start_at_the_ground_and_end_at_the_top() -> None:
    """One level above 80 km when the air goes on; subdivision keeps them in place."""
    levels = level_altitudes(100, 28)
    assert (levels[0], levels[-2], levels[-1], len(levels)) == (0, 80, 100, 28)
    assert np.all(np.diff(levels) > 0)
    np.testing.assert_array_equal(subdivide(levels, 5)[::5], levels)
