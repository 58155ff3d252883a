"""The solved field of light, as observers use it."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from skychart.sky.shape import Shape

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
