"""Light scattered more than once in hazy air on the sphere: G on the sphere, corrected by F / G of flat air.

On the sphere haze is solved with two moments of its phase function, its forward peak taken for unscattered (Joseph,
Wiscombe & Weinman 1976, doi:10.1175/1520-0469(1976)033<2452:TDEAFR>2.0.CO;2): the closure. G is one exact scattering of
the light of that closure, with the full phase function and the true extinction. What the closure gets wrong it gets
wrong in flat air too, where the full solution F is known at the same place, sun and direction: F / G there corrects G.
Q and U are those of the molecules in G, in the same proportion; haze light counts as unpolarised.
"""

import itertools
from concurrent.futures import ThreadPoolExecutor
from dataclasses import dataclass, replace
from dataclasses import field as field_of

import numpy as np
from numpy.typing import NDArray

from skychart.sky import dipole
from skychart.sky.atmosphere import Atmosphere
from skychart.sky.beam import THREADS, SunTable
from skychart.sky.field import Field
from skychart.sky.grid import Grid, solar_zenith_nodes_deg
from skychart.sky.haze import Haze
from skychart.sky.interpolation import spline_matrix
from skychart.sky.local import FlatAir, FlatField, FlatLight, one_scattering, solve_closure, solve_flat, through_peak
from skychart.sky.local.streams import MOMENTS, legendre
from skychart.sky.molecular import solve_field
from skychart.sky.observer import Station
from skychart.sky.shape import Shape, insert_between
from skychart.sky.shells import Shells, redistribute
from skychart.sky.sight import Lines

Array = NDArray[np.float64]

HAZY_GRID = Grid(levels=28, zenith=6, azimuth=4)
_DIRECTIONS = Grid(zenith=8, azimuth=8)  # in which the closure's radiance is known where it is scattered once more
_MODES = 8
_HAZE_LEFT = 1e-3  # of the haze may lie above the levels whose haze scatters once more
_FLAT_KM = np.concatenate(
    [
        [0, 0.05, 0.1, 0.17, 0.25, 0.37, 0.5, 0.62, 0.75, 0.87, 1, 1.25, 1.5, 1.75, 2, 2.5, 3, 3.5],
        [4, 5, 6, 7, 8, 9, 10, 11, 12, 15, 18, 22, 27, 35, 50, 80],
    ]
)
_LOWEST_FLAT_SUN_DEG = 97
_WHOLE = 1e-6
_VIEW_ELEVATION = np.arcsin(0.01) + (np.pi / 2 - np.arcsin(0.01)) * np.linspace(0, 1, 37) ** 1.6
"""Directions at which flat air is looked at [rad]: closest near its horizon, which it does not reach."""


@dataclass(frozen=True, eq=False)
class Scattered:
    """Haze's source from the closure's light: spherical harmonics at the lower levels.

    ``harmonics`` (level, mode, moment, sun every degree, wavelength), the phase function's moments in, over ``shape``.
    """

    harmonics: NDArray[np.float32]
    shape: Shape

    @property
    def levels(self) -> int:
        """How many levels hold haze."""
        return len(self.harmonics)

    def with_level(self, upper: int, part: float) -> "Scattered":
        """The same with a level inserted before ``upper``, that ``part`` of the way to it; none above the haze."""
        if upper >= self.levels:
            return self
        return Scattered(insert_between(self.harmonics, upper, part), self.shape.with_level(upper, part))

    def along(self, cosine: Array, level: NDArray[np.intp]) -> "ScatteredAlong":
        """What is sent back along a ray that crosses each ``level`` at a zenith cosine, both (crossing,)."""
        modes, count, suns, wavelengths = self.harmonics.shape[1:]
        basis = legendre(modes, count, cosine).astype(np.float32).transpose(1, 0, 2)[:, :, None]
        sent = np.empty((len(level), modes, 1, suns * wavelengths), np.float32)
        for crossing, here in enumerate(level):
            np.matmul(basis[crossing], self.harmonics[here].reshape(modes, count, -1), out=sent[crossing])
        by_sun = sent.reshape(len(level), modes, suns, wavelengths).transpose(0, 2, 1, 3)
        return ScatteredAlong(np.ascontiguousarray(by_sun), level, self.shape)


@dataclass(frozen=True, eq=False)
class ScatteredAlong:
    """The same along one ray: ``sent`` (crossing, sun every degree, mode, wavelength)."""

    sent: NDArray[np.float32]
    level: NDArray[np.intp]
    shape: Shape

    def at(self, cos_chi: Array, cos_azimuth: Array) -> Array:
        """Source [1/sr], (line, crossing, wavelength).

        ``cos_chi``, ``cos_azimuth`` (line, crossing): of the sun's zenith angle and of the azimuth from it.
        """
        node, low, high = self.shape.weights(self.level, cos_chi)
        crossings, suns, *rest = self.sent.shape
        waves = np.cos(np.arccos(cos_azimuth)[..., None] * np.arange(rest[0]))
        flat = self.sent.reshape(crossings * suns, *rest)
        row = np.arange(crossings) * suns + node
        below, above = (
            ((part[..., None] * waves).astype(np.float32)[..., None, :] @ flat[place])[..., 0, :]
            for part, place in ((low, row), (high, row + 1))
        )
        return below + above


