"""Bent rays of the sun, seen as straight ones in stretched altitudes.

Along a ray in spherical air the product n r sin(zenith angle) is constant (Bouguer). With q = n r for the radius a ray
is straight: its path through a layer is that of a straight ray through a layer whose boundaries lie at q, with the same
amount of air. What the true ray turns about the planet's centre beyond the straight one is its refraction,

    integral of p / q^2 (n dr/dq - 1) ds,   p = q sin(zenith angle),   s^2 = q^2 - p^2

(Auer & Standish 2000, Astron. J. 119, 2472, doi:10.1086/301325, use the same integral over another variable).
"""

from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from skychart.sky.shells import Shells, tangent_altitude, vertical_weight

Array = NDArray[np.float64]

_LARGEST_REFRACTION = 0.05  # rad
_BISECTIONS = 36
_DIFFERENCE = 1e-4  # rad, for a slope


@dataclass(frozen=True, eq=False)
class BentRays:
    """Rays through shells: ``paths`` are the shells in stretched altitudes, ``turning`` yields refraction over p."""

    paths: Shells
    turning: Shells

    @classmethod
    def of(cls, shells: Shells) -> "BentRays":
        """Rays through ``shells``; straight ones where the air does not refract."""
        radius, index = shells.planet_radius_km + shells.altitude_km, shells.refractivity
        height = shells.altitude_km + index * radius - index[0] * shells.planet_radius_km
        decay = np.concatenate([shells.decay_per_km[:1], shells.decay_per_km])
        decay = 0.5 * (decay + np.append(shells.decay_per_km, shells.decay_per_km[-1:]))
        slope = 1 + index - radius * index * decay  # dq/dr
        bend = np.maximum(radius * index * decay / slope, 0.0)
        thickness = np.diff(height)
        thinning = shells.decay_per_km * np.diff(shells.altitude_km) + np.diff(np.log(slope))
        paths = replace(
            shells,
            altitude_km=height,
            decay_per_km=thinning / thickness,
            planet_radius_km=shells.planet_radius_km * (1 + index[0]),
        )
        some = np.maximum(bend, 1e-300)
        fading = np.log(some[:-1] / some[1:]) / thickness
        middle = paths.planet_radius_km + 0.5 * (height[1:] + height[:-1])
        share = bend[:-1] * vertical_weight(fading, thickness) / middle**2
        return cls(paths, replace(paths, decay_per_km=fading, extinction_depth=share[:, None]))

    def depth(self, start: int, cos_zenith: Array) -> Array:
        """Optical depth from boundary ``start`` to space along rays of apparent zenith angle, (..., wavelength)."""
        (depth,) = _along((self.paths,), start, cos_zenith)
        return depth

    def refraction(self, start: int, cos_zenith: Array) -> Array:
        """Refraction [rad] from boundary ``start`` to space along rays of apparent zenith angle, (...)."""
        (turning,) = _along((self.turning,), start, cos_zenith)
        return self._constant(start, cos_zenith) * turning[..., 0]

    def depth_and_refraction(self, start: int, cos_zenith: Array) -> tuple[Array, Array]:
        """Both, in less time."""
        depth, turning = _along((self.paths, self.turning), start, cos_zenith)
        return depth, self._constant(start, cos_zenith) * turning[..., 0]

    def _constant(self, start: int, cos_zenith: Array) -> Array:
        radius = self.paths.planet_radius_km + self.paths.altitude_km[start]
        return np.asarray(radius * np.sqrt(1 - np.square(cos_zenith)))

    def lowest(self, start: int) -> float:
        """Apparent zenith angle [rad] at boundary ``start`` of the ray that grazes the ground."""
        radius = self.paths.planet_radius_km
        return float(np.pi / 2 + np.arccos(radius / (radius + self.paths.altitude_km[start])))

    def apparent(self, start: int, zenith_angle: Array) -> Array:
        """Apparent zenith angle [rad] at boundary ``start`` of the sun at a geometric one; in shadow, past lowest."""
        angle, lowest = np.asarray(zenith_angle, dtype=float), self.lowest(start)
        least, most = angle - _LARGEST_REFRACTION, angle
        for _ in range(_BISECTIONS):
            middle = 0.5 * (least + most)
            late = middle + self.refraction(start, np.cos(np.minimum(middle, lowest))) > angle
            least, most = np.where(late, least, middle), np.where(late, middle, most)
        return 0.5 * (least + most)

    def thinned(self, start: int, apparent_zenith_angle: Array) -> Array:
        """Apparent solid angle of a small source over its true one: what refraction leaves of its irradiance, (...).

        Radiance is kept, so a bundle of rays that refraction spreads is thinned; the low sun is flattened by it.
        """
        angle, lowest = np.asarray(apparent_zenith_angle, dtype=float), self.lowest(start)
        near = np.clip(angle, _DIFFERENCE, lowest - _DIFFERENCE)
        bent = self.refraction(start, np.cos(near))
        ahead, behind = (self.refraction(start, np.cos(near + step)) for step in (_DIFFERENCE, -_DIFFERENCE))
        stretch = 1 + (ahead - behind) / (2 * _DIFFERENCE)
        return np.sin(near) / (np.sin(near + bent) * stretch)


def _along(shells: Sequence[Shells], start: int, cos_zenith: Array) -> list[Array]:
    """Slant sums from boundary ``start`` to space; a ray that would strike the ground has that of one that grazes.

    ``shells``: alike in their altitudes, a sum (..., wavelength) for each.
    """
    first, decays = shells[0], [one.decay_per_km for one in shells]
    cosine = np.asarray(cos_zenith, dtype=float)
    up = cosine >= 0
    altitude, radius = first.altitude_km[start], first.planet_radius_km
    above = first.weighted_paths(tangent_altitude(altitude, cosine[up], radius), decays, start)
    tangent = np.maximum(tangent_altitude(altitude, cosine[~up], radius), 0.0)
    below = first.weighted_paths(tangent, decays)
    crossings = np.where(np.arange(len(decays[0])) >= start, 1.0, 2.0)[:, None]
    results = []
    for one, upward, downward in zip(shells, above, below, strict=True):
        result = np.empty((*cosine.shape, one.extinction_depth.shape[1]))
        result[up] = upward @ one.extinction_depth[start:]
        result[~up] = downward @ (crossings * one.extinction_depth)
        results.append(result)
    return results
