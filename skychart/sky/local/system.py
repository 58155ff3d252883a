"""The linear system of one azimuth mode of the light in flat air.

Unknown, in this order: the entries of the molecules' tensor that belong to the mode, each at every boundary; the
Legendre moments m, m + 1, ... of the radiance, each at every hazy boundary; in mode 0 the irradiance of the ground.
State x obeys x = M x + first, with M one more scattering and ``first`` what is scattered once from the beam. Arrays
have the wavelength first.
"""

import numpy as np
from numpy.typing import NDArray

from skychart.sky.dipole import molecular_coefficients
from skychart.sky.local import tensor
from skychart.sky.local.air import FlatAir, Optics
from skychart.sky.local.paths import beam_averages, from_ground, path_weights
from skychart.sky.local.streams import Streams, legendre

Array = NDArray[np.float64]

MOLECULES, HAZE = 0, 1


class System:
    """The systems of all azimuth modes below ``modes``; ``hazy`` are the boundaries that touch haze."""

    def __init__(self, air: FlatAir, optics: Optics, streams: Streams, hazy: slice, modes: int) -> None:
        cosine = streams.cosine
        self.streams, self.hazy = streams, hazy
        self.coefficients = molecular_coefficients(air.depolarisation)
        self.ground_radiance = air.ground_albedo / np.pi
        molecules, haze = path_weights(optics.scattering, optics.extinction, cosine)
        self.molecules, self.haze = molecules, np.ascontiguousarray(haze[..., hazy])
        self.molecules_at_haze, self.haze_at_haze = (
            np.ascontiguousarray(weights[:, :, hazy]) for weights in (self.molecules, self.haze)
        )
        self.averages = beam_averages(optics.scattering, optics.extinction, cosine, optics.beam)
        self.from_ground = from_ground(optics.extinction, cosine)
        count = len(optics.moments)
        self.share = 0.5 * (2 * np.arange(count) + 1) * optics.moments.T
        self.legendre = legendre(modes, count, cosine)
        self.cos_sun = np.cos(air.solar_zenith_angle)
        self.legendre_of_sun = legendre(modes, count, self.cos_sun)
        self.direct = np.maximum(self.cos_sun, 0) * optics.beam[0].T

    def solution(self, mode: int) -> tuple[Array, Array, Array]:
        """All orders: tensor (wavelength, entry, boundary, sun), moments from the mode's first on, (wavelength, moment,
        boundary, sun), and the irradiance of the ground, (wavelength, 0 or 1, sun).
        """
        matrix, (tensors, moments, _) = self._matrix(mode)
        state = np.asarray(np.linalg.solve(np.eye(matrix.shape[1]) - matrix, self._first(mode)), dtype=float)
        wavelengths, _, suns = state.shape
        boundaries, hazy = self.haze.shape[2:]
        return (
            state[:, :tensors].reshape(wavelengths, tensors // boundaries, boundaries, suns),
            state[:, tensors : tensors + moments].reshape(wavelengths, moments // hazy, hazy, suns),
            state[:, tensors + moments :],
        )

    def _matrix(self, mode: int) -> tuple[Array, tuple[int, int, int]]:
        """The operator and how many unknowns there are of each kind."""
        polynomials, to_moments, share = self._polynomials(mode)
        to_tensor, from_tensor, coherent = self._molecular(mode)
        haze_share = np.repeat(share, self.haze.shape[3], axis=1)[:, None]
        blocks = [
            [_block(coherent, self.molecules), _block(_pairs(to_tensor, polynomials), self.haze) * haze_share],
            [
                _block(_pairs(to_moments, from_tensor), self.molecules_at_haze),
                _block(_pairs(to_moments, polynomials), self.haze_at_haze) * haze_share,
            ],
        ]
        if mode == 0:
            falling = self._falling()
            lit = self.from_ground * self.ground_radiance[:, None, None]
            columns = [_summed(to_tensor, lit[..., None]), _summed(to_moments, lit[:, :, self.hazy, None])]
            ground = [
                _block(_pairs(falling, from_tensor), self.molecules[:, :, :1]),
                _block(_pairs(falling, polynomials), self.haze[:, :, :1]) * haze_share,
            ]
            blocks = [[*row, column] for row, column in zip(blocks, columns, strict=True)]
            blocks.append([*ground, np.zeros((len(lit), 1, 1))])
        sizes = blocks[0][0].shape[1], blocks[1][0].shape[1], int(mode == 0)
        return np.concatenate([np.concatenate(row, axis=2) for row in blocks], axis=1), sizes

    def _first(self, mode: int) -> Array:
        """Tensor, moments and ground's irradiance by light scattered once (the ground: and by the beam)."""
        polynomials, to_moments, share = self._polynomials(mode)
        to_tensor, from_tensor, coherent = self._molecular(mode)
        beam = tensor.of_beam(self.cos_sun)[tensor.entries_of(mode)]
        of_sun = self.legendre_of_sun[mode, :, mode:] * (1 if mode == 0 else 2) / (2 * np.pi)
        molecules, haze = self.averages
        from_haze = ((polynomials * share[:, None]) @ of_sun.T)[:, :, None] * haze
        light = (from_tensor @ beam)[:, :, None] * molecules + from_haze
        by_molecules = np.einsum("wsin,wskn->wikn", coherent @ beam, molecules)
        by_haze = _summed(to_tensor, from_haze)
        rows = [by_molecules.reshape(by_haze.shape) + by_haze, _summed(to_moments, light[:, :, self.hazy])]
        if mode == 0:
            rows.append(self.direct[:, None] + _summed(self._falling(), light[:, :, :1]))
        return np.concatenate(rows, axis=1)

    def _falling(self) -> Array:
        """What mode 0 of the radiance at the ground gives to its irradiance, (stream, 1)."""
        return 2 * np.pi * (self.streams.weight * np.maximum(self.streams.cosine, 0))[:, None]

    def _polynomials(self, mode: int) -> tuple[Array, Array, Array]:
        """Y_lm of the mode (stream, moment), the same under the streams' weights, and (2 l + 1) chi_l / 2."""
        polynomials = self.legendre[mode, :, mode:]
        return polynomials, polynomials * self.streams.weight[:, None], self.share[:, mode:]

    def _molecular(self, mode: int) -> tuple[Array, Array, Array]:
        """Tensor by unpolarised light, light by tensor, tensor by tensor; under the streams' weights where summed."""
        weight, cosine = self.streams.weight[:, None], self.streams.cosine
        if mode >= tensor.MODES:
            streams, wavelengths = len(cosine), len(self.share)
            return np.zeros((streams, 0)), np.zeros((wavelengths, streams, 0)), np.zeros((wavelengths, streams, 0, 0))
        return (
            tensor.unpolarised(mode, cosine) * weight,
            tensor.emitted(mode, cosine, *self.coefficients),
            tensor.gathered(mode, cosine, *self.coefficients) * weight[:, :, None],
        )


def _pairs(out: Array, into: Array) -> Array:
    """Products (..., stream, out, in) of factors (stream, out) and (..., stream, in)."""
    return out[..., :, None] * into[..., None, :]


def _block(factors: Array, weights: Array) -> Array:
    """Sum over streams of factors (..., stream, out, in) and weights (wavelength, stream, boundary, source boundary).

    Shape (wavelength, out x boundary, in x source boundary).
    """
    count, streams, here, there = weights.shape
    outs, ins = factors.shape[-2:]
    flat = np.moveaxis(factors, -3, -1).reshape(*factors.shape[:-3], outs * ins, streams)
    sums = flat @ weights.reshape(count, streams, here * there)
    return sums.reshape(count, outs, ins, here, there).transpose(0, 1, 3, 2, 4).reshape(count, outs * here, ins * there)


def _summed(factors: Array, light: Array) -> Array:
    """Sum over streams of factors (stream, out) and light (wavelength, stream, boundary, sun).

    Shape (wavelength, out x boundary, sun).
    """
    count, streams, boundaries, suns = light.shape
    return (factors.T @ light.reshape(count, streams, -1)).reshape(count, factors.shape[1] * boundaries, suns)
