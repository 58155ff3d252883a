"""One more scattering of the whole field as a dense linear operator, and the sum of all orders.

The binned geometry is kept once; the matrices of a few wavelengths at a time are made from it in a buffer that is used
again, since it is the largest thing in memory.
"""

from collections.abc import Iterator
from concurrent.futures import ThreadPoolExecutor
from dataclasses import dataclass
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

from skychart.sky import dipole
from skychart.sky.beam import THREADS
from skychart.sky.fan import Fan
from skychart.sky.kernels import Kernels, Window, bin_crossings, bin_ground
from skychart.sky.shape import Shape

Array = NDArray[np.float64]
Single = NDArray[np.float32]

_LAST_ORDER = 1e-4
_MOST_ORDERS = 200
_REACHES_DEG = (4.0, 1.0)  # crossings that turn by less about the planet's centre see few source nodes
_BLOCK_BYTES = 330e6  # of matrices held at once, one a wavelength


@dataclass(frozen=True, eq=False)
class Level:
    """The geometry of all rays from one level: kernels by the reach of their rays, and of the ground seen."""

    kernels: list[Kernels]
    ground: Single  # (ray, entry, node, ground node)
    ground_transmission: Array  # (ray, wavelength)

    @classmethod
    def of(cls, fan: Fan, chi: Array, shapes: tuple[Shape, Shape], entries: int) -> "Level":
        """Bin a fan's crossings for sources at ``chi`` [rad] over the shapes of the tensor and of the ground."""
        seen = fan.coarse.reached & (fan.coarse.weight.max(axis=(0, 4)) > 0)
        reach = np.abs(fan.coarse.sin_turn)
        kernels = []
        # the ground's own rays make its irradiance too: keep them in one piece
        reaches = np.sin(np.radians(_REACHES_DEG)) if fan.level else ()
        for nearest, farthest in pairwise((np.inf, *reaches, -1.0)):
            some = seen & (reach < nearest) & (reach >= farthest)
            if some.any():
                kernels.append(bin_crossings(fan, some, Window.of(chi, nearest), chi, shapes[0], entries))
        strikes = np.nonzero(fan.coarse.ground.any(axis=1))[0]
        return cls(kernels, bin_ground(fan, strikes, chi, shapes[1], entries), fan.coarse.ground[strikes])


