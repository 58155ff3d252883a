"""The sky of one atmosphere on the nodes that colour is made from.

Light scattered once is computed at every node; light scattered more often at eleven wavelengths, its logarithm carried
to the nodes by a cubic spline (and the ratios Q/I, U/I likewise). A spline cannot see the bands of ozone and of oxygen
pairs between its knots: of each logarithm those multiples of their cross-sections are split off which leave the
smoothest rest. Lines of water vapour and oxygen weaken both by the path of the light scattered once; where that light
ends, by the line of sight alone.
"""

from dataclasses import dataclass, replace
from functools import cache

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skychart.config import AirSettings
from skychart.sky import gases
from skychart.sky.air import standard_air
from skychart.sky.atmosphere import Atmosphere
from skychart.sky.hemisphere import over_hemisphere, peak_missed
from skychart.sky.interpolation import spline_matrix
from skychart.sky.line_paths import LinePaths
from skychart.sky.lines import band_shares
from skychart.sky.observer import Station
from skychart.sky.sky import Sky, lines_of_sight, solve

Array = NDArray[np.float64]

NODES_NM = np.arange(360.0, 831.0, 10.0)
MULTIPLE_NM = np.arange(380.0, 781.0, 40.0)
_FEW = 0.03
_DARKEST = 1e-30  # radiance or irradiance per unit solar irradiance, only to keep the logarithm finite


@dataclass(frozen=True, eq=False)
class SpectralSky:
    """A solved sky with ``wavelength_nm`` = 360 to 830 every 10 nm, shape (48,), seen from the settings' altitude.

    Angles, units, axis order and conventions are those of ``Sky``: degrees, geometric solar elevation, wavelength last.
    """

    settings: AirSettings
    every_order: Sky
    once: Sky
    paths: LinePaths

    @property
    def wavelength_nm(self) -> Array:
        """Colour nodes [nm], shape (48,)."""
        return NODES_NM

    @property
    def ground_albedo(self) -> Array:
        """Share of the light that the ground returns, shape (48,)."""
        return self.once.air.ground_albedo

    def stokes(
        self, solar_elevation_deg: ArrayLike, view_elevation_deg: ArrayLike, relative_azimuth_deg: ArrayLike
    ) -> Array:
        """I, Q, U of the diffuse light [1/sr] per unit solar irradiance, (..., 3, 48). Raises InputError."""
        angles = solar_elevation_deg, view_elevation_deg, relative_azimuth_deg
        altitude = self.settings.altitude_km
        multiple = self.every_order.multiple(*angles, altitude)
        radiance = multiple[..., :1, :]
        ratios = multiple[..., 1:, :] / np.maximum(radiance, _DARKEST)
        radiance = _to_nodes(radiance)
        multiple = np.concatenate([radiance, radiance * (ratios @ _SPLINE.T)], axis=-2)
        return weakened(self.once.single(*angles, altitude), multiple, *self._lines_leave(*angles))

    def beam(self, solar_elevation_deg: ArrayLike) -> Array:
        """Direct light of the sun on a plane that faces it, over that outside the air, (..., 48)."""
        zenith = np.radians(90 - np.asarray(solar_elevation_deg, dtype=float))
        return self.once.beam(solar_elevation_deg, self.settings.altitude_km) * self.paths.beam(zenith)

    def ground_irradiance(self, solar_elevation_deg: ArrayLike) -> tuple[Array, Array]:
        """Diffuse and direct irradiance of a horizontal plane per unit solar irradiance, each (..., 48)."""
        diffuse = over_hemisphere(self.stokes, solar_elevation_deg)
        seen = self.apparent_elevation_deg(solar_elevation_deg)
        if self.once.air.haze is not None:
            diffuse += peak_missed(self._met_by_haze, self.once.air.haze.phase_at, solar_elevation_deg, seen)
        height = np.sin(np.radians(seen))
        return diffuse, np.maximum(height, 0)[..., None] * self.beam(solar_elevation_deg)

    def _met_by_haze(self, sun_deg: ArrayLike, view_deg: ArrayLike, azimuth_deg: ArrayLike) -> Array:
        """What the haze's phase function multiplies in the light scattered once from the beam, (..., 48)."""
        angles = sun_deg, view_deg, azimuth_deg
        left = self._lines_leave(*angles)[0][..., 0, :]
        return self.once.met_by_haze(*angles, self.settings.altitude_km) * left

    def _lines_leave(self, sun_deg: ArrayLike, view_deg: ArrayLike, azimuth_deg: ArrayLike) -> tuple[Array, Array]:
        """What lines leave of light by its path from the sun, and by the line of sight alone, each (..., 1, 48)."""
        shape, lines = lines_of_sight(sun_deg, view_deg, azimuth_deg)
        by_sun, by_sight = (left.reshape(*shape, 1, -1) for left in self.paths.left(lines))
        return by_sun, by_sight

    def apparent_elevation_deg(self, solar_elevation_deg: ArrayLike) -> Array:
        """Elevation [degrees] of the refracted sun's centre, (...); below the horizon, where it would stand."""
        return self.every_order.apparent_elevation_deg(solar_elevation_deg, self.settings.altitude_km)


