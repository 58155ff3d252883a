"""Light from all around is smooth between the directions that were surveyed, and exact on them."""

import numpy as np
import pytest

from skychart.charts.aureole import arms, distance_and_side
from skychart.charts.dome import light_at, sky_at
from skychart.charts.survey import BELOW_ELEVATION_DEG, RELATIVE_AZIMUTH_DEG, VIEW_ELEVATION_DEG, SkyView


def glow(sun, view, azimuth):
    """A hazy sky: a narrow bright peak at the sun, less blue near it, over a horizon brighter than the zenith."""
    distance, _ = distance_and_side(sun, np.asarray(view, float), np.asarray(azimuth, float))
    log = 1.5 * np.exp(-distance / 3) + 1.5 * np.exp(-distance / 20) - 0.01 * np.asarray(view)
    return np.exp(log[..., None] * np.array([1.0, 1.0, 0.9]))


def glowing(sun):
    """The same as a survey knows it."""
    view, azimuth = arms(sun)
    below = glow(sun, BELOW_ELEVATION_DEG[:, None], RELATIVE_AZIMUTH_DEG)
    return SkyView(glow(sun, VIEW_ELEVATION_DEG[:, None], RELATIVE_AZIMUTH_DEG), glow(sun, view, azimuth), below, sun)


@pytest.mark.parametrize("sun", [0.5, 3.2, 10.0, 27.3, 50.0, 75.0, 90.0])
def test_the_aureole_is_right_between_the_nodes(sun):
    """At 1, 2, 5 and 10 degrees from the sun to every side within 2 %, of a peak twenty times as bright as the sky."""
    distance, turn = np.meshgrid(np.radians([1.0, 2, 5, 10]), np.radians(np.arange(0, 181, 15.0)))
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
    """Going away from the sun, upward, the sky darkens at every quarter degree, and its slope never jumps."""
    away = np.arange(0.25, 30, 0.25)
    log = np.log(sky_at(glowing(sun), sun + away, np.zeros_like(away))[:, 1])
    assert np.all(np.diff(log) < 0)
    assert np.abs(np.diff(log, 2)).max() < 0.03


def test_all_around_is_the_sky_above_and_the_ground_below():
    """One question for both, the nodes of either met exactly; azimuths that name one direction get one answer."""
    view = glowing(10.0)
    elevation = np.array([90.0, 30, 0, -0.5, -5, -90])[:, None]
    found = light_at(view, elevation, RELATIVE_AZIMUTH_DEG)
    np.testing.assert_allclose(found[:3], sky_at(view, elevation[:3], RELATIVE_AZIMUTH_DEG))
    rows = [int(np.flatnonzero(row == BELOW_ELEVATION_DEG)[0]) for row in (-0.5, -5, -90)]
    np.testing.assert_allclose(found[3:, ::2], view.below_XYZ[rows][:, ::2], rtol=5e-3)
    for turned in (-RELATIVE_AZIMUTH_DEG, 360 - RELATIVE_AZIMUTH_DEG):
        np.testing.assert_allclose(light_at(view, elevation, turned), found, rtol=1e-9)
