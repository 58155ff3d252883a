"""Directions all around an observer with their solid angles, dense where the light of a sky changes quickly.

Rows of equal elevation, cut into pieces of azimuth, are integrated by Gauss and Legendre's rule. Rows end at the
horizon, lie close above it and about the sun; pieces are narrow beside the sun, and end where a plane that faces the
sun, or one of the walls, stops seeing, so that no half-space cuts through a piece.
Against nodes three times as dense in every dimension, illuminances of all planes differ by at most 0.07 %.
"""

from dataclasses import dataclass

import numpy as np

_ABOVE_DEG = (0, 1, 3, 7, 15, 30, 60, 90)
_BELOW_DEG = (-90, -40, -15, -5)
_FROM_SUN_DEG = (1.5, 5, 12, 28)
_NODES_UP = 4
_NODES_BESIDE_SUN = 4
_NODES_ELSEWHERE = 8
_LEAST_COSINE = 0.3


@dataclass(frozen=True)
class Directions:
    """Directions of one half of the sphere, azimuth 0 to 180 from the sun; the other half is its mirror image.

    `elevation_deg`, `azimuth_deg` [deg] and `solid_angle_sr` [sr], each (direction,).
    """

    elevation_deg: np.ndarray
    azimuth_deg: np.ndarray
    solid_angle_sr: np.ndarray

    @property
    def vectors(self) -> np.ndarray:
        """Unit vectors, (direction, 3)."""
        return unit_vectors(self.elevation_deg, self.azimuth_deg)


def unit_vectors(elevation_deg: np.ndarray | float, azimuth_deg: np.ndarray | float) -> np.ndarray:
    """Unit vectors (..., 3) of directions [deg] that broadcast: x toward the sun's azimuth, z up, y at azimuth 90."""
    elevation, azimuth = np.radians(elevation_deg), np.radians(azimuth_deg)
    level = np.cos(elevation)
    return np.stack(np.broadcast_arrays(level * np.cos(azimuth), level * np.sin(azimuth), np.sin(elevation)), axis=-1)


def directions_around(sun_elevation_deg: float) -> Directions:
    """Directions for a sun that is seen at an elevation [deg, −90 to 90]."""
    ends = _row_ends(sun_elevation_deg)
    elevation, height = (part.ravel() for part in _pieces(ends[:-1], ends[1:], _NODES_UP))
    area = np.radians(height) * np.cos(np.radians(elevation))
    edges, beside = _azimuth_ends(sun_elevation_deg, elevation)
    parts = [
        _pieces(edges[:, i], edges[:, i + 1], _NODES_BESIDE_SUN if i < beside else _NODES_ELSEWHERE)
        for i in range(edges.shape[1] - 1)
    ]
    azimuth, width = (np.concatenate(part, axis=1) for part in zip(*parts, strict=True))
    rows = np.broadcast_to(elevation[:, None], azimuth.shape)
    return Directions(rows.ravel(), azimuth.ravel(), (area[:, None] * np.radians(width)).ravel())


def _row_ends(sun: float) -> np.ndarray:
    """Elevations [deg] between which rows lie; also where a plane facing the sun stops cutting rows."""
    near = [sun + sign * distance for distance in _FROM_SUN_DEG for sign in (1, -1)]
    touched = 90 - abs(sun)
    return np.unique([*_BELOW_DEG, *_ABOVE_DEG, *(end for end in near if 0 < end < 90), touched, -touched])


def _azimuth_ends(sun: float, elevation: np.ndarray) -> tuple[np.ndarray, int]:
    """Ends of the pieces of each row [deg], (row, end), and how many pieces lie beside the sun."""
    widening = max(np.cos(np.radians(sun)), _LEAST_COSINE)
    beside = np.minimum(np.array(_FROM_SUN_DEG) / widening, 90)
    facing = np.degrees(np.arccos(np.clip(-np.tan(np.radians(elevation)) * np.tan(np.radians(sun)), -1, 1)))
    fixed = np.broadcast_to([0, *beside, 90, 180], (len(elevation), len(beside) + 3))
    return np.sort(np.column_stack([fixed, facing]), axis=1), len(beside)


def _pieces(start: np.ndarray, end: np.ndarray, count: int) -> tuple[np.ndarray, np.ndarray]:
    """Nodes and weights between `start` and `end`, each (piece, node)."""
    node, weight = np.polynomial.legendre.leggauss(count)
    half = (end - start)[:, None] / 2
    return (start + end)[:, None] / 2 + half * node, half * weight