@dataclass(frozen=True, eq=False)
class HazyLight:
    """The solved light of a hazy sky: ``field`` is the closure's, ``full`` and ``closed`` flat air's by view cosine."""

    air: Atmosphere
    scatterers: dipole.Scatterers
    field: Field
    scattered: Scattered
    flat_altitude_km: Array
    full: FlatField
    closed: FlatField
    peak_beyond: Haze
    looks: dict[tuple[int, int], tuple[FlatLight, FlatLight]] = field_of(default_factory=dict, repr=False)

    def multiple(self, station: Station, lines: Lines) -> Array:
        """I, Q, U of light scattered more than once seen from ``station``, (line, 3, wavelength) [1/sr]."""
        altitude = float(station.shells.altitude_km[station.start])
        return self.one_scattering(station, lines) * self.correction(lines, altitude)[:, None]

    def one_scattering(self, station: Station, lines: Lines) -> Array:
        """G on the sphere: I, Q, U (line, 3, wavelength)."""
        molecules = self.scatterers._replace(forward=None)
        light = station.beyond().single(lines, molecules, self.peak_beyond.phase_at)
        return light + station.multiple(self.field, lines, molecules, self.air.ground_albedo, self.scattered)

    def correction(self, lines: Lines, altitude_km: float = 0.0) -> Array:
        """F / G of flat air for the same sun and direction at the boundary nearest the altitude, (line, wavelength).

        Linear between whole degrees of the sun, and between the directions of `_VIEW_ELEVATION`.
        """
        boundary = int(np.argmin(np.abs(self.flat_altitude_km - altitude_km)))
        result = np.empty((len(lines.view_cosine), len(self.air.wavelength_nm)))
        down = lines.view_cosine < 0
        for side, some in ((1, ~down), (-1, down)):
            if some.any():
                result[some] = self._ratio(boundary, side, lines.some(some))
        return result

    def _ratio(self, boundary: int, side: int, lines: Lines) -> Array:
        """The same of lines that all go up, side 1, or down, -1."""
        if (boundary, side) not in self.looks:
            full, closed = (
                one_scattering(light, side * np.sin(_VIEW_ELEVATION), boundary) for light in (self.full, self.closed)
            )
            self.looks[boundary, side] = full, closed
        light = self.looks[boundary, side]
        elevation = np.arcsin(np.abs(lines.view_cosine))
        place = np.interp(elevation, _VIEW_ELEVATION, np.arange(len(_VIEW_ELEVATION), dtype=float))
        suns = _neighbours(np.minimum(np.degrees(lines.solar_zenith), _LOWEST_FLAT_SUN_DEG), _LOWEST_FLAT_SUN_DEG)
        views = _neighbours(place, len(_VIEW_ELEVATION) - 1)
        result = np.zeros((len(lines.view_cosine), len(self.air.wavelength_nm)))
        for (sun, sun_part), (view, view_part) in itertools.product(suns, views):
            part = sun_part * view_part
            some = np.flatnonzero(part)
            where = sun[some], view[some], lines.relative_azimuth[some]
            true, approximate = (seen.stokes(*where)[:, 0] for seen in light)
            result[some] += part[some, None] * true / approximate
        return result


def _neighbours(place: Array, last: int) -> tuple[tuple[NDArray[np.intp], Array], tuple[NDArray[np.intp], Array]]:
    """Whole numbers about ``place`` (line,), at most ``last``, with their parts in it; a part within 1e-6 of 0 is 0."""
    low = np.floor(place + _WHOLE).astype(np.intp)
    part = np.where(place - low < _WHOLE, 0.0, place - low)
    return (low, 1 - part), (np.minimum(low + 1, last), part)


def solve_hazy(air: Atmosphere, grid: Grid, station: Station, typical: int) -> HazyLight:
    """Solve the light of air with haze.

    ``station``: on the ground, its boundaries those of ``grid``; ``typical``: index of the wavelength whose first order
    gives the shapes.
    """
    haze = _haze(air)
    if station.scaled is None:
        raise TypeError("a station in air without haze")
    shells = Shells.of(air, station.shells.altitude_km, haze.peak)
    forward = 3 * haze.asymmetry / (1 + haze.asymmetry)
    scatterers = dipole.Scatterers(*dipole.molecular_coefficients(air.depolarisation), forward)
    field = solve_field(shells, station.scaled, grid, scatterers, air.ground_albedo, typical)
    boundaries = _flat_boundaries(shells.altitude_km)
    flat = _flat_air(air, station, boundaries)
    return HazyLight(
        air=air,
        scatterers=scatterers,
        field=field,
        scattered=_scattered(haze, grid, shells, station.scaled, field, scatterers, air.ground_albedo),
        flat_altitude_km=shells.altitude_km[boundaries],
        full=solve_flat(flat),
        closed=solve_closure(flat),
        peak_beyond=through_peak(haze, 2, haze.peak),
    )


