"""Arms around the sun lie where they say, and the peak they give is one."""

import numpy as np
import pytest

from skychart.charts.aureole import ARMS, DISTANCE_DEG, along_distance, arms, distance_and_side, peak, toward_arms


@pytest.mark.parametrize("sun", [-5.0, -0.3, 0.0, 0.5, 3.0, 20.0, 62.0, 75.0, 90.0])
def test_arms_are_as_far_from_the_sun_as_they_say(sun):
    """Every direction of an arm has its distance; none lies below the horizon."""
    view, azimuth = arms(sun)
    seen = np.isfinite(view)
    np.testing.assert_array_equal(seen, np.isfinite(azimuth))
    distance, _ = distance_and_side(sun, view[seen], azimuth[seen])
    np.testing.assert_allclose(distance, np.broadcast_to(DISTANCE_DEG, view.shape)[seen], atol=1e-5)
    assert seen[ARMS.index("up")].all() == (sun >= 0)
    assert seen[:2, -1].all(), "far from the sun there is always sky, above it and beside"
    assert np.all((view[seen] >= 0) & (view[seen] <= 90))
    assert np.all((azimuth[seen] >= 0) & (azimuth[seen] <= 180))


@pytest.mark.parametrize("sun", [2.0, 30.0, 70.0])
def test_arms_leave_the_sun_in_three_directions(sun):
    """Up is straight up, beside nearly at right angles to it, down the opposite of up."""
    view, azimuth = arms(sun)
    _, side = distance_and_side(sun, view[:, 1:], azimuth[:, 1:])
    for row, seen, expected, within in zip(side, np.isfinite(view[:, 1:]), (1, 0, -1), (1e-6, 0.15, 1e-6), strict=True):
        assert seen.any()
        np.testing.assert_allclose(row[seen], expected, atol=within)


def test_deep_below_the_horizon_there_is_no_peak():
    """The arms of a sun at -8 degrees see nothing."""
    assert not np.isfinite(arms(-8.0)[0]).any()


def test_the_peak_ends_flat_and_keeps_what_is_narrow():
    """A parabola is no peak; an exponential one stays, and ends at nothing."""
    smooth = np.broadcast_to((3 - 1e-3 * DISTANCE_DEG**2)[:, None], (3, len(DISTANCE_DEG), 3))
    np.testing.assert_allclose(peak(20.0, smooth).values, 0, atol=1e-12)
    narrow = smooth + 4 * np.exp(-DISTANCE_DEG / 3)[:, None]
    found = peak(20.0, narrow).values
    assert found[-1] == pytest.approx(0)
    np.testing.assert_allclose(found[:5], np.broadcast_to(4 * np.exp(-DISTANCE_DEG[:5] / 3)[:, None], (5, 3)), atol=0.1)


def test_nodes_come_back_along_an_arm():
    """At its distances an arm has its own values, beyond the last it is held; each arm in its own direction."""
    values = np.random.default_rng(3).uniform(0, 1, (3, len(DISTANCE_DEG), 3))
    values[:, 0] = values[0, 0]
    np.testing.assert_allclose(along_distance(values[0], DISTANCE_DEG), values[0], atol=0.01)
    np.testing.assert_allclose(along_distance(values[0], np.array([90.0]))[0], values[0, -1])
    for arm, side in enumerate((1.0, 0.0, -1.0)):
        found = toward_arms(values, DISTANCE_DEG, np.full(len(DISTANCE_DEG), side))
        np.testing.assert_allclose(found, values[arm], atol=0.01)


def test_a_short_arm_is_held_and_a_blind_one_is_like_the_one_beside():
    """Near the horizon the arm down ends early; where it sees nothing at all it takes its neighbour's values."""
    values = np.ones((3, len(DISTANCE_DEG), 3))
    values[2] = np.nan
    np.testing.assert_allclose(toward_arms(values, np.array([5.0]), np.array([-1.0])), 1)
    values[2, :2] = 2
    np.testing.assert_allclose(toward_arms(values, np.array([5.0]), np.array([-1.0])), 2)
