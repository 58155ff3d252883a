"""The solved field of light, as observers use it."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from skychart.sky.shape import Shape, insert_between

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Field:
    """The solved field: ``tensor`` (level, node, entry, wavelength), ``ground`` (node, wavelength), over their shapes.

    Nodes are whole degrees here: once solved, field over shape is smooth in solar zenith angle, and a cubic spline
    through the solver's nodes makes it finer for observers.
    ``ground`` is downward irradiance at the ground, direct light included. All per unit solar irradiance.
    """

    level_altitude_km: Array
    tensor_shape: Shape
    ground_shape: Shape
    tensor: NDArray[np.float32]
    ground: NDArray[np.float32]

    def between_levels(self, altitude_km: float) -> tuple[int, float] | None:
        """The level above ``altitude_km`` and the part of the way to it from the one below; None at a level."""
        levels = self.level_altitude_km
        if altitude_km in levels:
            return None
        upper = int(np.searchsorted(levels, altitude_km))
        return upper, float((altitude_km - levels[upper - 1]) / (levels[upper] - levels[upper - 1]))

    def with_level(self, upper: int, part: float) -> "Field":
        """The same with a level inserted before ``upper``, linear in altitude, ``part`` of the way to it."""
        return Field(
            level_altitude_km=insert_between(self.level_altitude_km, upper, part),
            tensor_shape=self.tensor_shape.with_level(upper, part),
            ground_shape=self.ground_shape,
            tensor=insert_between(self.tensor, upper, part),
            ground=self.ground,
        )
