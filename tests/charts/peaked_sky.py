"""A sky with haze's peak around the sun that costs nothing and is smooth from twilight to noon."""

import numpy as np

from tests.charts.fake_sky import FakeSky

_SOFT_DEG = 2.0


class PeakedSky(FakeSky):
    """Molecules, and haze that sends light forward: a peak narrower and whiter than any grid of directions can show."""

    def stokes(self, solar_elevation_deg, view_elevation_deg, relative_azimuth_deg):
        """Single scattering, shape (..., 3, wavelength); haze light is unpolarised and comes from the apparent sun."""
        sun, view, azimuth = np.radians(
            np.broadcast_arrays(solar_elevation_deg, view_elevation_deg, relative_azimuth_deg)
        )
        seen = np.radians(self.apparent_elevation_deg(np.degrees(sun)))
        cosine = np.sin(seen) * np.sin(view) + np.cos(seen) * np.cos(view) * np.cos(azimuth)
        distance = np.degrees(np.arccos(np.clip(cosine, -1, 1)))
        peak = 3 * np.exp(0.27 - np.hypot(distance, 0.4) / 1.5) + np.exp(0.25 - np.hypot(distance, 2) / 8)
        degree = 0.9 * (1 - cosine**2) / (1 + cosine**2)
        across = np.cos(seen) * np.sin(azimuth)
        upward = np.sin(seen) * np.cos(view) - np.cos(seen) * np.sin(view) * np.cos(azimuth)
        turn = 2 * np.arctan2(across, upward)
        molecules = (1 + cosine**2)[..., None] * self._glow(sun, view)
        haze = peak[..., None] * (self.wavelength_nm / 550.0) ** 1.5 * self._glow(sun, view)
        q, u = ((degree * part)[..., None] * molecules for part in (np.cos(turn), np.sin(turn)))
        return np.stack([molecules + haze, q, u], axis=-2)

    def beam(self, solar_elevation_deg):
        """Transmission that falls fast below 2° and ends at −0.5°."""
        sun = np.asarray(solar_elevation_deg, float)[..., None]
        sine = np.sin(np.radians(_softened(sun + 0.5)))
        return np.where(sun >= -0.5, np.exp(-self.depth / sine), 0.0)

    def ground_irradiance(self, solar_elevation_deg):
        """Diffuse as if all the sky were as 45° beside the sun; direct by the apparent sun's height."""
        diffuse = np.pi * self.stokes(solar_elevation_deg, 45.0, 90.0)[..., 0, :]
        height = np.sin(np.radians(self.apparent_elevation_deg(solar_elevation_deg)))[..., None]
        return diffuse, np.maximum(height, 0) * self.beam(solar_elevation_deg)

    def apparent_elevation_deg(self, solar_elevation_deg):
        """Lifted by half a degree at the horizon and by nothing at the zenith."""
        sun = np.asarray(solar_elevation_deg, float)
        return sun + 0.5 * np.exp(-_softened(sun) / 4) * (90 - sun) / 90

    def _glow(self, sun, view):
        """Radiance for a phase function of 1, (..., wavelength); fades by a factor of ten each 3° of twilight."""
        degrees = np.degrees(sun)
        along = self.depth / (np.sin(view) + 0.03)[..., None]
        weakened = np.exp(-1.5 * self.depth / (np.sin(np.radians(_softened(degrees))) + 0.05)[..., None])
        dusk = 10.0 ** (-_softened(-degrees) / 3)
        return 3 / (16 * np.pi) * (1 - np.exp(-along)) * weakened * dusk[..., None]


def _softened(degrees: np.ndarray) -> np.ndarray:
    """Nearly the larger of an angle and 0, without a corner."""
    return _SOFT_DEG * np.logaddexp(0, degrees / _SOFT_DEG)
