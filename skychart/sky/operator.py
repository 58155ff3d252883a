"""One more scattering of the whole field as a dense linear operator, and the sum of all orders.

The binned geometry is kept once; the matrix of each wavelength is made from it in a buffer that is used again, since
it is the largest thing in memory.
"""

from collections.abc import Iterator
from concurrent.futures import ThreadPoolExecutor
from dataclasses import dataclass
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

from skychart.sky import dipole
from skychart.sky.fan import Fan
from skychart.sky.kernels import Kernels, Window, bin_crossings, bin_ground
from skychart.sky.shape import Shape

Array = NDArray[np.float64]
Single = NDArray[np.float32]

THREADS = 2
_LAST_ORDER = 1e-4
_MOST_ORDERS = 200
_REACHES_DEG = (10.0, 4.0, 1.0)  # crossings that turn by less about the planet's centre see few source nodes


@dataclass(frozen=True, eq=False)
class Level:
    """The geometry of all rays from one level: kernels by the reach of their rays, and of the ground seen."""

    kernels: list[Kernels]
    ground: Single  # (ray, entry, node, ground node)
    ground_transmission: Array  # (ray, wavelength)

    @classmethod
    def of(cls, fan: Fan, chi: Array, shapes: tuple[Shape, Shape]) -> "Level":
        """Bin a fan's crossings for sources at ``chi`` [rad] over the shapes of the tensor and of the ground."""
        seen = fan.coarse.reached & (fan.coarse.weight.max(axis=3) > 0)
        reach = np.abs(fan.coarse.sin_turn)
        kernels = []
        for nearest, farthest in pairwise((np.inf, *np.sin(np.radians(_REACHES_DEG)), -1.0)):
            some = seen & (reach < nearest) & (reach >= farthest)
            if some.any():
                kernels.append(bin_crossings(fan, some, Window.of(chi, nearest), chi, shapes[0]))
        strikes = np.nonzero(fan.coarse.ground.any(axis=1))[0]
        return cls(kernels, bin_ground(fan, strikes, chi, shapes[1]), fan.coarse.ground[strikes])


class Operator:
    """The operator at every wavelength. States are over the shapes: (level, entry, node), then (ground node)."""

    def __init__(
        self, fans: list[Fan], chi: Array, shapes: tuple[Shape, Shape], coefficients: tuple[Array, Array], albedo: Array
    ) -> None:
        self.nodes = len(chi)
        self.rows = dipole.ENTRIES * self.nodes
        self.coefficients, self.albedo = coefficients, albedo
        with ThreadPoolExecutor(THREADS) as pool:
            self.levels = list(pool.map(lambda fan: Level.of(fan, chi, shapes), fans))
        repeated = np.repeat(shapes[0].at_node[:, None], dipole.ENTRIES, axis=1)
        self.shape = np.append(repeated.ravel(), shapes[1].at_node[0]).astype(np.float32)

    def sum_orders(self, tensor: Array, ground: Array) -> tuple[Single, Single]:
        """All orders from the first: ``tensor`` (level, node, entry, wavelength), ``ground`` (node, wavelength).

        The results have the same shapes and are divided by the Shape's values. Orders are added until one adds less
        than 1e-4 of the sum anywhere.
        """
        flat = np.concatenate([tensor.transpose(3, 0, 2, 1).reshape(tensor.shape[3], -1), ground.T], axis=1)
        first = (flat / self.shape).astype(np.float32)
        with ThreadPoolExecutor(THREADS) as pool:
            shares = [range(start, len(first), THREADS) for start in range(THREADS)]
            sums = dict(
                pair for part in pool.map(lambda share: list(self._sums(share, first)), shares) for pair in part
            )
        total = np.stack([sums[wavelength] for wavelength in range(len(first))])
        solved = total[:, : -self.nodes].reshape(-1, len(self.levels), dipole.ENTRIES, self.nodes)
        return solved.transpose(1, 3, 2, 0), total[:, -self.nodes :].T

    def _sums(self, wavelengths: range, first: Single) -> Iterator[tuple[int, Single]]:
        matrix = np.empty((len(self.shape), len(self.shape)), np.float32)
        for wavelength in wavelengths:
            self._fill(matrix, wavelength)
            order = first[wavelength]
            total = order.copy()
            for _ in range(_MOST_ORDERS):
                order = (matrix @ order) / self.shape
                total += order
                if np.abs(order).max() < _LAST_ORDER * np.abs(total).max():
                    break
            yield wavelength, total

    def _fill(self, matrix: Single, wavelength: int) -> None:
        matrix.fill(0)
        count, size = len(self.levels), (dipole.ENTRIES, self.nodes)
        to_ground = matrix[-self.nodes :, : -self.nodes].reshape(1, self.nodes, count, *size)
        for number, level in enumerate(self.levels):
            own = matrix[number * self.rows : (number + 1) * self.rows]
            rows = own[:, : -self.nodes].reshape(*size, count, *size)
            for kernels in level.kernels:
                sums = self._weighted(kernels, wavelength)
                for x, first in enumerate(kernels.window.first):
                    sources = slice(first, first + kernels.window.width)
                    rows[:, x, ..., sources] += sums[:, : dipole.ENTRIES, x].swapaxes(0, 1)
                    if number == 0:
                        to_ground[:, x, ..., sources] += sums[:, dipole.ENTRIES :, x].swapaxes(0, 1)
            radiance = self.albedo[wavelength] / np.pi * level.ground_transmission[:, wavelength]
            own[:, -self.nodes :] = np.tensordot(radiance, level.ground, axes=1).reshape(self.rows, self.nodes)

    def _weighted(self, kernels: Kernels, wavelength: int) -> Single:
        """Kernels with one wavelength's path weights, summed by source level: (level, output, node, entry, window)."""
        size = kernels.dipolar.shape[1:]
        sums = np.zeros((len(self.levels), *size), np.float32)
        a, b = (coefficient[wavelength] for coefficient in self.coefficients)
        weight = kernels.weight[:, wavelength]
        dipolar_weight, plain_weight = (a * weight).astype(np.float32), (b * weight).astype(np.float32)
        traced = [entry for entry, part in enumerate(dipole.TRACE) if part]
        for level, run in kernels.runs():
            block = sums[level]
            np.matmul(
                dipolar_weight[run], kernels.dipolar[run].reshape(run.stop - run.start, -1), out=block.reshape(-1)
            )
            plain = plain_weight[run] @ kernels.plain[run].reshape(run.stop - run.start, -1)
            block[..., traced, :] += plain.reshape(*size[:2], 1, size[3])
        return sums
