"""The search for stops: exact against trying everything, and right where the answer is known."""

import itertools

import numpy as np
import pytest

from skychart.charts.minimax import Pieces
from skychart.colour.chromaticity import xyz_of_xy
from skychart.colour.differences import delta_e_2000
from skychart.colour.observers import D65_XY

WHITE = 100 * xyz_of_xy(D65_XY)


def error_of(position, XYZ, at):
    """Largest CIEDE2000 of straight pieces between the points `at`, worked out by another way."""
    straight = np.stack([np.interp(position, position[at], axis) for axis in XYZ.T[:, at]], axis=-1)
    return float(delta_e_2000(straight, XYZ, WHITE).max())


def wavy(seed, count):
    """A smooth, random curve of colours."""
    rng = np.random.default_rng(seed)
    x = np.linspace(0, 1, count)
    waves = [sum(rng.normal() * np.sin(k * np.pi * x + rng.uniform(0, 6)) / k for k in range(1, 6)) for _ in range(3)]
    return x, 20 * np.exp(0.8 * np.stack(waves, axis=-1))


@pytest.mark.parametrize("seed", range(6))
@pytest.mark.parametrize("count", [2, 3, 4, 5, 8])
def test_the_best_stops_are_those_that_trying_everything_finds(seed, count):
    """All choices of inner nodes among 11 nodes of a curve of 81 points."""
    position, XYZ = wavy(seed, 81)
    node = np.arange(0, 81, 8)
    pieces = Pieces(position, XYZ, node, WHITE)
    inner = itertools.combinations(range(1, 10), count - 2)
    least = min(error_of(position, XYZ, node[[0, *choice, 10]]) for choice in inner)
    path = pieces.best(count)
    assert len(path) == count
    assert (path[0], path[-1]) == (0, 10)
    assert pieces.error(path) == pytest.approx(least, rel=1e-9)
    assert error_of(position, XYZ, node[path]) == pytest.approx(least, rel=1e-9)


@pytest.mark.parametrize("seed", range(4))
def test_the_fewest_stops_are_those_that_trying_everything_finds(seed):
    """For limits on both sides of what a few stops reach; none if the most allowed do not suffice."""
    position, XYZ = wavy(seed, 81)
    node = np.arange(0, 81, 8)

    def least(count):
        inner = itertools.combinations(range(1, 10), count - 2)
        return min(error_of(position, XYZ, node[[0, *choice, 10]]) for choice in inner)

    reached = {count: least(count) for count in range(2, 12)}
    some = 0
    for limit in (0.2, 1, 3, 8, 20):
        path = Pieces(position, XYZ, node, WHITE).fewest(limit, 8)
        fewest = next((count for count in range(2, 9) if reached[count] <= limit), None)
        assert (None if path is None else len(path)) == fewest
        if path is not None:
            assert error_of(position, XYZ, node[path]) <= limit
            some += 1
    assert some > 0


def test_a_gradient_of_straight_pieces_needs_exactly_its_own_stops():
    """Kinks at 0, 20, 50 and 90: four stops there leave nothing, three leave something, and no fewer do."""
    own = np.array([0, 20, 50, 90])
    colours = np.array([[80, 85, 70], [30, 35, 60], [8, 9, 20], [12, 11, 9]], float)
    position = np.arange(0, 90.01, 0.5)
    XYZ = np.stack([np.interp(position, own, axis) for axis in colours.T], axis=-1)
    pieces = Pieces(position, XYZ, np.arange(0, len(position), 2), WHITE)
    path = pieces.best(4)
    np.testing.assert_array_equal(position[pieces.node[path]], own)
    assert pieces.error(path) < 1e-9
    assert pieces.error(pieces.best(3)) > 1
    np.testing.assert_array_equal(pieces.fewest(1e-9, 24), path)


def test_bounds_stay_below_what_is_measured():
    """After a search, no bound passes the true error of its piece, and most pieces were never measured."""
    position, XYZ = wavy(3, 241)
    node = np.arange(0, 241, 2)
    pieces = Pieces(position, XYZ, node, WHITE)
    pieces.best(5)
    start, end = np.triu_indices(len(node), 3)
    chosen = np.arange(0, len(start), 37)
    for i, j in zip(start[chosen], end[chosen], strict=True):
        part = slice(node[i], node[j] + 1)
        true = error_of(position[part], XYZ[part], [0, -1])
        assert pieces.worst[i, j] <= true + 1e-9
        if pieces.level[i, j] == pieces.level.max():
            assert pieces.worst[i, j] == pytest.approx(true, abs=1e-9)
    assert (pieces.level[start, end] == pieces.level.max()).mean() < 0.3


def test_colours_can_be_judged_as_they_are_shown():
    """Where everything is shown as white, any stops do."""
    position, XYZ = wavy(1, 41)
    pieces = Pieces(position, XYZ, np.arange(41), WHITE, lambda light: np.broadcast_to(WHITE, light.shape))
    assert pieces.error(pieces.best(3)) == 0
