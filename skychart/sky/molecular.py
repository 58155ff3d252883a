"""Every order of molecular scattering on the sphere, by successive orders of a dense linear operator.

The field is the sphere-integrated coherency tensor of the light at each (level, solar zenith angle), four entries a
point, and the downward irradiance of the ground at each solar zenith angle. The operator gathers, along rays from every
point, the light that the field sends after one more scattering. Its geometry is the same for all wavelengths: it is
binned once on (ray crossing, solar zenith nodes) and then contracted with each wavelength's path weights.

Between solar zenith nodes the field is interpolated as shape x linear(field / shape), the shape being the first order's
own fall through twilight.
"""

from concurrent.futures import ThreadPoolExecutor
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from skychart.sky import dipole
from skychart.sky.beam import SunTable
from skychart.sky.grid import Grid, solar_zenith_nodes_deg
from skychart.sky.interpolation import monotone_cubic
from skychart.sky.rays import crossings
from skychart.sky.shells import Shells, tangent_altitude

Array = NDArray[np.float64]

_SHAPE_STEP_DEG = 0.25
_SHAPE_FLOOR = 1e-7
_LAST_ORDER = 1e-4
_MOST_ORDERS = 200
_THREADS = 2
_BLOCK = 11  # wavelengths held at once: some 80 MB each with the default grid


@dataclass(frozen=True, eq=False)
class Shape:
    """How a field falls with solar zenith angle: one positive curve a level, and the nodes it is taken off at."""

    node_deg: Array  # (node,), whole degrees
    at_node: Array  # (level, node)
    fine: Array  # (level, every 0.25 degrees)

    @classmethod
    def of(cls, node_deg: Array, values: Array) -> "Shape":
        """From positive ``values`` (level, node); floored at 1e-7 of the largest."""
        log = np.log(np.maximum(values, _SHAPE_FLOOR * values.max())).T
        query = np.arange(0, node_deg[-1] + _SHAPE_STEP_DEG, _SHAPE_STEP_DEG)
        fine, _ = monotone_cubic(node_deg, log, query)
        return cls(node_deg, np.exp(log.T), np.exp(fine.T))

    def weights(self, level: NDArray[np.int_], cos_chi: Array) -> tuple[NDArray[np.intp], Array, Array]:
        """Lower node of each point and what a field divided by the shape counts at it and at the next node.

        ``level`` and ``cos_chi`` broadcast. Beyond the last node the last value is held.
        """
        degrees = np.degrees(np.arccos(cos_chi))
        place = np.minimum(degrees / _SHAPE_STEP_DEG, self.fine.shape[1] - 1.0)
        low = np.minimum(place.astype(np.intp), self.fine.shape[1] - 2)
        row = level * self.fine.shape[1] + low
        flat = self.fine.ravel()
        here = flat[row]
        here = here + (place - low) * (flat[row + 1] - here)
        whole = np.minimum(degrees, self.node_deg[-1])
        bracket = np.searchsorted(self.node_deg, np.arange(self.node_deg[-1] + 1), side="right") - 1
        bracket = np.minimum(bracket, len(self.node_deg) - 2)
        node = bracket[whole.astype(np.intp)]
        upper = here * (whole - self.node_deg[node]) / np.diff(self.node_deg)[node]
        return node, here - upper, upper


@dataclass(frozen=True, eq=False)
class Field:
    """The solved field. ``tensor`` (level, node, entry, wavelength) and ``ground`` (node, wavelength), divided by their shapes.

    ``ground`` is downward irradiance at the ground, direct light included; ``scattered_ground`` that of light scattered
    twice or more (ground reflections count). All per unit solar irradiance.
    """

    level_altitude_km: Array
    tensor_shape: Shape
    ground_shape: Shape
    tensor: NDArray[np.float32]
    ground: NDArray[np.float32]
    scattered_ground: NDArray[np.float32]


