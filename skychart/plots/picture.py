"""Pixels of the sky: one side of the dome, and the day as one band.

Between the nodes of the survey the logarithms of the tristimulus values are interpolated by cubic splines, which
keeps both a glow over five decades and its colour smooth.
"""

import numpy as np

from skychart.charts.exposure import Exposure
from skychart.charts.survey import RELATIVE_AZIMUTH_DEG, VIEW_ELEVATION_DEG

DOME_PIXELS = 160
RIM_PIXELS = 2
OVERLAP_PIXELS = 1
_SURROUND_BYTE = 0x77
_FLOOR = 1e-12
_STEPS = 181


def half_dome(sky_XYZ: np.ndarray, exposure: Exposure) -> np.ndarray:
    """The side of the sky to the right of the sun, of `sky_XYZ` (view elevation, azimuth, XYZ) on the survey's grid.

    Equidistant, horizon `RIM_PIXELS` inside the edge, the sun's azimuth downward, the zenith in the middle of the
    left edge but for `OVERLAP_PIXELS` of the other side, which is the mirror image. 8-bit sRGB, (height, width, 3).
    """
    fine = _refined(sky_XYZ)
    offset = np.arange(DOME_PIXELS) - (DOME_PIXELS - 1) / 2
    right, down = np.meshgrid(offset[DOME_PIXELS // 2 - OVERLAP_PIXELS :], offset)
    radius = np.hypot(right, down) / (DOME_PIXELS / 2 - RIM_PIXELS)
    elevation = np.clip(90 * (1 - radius), 0, 90)
    azimuth = np.degrees(np.arctan2(np.abs(right), down))
    channels = np.rint(exposure.screen(_bilinear(fine, elevation * 2, azimuth)) * 255)
    channels[radius > 1 + 4 * RIM_PIXELS / DOME_PIXELS] = _SURROUND_BYTE
    return channels.astype(np.uint8)


def day_band(band_XYZ: np.ndarray, exposures: tuple[Exposure, ...], column_pixels: int, height: int) -> np.ndarray:
    """A band of the day: `band_XYZ` (sun, view elevation, XYZ), a column for each sun, zenith at the top.

    8-bit sRGB, shape (height, width, 3).
    """
    elevation = np.linspace(90, 0, height)
    values = np.exp(np.einsum("ev,svx->sex", spline(VIEW_ELEVATION_DEG, elevation), _log(band_XYZ)))
    columns = [exposure.screen(column) for exposure, column in zip(exposures, values, strict=True)]
    channels = np.rint(np.stack(columns, axis=1) * 255).astype(np.uint8)
    return np.repeat(channels, column_pixels, axis=1)


def spline(nodes: np.ndarray, points: np.ndarray, flat_ends: bool = False) -> np.ndarray:
    """Matrix (point, node) of the cubic spline through `nodes`: natural, or with zero slope at both ends.

    Source: Press et al., Numerical Recipes, 3rd edition (2007), section 3.3, equations 3.3.3 to 3.3.7.
    """
    count, step = len(nodes), np.diff(nodes)
    system, right = np.eye(count), np.zeros((count, count))
    for i in range(1, count - 1):
        system[i, i - 1 : i + 2] = step[i - 1] / 6, (step[i - 1] + step[i]) / 3, step[i] / 6
        right[i, i - 1 : i + 2] = 1 / step[i - 1], -1 / step[i - 1] - 1 / step[i], 1 / step[i]
    if flat_ends:
        system[0, :2], right[0, :2] = (step[0] / 3, step[0] / 6), (-1 / step[0], 1 / step[0])
        system[-1, -2:], right[-1, -2:] = (step[-1] / 6, step[-1] / 3), (1 / step[-1], -1 / step[-1])
    curvature = np.linalg.solve(system, right)
    cell = np.clip(np.searchsorted(nodes, points, side="right") - 1, 0, count - 2)
    h = step[cell]
    a = (nodes[cell + 1] - points) / h
    b = 1 - a
    weights = np.zeros((len(points), count))
    rows = np.arange(len(points))
    weights[rows, cell] = a
    weights[rows, cell + 1] = b
    weights += ((a**3 - a) * h**2 / 6)[:, None] * curvature[cell]
    weights += ((b**3 - b) * h**2 / 6)[:, None] * curvature[cell + 1]
    return weights


def _refined(sky_XYZ: np.ndarray) -> np.ndarray:
    """Logarithms on half degrees of view elevation and whole degrees of azimuth."""
    upward = spline(VIEW_ELEVATION_DEG, np.linspace(0, 90, _STEPS))
    around = spline(RELATIVE_AZIMUTH_DEG, np.linspace(0, 180, _STEPS), flat_ends=True)
    return np.einsum("ev,az,vzx->eax", upward, around, _log(sky_XYZ), optimize=True)


def _bilinear(fine: np.ndarray, row: np.ndarray, column: np.ndarray) -> np.ndarray:
    """Values at fractional places of the refined grid, from its logarithms."""
    i = np.minimum(row.astype(int), _STEPS - 2)
    j = np.minimum(column.astype(int), _STEPS - 2)
    s, t = (row - i)[..., None], (column - j)[..., None]
    upper = (1 - t) * fine[i, j] + t * fine[i, j + 1]
    lower = (1 - t) * fine[i + 1, j] + t * fine[i + 1, j + 1]
    return np.exp((1 - s) * upper + s * lower)


def _log(XYZ: np.ndarray) -> np.ndarray:
    return np.log(np.maximum(XYZ, _FLOOR))
