"""Cubic splines as matrices, for whatever is interpolated between directions."""

import numpy as np


def spline(nodes: np.ndarray, points: np.ndarray, flat_ends: bool = False) -> np.ndarray:
    """Matrix (point, node) of the cubic spline through `nodes`: natural, or with zero slope at both ends.

    Source: Press et al., Numerical Recipes, 3rd edition (2007), section 3.3, equations 3.3.3 to 3.3.7.
    """
    count, step = len(nodes), np.diff(nodes)
    system, right = np.eye(count), np.zeros((count, count))
    for i in range(1, count - 1):
        system[i, i - 1 : i + 2] = step[i - 1] / 6, (step[i - 1] + step[i]) / 3, step[i] / 6
        right[i, i - 1 : i + 2] = 1 / step[i - 1], -1 / step[i - 1] - 1 / step[i], 1 / step[i]
    if flat_ends:
        system[0, :2], right[0, :2] = (step[0] / 3, step[0] / 6), (-1 / step[0], 1 / step[0])
        system[-1, -2:], right[-1, -2:] = (step[-1] / 6, step[-1] / 3), (1 / step[-1], -1 / step[-1])
    curvature = np.linalg.solve(system, right)
    cell = np.clip(np.searchsorted(nodes, points, side="right") - 1, 0, count - 2)
    h = step[cell]
    a = (nodes[cell + 1] - points) / h
    b = 1 - a
    weights = np.zeros((len(points), count))
    rows = np.arange(len(points))
    weights[rows, cell] = a
    weights[rows, cell + 1] = b
    weights += ((a**3 - a) * h**2 / 6)[:, None] * curvature[cell]
    weights += ((b**3 - b) * h**2 / 6)[:, None] * curvature[cell + 1]
    return weights
