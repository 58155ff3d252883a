"""Pixels of the sky: one side of the dome, and the day as one band."""

import numpy as np

from skychart.charts.dome import sky_at
from skychart.charts.exposure import Exposure
from skychart.charts.survey import SkyView

DOME_PIXELS = 128
RIM_PIXELS = 2
OVERLAP_PIXELS = 1
_SURROUND_BYTE = 0x77


def half_sky(view: SkyView) -> np.ndarray:
    """The side of the sky to the right of the sun as tristimulus values of pixels [cd m⁻²], (height, width, XYZ).

    Equidistant, horizon `RIM_PIXELS` inside the edge, the sun's azimuth downward, the zenith in the middle of the
    left edge but for `OVERLAP_PIXELS` of the other side, which is the mirror image.
    """
    right, down, radius = _places()
    return sky_at(view, np.clip(90 * (1 - radius), 0, 90), np.degrees(np.arctan2(np.abs(right), down)))


def half_dome(pixels_XYZ: np.ndarray, exposure: Exposure) -> np.ndarray:
    """`half_sky` at an exposure, the surround's grey outside: 8-bit sRGB, (height, width, 3)."""
    channels = np.rint(exposure.screen(pixels_XYZ) * 255)
    channels[_places()[2] > 1 + 4 * RIM_PIXELS / DOME_PIXELS] = _SURROUND_BYTE
    return channels.astype(np.uint8)


def day_band(
    skies: tuple[SkyView, ...],
    relative_azimuth_deg: float,
    exposures: tuple[Exposure, ...],
    column_pixels: int,
    height: int,
) -> np.ndarray:
    """A band of the day at one azimuth [deg]: a column for each sun, zenith at the top.

    8-bit sRGB, shape (height, width, 3).
    """
    elevation = np.linspace(90, 0, height)
    columns = [
        exposure.screen(sky_at(view, elevation, np.asarray(relative_azimuth_deg)))
        for exposure, view in zip(exposures, skies, strict=True)
    ]
    channels = np.rint(np.stack(columns, axis=1) * 255).astype(np.uint8)
    return np.repeat(channels, column_pixels, axis=1)


def _places() -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    """Pixels of `half_sky`: right of and below the zenith, and how far from it, the horizon at 1."""
    offset = np.arange(DOME_PIXELS) - (DOME_PIXELS - 1) / 2
    right, down = np.meshgrid(offset[DOME_PIXELS // 2 - OVERLAP_PIXELS :], offset)
    return right, down, np.hypot(right, down) / (DOME_PIXELS / 2 - RIM_PIXELS)
