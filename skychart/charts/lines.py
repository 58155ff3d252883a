"""Two lines across the sky that gradients are taken from: the vertical through the sun, and the one beside it."""

from dataclasses import dataclass

import numpy as np

from skychart.charts.numbers import degrees


@dataclass(frozen=True)
class Line:
    """A vertical of the sky, or half of one.

    A position [deg] is the angle along it from the horizon at `azimuth_deg` from the sun; 90 is the zenith, and from
    there to `end_deg` it goes down on the opposite side. `sides` name both halves.
    """

    key: str
    title: str
    azimuth_deg: float
    end_deg: float
    sides: tuple[str, str]

    def directions(self, position_deg: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
        """View elevation and relative azimuth [deg] at positions, both of their shape."""
        beyond = position_deg > 90
        azimuth = np.where(beyond, 180 - self.azimuth_deg, self.azimuth_deg)
        return np.where(beyond, 180 - position_deg, position_deg), azimuth

    def label(self, position_deg: float) -> str:
        """A position as a view elevation and a side: `12° toward`."""
        if position_deg == 90:
            return "zenith"
        text = degrees(round(min(position_deg, 180 - position_deg), 2))
        return f"{text} {self.sides[position_deg > 90]}".rstrip()


PLANE = Line("plane", "Principal plane", 0.0, 180.0, ("toward", "away"))
BESIDE = Line("beside", "Vertical beside the sun", 90.0, 90.0, ("", ""))
LINES = (PLANE, BESIDE)
