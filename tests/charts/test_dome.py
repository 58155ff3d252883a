"""Light from all around is smooth between the directions that were surveyed, and exact on them."""

import numpy as np
import pytest

from skychart.charts.aureole import arms, distance_and_side
from skychart.charts.dome import light_at, sky_at
from skychart.charts.survey import BELOW_ELEVATION_DEG, RELATIVE_AZIMUTH_DEG, VIEW_ELEVATION_DEG, SkyView


def glow(sun, view, azimuth):
    """A hazy sky: a narrow bright peak at the sun, less blue near it, over a horizon brighter than the zenith.

    Rounded within half a degree and falling by half in the first one, as the solved sky with clean haze does.
    """
    distance, _ = distance_and_side(sun, np.asarray(view, float), np.asarray(azimuth, float))
    core = 0.5 / (1 + (distance / 0.6) ** 2)
    log = core + 1.2 * np.exp(-distance / 3) + 1.4 * np.exp(-distance / 20) - 0.01 * np.asarray(view)
    return np.exp(log[..., None] * np.array([1.0, 1.0, 0.9]))


def glowing(sun):
    """The same as a survey knows it."""
    view, azimuth = arms(sun)
    below = glow(sun, BELOW_ELEVATION_DEG[:, None], RELATIVE_AZIMUTH_DEG)
    return SkyView(glow(sun, VIEW_ELEVATION_DEG[:, None], RELATIVE_AZIMUTH_DEG), glow(sun, view, azimuth), below, sun)


@pytest.mark.parametrize("sun", [0.5, 3.2, 10.0, 27.3, 50.0, 75.0, 90.0])
def test_the_aureole_is_right_between_the_nodes(sun):
    """From 0.1 to 10 degrees from the sun to every side within 2 %, of a peak twenty times as bright as the sky."""
    away = [0.1, 0.2, 0.35, 0.5, 0.7, 1, 1.5, 2, 3, 5, 7, 10]
    distance, turn = np.meshgrid(np.radians(away), np.radians(np.arange(0, 181, 15.0)))
    view = np.degrees(np.arcsin(
        np.sin(np.radians(sun)) * np.cos(distance) + np.cos(np.radians(sun)) * np.sin(distance) * np.cos(turn)
    ))  # fmt: skip
    azimuth = np.degrees(np.arctan2(
        np.sin(distance) * np.sin(turn),
        np.cos(np.radians(sun)) * np.cos(distance) - np.sin(np.radians(sun)) * np.sin(distance) * np.cos(turn),
    ))  # fmt: skip
    up = view >= 0
    found = sky_at(glowing(sun), view[up], azimuth[up])
    np.testing.assert_allclose(found, glow(sun, view[up], azimuth[up]), rtol=0.02)


@pytest.mark.parametrize("sun", [0.5, 10.0, 50.0])
def test_the_aureole_falls_without_steps(sun):
    """Going away from the sun, upward, it darkens at every quarter degree, and its slope bends as that of the sky."""
    away = np.arange(0.25, 30, 0.25)
    toward = np.zeros_like(away)
    log, own = (np.log(light[:, 1]) for light in (sky_at(glowing(sun), sun + away, toward), glow(sun, sun + away, 0.0)))
    assert np.all(np.diff(log) < 0)
    assert np.abs(np.diff(log - own, 2)).max() < 0.01


def test_all_around_is_the_sky_above_and_the_ground_below():
    """One question for both, the nodes of either met exactly; azimuths that name one direction get one answer."""
    view = glowing(10.0)
    elevation = np.array([90.0, 30, 0, -0.5, -5, -90])[:, None]
    found = light_at(view, elevation, RELATIVE_AZIMUTH_DEG)
    np.testing.assert_allclose(found[:3], sky_at(view, elevation[:3], RELATIVE_AZIMUTH_DEG))
    rows = [int(np.flatnonzero(row == BELOW_ELEVATION_DEG)[0]) for row in (-0.5, -5, -90)]
    whole = RELATIVE_AZIMUTH_DEG % 1 == 0
    np.testing.assert_allclose(found[3:, whole], view.below_XYZ[rows][:, whole], rtol=5e-3)
    for turned in (-RELATIVE_AZIMUTH_DEG, 360 - RELATIVE_AZIMUTH_DEG):
        np.testing.assert_allclose(light_at(view, elevation, turned), found, rtol=1e-9)
