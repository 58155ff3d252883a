"""Pixels of the sky: one side of the dome, and the day as one band.

Between the nodes of the survey the logarithms of the tristimulus values are interpolated by cubic splines, which
keeps both a glow over five decades and its colour smooth. The peak around the sun, too narrow for the nodes, is taken
out first and put back at every pixel, see `skychart.charts.aureole`.
"""

import numpy as np

from skychart.charts.aureole import DISTANCE_DEG, Peak, arms, distance_and_side, peak, toward_arms
from skychart.charts.exposure import Exposure
from skychart.charts.splines import spline
from skychart.charts.survey import RELATIVE_AZIMUTH_DEG, VIEW_ELEVATION_DEG, SkyView

DOME_PIXELS = 160
RIM_PIXELS = 2
OVERLAP_PIXELS = 1
_SURROUND_BYTE = 0x77
_FLOOR = 1e-12
_STEPS = 181
_UPWARD = spline(VIEW_ELEVATION_DEG, np.linspace(0, 90, _STEPS))
_AROUND = spline(RELATIVE_AZIMUTH_DEG, np.linspace(0, 180, _STEPS), flat_ends=True)
_FADE = 1 - (DISTANCE_DEG / DISTANCE_DEG[-1]) ** 4


def sky_at(view: SkyView, elevation_deg: np.ndarray, azimuth_deg: np.ndarray) -> np.ndarray:
    """Tristimulus values of the sky [cd m⁻²] in directions [deg] that broadcast, (..., XYZ).

    View elevation 0 to 90, relative azimuth 0 to 180.
    """
    elevation, azimuth = np.broadcast_arrays(elevation_deg, azimuth_deg)
    grid = np.log(np.maximum(view.grid_XYZ, _FLOOR))
    around = np.log(np.maximum(view.arms_XYZ, _FLOOR))
    if not np.isfinite(around).any():
        return np.exp(_bilinear(_refined(grid), elevation, azimuth))
    bright = peak(view.sun_elevation_deg, around)
    fine = _refined(grid - bright.at(VIEW_ELEVATION_DEG[:, None], RELATIVE_AZIMUTH_DEG))
    left = _FADE[:, None] * (around - _on_arms(view.sun_elevation_deg, fine, bright))
    rest = toward_arms(left, *distance_and_side(view.sun_elevation_deg, elevation, azimuth))
    return np.exp(_bilinear(fine, elevation, azimuth) + bright.at(elevation, azimuth) + rest)


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


def _on_arms(sun_elevation_deg: float, fine: np.ndarray, bright: Peak) -> np.ndarray:
    """Logarithms that grid and peak give along the arms, (arm, distance, XYZ); nan where an arm sees nothing."""
    view, azimuth = arms(sun_elevation_deg)
    seen = np.isfinite(view)
    found = np.full((*view.shape, 3), np.nan)
    found[seen] = _bilinear(fine, view[seen], azimuth[seen]) + bright.at(view[seen], azimuth[seen])
    return found


def _refined(log_XYZ: np.ndarray) -> np.ndarray:
    """Logarithms on half degrees of view elevation and whole degrees of azimuth."""
    return np.einsum("ev,az,vzx->eax", _UPWARD, _AROUND, log_XYZ, optimize=True)


def _bilinear(fine: np.ndarray, elevation_deg: np.ndarray, azimuth_deg: np.ndarray) -> np.ndarray:
    """Values in directions between those of the refined grid."""
    row, column = 2 * elevation_deg, azimuth_deg
    i = np.minimum(row.astype(int), _STEPS - 2)
    j = np.minimum(column.astype(int), _STEPS - 2)
    s, t = (row - i)[..., None], (column - j)[..., None]
    upper = (1 - t) * fine[i, j] + t * fine[i, j + 1]
    lower = (1 - t) * fine[i + 1, j] + t * fine[i + 1, j + 1]
    return (1 - s) * upper + s * lower
