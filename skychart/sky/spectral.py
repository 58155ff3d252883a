"""The sky of one atmosphere on the nodes that colour is made from.

Light scattered once is computed at every node; light scattered more often at eleven wavelengths, its logarithm carried
to the nodes by a cubic spline (and the ratios Q/I, U/I likewise).
"""

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skychart.config import AirSettings
from skychart.sky import gases
from skychart.sky.atmosphere import Atmosphere
from skychart.sky.beam import SunTable
from skychart.sky.interpolation import spline_matrix
from skychart.sky.observer import Station
from skychart.sky.shells import Shells
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
        """Diffuse and direct irradiance of the horizontal ground per unit solar irradiance, each (..., 48)."""
        multiple = _to_nodes(self.every_order.multiple_irradiance(solar_elevation_deg))
        elevation = np.asarray(solar_elevation_deg, dtype=float)
        direct = np.maximum(np.sin(np.radians(elevation)), 0)[..., None] * self.once.beam(elevation)
        return self.once.single_irradiance(elevation) + multiple, direct


def solve_spectral(settings: AirSettings) -> SpectralSky:
    """Solve the sky of ``settings``. Raises InputError."""
    sky = solve(_air(settings, MULTIPLE_NM))
    air = _air(settings, NODES_NM)
    air = replace(air, absorption_depth=_fitted_ozone(air, settings.ozone_du))
    shells = Shells.of(air, sky.ground.shells.altitude_km)
    return SpectralSky(settings, sky, Sky(air, sky.grid, Station(shells, SunTable.of(shells), 0), sky.field))


_SPLINE = spline_matrix(MULTIPLE_NM, NODES_NM)


def _to_nodes(light: Array) -> Array:
    return np.exp(np.log(np.maximum(light, _DARKEST)) @ _SPLINE.T)


def _air(settings: AirSettings, wavelength_nm: Array) -> Atmosphere:
    return Atmosphere.standard(wavelength_nm, settings.ozone_du, settings.ground_albedo)


def _fitted_ozone(air: Atmosphere, ozone_du: float) -> Array:
    """Ozone depths (layer, wavelength) whose spline through the nodes follows the 1 nm table best, in least squares.

    Sampled at the nodes alone, the Chappuis bands' structure would move the direct light by 2e-4 in xy.
    """
    fine = np.arange(NODES_NM[0], NODES_NM[-1] + 1)
    spline = spline_matrix(NODES_NM, fine)
    fitted, *_ = np.linalg.lstsq(spline, gases.ozone_cross_section(fine), rcond=None)
    return gases.ozone_layers(air.level_altitude_km, ozone_du)[:, None] * np.maximum(fitted, 0)
