"""Direct light and the planet's shadow."""

import numpy as np
import pytest

from skychart.sky import Atmosphere
from skychart.sky.atmosphere import EARTH_RADIUS_KM
from skychart.sky.beam import SunTable, lit, transmission
from skychart.sky.shells import Shells, level_altitudes, subdivide


@pytest.fixture(scope="module")
def shells() -> Shells:
    """Standard air on fine boundaries."""
    return Shells.of(Atmosphere.standard([400.0, 550.0, 700.0]), subdivide(level_altitudes(100, 28), 3))


def test_overhead_sun_passes_the_vertical_depth(shells: Shells) -> None:
    """Transmission at the zenith is exp of minus the whole depth."""
    expected = np.exp(-shells.extinction_depth.sum(axis=0))
    np.testing.assert_allclose(transmission(shells, 0, np.array(1.0)), expected, rtol=1e-12)


def test_table_follows_the_direct_computation(shells: Shells) -> None:
    """Within 0.08 % of all light everywhere, and within 0.02 % while the sun is more than 5 degrees up."""
    table = SunTable.of(shells)
    cosine = np.cos(np.radians(np.random.default_rng(3).uniform(0, 99, 400)))
    for start in (0, 12, 40, 70):
        exact = transmission(shells, start, cosine)
        tabulated = table.at(np.array(start), cosine)
        np.testing.assert_allclose(tabulated, exact, rtol=0, atol=8e-4)
        high = cosine > np.sin(np.radians(5))
        np.testing.assert_allclose(tabulated[high], exact[high], rtol=0, atol=2e-4)


@pytest.mark.parametrize("altitude", [0.0, 10.0, 80.0])
def test_shadow_begins_at_the_geometric_dip(altitude: float) -> None:
    """A point at altitude z sees the sun down to arccos(R / (R + z)) below its horizontal."""
    dip = np.degrees(np.arccos(EARTH_RADIUS_KM / (EARTH_RADIUS_KM + altitude)))
    for beyond, expected in ((-1e-3, True), (1e-3, False)):
        assert lit(altitude, np.cos(np.radians(90 + dip + beyond)), EARTH_RADIUS_KM) == expected


def test_table_cuts_the_shadow_exactly(shells: Shells) -> None:
    """At 700 nm grazing light still passes, and a hair's breadth further none does."""
    table = SunTable.of(shells)
    start = len(shells.altitude_km) - 4
    dip = np.arccos(EARTH_RADIUS_KM / (EARTH_RADIUS_KM + shells.altitude_km[start]))
    before, after = (table.at(np.array(start), np.cos(np.pi / 2 + dip + step))[2] for step in (-1e-7, 1e-7))
    assert before > 1e-3
    assert after == 0
