"""The solved sky of one atmosphere, for every sun and direction."""

from collections.abc import Callable
from dataclasses import dataclass, field, replace
from typing import Protocol

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skychart.errors import InputError
from skychart.sky import beam, dipole
from skychart.sky.atmosphere import Atmosphere
from skychart.sky.grid import Grid
from skychart.sky.hazy import HAZY_GRID, solve_hazy
from skychart.sky.hemisphere import over_hemisphere, peak_missed
from skychart.sky.molecular import MolecularLight, solve_field
from skychart.sky.observer import Station
from skychart.sky.shells import level_altitudes, subdivide
from skychart.sky.sight import Lines

Array = NDArray[np.float64]

LOWEST_SUN_DEG = -12.0
HIGHEST_OBSERVER_KM = 50.0
_SHAPE_WAVELENGTH_NM = 500.0


def solve(air: Atmosphere, grid: Grid | None = None) -> "Sky":
    """Solve every order of scattering for each wavelength of ``air`` and all sun heights at once.

    ``grid``: by default the standard one without haze, and a coarser one with it, whose errors the correction shares.
    """
    grid = grid or (Grid() if air.haze is None else HAZY_GRID)
    air_top = float(air.level_altitude_km[-1])
    station = Station.of(air, subdivide(level_altitudes(air_top, grid.levels), grid.substeps))
    away = np.abs(air.wavelength_nm - _SHAPE_WAVELENGTH_NM)
    typical = int(np.flatnonzero(away == away.min())[-1])  # the longer one of two alike: its light reaches deeper
    if air.haze is not None:
        return Sky(air, station, solve_hazy(air, grid, station, typical))
    scatterers = _molecules(air)
    solved = solve_field(station.shells, station.table, grid, scatterers, air.ground_albedo, typical)
    return Sky(air, station, MolecularLight(solved, scatterers, air.ground_albedo))


class Light(Protocol):
    """What a solution knows."""

    def multiple(self, station: Station, lines: Lines) -> Array:
        """I, Q, U of light scattered more than once seen from ``station``, (line, 3, wavelength) [1/sr]."""


