"""Light of atmospheres of the default settings, for comparisons with measured skies."""

import dataclasses
from collections.abc import Iterable

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skychart.colour.integrate import tristimulus_matrix
from skychart.config import NAMED_AIRS, AirSettings
from skychart.sky.spectral import SpectralSky, solve_spectral


class StandardSky:
    """The sky of an atmosphere known by name as CIE 1931 tristimulus values; molecular or clear are those compared."""

    def __init__(self, solved: Iterable[SpectralSky] = (), wanted: AirSettings = NAMED_AIRS["molecular"]) -> None:
        """Take the sky of the ``wanted`` settings from those already ``solved``, or solve it."""
        self._sky = next((sky for sky in solved if sky.settings == wanted), None) or solve_spectral(wanted)
        self._matrix = tristimulus_matrix(self._sky.wavelength_nm)

    def sun_shines(self, solar_elevation_deg: float) -> bool:
        """Whether light of the sun's centre reaches the ground."""
        return bool(np.any(self._sky.beam(solar_elevation_deg) > 0))

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
        settings = dataclasses.replace(self._sky.settings, altitude_km=altitude_km)
        seen = dataclasses.replace(self._sky, settings=settings)
        return seen.stokes(solar_elevation_deg, view_elevation_deg, relative_azimuth_deg)[..., 0, :] @ self._matrix

    def zenith_luminance(self, solar_elevation_deg: ArrayLike, altitude_km: float = 0.0) -> NDArray[np.float64]:
        """Luminance of the zenith [cd/m²], shape (...)."""
        return self.sky_XYZ(solar_elevation_deg, 90.0, 0.0, altitude_km)[..., 1]
