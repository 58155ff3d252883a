"""The bright sky around the sun: where it is looked at, and how a picture comes by it.

Haze sends light forward in so narrow a peak that a grid of directions passes it by. The sky is therefore asked along
three arms from the apparent sun: up, beside (along its own elevation, or along the horizon if it is lower) and down. A
picture interpolates on the grid what is left without the peak along the arm beside, and puts the peak back at every
pixel, corrected so that it meets each arm.
"""

from dataclasses import dataclass

import numpy as np

from skychart.charts.splines import spline

DISTANCE_DEG = np.array([0, 0.2, 0.5, 1, 2, 5, 10, 18, 28])
"""Distances from the sun along an arm: those of the tables, and as many nearer ones as keep the peak within 1 %."""

ARMS = ("up", "beside", "down")
LOWEST_SUN_DEG = -6.0
"""Apparent elevation below which a sun has no peak: its light no longer reaches haze that an observer sees."""

_REACH_DEG = float(DISTANCE_DEG[-1])
_HIGH_SUN = np.radians(60)
_FINE = 281
_SMOOTH = spline(np.sqrt(DISTANCE_DEG / _REACH_DEG), np.linspace(0, 1, _FINE), flat_ends=True)


def arms(sun_elevation_deg: float) -> tuple[np.ndarray, np.ndarray]:
    """View elevation and relative azimuth [deg] of the arms of a sun, each (arm, distance); nan below the horizon."""
    shape = len(ARMS), len(DISTANCE_DEG)
    view, azimuth = np.full(shape, np.nan), np.full(shape, np.nan)
    if sun_elevation_deg < LOWEST_SUN_DEG:
        return view, azimuth
    for row, sign in ((0, 1), (2, -1)):
        along = sun_elevation_deg + sign * DISTANCE_DEG
        view[row] = np.where(along > 90, 180 - along, along)
        azimuth[row] = np.where(along > 90, 180.0, 0.0)
    view[1], azimuth[1] = beside(np.radians(DISTANCE_DEG), np.radians(sun_elevation_deg))
    hidden = ~((view >= 0) & np.isfinite(azimuth))
    view[hidden] = azimuth[hidden] = np.nan
    return view, azimuth


def distance_and_side(
    sun_elevation_deg: float, view_elevation_deg: np.ndarray, relative_azimuth_deg: np.ndarray
) -> tuple[np.ndarray, np.ndarray]:
    """Angular distance from the sun [deg], and the cosine of the angle at the sun from straight up; broadcast."""
    sun, view, azimuth = np.radians(sun_elevation_deg), np.radians(view_elevation_deg), np.radians(relative_azimuth_deg)
    across = np.cos(view) * np.sin(azimuth)
    upward = np.sin(view) * np.cos(sun) - np.cos(view) * np.sin(sun) * np.cos(azimuth)
    forward = np.sin(view) * np.sin(sun) + np.cos(view) * np.cos(sun) * np.cos(azimuth)
    sideways = np.hypot(across, upward)
    side = np.divide(upward, sideways, out=np.zeros_like(sideways), where=sideways > 0)
    return np.degrees(np.arctan2(sideways, forward)), side


@dataclass(frozen=True)
class Peak:
    """Logarithm of the peak, by distance from the sun: `values` (distance, XYZ), which end flat at nothing."""

    sun_elevation_deg: float
    values: np.ndarray

    def at(self, view_elevation_deg: np.ndarray, relative_azimuth_deg: np.ndarray) -> np.ndarray:
        """Logarithm of the peak in directions [deg], (..., XYZ)."""
        distance, _ = distance_and_side(self.sun_elevation_deg, view_elevation_deg, relative_azimuth_deg)
        return along_distance(self.values, distance)


def peak(sun_elevation_deg: float, arms_log_XYZ: np.ndarray) -> Peak:
    """Of the arms (arm, distance, XYZ; logarithms) the one beside, less the parabola that it ends in.

    Along the others the sky changes with its height above the horizon as well, which the grid knows better.
    """
    own = without_gaps(arms_log_XYZ)[ARMS.index("beside")]
    squared = DISTANCE_DEG[:, None] ** 2
    curve = (own[-1] - own[-2]) / (squared[-1] - squared[-2])
    return Peak(sun_elevation_deg, own - own[-1] - curve * (squared - squared[-1]))


def along_distance(values: np.ndarray, distance_deg: np.ndarray) -> np.ndarray:
    """`values` (distance, XYZ) at any distance [deg], (..., XYZ); smooth, the last one held beyond."""
    fine = np.linspace(0, 1, _FINE)
    table = _SMOOTH @ values
    place = np.sqrt(np.clip(np.asarray(distance_deg) / _REACH_DEG, 0, 1))
    return np.stack([np.interp(place, fine, column) for column in table.T], axis=-1)


def toward_arms(sides_log: np.ndarray, distance_deg: np.ndarray, side: np.ndarray) -> np.ndarray:
    """Between arms (arm, distance, XYZ): their values at a distance, weighted by the direction from the sun."""
    up, beside, down = (along_distance(values, distance_deg) for values in without_gaps(sides_log))
    vertical = (side**2)[..., None]
    return vertical * np.where((side > 0)[..., None], up, down) + (1 - vertical) * beside


def without_gaps(arms_log: np.ndarray) -> np.ndarray:
    """Arms without gaps: beyond the horizon a value is held, and an arm that sees nothing is like the one beside."""
    filled = arms_log.copy()
    for arm in filled:
        seen = np.isfinite(arm[:, 0])
        if seen.any():
            known = np.flatnonzero(seen)
            nearest = known[np.argmin(np.abs(np.arange(len(arm))[:, None] - known), axis=1)]
            arm[:] = arm[nearest]
    lost = ~np.isfinite(filled[:, 0, 0])
    filled[lost] = filled[1]
    return filled


def beside(distance: np.ndarray, sun: float) -> tuple[np.ndarray, np.ndarray]:
    """View elevation and azimuth [deg] of the arm beside the sun, from angles in rad; nan nearer than the horizon.

    Along the sun's own elevation, which is one question less for each distance, but for a sun near the zenith.
    """
    if sun > _HIGH_SUN:
        view = np.arcsin(np.sin(sun) * np.cos(distance))
        return np.degrees(view), np.degrees(np.arctan2(np.sin(distance), np.cos(sun) * np.cos(distance)))
    view = np.full_like(distance, max(sun, 0.0))
    share = (np.sin(distance / 2) ** 2 - np.sin((view - sun) / 2) ** 2) / (np.cos(sun) * np.cos(view))
    azimuth = np.degrees(2 * np.arcsin(np.sqrt(np.maximum(share, 0))))
    return np.degrees(view), np.where(share >= 0, azimuth, np.nan)
