"""Lines of water and oxygen along the paths of the sky's light."""

import numpy as np
import pytest

from skychart.sky import Atmosphere, gases
from skychart.sky.line_paths import LinePaths
from skychart.sky.lines import band_transmission
from skychart.sky.observer import Station
from skychart.sky.shells import level_altitudes, subdivide
from skychart.sky.sight import Lines

NODES_NM = np.arange(360.0, 831.0, 10.0)
WATER_CM = 1.42


@pytest.fixture(scope="module")
def paths() -> LinePaths:
    """Standard air and water, seen from the ground."""
    air = Atmosphere.standard(NODES_NM)
    station = Station.of(air, subdivide(level_altitudes(100, 28), 5))
    return LinePaths.of(station, NODES_NM, WATER_CM, 1013.25)


def test_amounts_above_the_ground_are_the_whole_columns(paths: LinePaths) -> None:
    """All the water and one air mass of oxygen."""
    np.testing.assert_allclose(paths.layers.sum(axis=0), [WATER_CM, 1], rtol=1e-3)


def test_overhead_sun_passes_one_column(paths: LinePaths) -> None:
    """What lines leave of the zenith sun is the band transmission of the vertical amounts."""
    expected = band_transmission(NODES_NM, WATER_CM, 1.0)
    np.testing.assert_allclose(paths.beam(np.array(0.0)), expected, atol=2e-4)


def test_lines_weaken_only_their_own_wavelengths(paths: LinePaths) -> None:
    """Some is always left, never more than all; nothing is lost where no line lies, more the lower one looks."""
    lines = Lines(np.radians([30.0, 60, 85, 97]), np.cos(np.radians([0.0, 60, 80, 88])), np.radians([0.0, 90, 180, 20]))
    left, _ = paths.left(lines)
    assert left.shape == (4, 48)
    assert np.all((left > 0) & (left <= 1))
    bare = band_transmission(NODES_NM, 0, 0) == band_transmission(NODES_NM, 2, 2)
    assert bare.any()
    np.testing.assert_array_equal(left[:, bare], 1)
    oxygen = np.argmin(np.abs(NODES_NM - 760))
    assert np.all(np.diff(left[:3, oxygen]) < 0)


def test_unlit_sight_has_its_own_lines() -> None:
    """Where no light is scattered once, what is left is the transmission of the line of sight to space."""
    air = Atmosphere.standard(NODES_NM)
    station = Station.of(air, level_altitudes(100, 28))
    paths = LinePaths.of(station, NODES_NM, WATER_CM, 1013.25)
    away = Lines(np.radians([113.0]), np.array([1.0]), np.radians([180.0]))
    expected = band_transmission(NODES_NM, WATER_CM, 1.0)
    for left in paths.left(away):
        np.testing.assert_allclose(left[0], expected, atol=2e-4)


def test_water_lies_low() -> None:
    """Half of the water is below 2 km, so an observer at 3 km has little of it above."""
    altitude = np.array([0.0, 2, 3, 100])
    share = gases.water_layers(altitude, 1.0)
    assert share[0] > 0.5
    assert share[2] < 0.3
