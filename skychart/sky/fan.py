"""Rays in all directions of the quadrature from one level, and the light scattered once that they gather."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from skychart.sky import dipole
from skychart.sky.beam import SunTable
from skychart.sky.grid import Grid
from skychart.sky.rays import Crossings, crossings
from skychart.sky.shells import Shells, tangent_altitude

Array = NDArray[np.float64]

_HIGH_SUN_DEG = 78.0


class Fan:
    """Rays in all directions of the quadrature from one level."""

    def __init__(self, shells: Shells, grid: Grid, level: int) -> None:
        self.start = level * grid.substeps
        self.level, self.parts = level, grid.substeps
        radius = shells.planet_radius_km
        altitude = shells.altitude_km[self.start]
        dip_cosine = np.sqrt(altitude * (2 * radius + altitude)) / (radius + altitude)
        self.cos_zenith, self.solid_angle = grid.cosines(dip_cosine)
        self.sin_zenith = np.sqrt(1 - self.cos_zenith**2)
        self.cos_phi, self.sin_phi, phi_weight = grid.azimuths()
        self.solid_angle = self.solid_angle * phi_weight
        tangent = tangent_altitude(altitude, self.cos_zenith, radius)
        factors = shells.slant_factors(tangent)[..., None]
        scattering, extinction = (
            [factors * depth for depth in shells.scattering_depth],
            factors * shells.extinction_depth,
        )
        self.fine = crossings(shells.altitude_km, scattering, extinction, self.start, self.cos_zenith, radius)
        starts = np.arange(0, factors.shape[1], grid.substeps)
        scattering = [np.add.reduceat(depth, starts, axis=1) for depth in scattering]
        extinction = np.add.reduceat(extinction, starts, axis=1)
        boundaries = shells.altitude_km[:: grid.substeps]
        self.coarse = crossings(boundaries, scattering, extinction, level, self.cos_zenith, radius)

    def sight(self, chi: Array) -> dipole.Vector:
        """Directions of sight, each component (ray, chi, azimuth)."""
        return dipole.sight(
            self.cos_zenith[:, None, None], self.sin_zenith[:, None, None], self.cos_phi, self.sin_phi,
            np.cos(chi)[:, None], np.sin(chi)[:, None],
        )  # fmt: skip


@dataclass(frozen=True, eq=False)
class FirstOrder:
    """Light scattered once: ``tensor`` (chi, entry, wavelength), ``irradiance`` from above (chi, wavelength)."""

    tensor: Array
    irradiance: Array


def first_order(table: SunTable, fan: Fan, chi: Array, scatterers: dipole.Scatterers) -> FirstOrder:
    """Gather the light scattered once from the beam at solar zenith angles ``chi`` [rad] at the fan's level.

    A sun well up changes little from level to level; else the beam is taken at every sub-step.
    """
    high = chi < np.radians(_HIGH_SUN_DEG)
    gathered = np.empty((len(chi), scatterers.entries + 1, len(scatterers.a)))
    gathered[high] = _gathered(table, fan, fan.coarse, fan.parts, chi[high], scatterers)
    gathered[~high] = _gathered(table, fan, fan.fine, 1, chi[~high], scatterers)
    return FirstOrder(gathered[:, :-1], gathered[:, -1])


def _gathered(
    table: SunTable, fan: Fan, crossing: Crossings, boundaries: int, chi: Array, scatterers: dipole.Scatterers
) -> Array:
    """Entries and irradiance (chi, entry + 1, wavelength) from crossings with every ``boundaries``-th of the table."""
    omega = fan.sight(chi)
    _, e_rho, e_alpha = dipole.projected_axes(omega)
    cos_chi, sin_chi = np.cos(chi)[:, None], np.sin(chi)[:, None]
    result = np.zeros((len(chi), scatterers.entries + 1, len(scatterers.a)))
    for ray in map(int, np.flatnonzero(crossing.reached.any(axis=(1, 2)))):
        branch, level = np.nonzero(crossing.reached[ray])
        turn = crossing.cos_turn[ray, branch, level], crossing.sin_turn[ray, branch, level]
        cos_there = cos_chi * turn[0][:, None, None] + sin_chi * turn[1][:, None, None] * fan.cos_phi
        beam = table.at(level[:, None, None] * boundaries, np.clip(cos_there, -1, 1))
        molecules, *haze = (
            np.einsum("qxpl,ql->xpl", beam, weight[ray, branch, level].astype(np.float32), optimize=False)
            for weight in crossing.weight
        )
        across = [dipole.tensor_entries(axis.of(ray), axis.of(ray)) for axis in (e_rho, e_alpha)]
        dipolar = [0.5 * (rho + alpha) for rho, alpha in zip(*across, strict=True)]
        sight = omega.of(ray)
        plain = dipole.projector_entries(sight)
        parts = [(dipolar, scatterers.a * molecules), (plain, scatterers.b * molecules)]
        if haze and scatterers.forward is not None:
            parts.append((plain, dipole.ISOTROPIC * haze[0] * (1 + scatterers.forward * sight.s[..., None])))
        cosine = max(fan.cos_zenith[ray], 0.0)
        for entries, light in parts:
            outputs = dipole.outputs(entries, sight, scatterers.entries, np.full(sight.s.shape, cosine))
            for number, output in enumerate(outputs):
                result[:, number] += fan.solid_angle[ray] * np.einsum("xp,xpl->xl", output, light)
    return result