@dataclass(frozen=True, eq=False)
class Sky:
    """A solved sky. Angles in degrees; solar elevations are geometric (as without refraction), -12 to 90.

    Relative azimuth 0 looks toward the sun's azimuth, 180 away from it. Angles broadcast together; the wavelength axis,
    that of the atmosphere, is last. Radiance and irradiance are per unit solar irradiance at the top of the atmosphere.
    Q is positive where the electric vector is perpendicular to the vertical plane of the line of sight; U is that of
    Natraj, Li & Yung 2009 (doi:10.1088/0004-637X/691/2/1909): odd in the azimuth, negative toward a low sun's side.
    """

    air: Atmosphere
    ground: Station
    light: Light
    aloft: dict[float, Station] = field(default_factory=dict, repr=False)  # by altitude, made when asked for

    def stokes(
        self,
        solar_elevation_deg: ArrayLike,
        view_elevation_deg: ArrayLike,
        relative_azimuth_deg: ArrayLike,
        altitude_km: float = 0.0,
    ) -> Array:
        """I, Q, U of the sky's diffuse light [1/sr], shape (..., 3, wavelength).

        View elevation -90 to 90; below the horizon the line of sight ends on the lit ground. ``altitude_km`` 0 to 50.
        Raises InputError.
        """
        view = solar_elevation_deg, view_elevation_deg, relative_azimuth_deg, altitude_km
        return self.single(*view) + self.multiple(*view)

    def single(
        self,
        solar_elevation_deg: ArrayLike,
        view_elevation_deg: ArrayLike,
        relative_azimuth_deg: ArrayLike,
        altitude_km: float = 0.0,
    ) -> Array:
        """The part of ``stokes`` scattered once from the beam."""
        molecules, phase = _molecules(self.air), None if self.air.haze is None else self.air.haze.phase_at
        angles = solar_elevation_deg, view_elevation_deg, relative_azimuth_deg
        return self._seen(lambda station, lines: station.single(lines, molecules, phase), angles, altitude_km)

    def met_by_haze(
        self,
        solar_elevation_deg: ArrayLike,
        view_elevation_deg: ArrayLike,
        relative_azimuth_deg: ArrayLike,
        altitude_km: float = 0.0,
    ) -> Array:
        """What the haze's phase function multiplies in ``single``, (..., wavelength). Hazy air only."""
        angles = solar_elevation_deg, view_elevation_deg, relative_azimuth_deg
        return self._seen(Station.met_by_haze, angles, altitude_km)

    def multiple(
        self,
        solar_elevation_deg: ArrayLike,
        view_elevation_deg: ArrayLike,
        relative_azimuth_deg: ArrayLike,
        altitude_km: float = 0.0,
    ) -> Array:
        """The part of ``stokes`` scattered more than once or by the ground."""
        angles = solar_elevation_deg, view_elevation_deg, relative_azimuth_deg
        return self._seen(self.light.multiple, angles, altitude_km)

    def beam(self, solar_elevation_deg: ArrayLike, altitude_km: float = 0.0) -> Array:
        """Direct transmission from the sun, shape (..., wavelength); 0 where the planet hides it."""
        elevation = within("solar elevation", solar_elevation_deg, LOWEST_SUN_DEG, 90)
        station = self._station(altitude_km)
        return beam.transmission(station.shells, station.start, np.sin(np.radians(elevation)))

    def apparent_elevation_deg(self, solar_elevation_deg: ArrayLike, altitude_km: float = 0.0) -> Array:
        """Elevation [degrees] at which the refracted sun stands or, below the horizon, would stand, (...)."""
        elevation = within("solar elevation", solar_elevation_deg, LOWEST_SUN_DEG, 90)
        station = self._station(altitude_km)
        return 90 - np.degrees(station.table.apparent(station.start, np.radians(90 - elevation)))

    def ground_irradiance(self, solar_elevation_deg: ArrayLike) -> tuple[Array, Array]:
        """Diffuse and direct irradiance of the horizontal ground, each (..., wavelength)."""
        diffuse = self.single_irradiance(solar_elevation_deg) + self.multiple_irradiance(solar_elevation_deg)
        return diffuse, self.direct_irradiance(solar_elevation_deg)

    def direct_irradiance(self, solar_elevation_deg: ArrayLike, altitude_km: float = 0.0) -> Array:
        """Irradiance of a horizontal plane by the sun itself, (..., wavelength)."""
        transmission = self.beam(solar_elevation_deg, altitude_km)
        height = np.sin(np.radians(self.apparent_elevation_deg(solar_elevation_deg, altitude_km)))
        return np.maximum(height, 0)[..., None] * transmission

    def single_irradiance(self, solar_elevation_deg: ArrayLike, altitude_km: float = 0.0) -> Array:
        """Irradiance of a horizontal plane by light scattered once, (..., wavelength)."""
        light = over_hemisphere(self.single, solar_elevation_deg, altitude_km)
        if self.air.haze is not None:
            seen = self.apparent_elevation_deg(solar_elevation_deg, altitude_km)
            light += peak_missed(self.met_by_haze, self.air.haze.phase_at, solar_elevation_deg, seen, altitude_km)
        return light

    def multiple_irradiance(self, solar_elevation_deg: ArrayLike, altitude_km: float = 0.0) -> Array:
        """Irradiance of a horizontal plane by light scattered more than once or by the ground, (..., wavelength)."""
        return over_hemisphere(self.multiple, solar_elevation_deg, altitude_km)

    def _seen(
        self,
        look: Callable[[Station, Lines], Array],
        angles_deg: tuple[ArrayLike, ArrayLike, ArrayLike],
        altitude_km: float,
    ) -> Array:
        """What ``look`` makes of lines of sight, (line, ...), in the shape that the angles broadcast to."""
        shape, lines = lines_of_sight(*angles_deg)
        found = look(self._station(altitude_km), lines)
        return found.reshape(*shape, *found.shape[1:])

    def _station(self, altitude_km: float) -> Station:
        altitude = float(within("altitude", altitude_km, 0, HIGHEST_OBSERVER_KM, "km"))
        boundaries = self.ground.shells.altitude_km
        if altitude in boundaries:
            return replace(self.ground, start=int(np.searchsorted(boundaries, altitude)))
        if altitude not in self.aloft:
            self.aloft[altitude] = Station.of(self.air, np.sort(np.append(boundaries, altitude)), altitude)
        return self.aloft[altitude]


def _molecules(air: Atmosphere) -> dipole.Scatterers:
    return dipole.Scatterers(*dipole.molecular_coefficients(air.depolarisation))


def within(name: str, value: ArrayLike, low: float, high: float, unit: str = "°") -> Array:
    """``value`` as an array of floats; InputError if any lies outside ``low`` to ``high`` or is not a number."""
    array = np.asarray(value, dtype=float)
    bad = ~((array >= low) & (array <= high))
    if bad.any():
        raise InputError(f"{name} is {array[bad].flat[0]:g}{unit}, accepted: {low:g}{unit} to {high:g}{unit}")
    return array


def lines_of_sight(
    solar_elevation_deg: ArrayLike, view_elevation_deg: ArrayLike, relative_azimuth_deg: ArrayLike
) -> tuple[tuple[int, ...], Lines]:
    """The shape that angles [degrees] broadcast to, and their lines of sight one by one. Raises InputError."""
    angles = np.broadcast_arrays(
        within("solar elevation", solar_elevation_deg, LOWEST_SUN_DEG, 90),
        within("view elevation", view_elevation_deg, -90, 90),
        within("relative azimuth", relative_azimuth_deg, -360, 360),
    )
    sun, view, azimuth = (angle.ravel() for angle in angles)
    return angles[0].shape, Lines(np.radians(90 - sun), np.sin(np.radians(view)), np.radians(azimuth))
