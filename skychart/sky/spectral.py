"""The sky of one atmosphere on the nodes that colour is made from.

Light scattered once is computed at every node; light scattered more often at eleven wavelengths, its logarithm carried
to the nodes by a cubic spline (and the ratios Q/I, U/I likewise). A spline cannot see the ozone bands between its
knots: of each logarithm that multiple of the ozone cross-section is split off which leaves the smoothest rest.
"""

from dataclasses import dataclass, replace
from functools import cache

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skychart.config import AirSettings
from skychart.sky import gases
from skychart.sky.atmosphere import Atmosphere
from skychart.sky.interpolation import spline_matrix
from skychart.sky.observer import Station
from skychart.sky.sky import Sky, solve

Array = NDArray[np.float64]

NODES_NM = np.arange(360.0, 831.0, 10.0)
MULTIPLE_NM = np.arange(380.0, 781.0, 40.0)
_DARKEST = 1e-30  # radiance or irradiance per unit solar irradiance, only to keep the logarithm finite


@dataclass(frozen=True, eq=False)
class SpectralSky:
    """A solved sky with ``wavelength_nm`` = 360 to 830 every 10 nm, shape (48,), seen from the settings' altitude.

    Angles, units, axis order and conventions are those of ``Sky``: degrees, geometric solar elevation, wavelength last.
    """

    settings: AirSettings
    every_order: Sky
    once: Sky

    @property
    def wavelength_nm(self) -> Array:
        """Colour nodes [nm], shape (48,)."""
        return NODES_NM

    def stokes(
        self, solar_elevation_deg: ArrayLike, view_elevation_deg: ArrayLike, relative_azimuth_deg: ArrayLike
    ) -> Array:
        """I, Q, U of the diffuse light [1/sr] per unit solar irradiance, (..., 3, 48). Raises InputError."""
        view = solar_elevation_deg, view_elevation_deg, relative_azimuth_deg, self.settings.altitude_km
        multiple = self.every_order.multiple(*view)
        radiance = multiple[..., :1, :]
        ratios = multiple[..., 1:, :] / np.maximum(radiance, _DARKEST)
        radiance = _to_nodes(radiance)
        return self.once.single(*view) + np.concatenate([radiance, radiance * (ratios @ _SPLINE.T)], axis=-2)

    def beam(self, solar_elevation_deg: ArrayLike) -> Array:
        """Direct transmission from the sun, (..., 48)."""
        return self.once.beam(solar_elevation_deg, self.settings.altitude_km)

    def ground_irradiance(self, solar_elevation_deg: ArrayLike) -> tuple[Array, Array]:
        """Diffuse and direct irradiance of a horizontal plane per unit solar irradiance, each (..., 48)."""
        place = solar_elevation_deg, self.settings.altitude_km
        multiple = _to_nodes(self.every_order.multiple_irradiance(*place))
        return self.once.single_irradiance(*place) + multiple, self.once.direct_irradiance(*place)


def solve_spectral(settings: AirSettings) -> SpectralSky:
    """Solve the sky of ``settings``. Raises InputError."""
    sky = solve(_air(settings, MULTIPLE_NM))
    air = _air(settings, NODES_NM)
    ozone = gases.ozone_layers(air.level_altitude_km, settings.ozone_du)
    air = replace(air, absorption_depth=ozone[:, None] * _fitted_ozone())
    station = Station.of(air, sky.ground.shells.altitude_km)
    return SpectralSky(settings, sky, Sky(air, station, sky.light))


def _to_nodes(light: Array) -> Array:
    """Positive ``light`` (..., 11) at the wavelengths of multiple scattering carried to the nodes, (..., 48)."""
    log = np.log(np.maximum(light, _DARKEST))
    bands = gases.ozone_cross_section(MULTIPLE_NM)
    bends = np.diff(bands, n=3)
    depth = (np.diff(log, n=3) @ bends / (bends @ bends))[..., None]
    return np.exp((log - depth * bands) @ _SPLINE.T + depth * _fitted_ozone())


_SPLINE = spline_matrix(MULTIPLE_NM, NODES_NM)


@cache
def _fitted_ozone() -> Array:
    """Ozone cross-section [m2] on the nodes whose spline follows the 1 nm table best, in least squares.

    Sampled at the nodes alone, the Chappuis bands' structure would move the direct light by 2e-4 in xy.
    """
    fine = np.arange(NODES_NM[0], NODES_NM[-1] + 1)
    fitted, *_ = np.linalg.lstsq(spline_matrix(NODES_NM, fine), gases.ozone_cross_section(fine), rcond=None)
    return np.maximum(fitted, 0)


def _air(settings: AirSettings, wavelength_nm: Array) -> Atmosphere:
    return Atmosphere.standard(wavelength_nm, settings.ozone_du, settings.ground_albedo)