def solve_spectral(settings: AirSettings) -> SpectralSky:
    """Solve the sky of ``settings``. Raises InputError."""
    sky = solve(_air(settings, MULTIPLE_NM))
    air = _air(settings, NODES_NM)
    depth = np.zeros_like(air.absorption_depth)
    for layers, (_, strength) in zip(_amounts(settings, air.level_altitude_km), _bands(), strict=True):
        depth += layers[:, None] * strength
    air = replace(air, absorption_depth=depth)
    boundaries, altitude = sky.ground.shells.altitude_km, settings.altitude_km
    if altitude in boundaries:
        station = replace(sky.ground.of_air(air), start=int(np.searchsorted(boundaries, altitude)))
    else:
        station = Station.of(air, np.union1d(boundaries, altitude), altitude)
    paths = LinePaths.of(station, NODES_NM, settings.water_cm, settings.pressure_hpa)
    once = Sky(air, replace(station, start=0), sky.light)
    return SpectralSky(settings, sky, once, paths)


def weakened(once: Array, multiple: Array, by_sun: Array, by_sight: Array) -> Array:
    """Light scattered once and more often, (..., 3, wavelength), with what lines leave, (..., 1, wavelength).

    The rest comes by the path of the light scattered once as long as that is more than a few hundredths of it, and goes
    over to the line of sight smoothly as it fades.
    """
    first, rest = once[..., :1, :], multiple[..., :1, :]
    lit = first / np.maximum(first + _FEW * rest, _DARKEST)
    return once * by_sun + multiple * (by_sight + lit * (by_sun - by_sight))


def _to_nodes(light: Array) -> Array:
    """Positive ``light`` (..., 11) at the wavelengths of multiple scattering carried to the nodes, (..., 48)."""
    log = np.log(np.maximum(light, _DARKEST))
    sampled, fine = (np.stack(part) for part in zip(*_bands()[:2], strict=True))
    strongest = sampled.max(axis=1, keepdims=True)
    sampled, fine = sampled / strongest, fine / strongest
    depth = np.diff(log, n=3) @ np.linalg.pinv(np.diff(sampled, n=3))
    return np.exp((log - depth @ sampled) @ _SPLINE.T + depth @ fine)


_SPLINE = spline_matrix(MULTIPLE_NM, NODES_NM)


@cache
def _bands() -> tuple[tuple[Array, Array], ...]:
    """Absorption by ozone, oxygen pairs and NO2: at the wavelengths of multiple scattering, and made for the nodes.

    Ozone: so that the nodes' spline follows the 1 nm table best, in least squares; sampled at the nodes alone, the
    Chappuis bands' structure would move the direct light by 2e-4 in xy. The others: means over a node's width.
    """
    fine = np.arange(NODES_NM[0], NODES_NM[-1] + 1)
    ozone, *_ = np.linalg.lstsq(spline_matrix(NODES_NM, fine), gases.ozone_cross_section(fine), rcond=None)
    shares = band_shares(NODES_NM)
    return (
        (gases.ozone_cross_section(MULTIPLE_NM), np.maximum(ozone, 0)),
        (gases.o2_o2_coefficient(MULTIPLE_NM), shares @ gases.o2_o2_coefficient(fine)),
        (gases.no2_cross_section(MULTIPLE_NM), shares @ gases.no2_cross_section(fine)),
    )


def _amounts(settings: AirSettings, altitude_km: Array) -> tuple[Array, ...]:
    """Amounts in each layer of what ``_bands`` absorb, in its order."""
    _, density = standard_air(settings.pressure_hpa)
    return (
        gases.ozone_layers(altitude_km, settings.ozone_du),
        gases.o2_o2_layers(altitude_km, density),
        gases.no2_layers(altitude_km, settings.no2_du),
    )


def _air(settings: AirSettings, wavelength_nm: Array) -> Atmosphere:
    return Atmosphere.standard(
        wavelength_nm,
        settings.ozone_du,
        settings.ground_albedo,
        haze=None if settings.haze == "none" else settings.haze,
        haze_depth_550=settings.haze_depth_550,
        haze_scale_height_km=settings.haze_scale_height_km,
        no2_du=settings.no2_du,
        pressure_hpa=settings.pressure_hpa,
    )
