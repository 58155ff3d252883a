"""Light of atmospheres known by name, for comparisons with measured skies."""

import dataclasses

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skychart.colour.integrate import tristimulus_matrix
from skychart.sky.spectral import SpectralSky


class StandardSky:
    """A solved sky as CIE 1931 tristimulus values."""

    def __init__(self, sky: SpectralSky) -> None:
        self._sky = sky
        self._matrix = tristimulus_matrix(sky.wavelength_nm)

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
        """Sky light from a direction [cd/m² in Y], shape (..., 3).

        The observer stands on the boundary of the solution's layers nearest the altitude, which needs no new tables.
        """
        boundaries = self._sky.every_order.ground.shells.altitude_km
        nearest = float(boundaries[np.abs(boundaries - altitude_km).argmin()])
        settings = dataclasses.replace(self._sky.settings, altitude_km=nearest)
        seen = dataclasses.replace(self._sky, settings=settings)
        return seen.stokes(solar_elevation_deg, view_elevation_deg, relative_azimuth_deg)[..., 0, :] @ self._matrix

    def zenith_luminance(self, solar_elevation_deg: ArrayLike, altitude_km: float = 0.0) -> NDArray[np.float64]:
        """Luminance of the zenith [cd/m²], shape (...)."""
        return self.sky_XYZ(solar_elevation_deg, 90.0, 0.0, altitude_km)[..., 1]
