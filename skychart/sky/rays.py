"""Straight rays from one level through all others: where they cross, and how much each crossing's source counts.

Along a ray the source between two crossings is taken linear in the fraction of that segment's optical depth. A ray
crosses a level at most twice: coming down to its tangent point or the ground ("inward") and going out to space
("outward"). Arrays over crossings have shape (ray, 2, level): axis 1 is inward, outward.
"""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from skychart.sky.shells import distance_from_tangent, tangent_altitude

Array = NDArray[np.float64]

INWARD, OUTWARD = 0, 1


@dataclass(frozen=True, eq=False)
class Crossings:
    """Crossings of a fan of rays with the levels.

    ``reached`` (ray, 2, level).
    ``weight`` (scatterer, ray, 2, level, wavelength): what a unit of a scatterer's source (radiance per unit of its
    scattering optical depth) at a crossing adds to the radiance at the start.
    ``cos_turn``, ``sin_turn`` (ray, 2, level): angle at the planet's centre between start and crossing.
    ``ground`` (ray, wavelength): transmission from the ground, 0 for a ray that misses it; ``ground_cos_turn``,
    ``ground_sin_turn`` (ray,).
    """

    reached: NDArray[np.bool_]
    weight: Array
    cos_turn: Array
    sin_turn: Array
    ground: Array
    ground_cos_turn: Array
    ground_sin_turn: Array


def crossings(
    altitude_km: Array,
    scattering: Sequence[Array],
    extinction: Array,
    start: int,
    cos_zenith: Array,
    planet_radius_km: float,
) -> Crossings:
    """Follow rays from level ``start`` at zenith angles arccos(``cos_zenith``), shape (ray,).

    ``altitude_km`` (level,) ascending from 0; ``scattering`` and ``extinction``: slant optical depth of each layer on
    one side of the tangent point, 0 below it, shape (ray, layer, wavelength), ``scattering`` one for each scatterer.
    """
    tangent = tangent_altitude(altitude_km[start], cos_zenith, planet_radius_km)
    down = cos_zenith < 0
    strikes = down & (tangent < 0)
    lowest = np.where(strikes, 0, np.searchsorted(altitude_km, tangent, side="left"))
    first_out = np.where(down, lowest, start)
    level = np.arange(len(altitude_km))
    inward = down[:, None] & (level <= start) & (level >= lowest[:, None])
    outward = ~strikes[:, None] & (level >= first_out[:, None])

    below = np.concatenate([np.zeros_like(extinction[:, :1]), np.cumsum(extinction, axis=1)], axis=1)
    here = below[:, start, None]
    depth_inward = here - below
    depth_outward = below + np.where(down[:, None, None], here, -here)
    near, far = _segment_weights(extinction)
    arriving = np.exp(-np.maximum(depth_inward[:, 1:], 0)) * (inward[:, 1:] & inward[:, :-1])[..., None]
    leaving = np.exp(-np.maximum(depth_outward[:, :-1], 0)) * (outward[:, :-1] & outward[:, 1:])[..., None]
    turning = _TurningSegments.of(extinction, depth_inward, down & ~strikes, lowest)
    weight = np.zeros((len(scattering), len(cos_zenith), 2, len(altitude_km), extinction.shape[2]))
    for share, depth in zip(weight, scattering, strict=True):
        share[:, INWARD, 1:] += arriving * near * depth
        share[:, INWARD, :-1] += arriving * far * depth
        share[:, OUTWARD, :-1] += leaving * near * depth
        share[:, OUTWARD, 1:] += leaving * far * depth
        turning.add(share, depth)

    turns = [_turn(altitude_km, tangent, sign, altitude_km[start], cos_zenith, planet_radius_km) for sign in (-1, 1)]
    cos_turn = np.stack([turn[0] for turn in turns], axis=1)
    sin_turn = np.stack([turn[1] for turn in turns], axis=1)
    return Crossings(
        reached=np.stack([inward, outward], axis=1),
        weight=weight,
        cos_turn=cos_turn,
        sin_turn=sin_turn,
        ground=np.where(strikes[:, None], np.exp(-here[:, 0]), 0.0),
        ground_cos_turn=cos_turn[:, INWARD, 0],
        ground_sin_turn=sin_turn[:, INWARD, 0],
    )


@dataclass(frozen=True, eq=False)
class _TurningSegments:
    """Segments through the tangent point, from the lowest level a ray reaches back to the same level."""

    ray: NDArray[np.intp]
    level: NDArray[np.intp]
    near: Array
    far: Array

    @classmethod
    def of(
        cls, extinction: Array, depth_inward: Array, turns: NDArray[np.bool_], lowest: NDArray[np.int_]
    ) -> "_TurningSegments":
        ray = np.nonzero(turns & (lowest > 0))[0]
        level = lowest[ray]
        near, far = _segment_weights(2 * extinction[ray, level - 1])
        arriving = np.exp(-depth_inward[ray, level])
        return cls(ray, level, arriving * near, arriving * far)

    def add(self, weight: Array, scattering: Array) -> None:
        depth = 2 * scattering[self.ray, self.level - 1]
        weight[self.ray, INWARD, self.level] += self.near * depth
        weight[self.ray, OUTWARD, self.level] += self.far * depth


def _segment_weights(extinction: Array) -> tuple[Array, Array]:
    """Shares of a segment's two ends, per unit of scattering depth, for a source linear in its optical depth."""
    thin = extinction < 1e-2
    x = np.where(thin, 1.0, extinction)
    absorbed = -np.expm1(-x)
    far = np.where(
        thin, 1 / 2 - extinction * (1 / 3 - extinction * (1 / 8 - extinction / 30)), (absorbed - x * np.exp(-x)) / x**2
    )
    both = np.where(thin, 1 - extinction * (1 / 2 - extinction * (1 / 6 - extinction / 24)), absorbed / x)
    return both - far, far


def _turn(
    altitude_km: Array, tangent_km: Array, sign: int, start_km: float, cos_zenith: Array, planet_radius_km: float
) -> tuple[Array, Array]:
    """Cosine and sine of the angle at the planet's centre from the start to each level, shape (ray, level)."""
    nearest = np.maximum(tangent_km[:, None], -planet_radius_km)
    along = sign * distance_from_tangent(np.maximum(altitude_km, nearest), nearest, planet_radius_km)
    start_radius = planet_radius_km + start_km
    travelled = along - (start_radius * cos_zenith)[:, None]
    radius = planet_radius_km + altitude_km
    cosine = (start_radius + travelled * cos_zenith[:, None]) / radius
    sine = travelled * np.sqrt(np.maximum(0.0, 1 - cos_zenith**2))[:, None] / radius
    return cosine, sine
