"""One more scattering of the whole field as a dense linear operator, and the sum of all orders."""

from collections.abc import Iterator
from concurrent.futures import ThreadPoolExecutor
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
_REACHES_DEG = (4.0, 1.0)  # crossings that turn by less about the planet's centre see few source nodes


class Operator:
    """The operator of some wavelengths. All states are over the shapes.

    ``between`` (wavelength, level, source level, entry x node, source entry x node);
    ``from_ground`` (wavelength, level, entry x node, ground node);
    ``to_ground`` (wavelength, source level, ground node, source entry x node).
    """

    def __init__(
        self,
        fans: list[Fan],
        block: slice,
        chi: Array,
        shapes: tuple[Shape, Shape],
        coefficients: tuple[Array, Array],
        albedo: Array,
    ) -> None:
        self.block, self.chi, self.albedo = block, chi, albedo
        self.tensor_shape, self.ground_shape = shapes
        self.a, self.b = coefficients
        count, levels, points = len(albedo), len(fans), dipole.ENTRIES * len(chi)
        self.between = np.zeros((count, levels, levels, points, points), np.float32)
        self.from_ground = np.zeros((count, levels, points, len(chi)), np.float32)
        self.to_ground = np.zeros((count, levels, len(chi), points), np.float32)
        with ThreadPoolExecutor(THREADS) as pool:
            list(pool.map(self._fill, fans))

    def sum_orders(self, tensor: Array, ground: Array) -> tuple[Single, Single]:
        """All orders from the first: ``tensor`` (level, node, entry, wavelength), ``ground`` (node, wavelength).

        The results have the same shapes and are divided by the Shape's values. Orders are added until one adds less
        than 1e-4 of the sum anywhere.
        """
        levels, nodes, entries, count = tensor.shape
        over_tensor = (
            np.repeat(self.tensor_shape.at_node[:, None], entries, axis=1).reshape(levels, -1).astype(np.float32)
        )
        over_ground = self.ground_shape.at_node[0].astype(np.float32)
        order = (tensor.transpose(3, 0, 2, 1).reshape(count, levels, -1) / over_tensor).astype(np.float32)
        order_ground = (ground.T / over_ground).astype(np.float32)
        total, total_ground = order.copy(), order_ground.copy()
        for _ in range(_MOST_ORDERS):
            order, order_ground = (
                (
                    (self.between @ order[:, None, ..., None])[..., 0].sum(axis=2)
                    + (self.from_ground @ order_ground[:, None, :, None])[..., 0]
                )
                / over_tensor,
                (self.to_ground @ order[..., None])[..., 0].sum(axis=1) / over_ground,
            )
            total += order
            total_ground += order_ground
            if np.abs(order).max() < _LAST_ORDER * np.abs(total).max():
                break
        return total.reshape(count, levels, entries, nodes).transpose(1, 3, 2, 0), total_ground.T

    def _fill(self, fan: Fan) -> None:
        """All rows of the fan's level."""
        count, levels, nodes = len(self.a), self.between.shape[1], len(self.chi)
        size = count, levels, dipole.ENTRIES, nodes, dipole.ENTRIES, nodes
        rows = self.between[:, fan.level].reshape(size)
        ground_rows = self.to_ground.reshape(count, levels, 1, nodes, dipole.ENTRIES, nodes)
        seen = fan.coarse.reached & (fan.coarse.weight.max(axis=3) > 0)
        reach = np.abs(fan.coarse.sin_turn)
        for nearest, farthest in pairwise((np.inf, *np.sin(np.radians(_REACHES_DEG)), -1.0)):
            some = seen & (reach < nearest) & (reach >= farthest)
            if not some.any():
                continue
            window = Window.of(self.chi, nearest)
            blocks = self._contract(bin_crossings(fan, some, window, self.chi, self.tensor_shape))
            if window.width == nodes:
                for level, block in blocks:
                    rows[:, level] += block[:, : dipole.ENTRIES]
                    if fan.level == 0:
                        ground_rows[:, level] += block[:, dipole.ENTRIES :]
                continue
            sums = np.zeros(
                (count, levels, dipole.ENTRIES + (fan.level == 0), nodes, dipole.ENTRIES, window.width), np.float32
            )
            for level, block in blocks:
                sums[:, level] = block
            for x, first in enumerate(window.first):
                sources = slice(first, first + window.width)
                rows[:, :, :, x, :, sources] += sums[:, :, : dipole.ENTRIES, x]
                if fan.level == 0:
                    ground_rows[:, :, :, x, :, sources] += sums[:, :, dipole.ENTRIES :, x]
        strikes = np.nonzero(fan.coarse.ground.any(axis=1))[0]
        radiance = (self.albedo / np.pi) * fan.coarse.ground[strikes, self.block]
        lit = np.tensordot(radiance.T, bin_ground(fan, strikes, self.chi, self.ground_shape), axes=1)
        self.from_ground[:, fan.level] = lit.reshape(count, -1, nodes)

    def _contract(self, kernels: Kernels) -> Iterator[tuple[int, Single]]:
        """Each source level's kernels weighted and summed: (wavelength, output, node, entry, window)."""
        count, size = len(self.a), kernels.dipolar.shape[1:]
        for level in np.unique(kernels.level):
            here = kernels.level == level
            weight = kernels.weight[here, self.block].T
            dipolar = (self.a[:, None] * weight).astype(np.float32) @ kernels.dipolar[here].reshape(here.sum(), -1)
            plain = (self.b[:, None] * weight).astype(np.float32) @ kernels.plain[here].reshape(here.sum(), -1)
            block, plain = dipolar.reshape(count, *size), plain.reshape(count, *size[:2], size[3])
            for entry, traced in enumerate(dipole.TRACE):
                if traced:
                    block[..., entry, :] += plain
            yield int(level), block
