"""Direct light: transmission from any altitude toward the sun, rays bent, the planet's shadow exact."""

from concurrent.futures import ThreadPoolExecutor
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from skychart.sky.refraction import BentRays
from skychart.sky.shells import Shells

Array = NDArray[np.float64]

THREADS = 2  # numpy lets other threads work; more would not pay
_STEP_DEG = 0.0625
_NEGLIGIBLE = 1e-5  # part of the optical depth
_DARK = 1000.0  # optical depth of no light at all
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
    """Irradiance of the beam over that outside, by boundary and solar zenith angle every 1/16 degree.

    The optical depths of all wavelengths are sums of a few amounts along the path, as many as there are absorbers and
    scatterers of spectra of their own; these are tabulated. Zenith angles are geometric, rays bent. Beyond the shadow's
    edge the table goes on smoothly, so that interpolation knows no edge; ``at`` cuts it exactly.

    ``amounts`` (boundary, zenith angle, 2 component): amounts, then what they grow by to the next angle. ``spectra``
    (2 component, wavelength): optical depth of an amount, negative, the same for both; that of the last amount is 1.
    ``less``: spectra of a beam to subtract.
    ``refraction`` [rad] (boundary, zenith angle); ``edge`` (boundary,): zenith angle of the shadow's edge in steps.
    ``layers`` (layer, component): the amounts in each layer.
    """

    layers: Array
    amounts: NDArray[np.float32]
    spectra: NDArray[np.float32]
    refraction: Array
    edge: Array
    less: NDArray[np.float32] | None = None

    @classmethod
    def of(cls, shells: Shells) -> "SunTable":
        """Tabulate for every boundary of ``shells``."""
        layers, spectra = _components(shells.extinction_depth)
        rays = BentRays.of(replace(shells, extinction_depth=layers))
        boundaries = range(len(shells.altitude_km))
        lowest = np.array([rays.lowest(start) for start in boundaries])
        at_edge = [float(rays.refraction(start, np.cos(lowest[start]))) for start in boundaries]
        edge = np.degrees(lowest + at_edge) / _STEP_DEG
        uniform = np.arange(0.0, edge.max() + 2) * _STEP_DEG
        computed = _computed_angles(uniform)
        cosine = np.cos(np.radians(computed))
        count = len(spectra) + 1
        amounts = np.zeros((len(edge), len(uniform), 2 * count), np.float32)
        refraction = np.empty(amounts.shape[:2])

        def fill(start: int) -> None:
            depth, bent = rays.depth_and_refraction(start, cosine)
            place = np.interp(uniform, computed + np.degrees(bent), np.arange(len(computed)))
            low = np.minimum(place.astype(int), len(computed) - 2)
            part = (place - low)[:, None]
            thinned = -np.log(_thinned(np.radians(computed), bent, lowest[start]))
            along = np.column_stack([depth, thinned, bent])
            along = along[low] + part * (along[low + 1] - along[low])
            refraction[start] = along[:, -1]
            amounts[start, :, :count] = along[:, :-1]
            amounts[start, :-1, count:] = np.diff(along[:, :-1], axis=0)

        with ThreadPoolExecutor(THREADS) as pool:
            list(pool.map(fill, boundaries))
        return cls(layers, amounts, _doubled(spectra), refraction, edge)

    def of_depth(self, extinction_depth: Array) -> "SunTable":
        """The table of other optical depths (layer, wavelength) of the same absorbers and scatterers in the layers."""
        spectra, *_ = np.linalg.lstsq(self.layers, extinction_depth, rcond=None)
        return replace(self, spectra=_doubled(spectra.astype(float)))

    def at(self, boundary: NDArray[np.intp], cos_zenith: Array) -> NDArray[np.float32]:
        """Transmission toward the sun from ``boundary`` (index), (..., wavelength); arguments broadcast to (...)."""
        angles = self.amounts.shape[1]
        place = np.arccos(cos_zenith) * (180 / np.pi / _STEP_DEG)
        clear = place <= self.edge[boundary]
        low = np.minimum(place.astype(np.intp), angles - 2)
        along = self.amounts.reshape(-1, self.amounts.shape[2]).take(low + boundary * angles, axis=0, mode="clip")
        count = along.shape[-1] // 2
        along[..., count:] *= ((place - low) * clear).astype(np.float32)[..., None]
        along[..., count - 1] += np.where(clear, np.float32(0), np.float32(_DARK))
        light = _transmission(along, self.spectra)
        if self.less is not None:
            light -= _transmission(along, self.less)
        return light

    def split(self) -> tuple["SunTable", "SunTable"]:
        """The first half of the wavelengths, and the second."""
        first, second = np.split(self.spectra, 2, axis=1)
        return replace(self, spectra=first), replace(self, spectra=second)

    def apparent(self, boundary: int, zenith_angle: Array) -> Array:
        """Apparent zenith angle [rad] of the sun at ``boundary``, by its geometric one; broadcasts."""
        place = np.degrees(zenith_angle) / _STEP_DEG
        return zenith_angle - np.interp(place, np.arange(self.refraction.shape[1]), self.refraction[boundary])


def _components(depth: Array) -> tuple[Array, Array]:
    """``depth`` (layer, wavelength) as a product (layer, component) (component, wavelength) of as few as will do."""
    left, size, right = np.linalg.svd(depth, full_matrices=False)
    kept = max(int((size > _NEGLIGIBLE * size[0]).sum()), 1)
    return left[:, :kept] * size[:kept], right[:kept]


def _doubled(spectra: Array) -> NDArray[np.float32]:
    """Spectra as a table keeps them, that of what thins the beam last."""
    whole = -np.concatenate([spectra, np.ones((1, spectra.shape[1]))]).astype(np.float32)
    return np.concatenate([whole, whole])


def _transmission(along: NDArray[np.float32], spectra: NDArray[np.float32]) -> NDArray[np.float32]:
    """Of amounts (..., component) with ``spectra`` (component, wavelength)."""
    light = along.reshape(-1, along.shape[-1]) @ spectra
    np.exp(light, out=light)
    return light.reshape(*along.shape[:-1], -1)


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