class Operator:
    """The operator at every wavelength. States are over the shapes: (level, entry, node), then (ground node)."""

    def __init__(
        self, fans: list[Fan], chi: Array, shapes: tuple[Shape, Shape], scatterers: dipole.Scatterers, albedo: Array
    ) -> None:
        self.nodes, self.entries = len(chi), scatterers.entries
        self.rows = self.entries * self.nodes
        self.scatterers, self.albedo = scatterers, albedo
        with ThreadPoolExecutor(THREADS) as pool:
            self.levels = list(pool.map(lambda fan: Level.of(fan, chi, shapes, self.entries), fans))
        repeated = np.repeat(shapes[0].at_node[:, None], self.entries, axis=1)
        self.shape = np.append(repeated.ravel(), shapes[1].at_node[0]).astype(np.float32)

    def sum_orders(self, tensor: Array, ground: Array) -> tuple[Single, Single]:
        """All orders from the first: ``tensor`` (level, node, entry, wavelength), ``ground`` (node, wavelength).

        The results have the same shapes and are divided by the Shape's values. Orders are added until one adds less
        than 1e-4 of the sum anywhere.
        """
        flat = np.concatenate([tensor.transpose(3, 0, 2, 1).reshape(tensor.shape[3], -1), ground.T], axis=1)
        first = (flat / self.shape).astype(np.float32)
        total = np.empty_like(first)
        wavelengths, size = first.shape
        at_once = min(max(int(_BLOCK_BYTES / (4 * size**2)), 1), wavelengths)
        buffer = np.empty((at_once, size, size), np.float32)
        with ThreadPoolExecutor(THREADS) as pool:
            for start in range(0, wavelengths, at_once):
                block = range(start, min(start + at_once, wavelengths))
                matrices = buffer[: len(block)]
                list(pool.map(lambda number, m=matrices, b=block: self._fill(m, b, number), range(len(self.levels))))
                total[block] = list(pool.map(self._summed, matrices, first[block]))
        solved = total[:, : -self.nodes].reshape(-1, len(self.levels), self.entries, self.nodes)
        return solved.transpose(1, 3, 2, 0), total[:, -self.nodes :].T

    def _summed(self, matrix: Single, first: Single) -> Single:
        total, order = first.copy(), first
        for _ in range(_MOST_ORDERS):
            order = (matrix @ order) / self.shape
            total += order
            if np.abs(order).max() < _LAST_ORDER * np.abs(total).max():
                break
        return total

    def _fill(self, matrices: Single, wavelengths: range, number: int) -> None:
        """The rows of level ``number`` of the matrices of some wavelengths; with level 0 come those of the ground."""
        level, size = self.levels[number], (self.entries, self.nodes)
        count, own = len(matrices), matrices[:, number * self.rows : (number + 1) * self.rows]
        own.fill(0)
        rows = own[..., : -self.nodes].reshape(count, *size, len(self.levels), *size)
        ground = matrices[:, -self.nodes :]
        to_ground = ground[..., : -self.nodes].reshape(count, 1, self.nodes, len(self.levels), *size)
        if number == 0:
            ground.fill(0)
        for kernels in level.kernels:
            blocks = self._weighted(kernels, wavelengths)
            if kernels.window.width == self.nodes:
                for source, block in blocks:
                    rows[:, :, :, source] = block[:, : self.entries]
                    if number == 0:
                        to_ground[:, :, :, source] = block[:, self.entries :]
                continue
            sums = np.zeros((*rows.shape[:-1], kernels.window.width), np.float32)
            for source, block in blocks:
                sums[:, :, :, source] = block[:, : self.entries]
            for x, first in enumerate(kernels.window.first):
                rows[:, :, x, ..., first : first + kernels.window.width] += sums[:, :, x]
        radiance = self.albedo[wavelengths] / np.pi * level.ground_transmission[:, wavelengths]
        own[..., -self.nodes :] = np.tensordot(radiance.T, level.ground, axes=1).reshape(count, self.rows, -1)

    def _weighted(self, kernels: Kernels, wavelengths: range) -> Iterator[tuple[int, Single]]:
        """Each source level with its kernels under the path weights: (wavelength, output, node, entry, window)."""
        count, (_, outputs, nodes, _, width) = len(wavelengths), kernels.dipolar.shape
        scatterers = self.scatterers.of(wavelengths)
        traced = [entry for entry, part in enumerate(dipole.TRACE) if part]
        for source, run in kernels.runs():
            molecules, *haze = kernels.weight[:, run, wavelengths.start : wavelengths.stop].swapaxes(1, 2)
            block = np.empty((count, outputs, nodes, self.entries, width), np.float32)
            block[..., : dipole.ENTRIES, :] = _product(scatterers.a[:, None] * molecules, kernels.dipolar[run])
            plain = scatterers.b[:, None] * molecules
            if haze and kernels.forward is not None and scatterers.forward is not None:
                plain = plain + dipole.ISOTROPIC * haze[0]
                forward = dipole.ISOTROPIC * scatterers.forward[:, None] * haze[0]
                block[..., dipole.ENTRIES :, :] = _product(forward, kernels.forward[run])
            isotropic = _product(plain, kernels.plain[run])
            for entry in traced:
                block[..., entry, :] += isotropic
            yield source, block


def _product(weight: Array, kernel: Single) -> Single:
    """Sum over crossings of ``weight`` (wavelength, crossing) and ``kernel`` (crossing, ...): (wavelength, ...)."""
    return (weight.astype(np.float32) @ kernel.reshape(len(kernel), -1)).reshape(len(weight), *kernel.shape[1:])