class Fan:
    """Rays in all directions of the quadrature from one level."""

    def __init__(self, shells: Shells, grid: Grid, level: int) -> None:
        self.start = level * grid.substeps
        self.level = level
        radius = shells.planet_radius_km
        altitude = shells.altitude_km[self.start]
        dip_cosine = np.sqrt(altitude * (2 * radius + altitude)) / (radius + altitude)
        self.cos_zenith, self.solid_angle = grid.cosines(dip_cosine)
        self.sin_zenith = np.sqrt(1 - self.cos_zenith**2)
        self.cos_phi, self.sin_phi, phi_weight = grid.azimuths()
        self.solid_angle = self.solid_angle * phi_weight
        tangent = tangent_altitude(altitude, self.cos_zenith, radius)
        factors = shells.slant_factors(tangent)[..., None]
        self.fine = crossings(
            shells.altitude_km, factors * shells.scattering_depth, factors * shells.extinction_depth,
            self.start, self.cos_zenith, radius,
        )  # fmt: skip
        starts = np.arange(0, factors.shape[1], grid.substeps)
        self.coarse = crossings(
            shells.altitude_km[:: grid.substeps],
            np.add.reduceat(factors * shells.scattering_depth, starts, axis=1),
            np.add.reduceat(factors * shells.extinction_depth, starts, axis=1),
            level, self.cos_zenith, radius,
        )  # fmt: skip

    def sight(self, chi: Array) -> dipole.Vector:
        """Directions of sight, each component (ray, chi, azimuth)."""
        return dipole.sight(
            self.cos_zenith[:, None, None], self.sin_zenith[:, None, None], self.cos_phi, self.sin_phi,
            np.cos(chi)[:, None], np.sin(chi)[:, None],
        )  # fmt: skip


@dataclass(frozen=True, eq=False)
class FirstOrder:
    """Singly scattered light at a level: ``tensor`` (chi, entry, wavelength), ``irradiance`` (chi, wavelength) on the level's upper side."""

    tensor: Array
    irradiance: Array


def first_order(table: SunTable, fan: Fan, chi: Array, a: Array, b: Array) -> FirstOrder:
    """Gather the light scattered once from the beam at solar zenith angles ``chi`` [rad] at the fan's level."""
    omega = fan.sight(chi)
    _, e_rho, e_alpha = dipole.projected_axes(omega)
    cos_chi, sin_chi = np.cos(chi)[:, None], np.sin(chi)[:, None]
    tensor = np.zeros((len(chi), dipole.ENTRIES, len(a)))
    irradiance = np.zeros((len(chi), len(a)))
    for ray in range(len(fan.cos_zenith)):
        reached = np.nonzero(fan.fine.reached[ray])
        if fan.start == 0 and fan.cos_zenith[ray] < 0:
            continue
        turn = (fan.fine.cos_turn[ray][reached][:, None, None], fan.fine.sin_turn[ray][reached][:, None, None])
        cos_there = np.clip(cos_chi * turn[0] + sin_chi * turn[1] * fan.cos_phi, -1, 1)
        beam = table.at(reached[1][:, None, None], cos_there)
        light = np.einsum("qxpl,ql->xpl", beam, fan.fine.weight[ray][reached].astype(np.float32), optimize=False)
        across = dipole.Vector(*(component[ray] for component in e_rho)), dipole.Vector(*(component[ray] for component in e_alpha))
        dipolar = [0.5 * (r + t) for r, t in zip(dipole.tensor_entries(across[0], across[0]), dipole.tensor_entries(across[1], across[1]), strict=True)]
        plain = _projector_entries(dipole.Vector(*(component[ray] for component in omega)))
        weight = fan.solid_angle[ray]
        for entry in range(dipole.ENTRIES):
            tensor[:, entry] += weight * (
                a * np.einsum("xp,xpl->xl", dipolar[entry], light) + b * np.einsum("xp,xpl->xl", plain[entry], light)
            )
        if fan.cos_zenith[ray] > 0:
            phase = dipole.trace(dipolar, 0)
            irradiance += weight * fan.cos_zenith[ray] * (a * np.einsum("xp,xpl->xl", phase, light) + 2 * b * light.sum(axis=1))
    return FirstOrder(tensor, irradiance)


def solve_field(shells: Shells, table: SunTable, grid: Grid, depolarisation: Array, albedo: Array, typical: int) -> Field:
    """All orders, all sun positions. ``typical``: index of the wavelength whose first order gives the shapes."""
    a, b = dipole.molecular_coefficients(depolarisation)
    node_deg = solar_zenith_nodes_deg()
    chi = np.radians(node_deg)
    altitude = shells.altitude_km[:: grid.substeps]
    with ThreadPoolExecutor(_THREADS) as pool:
        fans = list(pool.map(lambda level: Fan(shells, grid, level), range(len(altitude))))
        firsts = list(pool.map(lambda fan: first_order(table, fan, chi, a, b), fans))
    direct = np.maximum(np.cos(chi), 0)[:, None] * table.at(np.zeros(len(chi), np.intp), np.cos(chi))
    tensor = np.stack([first.tensor for first in firsts])
    ground = direct + firsts[0].irradiance
    tensor_shape = Shape.of(node_deg, dipole.trace(tensor[..., typical], 2))
    ground_shape = Shape.of(node_deg, ground[None, :, typical])
    solved = np.empty(tensor.shape, np.float32)
    lit_ground = np.empty(ground.shape, np.float32)
    for first in range(0, len(a), _BLOCK):
        block = slice(first, first + _BLOCK)
        operator = _Operator(fans, block, chi, (tensor_shape, ground_shape), (a[block], b[block]), albedo[block])
        solved[..., block], lit_ground[..., block] = operator.solve(tensor[..., block], ground[..., block])
        del operator
    scattered = lit_ground - ground / ground_shape.at_node[0][:, None]
    return Field(altitude, tensor_shape, ground_shape, solved, lit_ground, scattered.astype(np.float32))


