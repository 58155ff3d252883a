"""Rays in all directions of the quadrature from one level, and the light scattered once that they gather."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from skychart.sky import dipole
from skychart.sky.beam import SunTable
from skychart.sky.grid import Grid
from skychart.sky.rays import crossings
from skychart.sky.shells import Shells, tangent_altitude

Array = NDArray[np.float64]


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
    """Light scattered once: ``tensor`` (chi, entry, wavelength), ``irradiance`` from above (chi, wavelength)."""

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
        across = [dipole.tensor_entries(axis.of(ray), axis.of(ray)) for axis in (e_rho, e_alpha)]
        dipolar = [0.5 * (rho + alpha) for rho, alpha in zip(*across, strict=True)]
        plain = dipole.projector_entries(omega.of(ray))
        weight = fan.solid_angle[ray]
        for entry in range(dipole.ENTRIES):
            tensor[:, entry] += weight * (
                a * np.einsum("xp,xpl->xl", dipolar[entry], light) + b * np.einsum("xp,xpl->xl", plain[entry], light)
            )
        if fan.cos_zenith[ray] > 0:
            phase = dipole.trace(dipolar, 0)
            irradiance += (
                weight * fan.cos_zenith[ray] * (a * np.einsum("xp,xpl->xl", phase, light) + 2 * b * light.sum(axis=1))
            )
    return FirstOrder(tensor, irradiance)
