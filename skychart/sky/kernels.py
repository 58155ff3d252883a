"""Geometry of one more scattering, binned on the solution's nodes; the same for every wavelength."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

from skychart.sky import dipole
from skychart.sky.fan import Fan
from skychart.sky.shape import Shape

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Window:
    """The run of source nodes that a node's rays can reach: ``first`` (node,) of ``width``."""

    first: NDArray[np.intp]
    width: int

    @classmethod
    def of(cls, chi: Array, sine: float) -> "Window":
        """For rays that turn by less than arcsin ``sine`` about the planet's centre; all nodes beyond a right angle."""
        nodes = len(chi)
        if sine >= 1:
            return cls(np.zeros(nodes, np.intp), nodes)
        turn = np.arcsin(sine)
        low = np.maximum(np.searchsorted(chi, chi - turn, side="right") - 1, 0)
        high = np.minimum(np.searchsorted(chi, chi + turn, side="left"), nodes - 1)
        width = int((high - low).max()) + 1
        return cls(np.minimum(low, nodes - width), width)


@dataclass(frozen=True, eq=False)
class Kernels:
    """Kernels on (crossing, output, node, entry, window of source nodes); ``plain`` has no entry axis.

    ``dipolar`` takes the four entries of the tensor, ``plain`` its trace, ``forward`` the two of the flux (haze only).
    Outputs: the entries, and at the ground its irradiance. Crossings stand in order of their level; ``weight`` has
    shape (scatterer, crossing, wavelength).
    """

    window: Window
    level: NDArray[np.intp]
    weight: Array
    dipolar: NDArray[np.float32]
    plain: NDArray[np.float32]
    forward: NDArray[np.float32] | None

    def runs(self) -> Iterator[tuple[int, slice]]:
        """Each level with the run of its crossings."""
        starts = np.flatnonzero(np.diff(self.level, prepend=-1))
        for start, stop in pairwise((*starts, len(self.level))):
            yield int(self.level[start]), slice(int(start), int(stop))


def bin_crossings(fan: Fan, some: NDArray[np.bool_], window: Window, chi: Array, shape: Shape, entries: int) -> Kernels:
    """Kernels of the crossings ``some`` (ray, 2, level) for sources at ``chi`` [rad] of a field of ``entries``."""
    crossing = fan.coarse
    level, ray, branch = np.nonzero(some.transpose(2, 0, 1))
    omega = fan.sight(chi)
    cos_there, cosine, sine = dipole.moved(
        crossing.cos_turn[ray, branch, level][:, None, None], crossing.sin_turn[ray, branch, level][:, None, None],
        fan.cos_phi, fan.sin_phi, np.cos(chi)[:, None], np.sin(chi)[:, None],
    )  # fmt: skip
    node, low, high = shape.weights(level[:, None, None], cos_there)
    e_s, e_rho, e_alpha = (axis.of(ray) for axis in dipole.projected_axes(omega))
    there_rho, there_alpha = dipole.turned_axes(e_rho, e_alpha, cosine, sine)
    sight = omega.of(ray)
    incidence = None if fan.level else np.maximum(fan.cos_zenith, 0)[ray][:, None, None]
    plain = dipole.outputs(dipole.projector_entries(sight), sight, entries, incidence)
    columns = [
        dipole.tensor_entries(e_s, e_s),
        [2 * entry for entry in dipole.tensor_entries(e_s, there_rho)],
        dipole.tensor_entries(there_rho, there_rho),
        dipole.tensor_entries(there_alpha, there_alpha),
    ]
    dipolar = [dipole.outputs(column, sight, entries, incidence) for column in columns]
    along_rho = cosine * sight.rho + sine * sight.alpha
    forward = [[part * output for output in plain] for part in (sight.s, along_rho)] if entries > dipole.ENTRIES else []
    solid = fan.solid_angle[ray][:, None, None]
    place, low, high = node - window.first[:, None], solid * low, solid * high

    def binned(sources: list[list[Array]]) -> NDArray[np.float32]:
        spread = _Spread(place, low, high, window.width, len(sources))
        result = np.empty((len(ray), len(plain), len(chi), len(sources), window.width), np.float32)
        for output in range(len(plain)):
            result[:, output] = spread.bin([source[output] for source in sources])
        return result

    return Kernels(
        window=window,
        level=level,
        weight=crossing.weight[:, ray, branch, level],
        dipolar=binned(dipolar),
        plain=binned([plain])[:, :, :, 0],
        forward=binned(forward) if forward else None,
    )


def bin_ground(fan: Fan, strikes: NDArray[np.intp], chi: Array, shape: Shape, entries: int) -> NDArray[np.float32]:
    """What unit radiance of the ground counts along the rays ``strikes``: (ray, entry, node, node of the ground)."""
    crossing = fan.coarse
    cos_there, _, _ = dipole.moved(
        crossing.ground_cos_turn[strikes][:, None, None], crossing.ground_sin_turn[strikes][:, None, None],
        fan.cos_phi, fan.sin_phi, np.cos(chi)[:, None], np.sin(chi)[:, None],
    )  # fmt: skip
    node, low, high = shape.weights(np.zeros(1, np.intp), cos_there)
    solid = fan.solid_angle[strikes][:, None, None]
    sight = fan.sight(chi).of(strikes)
    unpolarised = [0.5 * solid * entry for entry in dipole.projector_entries(sight)]
    spread = _Spread(node, low, high, len(chi), entries)
    return spread.bin(dipole.outputs(unpolarised, sight, entries)).transpose(0, 2, 1, 3).astype(np.float32)


class _Spread:
    """Adds values on (row, node, azimuth) to the two source nodes each is interpolated between."""

    def __init__(self, node: NDArray[np.intp], low: Array, high: Array, nodes: int, entries: int) -> None:
        self.size = (node.shape[0], node.shape[1], entries, nodes)
        row = np.arange(node.shape[0] * node.shape[1]).reshape(*node.shape[:2], 1) * (entries * nodes)
        place = (row + node)[:, :, None] + nodes * np.arange(entries)[:, None]
        self.place = np.stack([place, place + 1], axis=3).ravel()
        self.low, self.high = low, high

    def bin(self, values: Sequence[Array]) -> Array:
        """(row, node, entry, source node) from one array an entry."""
        weight = np.empty((*self.size[:3], 2, self.low.shape[2]))
        for entry, value in enumerate(values):
            np.multiply(value, self.low, out=weight[:, :, entry, 0])
            np.multiply(value, self.high, out=weight[:, :, entry, 1])
        sums = np.bincount(self.place, weight.ravel(), minlength=int(np.prod(self.size)))
        return np.asarray(sums, dtype=float).reshape(self.size)