class _Operator:
    """The dense operator of one block of wavelengths. State: (level, entry, node) then (node) of the ground, over the shapes."""

    def __init__(
        self,
        fans: list[Fan],
        block: slice,
        chi: Array,
        shapes: tuple[Shape, Shape],
        coefficients: tuple[Array, Array],
        albedo: Array,
    ) -> None:
        self.levels, self.nodes, self.block, self.chi, self.albedo = len(fans), len(chi), block, chi, albedo
        self.tensor_shape, self.ground_shape = shapes
        self.a, self.b = coefficients
        self.points = self.levels * dipole.ENTRIES * self.nodes
        repeated = np.repeat(self.tensor_shape.at_node[:, None], dipole.ENTRIES, axis=1)
        self.shape = np.append(repeated.ravel(), self.ground_shape.at_node[0]).astype(np.float32)
        self.matrix = np.zeros((len(albedo), len(self.shape), len(self.shape)), np.float32)
        with ThreadPoolExecutor(_THREADS) as pool:
            list(pool.map(self._fill, fans))

    def solve(self, tensor: Array, ground: Array) -> tuple[NDArray[np.float32], NDArray[np.float32]]:
        """All orders from the first: ``tensor`` (level, node, entry, wavelength), ``ground`` (node, wavelength); over the shapes."""
        flat = np.concatenate([tensor.transpose(3, 0, 2, 1).reshape(tensor.shape[3], -1), ground.T], axis=1)
        total = self._sum_orders((flat / self.shape).astype(np.float32))
        solved = total[:, : self.points].reshape(-1, self.levels, dipole.ENTRIES, self.nodes)
        return solved.transpose(1, 3, 2, 0), total[:, self.points :].T

    def _sum_orders(self, first: NDArray[np.float32]) -> NDArray[np.float32]:
        total, order = first.copy(), first
        for _ in range(_MOST_ORDERS):
            order = (self.matrix @ order[..., None])[..., 0] / self.shape
            total += order
            if np.abs(order).max() < _LAST_ORDER * np.abs(total).max():
                break
        return total

    def _fill(self, fan: Fan) -> None:
        omega = fan.sight(self.chi)
        gathered = _bin_crossings(fan, self.chi, omega, self.tensor_shape)
        width = dipole.ENTRIES * self.nodes
        rows = slice(fan.level * width, (fan.level + 1) * width)
        for level in np.unique(gathered.level):
            here = gathered.level == level
            columns = slice(level * width, (level + 1) * width)
            weight = gathered.weight[here, self.block].T
            block = self._contract(weight, gathered.dipolar[here], gathered.plain[here])
            self.matrix[:, rows, columns] = block[:, :width]
            if fan.level == 0:
                self.matrix[:, self.points :, columns] = block[:, width:]
        strikes = np.nonzero(fan.coarse.ground.any(axis=1))[0]
        seen = _bin_ground(fan, strikes, self.chi, omega, self.ground_shape)
        radiance = (self.albedo / np.pi) * fan.coarse.ground[strikes, self.block]
        self.matrix[:, rows, self.points :] = np.tensordot(radiance.T, seen, axes=1).reshape(len(radiance.T), width, -1)

    def _contract(self, weight: Array, dipolar: Array, plain: Array) -> NDArray[np.float32]:
        """(wavelength, output x node, entry x node) from binned kernels (crossing, output, node, entry, node)."""
        count, outputs = len(self.a), dipolar.shape[1] * self.nodes
        block = (self.a[:, None] * weight).astype(np.float32) @ dipolar.reshape(len(dipolar), -1)
        isotropic = (self.b[:, None] * weight).astype(np.float32) @ plain.reshape(len(plain), -1)
        block = block.reshape(count, outputs, dipole.ENTRIES, self.nodes)
        block += isotropic.reshape(count, outputs, 1, self.nodes) * np.asarray(dipole.TRACE, np.float32)[:, None]
        return block.reshape(count, outputs, -1)