def _flat_suns() -> Array:
    """Zenith angles [rad] at which flat air is solved: every degree while the sun lights some of the air above."""
    return np.radians(np.arange(_LOWEST_FLAT_SUN_DEG + 1))


def _haze(air: Atmosphere) -> Haze:
    if air.haze is None:
        raise TypeError("air without haze")
    return air.haze


def _flat_boundaries(altitude_km: Array) -> NDArray[np.intp]:
    """Those of the boundaries that are nearest to the wanted ones of flat air, and the top."""
    nearest = np.abs(altitude_km - _FLAT_KM[:, None]).argmin(axis=1)
    return np.union1d(nearest, len(altitude_km) - 1)


def _flat_air(air: Atmosphere, station: Station, boundaries: NDArray[np.intp]) -> FlatAir:
    """The same air in flat layers, thinnest at the ground, under the sphere's own beam at every whole degree."""
    if station.scaled is None:
        raise TypeError("a station in air without haze")
    cosine = np.cos(_flat_suns())
    beam, scaled = (table.at(boundaries[:, None], cosine) for table in (station.table, station.scaled))
    altitude = station.shells.altitude_km[boundaries]
    rayleigh, absorption, haze = (
        redistribute(air, depth, altitude) for depth in (air.rayleigh_depth, air.absorption_depth, _haze(air).depth)
    )
    return FlatAir(
        rayleigh_depth=rayleigh,
        absorption_depth=absorption,
        haze=replace(_haze(air), depth=haze),
        depolarisation=air.depolarisation,
        ground_albedo=air.ground_albedo,
        solar_zenith_angle=_flat_suns(),
        beam=beam.astype(float),
        scaled_beam=scaled.astype(float),
    )


def _scattered(
    haze: Haze,
    grid: Grid,
    shells: Shells,
    table: SunTable,
    field: Field,
    scatterers: dipole.Scatterers,
    albedo: Array,
) -> Scattered:
    """Radiance of the closure in all directions from the lower levels, as harmonics times the full phase function's."""
    above = _haze_above(shells)
    levels = [level for level in range(grid.levels) if above[level * grid.substeps] > _HAZE_LEFT]
    node = np.radians(solar_zenith_nodes_deg())
    moments = haze.moments(MOMENTS)

    def closure_phase(cosine: Array) -> Array:
        return 1 + (scatterers.forward if scatterers.forward is not None else 0) * cosine[..., None]

    def harmonics(level: int) -> Array:
        station = Station(shells, table, level * grid.substeps)
        altitude, radius = shells.altitude_km[station.start], shells.planet_radius_km
        cosine, weight = _DIRECTIONS.cosines(float(np.sqrt(altitude * (2 * radius + altitude)) / (radius + altitude)))
        cos_phi, _, phi_weight = _DIRECTIONS.azimuths()
        chi, view, phi = (x.ravel() for x in np.meshgrid(node, cosine, np.arccos(cos_phi), indexing="ij"))
        lines = Lines(chi, view, phi)
        light = station.single(lines, scatterers, closure_phase)[:, 0]
        light += station.multiple(field, lines, scatterers, albedo)[:, 0]
        light = light.reshape(len(node), len(cosine), len(cos_phi), -1)
        cosines = np.cos(np.arccos(cos_phi)[:, None] * np.arange(_MODES)) * phi_weight
        basis = legendre(_MODES, MOMENTS, cosine) * weight[:, None]
        return np.einsum("mvc,pm,nvpw->mcnw", basis, cosines, light, optimize=True)

    with ThreadPoolExecutor(THREADS) as pool:
        found = np.stack(list(pool.map(harmonics, levels)))
    found *= ((2 * np.arange(MOMENTS) + 1)[:, None] * moments / (4 * np.pi))[:, None]
    found[:, 1:] *= 2
    shape = Shape(field.tensor_shape.node_deg, field.tensor_shape.at_node[levels], field.tensor_shape.fine[levels])
    whole = solar_zenith_nodes_deg().astype(int)
    found /= shape.at_node[:, whole][:, None, None, :, None]
    refine = spline_matrix(solar_zenith_nodes_deg(), shape.node_deg)
    return Scattered((refine @ found).astype(np.float32), shape)


def _haze_above(shells: Shells) -> Array:
    """Share of the haze above each boundary, (boundary,)."""
    depth = shells.scattering_depth[1].sum(axis=1)
    above = np.append(np.cumsum(depth[::-1])[::-1], 0.0)
    return above / max(above[0], np.finfo(float).tiny)
