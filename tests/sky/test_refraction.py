"""Refraction against quadrature of its defining integral; published tables are among the checks."""

import dataclasses

import numpy as np
import pytest
from scipy.integrate import quad

from skychart.sky import Atmosphere
from skychart.sky.refraction import BentRays
from skychart.sky.shells import Shells, level_altitudes, subdivide

RADIUS_KM, HEIGHT_KM, REFRACTIVITY = 6371.0, 8.0, 2.778e-4


@pytest.fixture(scope="module")
def rays() -> BentRays:
    """An exponential air."""
    altitude = np.linspace(0, 100, 101)
    depth = np.diff(1 - np.exp(-altitude / HEIGHT_KM))[:, None]
    air = Atmosphere(altitude, [550.0], depth, 0 * depth, 0.0, 0.0, RADIUS_KM, refractivity=REFRACTIVITY)
    return BentRays.of(Shells.of(air, subdivide(level_altitudes(100, 28), 5)))


def index(altitude: float) -> float:
    """Refractive index of the exponential air."""
    return float(1 + REFRACTIVITY * np.exp(-altitude / HEIGHT_KM))


@pytest.mark.parametrize("elevation", [0.0, 0.5, 2.0, 10.0, 45.0])
def test_refraction_is_the_integral_along_the_ray(rays: BentRays, elevation: float) -> None:
    """Integral of -(dn / n) tan(zenith angle), by adaptive quadrature over altitude, within 0.05 %."""
    constant = index(0) * RADIUS_KM * np.cos(np.radians(elevation))

    def slope(root: float) -> float:
        altitude = root**2
        q = index(altitude) * (RADIUS_KM + altitude)
        fall = REFRACTIVITY / HEIGHT_KM * np.exp(-altitude / HEIGHT_KM) / index(altitude)
        return float(fall * constant / np.sqrt(max(q**2 - constant**2, 1e-30)) * 2 * root)

    expected = quad(slope, 1e-7, 10, limit=400)[0]
    assert float(rays.refraction(0, np.sin(np.radians(elevation)))) == pytest.approx(expected, rel=5e-4)


def test_apparent_and_geometric_places_are_each_others_inverse(rays: BentRays) -> None:
    """At the ground and aloft, down to the grazing ray."""
    for start in (0, 60, 120):
        seen = np.linspace(0, rays.lowest(start) - 1e-6, 200)
        geometric = seen + rays.refraction(start, np.cos(seen))
        np.testing.assert_allclose(rays.apparent(start, geometric), seen, atol=1e-8)


def test_air_that_does_not_refract_leaves_rays_straight() -> None:
    """No refraction, nothing thinned, unstretched altitudes."""
    air = dataclasses.replace(Atmosphere.standard([550.0]), refractivity=0)
    shells = Shells.of(air, level_altitudes(100, 28))
    rays = BentRays.of(shells)
    np.testing.assert_allclose(rays.paths.altitude_km, shells.altitude_km, atol=1e-9)
    assert float(rays.refraction(0, np.array(0.0))) == 0
    assert float(rays.thinned(5, np.array(1.5))) == pytest.approx(1)


def test_bent_horizontal_path_is_longer_than_a_straight_one() -> None:
    """Relative air mass at the horizon: 38.1 bent, about 35.3 straight, for the standard air."""
    air = Atmosphere.standard([550.0], ozone_du=0)
    masses = []
    for one in (air, dataclasses.replace(air, refractivity=0)):
        rays = BentRays.of(Shells.of(one, subdivide(level_altitudes(100, 28), 5)))
        depth, vertical = (rays.depth(0, np.array(cosine))[0] for cosine in (0.0, 1.0))
        masses.append(depth / vertical)
    assert masses[0] == pytest.approx(38.1, abs=0.2)
    assert masses[1] == pytest.approx(35.3, abs=0.3)
