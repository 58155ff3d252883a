"""A sky of single scattering in a flat air: quick, smooth, and wrong enough never to be taken for the real one."""

import numpy as np

from skychart.config import AirSettings


class FakeSky:
    """What charts ask of a sky, on 48 wavelengths; light fades by a factor of ten each 3° below the horizon."""

    def __init__(self, settings: AirSettings) -> None:
        self.settings = settings
        self.wavelength_nm = np.arange(360.0, 831.0, 10.0)
        self.ground_albedo = np.full(48, 0.18)
        self.depth = 0.1 * (550.0 / self.wavelength_nm) ** 4 + 0.03 * np.exp(-(((self.wavelength_nm - 600) / 60) ** 2))

    def stokes(self, solar_elevation_deg, view_elevation_deg, relative_azimuth_deg):
        """Single scattering by molecules, shape (..., 3, wavelength)."""
        sun, view, azimuth = np.radians(
            np.broadcast_arrays(solar_elevation_deg, view_elevation_deg, relative_azimuth_deg)
        )
        cosine = np.sin(sun) * np.sin(view) + np.cos(sun) * np.cos(view) * np.cos(azimuth)
        along = self.depth / (np.sin(view) + 0.03)[..., None]
        glow = (1 - np.exp(-along)) * np.exp(-1.5 * self.depth / (np.sin(np.maximum(sun, 0)) + 0.05)[..., None])
        intensity = 3 / (16 * np.pi) * (1 + cosine**2)[..., None] * glow * self._dusk(sun)[..., None]
        degree = 0.9 * (1 - cosine**2) / (1 + cosine**2)
        across = np.cos(sun) * np.sin(azimuth)
        upward = np.sin(sun) * np.cos(view) - np.cos(sun) * np.sin(view) * np.cos(azimuth)
        turn = 2 * np.arctan2(across, upward)
        q, u = degree * np.cos(turn), degree * np.sin(turn)
        return np.stack([intensity, intensity * q[..., None], intensity * u[..., None]], axis=-2)

    def beam(self, solar_elevation_deg):
        """Flat-air transmission, nothing once the sun is below the horizon."""
        sine = np.sin(np.radians(np.asarray(solar_elevation_deg, float)))[..., None]
        return np.where(sine >= 0, np.exp(-self.depth / (np.maximum(sine, 0) + 0.02)), 0.0)

    def ground_irradiance(self, solar_elevation_deg):
        """Diffuse as if the sky were as bright everywhere as 45° beside the sun."""
        diffuse = np.pi * self.stokes(solar_elevation_deg, 45.0, 90.0)[..., 0, :]
        sine = np.sin(np.radians(np.asarray(solar_elevation_deg, float)))[..., None]
        return diffuse, np.maximum(sine, 0) * self.beam(solar_elevation_deg)

    def apparent_elevation_deg(self, solar_elevation_deg):
        """Lifted by half a degree at the horizon, by nothing at the zenith."""
        sun = np.asarray(solar_elevation_deg, float)
        return sun + 0.5 * np.exp(-np.maximum(sun, -1.0) / 4) * (90 - sun) / 90

    def _dusk(self, sun):
        return 10.0 ** (np.degrees(np.minimum(sun, 0)) / 3)
