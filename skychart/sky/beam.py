"""Direct light: transmission from any altitude toward the sun, rays bent, the planet's shadow exact."""

from concurrent.futures import ThreadPoolExecutor
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from skychart.sky.refraction import BentRays
from skychart.sky.shells import Shells

Array = NDArray[np.float64]

THREADS = 2  # numpy lets other threads work; more would not pay
_STEP_DEG = 0.0625
# Columns are computed on coarser steps, as the air mass bends little over them: (up to this zenith angle, every)
_COMPUTED = ((60.0, 1.0), (75.0, 0.5), (85.0, 0.25))


def transmission(shells: Shells, start: int, cos_zenith: Array) -> Array:
    """Irradiance normal to the beam at boundary ``start`` over that outside the air, (..., wavelength); 0 in shadow."""
    rays = BentRays.of(shells)
    seen = rays.apparent(start, np.arccos(np.clip(cos_zenith, -1, 1)))
    clear = seen <= rays.lowest(start)
    beam = rays.thinned(start, seen)[..., None] * np.exp(-rays.depth(start, np.cos(seen)))
    return np.where(clear[..., None], beam, 0.0)


@dataclass(frozen=True, eq=False)
class SunTable:
    """Irradiance of the beam over that outside, on (boundary, solar zenith angle every 1/16 degree, wavelength).

    Zenith angles are geometric, rays bent. Beyond the shadow's edge the table goes on smoothly, so that interpolation
    knows no edge; ``at`` cuts it exactly.
    """

    values: NDArray[np.float32]  # (boundary, zenith angle, wavelength)
    refraction: Array  # [rad], (boundary, zenith angle)
    edge: Array  # (boundary,), zenith angle of the shadow's edge in steps of the table

    @classmethod
    def of(cls, shells: Shells) -> "SunTable":
        """Tabulate for every boundary of ``shells``."""
        rays = BentRays.of(shells)
        boundaries = range(len(shells.altitude_km))
        lowest = np.array([rays.lowest(start) for start in boundaries])
        at_edge = [float(rays.refraction(start, np.cos(lowest[start]))) for start in boundaries]
        edge = np.degrees(lowest + at_edge) / _STEP_DEG
        uniform = np.arange(0.0, edge.max() + 2) * _STEP_DEG
        computed = _computed_angles(uniform)
        cosine = np.cos(np.radians(computed))
        values = np.empty((len(edge), len(uniform), shells.extinction_depth.shape[1]), np.float32)
        refraction = np.empty(values.shape[:2])

        def fill(start: int) -> None:
            bent = rays.refraction(start, cosine)
            place = np.interp(uniform, computed + np.degrees(bent), np.arange(len(computed)))
            low = np.minimum(place.astype(int), len(computed) - 2)
            part = place - low
            refraction[start] = bent[low] + part * (bent[low + 1] - bent[low])
            depth = rays.depth(start, cosine)
            depth -= np.log(_thinned(np.radians(computed), bent, lowest[start]))[:, None]
            values[start] = np.exp(-(depth[low] + part[:, None] * (depth[low + 1] - depth[low])))

        with ThreadPoolExecutor(THREADS) as pool:
            list(pool.map(fill, boundaries))
        return cls(values, refraction, edge)

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

    def apparent(self, boundary: int, zenith_angle: Array) -> Array:
        """Apparent zenith angle [rad] of the sun at ``boundary``, by its geometric one; broadcasts."""
        place = np.degrees(zenith_angle) / _STEP_DEG
        return zenith_angle - np.interp(place, np.arange(self.values.shape[1]), self.refraction[boundary])


def _thinned(angle: Array, refraction: Array, lowest: float) -> Array:
    """``BentRays.thinned`` from refraction known at apparent zenith angles; past the grazing ray, what that one has."""
    clear = angle <= lowest
    stretch = 1 + np.gradient(refraction[clear], angle[clear])
    seen, true = np.sin(angle[clear]), np.sin((angle + refraction)[clear])
    thinned = np.ones_like(angle)
    thinned[clear] = np.where(true > 0, seen / np.where(true > 0, true, 1), 1 / stretch) / stretch
    thinned[~clear] = thinned[clear][-1]
    return thinned


def _computed_angles(uniform: Array) -> Array:
    keep = np.ones(len(uniform), bool)
    below = 0.0
    for limit, every in _COMPUTED:
        inside = (uniform >= below) & (uniform < limit)
        keep &= ~inside | (np.round(uniform / _STEP_DEG) % round(every / _STEP_DEG) == 0)
        below = limit
    return uniform[keep]