@dataclass(frozen=True, eq=False)
class _Binned:
    """Kernels on (crossing, output, node, entry, node of the source); outputs: four entries, and irradiance at the ground."""

    level: NDArray[np.intp]
    weight: Array
    dipolar: NDArray[np.float32]
    plain: NDArray[np.float32]


def _bin_crossings(fan: Fan, chi: Array, omega: dipole.Vector, shape: Shape) -> _Binned:
    crossing = fan.coarse
    ray, branch, level = np.nonzero(crossing.reached & (crossing.weight.max(axis=3) > 0))
    cos_there, cosine, sine = dipole.moved(
        crossing.cos_turn[ray, branch, level][:, None, None], crossing.sin_turn[ray, branch, level][:, None, None],
        fan.cos_phi, fan.sin_phi, np.cos(chi)[:, None], np.sin(chi)[:, None],
    )  # fmt: skip
    node, low, high = shape.weights(level[:, None, None], cos_there)
    spread = _Spread(node, low, high, len(chi))
    e_s, e_rho, e_alpha = (dipole.Vector(*(c[ray] for c in e)) for e in dipole.projected_axes(omega))
    there_rho, there_alpha = dipole.turned_axes(e_rho, e_alpha, cosine, sine)
    cross = dipole.tensor_entries(e_s, there_rho)
    columns = (
        dipole.tensor_entries(e_s, e_s),
        tuple(2 * entry for entry in cross),
        dipole.tensor_entries(there_rho, there_rho),
        dipole.tensor_entries(there_alpha, there_alpha),
    )
    solid = fan.solid_angle[ray][:, None, None]
    cosine_weight = np.maximum(fan.cos_zenith, 0)[ray][:, None, None]
    outputs = dipole.ENTRIES + (fan.level == 0)
    size = (len(ray), outputs, len(chi), dipole.ENTRIES, len(chi))
    dipolar, plain = np.empty(size, np.float32), np.empty((*size[:3], len(chi)), np.float32)
    for entry, column in enumerate(columns):
        for output in range(dipole.ENTRIES):
            dipolar[:, output, :, entry] = spread.bin(solid * column[output])
        if fan.level == 0:
            dipolar[:, -1, :, entry] = spread.bin(solid * cosine_weight * (column[0] + column[2] + column[3]))
    for output, entry in enumerate(_projector_entries(dipole.Vector(*(c[ray] for c in omega)))):
        plain[:, output] = spread.bin(solid * entry)
    if fan.level == 0:
        plain[:, -1] = spread.bin(np.broadcast_to(2 * solid * cosine_weight, node.shape))
    return _Binned(level, crossing.weight[ray, branch, level], dipolar, plain)


def _bin_ground(fan: Fan, strikes: NDArray[np.intp], chi: Array, omega: dipole.Vector, shape: Shape) -> NDArray[np.float32]:
    """What unit radiance of the ground counts: (ray, entry, node, node of the ground)."""
    crossing = fan.coarse
    cos_there, _, _ = dipole.moved(
        crossing.ground_cos_turn[strikes][:, None, None], crossing.ground_sin_turn[strikes][:, None, None],
        fan.cos_phi, fan.sin_phi, np.cos(chi)[:, None], np.sin(chi)[:, None],
    )  # fmt: skip
    node, low, high = shape.weights(np.zeros(1, np.intp), cos_there)
    spread = _Spread(node, low, high, len(chi))
    solid = fan.solid_angle[strikes][:, None, None]
    entries = _projector_entries(dipole.Vector(*(c[strikes] for c in omega)))
    return np.stack([spread.bin(0.5 * solid * entry) for entry in entries], axis=1)


class _Spread:
    """Adds values on (row, node, azimuth) to the two source nodes each is interpolated between."""

    def __init__(self, node: NDArray[np.intp], low: Array, high: Array, nodes: int) -> None:
        self.size = (node.shape[0], node.shape[1], nodes)
        place = np.arange(node.shape[0] * node.shape[1]).reshape(node.shape[:2])[..., None] * nodes + node
        self.place = np.concatenate([place.ravel(), place.ravel() + 1])
        self.low, self.high = low, high

    def bin(self, values: Array) -> NDArray[np.float32]:
        """(row, node, source node)."""
        weight = np.concatenate([(values * self.low).ravel(), (values * self.high).ravel()])
        return np.bincount(self.place, weight, minlength=int(np.prod(self.size))).reshape(self.size).astype(np.float32)


def _projector_entries(omega: dipole.Vector) -> tuple[Array, Array, Array, Array]:
    """Entries of I - omega omega^T."""
    return 1 - omega.s**2, -omega.s * omega.rho, 1 - omega.rho**2, 1 - omega.alpha**2

