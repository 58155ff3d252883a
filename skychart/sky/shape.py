"""The fall of a field with solar zenith angle, by which it is interpolated.

Between solar zenith nodes a field is interpolated as shape x linear(field / shape): through twilight light falls by a
factor of ten every two degrees, and the shape (the first order's own fall) carries that.
"""

from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

from skychart.sky.interpolation import spline_matrix

Array = NDArray[np.float64]

_STEP_DEG = 0.25
_FLOOR = 1e-7


@dataclass(frozen=True, eq=False)
class Shape:
    """How a field falls with solar zenith angle: one positive curve a level, and the nodes it is taken off at."""

    node_deg: Array  # (node,), whole degrees
    at_node: Array  # (level, node)
    fine: Array  # (level, every 0.25 degrees)

    @classmethod
    def of(cls, node_deg: Array, values: Array) -> "Shape":
        """From ``values`` >= 0 (level, node): a cubic spline of their logarithm, 1e-7 of the largest added."""
        log = np.log(values + _FLOOR * values.max())
        query = np.arange(0, node_deg[-1] + _STEP_DEG, _STEP_DEG)
        return cls(node_deg, np.exp(log), np.exp(log @ spline_matrix(node_deg, query).T))

    def with_level(self, upper: int, part: float) -> "Shape":
        """The curves with one inserted before ``upper``, that ``part`` of the way to it from the one below."""
        return Shape(self.node_deg, insert_between(self.at_node, upper, part), insert_between(self.fine, upper, part))

    def every_degree(self) -> "Shape":
        """The same curves, taken off at every whole degree."""
        steps = round(1 / _STEP_DEG)
        return Shape(np.arange(self.node_deg[-1] + 1), self.fine[:, ::steps], self.fine)

    def weights(self, level: NDArray[np.int_], cos_chi: Array) -> tuple[NDArray[np.intp], Array, Array]:
        """Lower node of each point and what a field divided by the shape counts at it and at the next node.

        ``level`` and ``cos_chi`` broadcast. Beyond the last node the last value is held.
        """
        degrees = np.degrees(np.arccos(cos_chi))
        place = np.minimum(degrees / _STEP_DEG, self.fine.shape[1] - 1.0)
        low = np.minimum(place.astype(np.intp), self.fine.shape[1] - 2)
        row = level * self.fine.shape[1] + low
        flat = self.fine.ravel()
        here = flat[row]
        here = here + (place - low) * (flat[row + 1] - here)
        whole = np.minimum(degrees, self.node_deg[-1])
        bracket = np.searchsorted(self.node_deg, np.arange(self.node_deg[-1] + 1), side="right") - 1
        bracket = np.minimum(bracket, len(self.node_deg) - 2)
        node = bracket[whole.astype(np.intp)]
        upper = here * (whole - self.node_deg[node]) / np.diff(self.node_deg)[node]
        return node, here - upper, upper


def insert_between(values: NDArray[Any], upper: int, part: float) -> NDArray[Any]:
    """``values`` (level, ...) with one inserted before ``upper``, that ``part`` of the way to it from the one below."""
    between = values[upper - 1] + np.asarray(part, values.dtype) * (values[upper] - values[upper - 1])
    return np.insert(values, upper, between, axis=0)
