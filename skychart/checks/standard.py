"""Light of the default atmosphere, for comparisons with measured skies."""

import dataclasses
from collections.abc import Iterable

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skychart.colour.integrate import tristimulus_matrix
from skychart.config import AirSettings
from skychart.sky.spectral import SpectralSky, solve_spectral


class StandardSky:
    """The molecular sky of the default settings (18 % ground, 300 Dobson units), as CIE 1931 tristimulus values."""

    def __init__(self, solved: Iterable[SpectralSky] = ()) -> None:
        """Take the sky of the default settings from those already ``solved``, or solve it."""
        wanted = AirSettings()
        self._sky = next((sky for sky in solved if sky.settings == wanted), None) or solve_spectral(wanted)
        self._matrix = tristimulus_matrix(self._sky.wavelength_nm)

    def horizontal_XYZ(self, solar_elevation_deg: ArrayLike) -> NDArray[np.float64]:
        """Sun and sky on the horizontal ground [lx in Y], shape (..., 3)."""
        diffuse, direct = self._sky.ground_irradiance(solar_elevation_deg)
        return (diffuse + direct) @ self._matrix

    def sky_XYZ(
        self,
        solar_elevation_deg: ArrayLike,
        view_elevation_deg: ArrayLike,
        relative_azimuth_deg: ArrayLike,
        altitude_km: float = 0.0,
    ) -> NDArray[np.float64]:
        """Sky light from a direction [cd/m² in Y], shape (..., 3), for an observer at any altitude."""
        seen = dataclasses.replace(self._sky, settings=AirSettings(altitude_km=altitude_km))
        return seen.stokes(solar_elevation_deg, view_elevation_deg, relative_azimuth_deg)[..., 0, :] @ self._matrix

    def zenith_luminance(self, solar_elevation_deg: ArrayLike, altitude_km: float = 0.0) -> NDArray[np.float64]:
        """Luminance of the zenith [cd/m²], shape (...)."""
        return self.sky_XYZ(solar_elevation_deg, 90.0, 0.0, altitude_km)[..., 1]
