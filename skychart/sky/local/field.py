"""Light of all orders in flat air: the full solution and its closure.

The azimuth modes of flat air never mix, and the system of each is the same for every sun: so the sum of all orders of
scattering is one solution of a dense system for all suns, exact where adding order to order would stop.
"""

from concurrent.futures import ThreadPoolExecutor
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from skychart.sky.dipole import molecular_coefficients
from skychart.sky.local import tensor
from skychart.sky.local.air import FlatAir, Optics, delta_eddington, delta_m
from skychart.sky.local.paths import beam_averages, from_ground, path_weights, top_boundary
from skychart.sky.local.streams import MODES, MOMENTS, Streams, legendre
from skychart.sky.local.system import HAZE, MOLECULES, System

Array = NDArray[np.float64]

_THREADS = 2


@dataclass(frozen=True, eq=False)
class FlatField:
    """Light scattered at least once at the boundaries of flat air, under every sun, per unit solar irradiance.

    ``tensor`` (boundary, sun, entry, wavelength): the sphere-integrated coherency tensor, entries zz, (xx + yy)/2, xz,
    (xx - yy)/2 with z up and x toward the sun's azimuth. ``moments`` (mode, boundary, sun, moment, wavelength), at the
    boundaries ``hazy`` alone: integrals of Y_lm(mu) I_m(mu) dmu, 0 where l < m. So the mean intensity times 4 pi is
    2 pi times moment 0 of mode 0, and the vector that the light comes from, integral of omega I, has the components
    z: 2 pi times moment 1 of mode 0; x: sqrt(2) pi times moment 1 of mode 1.
    ``ground`` (sun, wavelength): downward irradiance of the ground, the direct light of ``optics.beam`` included.
    """

    air: FlatAir
    optics: Optics
    streams: Streams
    hazy: slice
    tensor: Array
    moments: Array
    ground: Array

    def diffuse_irradiance(self) -> Array:
        """Downward irradiance of the ground by all light but the beam as it truly is, (sun, wavelength)."""
        return self.ground - np.maximum(np.cos(self.air.solar_zenith_angle), 0)[:, None] * self.air.beam[0]

    def radiance(self, cosine: Array) -> Array:
        """Radiance [1/sr] at the hazy boundaries, mode by mode, shape (boundary, sun, direction, mode, wavelength).

        ``cosine`` of the zenith angle of sight, (direction,), not 0. Light scattered once by the scaled haze is in it.
        """
        return np.moveaxis(_radiance(self, cosine), (3, 4, 2, 0, 1), (0, 1, 2, 3, 4))

    @cached_property
    def at_streams(self) -> Array:
        """``radiance`` at the streams in the order of the solver: (mode, wavelength, stream, boundary, sun)."""
        return _radiance(self, self.streams.cosine)


def solve_flat(air: FlatAir, streams: Streams | None = None, moments: int = MOMENTS, modes: int = MODES) -> FlatField:
    """The full solution: ``moments`` of the phase function, delta-M beyond them, and ``modes`` azimuth modes, >= 3."""
    return _solve(air, delta_m(air, moments), streams or Streams.double_gauss(), modes)


def solve_closure(air: FlatAir, streams: Streams | None = None) -> FlatField:
    """The same with two moments of the haze's phase function, delta-Eddington beyond them."""
    return _solve(air, delta_eddington(air), streams or Streams.double_gauss(), tensor.MODES)


def _solve(air: FlatAir, optics: Optics, streams: Streams, modes: int) -> FlatField:
    hazy = slice(0, top_boundary(optics.scattering[HAZE]) + 1)
    system = System(air, optics, streams, hazy, modes)
    with ThreadPoolExecutor(_THREADS) as pool:
        solutions = list(pool.map(system.solution, range(modes)))
    tensors = np.concatenate([solution[0] for solution in solutions], axis=1)
    wavelengths, _, boundaries, suns = solutions[0][1].shape
    moments = np.zeros((modes, wavelengths, len(optics.moments), boundaries, suns))
    for mode, solution in enumerate(solutions):
        moments[mode, :, mode:] = solution[1]
    return FlatField(
        air, optics, streams, hazy,
        tensor=tensors.transpose(2, 3, 1, 0),
        moments=moments.transpose(0, 3, 4, 2, 1),
        ground=solutions[0][2][:, 0].T,
    )  # fmt: skip


def _radiance(field: FlatField, cosine: Array) -> Array:
    """Radiance at the hazy boundaries, (mode, wavelength, direction, boundary, sun)."""
    optics, hazy, modes = field.optics, field.hazy, len(field.moments)
    weights = path_weights(optics.scattering, optics.extinction, cosine)[..., hazy, :]
    molecules, haze = beam_averages(optics.scattering, optics.extinction, cosine, optics.beam)[..., hazy, :]
    cos_sun = np.cos(field.air.solar_zenith_angle)
    count = len(optics.moments)
    here, of_sun = legendre(modes, count, cosine), legendre(modes, count, cos_sun) / (2 * np.pi)
    of_sun[1:] *= 2
    source = here[:, None] * (0.5 * (2 * np.arange(count) + 1) * optics.moments.T)[:, None]
    once = source @ of_sun[:, None].swapaxes(2, 3)
    light = once[:, :, :, None] * haze
    moments = field.moments.transpose(0, 4, 3, 1, 2)
    emitted = (source @ moments.reshape(*moments.shape[:3], -1)).reshape(*source.shape[:3], *moments.shape[3:])
    light += weights[HAZE][..., hazy] @ emitted
    a, b = molecular_coefficients(field.air.depolarisation)
    beam = tensor.of_beam(cos_sun)
    entries = field.tensor.transpose(3, 2, 0, 1)
    for mode in range(tensor.MODES):
        part = tensor.entries_of(mode)
        sent = tensor.emitted(mode, cosine, a, b)
        light[mode] += (sent @ beam[part])[:, :, None] * molecules
        light[mode] += weights[MOLECULES] @ np.einsum("wce,wekn->wckn", sent, entries[:, part], optimize=True)
    below = from_ground(optics.extinction, cosine)[:, :, hazy, None]
    light[0] += below * (field.air.ground_albedo / np.pi * field.ground).T[:, None, None]
    return light
