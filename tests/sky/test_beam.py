"""Direct light and the planet's shadow, with straight rays and with bent ones."""

import dataclasses

import numpy as np
import pytest

from skychart.sky import Atmosphere
from skychart.sky.atmosphere import EARTH_RADIUS_KM
from skychart.sky.beam import SunTable, transmission
from skychart.sky.refraction import BentRays
from skychart.sky.shells import Shells, level_altitudes, subdivide

ALTITUDE_KM = subdivide(level_altitudes(100, 28), 3)


@pytest.fixture(scope="module")
def bent() -> Shells:
    """Standard air on fine boundaries."""
    return Shells.of(Atmosphere.standard([400.0, 550.0, 700.0]), ALTITUDE_KM)


@pytest.fixture(scope="module")
def straight() -> Shells:
    """The same air without refraction."""
    air = dataclasses.replace(Atmosphere.standard([400.0, 550.0, 700.0]), refractivity=0)
    return Shells.of(air, ALTITUDE_KM)


def test_overhead_sun_passes_the_vertical_depth(straight: Shells, bent: Shells) -> None:
    """Transmission at the zenith is exp of minus the whole depth; refraction takes (n - 1) twice of it at most."""
    expected = np.exp(-straight.extinction_depth.sum(axis=0))
    np.testing.assert_allclose(transmission(straight, 0, np.array(1.0)), expected, rtol=1e-6)
    np.testing.assert_allclose(transmission(bent, 0, np.array(1.0)), expected, rtol=6e-4)


@pytest.mark.parametrize("kind", ["straight", "bent"])
def test_table_follows_the_direct_computation(kind: str, request: pytest.FixtureRequest) -> None:
    """Within 0.4 % of all light in the lower air and 0.7 % aloft, where the sun grazes; 0.02 % with it 5 degrees up."""
    shells = request.getfixturevalue(kind)
    table = SunTable.of(shells)
    cosine = np.cos(np.radians(np.random.default_rng(3).uniform(0, 99, 400)))
    high = cosine > np.sin(np.radians(5))
    for start, within in ((0, 4e-3), (12, 4e-3), (40, 4e-3), (70, 7e-3)):
        exact = transmission(shells, start, cosine)
        tabulated = table.at(np.array(start), cosine)
        np.testing.assert_allclose(tabulated, exact, rtol=0, atol=within)
        np.testing.assert_allclose(tabulated[high], exact[high], rtol=0, atol=2e-4)


@pytest.mark.parametrize("boundary", [0, 30, 80])
def test_straight_shadow_begins_at_the_geometric_dip(straight: Shells, boundary: int) -> None:
    """A point at altitude z sees the sun down to arccos(R / (R + z)) below its horizontal, and no further."""
    dip = np.arccos(EARTH_RADIUS_KM / (EARTH_RADIUS_KM + straight.altitude_km[boundary]))
    table = SunTable.of(straight)
    before, after = (table.at(np.array(boundary), np.cos(np.pi / 2 + dip + step))[2] for step in (-1e-6, 1e-6))
    assert before > 1e-3
    assert after == 0


def test_refraction_moves_the_edge_of_the_shadow(straight: Shells, bent: Shells) -> None:
    """At the ground by the horizon's refraction; outside the air by twice that, less what Bouguer's law takes back."""
    moved = np.radians(SunTable.of(bent).edge - SunTable.of(straight).edge) / 16
    rays = BentRays.of(bent)
    horizon = float(rays.refraction(0, np.array(0.0)))
    assert moved[0] == pytest.approx(horizon, abs=1e-9)
    ratio = EARTH_RADIUS_KM / (EARTH_RADIUS_KM + bent.altitude_km[-1])
    lifted = np.arccos(ratio) - np.arccos(ratio * (1 + bent.refractivity[0]))
    assert moved[-1] == pytest.approx(2 * horizon - lifted, rel=2e-3)


def test_low_sun_is_weakened_by_its_flattening(straight: Shells, bent: Shells) -> None:
    """The disc keeps its radiance, so its light falls as its height: lower limb on the horizon, and high up."""
    rays = BentRays.of(bent)
    for lower_limb in (np.pi / 2 - 1e-4, np.radians(60.0)):
        true = np.array([0, np.radians(0.533)])
        limbs = rays.apparent(0, lower_limb + rays.refraction(0, np.cos(lower_limb)) - true)
        flattened = (limbs[0] - limbs[1]) / true[1]
        assert float(rays.thinned(0, limbs.mean())) == pytest.approx(flattened, abs=4e-3)
    assert flattened == pytest.approx(1, abs=2e-3)
    assert float(BentRays.of(straight).thinned(0, np.radians(89.0))) == pytest.approx(1, abs=1e-12)


@pytest.mark.parametrize("haze", [None, "average"])
def test_a_table_serves_the_same_air_at_other_wavelengths(haze: str | None) -> None:
    """Transmission within 1e-4 of a table of their own, gases and haze included, from the zenith to the shadow."""
    altitude = subdivide(level_altitudes(100, 28), 2)
    few, many = (
        Shells.of(Atmosphere.standard(nodes, haze=haze), altitude)
        for nodes in (np.arange(380.0, 781, 40), np.arange(360.0, 831, 10))
    )
    boundary, cosine = np.array([[0], [5], [20]]), np.cos(np.radians(np.linspace(0, 95, 200)))
    found = SunTable.of(few).of_depth(many.extinction_depth).at(boundary, cosine)
    np.testing.assert_allclose(found, SunTable.of(many).at(boundary, cosine), atol=1e-4)
