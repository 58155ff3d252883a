"""Every order of molecular scattering on the sphere, by successive orders of a dense linear operator.

The field is the sphere-integrated coherency tensor of the light at each (level, solar zenith angle), four entries a
point, and the downward irradiance of the ground at each solar zenith angle. The operator gathers, along rays from every
point, the light that the field sends after one more scattering. Its geometry is the same for all wavelengths: it is
binned once on (ray crossing, solar zenith nodes) and then contracted with each wavelength's path weights.
"""

from concurrent.futures import ThreadPoolExecutor
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from skychart.sky import dipole
from skychart.sky.beam import THREADS, SunTable
from skychart.sky.fan import Fan, first_order
from skychart.sky.field import Field
from skychart.sky.grid import Grid, solar_zenith_nodes_deg
from skychart.sky.interpolation import spline_matrix
from skychart.sky.observer import Station
from skychart.sky.operator import Operator
from skychart.sky.shape import Shape
from skychart.sky.shells import Shells
from skychart.sky.sight import Lines

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class MolecularLight:
    """The solved light of a sky without haze."""

    field: Field
    scatterers: dipole.Scatterers
    albedo: Array

    def multiple(self, station: Station, lines: Lines) -> Array:
        """I, Q, U of light scattered more than once seen from ``station``, (line, 3, wavelength) [1/sr]."""
        return station.multiple(self.field, lines, self.scatterers, self.albedo)


def solve_field(
    shells: Shells, table: SunTable, grid: Grid, scatterers: dipole.Scatterers, albedo: Array, typical: int
) -> Field:
    """All orders, all sun positions. ``typical``: index of the wavelength whose first order gives the shapes."""
    node_deg = solar_zenith_nodes_deg()
    chi = np.radians(node_deg)
    altitude = shells.altitude_km[:: grid.substeps]
    with ThreadPoolExecutor(THREADS) as pool:
        fans = list(pool.map(lambda level: Fan(shells, grid, level), range(len(altitude))))
        firsts = list(pool.map(lambda fan: first_order(table, fan, chi, scatterers), fans))
    direct = np.maximum(np.cos(table.apparent(0, chi)), 0)[:, None] * table.at(np.zeros(len(chi), np.intp), np.cos(chi))
    tensor = np.stack([first.tensor for first in firsts])
    ground = direct + firsts[0].irradiance
    shapes = (
        Shape.of(node_deg, dipole.trace(tensor[:, :, : dipole.ENTRIES, typical], 2)),
        Shape.of(node_deg, ground[None, :, typical]),
    )
    solved, lit = Operator(fans, chi, shapes, scatterers, albedo).sum_orders(tensor, ground)
    tensor_shape, ground_shape = (shape.every_degree() for shape in shapes)
    refine = spline_matrix(node_deg, tensor_shape.node_deg).astype(np.float32)
    fine = np.einsum("fn,lnew->lfew", refine, solved, optimize=True)
    return Field(altitude, tensor_shape, ground_shape, fine, refine @ lit)
