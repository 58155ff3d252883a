"""Rays through the levels: where they cross, and weights that keep light."""

import numpy as np
import pytest

from skychart.sky.atmosphere import EARTH_RADIUS_KM
from skychart.sky.rays import INWARD, OUTWARD, Crossings, crossings
from skychart.sky.shells import Shells, tangent_altitude

from .test_shells import exponential

LEVELS = np.array([0.0, 1, 2, 4, 8, 16, 32, 80])


def follow(start: int, cos_zenith: list[float], absorbing: float = 0.0) -> Crossings:
    """Rays through an exponential air of optical depth 1 to 1 + ``absorbing``."""
    shells = Shells.of(exponential(), LEVELS)
    cosine = np.array(cos_zenith)
    factors = shells.slant_factors(tangent_altitude(LEVELS[start], cosine, EARTH_RADIUS_KM))[..., None]
    scattering = factors * shells.scattering_depth[0]
    return crossings(LEVELS, [scattering], (1 + absorbing) * scattering, start, cosine, EARTH_RADIUS_KM)


def test_each_kind_of_ray_crosses_its_own_levels() -> None:
    """Up: all above. Down to the ground: all below. Between: down to above the tangent point and out again."""
    seen = follow(4, [0.5, -0.5, -0.04])
    assert seen.reached[0, INWARD].sum() == 0
    assert seen.reached[0, OUTWARD].tolist() == [False] * 4 + [True] * 4
    assert seen.reached[1, OUTWARD].sum() == 0
    assert seen.reached[1, INWARD].tolist() == [True] * 5 + [False] * 3
    lowest = np.searchsorted(LEVELS, tangent_altitude(LEVELS[4], -0.04, EARTH_RADIUS_KM))
    assert seen.reached[2, INWARD].tolist() == [lowest <= k <= 4 for k in range(8)]
    assert seen.reached[2, OUTWARD].tolist() == [lowest <= k for k in range(8)]


@pytest.mark.parametrize("cos_zenith", [0.5, 0.0, -0.04, -0.5])
@pytest.mark.parametrize("absorbing", [0.0, 0.7])
def test_a_constant_source_gives_one_minus_transmission(cos_zenith: float, absorbing: float) -> None:
    """The weights of a ray sum to albedo x (1 - exp(-depth)), with the ground's share the rest."""
    seen = follow(4, [cos_zenith], absorbing)
    shells = Shells.of(exponential(), LEVELS)
    factors = shells.slant_factors(tangent_altitude(LEVELS[4], np.array(cos_zenith), EARTH_RADIUS_KM))
    depth = factors * shells.scattering_depth[0][:, 0] * (1 + absorbing)
    strikes = seen.ground[0, 0] > 0
    total = depth[:4].sum() if strikes else depth[4:].sum() + (2 * depth[:4].sum() if cos_zenith < 0 else 0)
    expected = (1 - np.exp(-total)) / (1 + absorbing)
    assert seen.weight[0, 0].sum() == pytest.approx(expected, rel=1e-10)
    assert seen.ground[0, 0] == pytest.approx(np.exp(-total) if strikes else 0.0, rel=1e-10)


def test_turn_is_the_angle_at_the_planets_centre() -> None:
    """Law of sines: radius x sin(turn) = distance x sin(zenith angle); a ray and its mirror turn alike."""
    seen = follow(4, [0.3])
    radius = EARTH_RADIUS_KM + LEVELS
    straight = np.sqrt(radius**2 - (radius[4] * np.sqrt(1 - 0.09)) ** 2)
    travelled = straight - radius[4] * 0.3
    expected = travelled * np.sqrt(1 - 0.09) / radius
    np.testing.assert_allclose(seen.sin_turn[0, OUTWARD, 4:], expected[4:], atol=1e-12)
    np.testing.assert_allclose((seen.sin_turn**2 + seen.cos_turn**2)[seen.reached], 1, atol=1e-9)


def test_from_the_ground_looking_down_the_ground_is_all() -> None:
    """No path, full transmission, no turn."""
    seen = follow(0, [-0.3])
    assert seen.ground[0, 0] == 1
    assert seen.ground_cos_turn[0] == pytest.approx(1)
    assert seen.weight.sum() == 0
