"""Direct light: transmission from any altitude toward the sun, the planet's shadow exact."""

from concurrent.futures import ThreadPoolExecutor
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from skychart.sky.shells import Shells, tangent_altitude

Array = NDArray[np.float64]

THREADS = 2  # numpy lets other threads work; more would not pay
_STEP_DEG = 0.0625
# Columns are computed on coarser steps, as the air mass bends little over them: (up to this zenith angle, every)
_COMPUTED = ((60.0, 1.0), (75.0, 0.5), (85.0, 0.25))


def _depth_above(shells: Shells, start: int, cos_zenith: Array) -> Array:
    """Optical depth from boundary ``start`` to space for rays that go up, ``cos_zenith`` >= 0: (..., wavelength)."""
    tangent = tangent_altitude(shells.altitude_km[start], cos_zenith, shells.planet_radius_km)
    return shells.slant_factors(tangent, start) @ shells.extinction_depth[start:]


def _depth_around(shells: Shells, start: int, cos_zenith: Array) -> Array:
    """The same for rays that go down first, twice through the layers below; none is lower than one that grazes."""
    tangent = np.maximum(tangent_altitude(shells.altitude_km[start], cos_zenith, shells.planet_radius_km), 0.0)
    crossings = np.where(np.arange(len(shells.extinction_depth)) >= start, 1.0, 2.0)
    return shells.slant_factors(tangent) @ (crossings[:, None] * shells.extinction_depth)


def lit(altitude_km: Array, cos_zenith: Array, planet_radius_km: float) -> NDArray[np.bool_]:
    """Whether a straight ray from ``altitude_km`` toward the sun clears the planet; broadcasts."""
    return (cos_zenith >= 0) | (tangent_altitude(altitude_km, cos_zenith, planet_radius_km) >= 0)


def transmission(shells: Shells, start: int, cos_zenith: Array) -> Array:
    """Transmission from boundary ``start`` toward the sun, shape (..., wavelength); 0 in the shadow."""
    cosine = np.asarray(cos_zenith, dtype=float)
    up = _depth_above(shells, start, np.maximum(cosine, 0))
    around = _depth_around(shells, start, np.minimum(cosine, 0))
    clear = lit(shells.altitude_km[start], cosine, shells.planet_radius_km)
    return np.where(clear[..., None], np.exp(-np.where(cosine[..., None] >= 0, up, around)), 0.0)


@dataclass(frozen=True, eq=False)
class SunTable:
    """Transmission toward the sun, tabulated on (boundary, solar zenith angle every 1/16 degree, wavelength).

    Beyond the shadow's edge the table goes on smoothly, so that interpolation knows no edge; ``at`` cuts it exactly.
    """

    shells: Shells
    values: NDArray[np.float32]  # (boundary, zenith angle, wavelength)
    edge: Array  # (boundary,), zenith angle of the shadow's edge in steps of the table

    @classmethod
    def of(cls, shells: Shells) -> "SunTable":
        """Tabulate for every boundary of ``shells``."""
        radius = shells.planet_radius_km
        dip = np.degrees(np.arccos(radius / (radius + shells.altitude_km[-1])))
        uniform = np.arange(0.0, 90.0 + dip + 2 * _STEP_DEG, _STEP_DEG)
        computed = _computed_angles(uniform)
        values = np.empty((len(shells.altitude_km), len(uniform), shells.extinction_depth.shape[1]), np.float32)
        place = np.interp(uniform, computed, np.arange(len(computed)))
        low = np.minimum(place.astype(int), len(computed) - 2)
        part = (place - low)[:, None]
        cosine = np.cos(np.radians(computed))
        up = cosine >= 0

        def fill(start: int) -> None:
            depth = np.concatenate([_depth_above(shells, start, cosine[up]), _depth_around(shells, start, cosine[~up])])
            values[start] = np.exp(-(depth[low] + part * (depth[low + 1] - depth[low])))

        with ThreadPoolExecutor(THREADS) as pool:
            list(pool.map(fill, range(len(shells.altitude_km))))
        horizon = 90 + np.degrees(np.arccos(radius / (radius + shells.altitude_km)))
        return cls(shells, values, horizon / _STEP_DEG)

    def at(self, boundary: NDArray[np.intp], cos_zenith: Array) -> NDArray[np.float32]:
        """Transmission toward the sun from ``boundary`` (index), (..., wavelength); arguments broadcast to (...)."""
        angles = self.values.shape[1]
        place = np.arccos(cos_zenith) * (180 / np.pi / _STEP_DEG)
        clear = place <= self.edge[boundary]
        low = np.minimum(place.astype(np.intp), angles - 2)
        part = ((place - low) * clear).astype(np.float32)[..., None]
        rest = clear[..., None] - part
        flat = self.values.reshape(-1, self.values.shape[2])
        row = low + boundary * angles
        return rest * flat.take(row, axis=0) + part * flat.take(row + 1, axis=0)


def _computed_angles(uniform: Array) -> Array:
    keep = np.ones(len(uniform), bool)
    below = 0.0
    for limit, every in _COMPUTED:
        inside = (uniform >= below) & (uniform < limit)
        keep &= ~inside | (np.round(uniform / _STEP_DEG) % round(every / _STEP_DEG) == 0)
        below = limit
    return uniform[keep]
