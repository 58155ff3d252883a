"""Light from every direction around an observer, between those that were surveyed.

Between the nodes of the survey the logarithms of the tristimulus values are interpolated by cubic splines, which
keeps both a glow over five decades and its colour smooth. The peak around the sun, too narrow for the nodes, is taken
out first and put back in every direction, see `skychart.charts.aureole`.
"""

import numpy as np

from skychart.charts.aureole import DISTANCE_DEG, Peak, arms, distance_and_side, peak, toward_arms
from skychart.charts.splines import spline
from skychart.charts.survey import BELOW_ELEVATION_DEG, RELATIVE_AZIMUTH_DEG, VIEW_ELEVATION_DEG, SkyView

_FLOOR = 1e-12
_STEPS = 181
_UPWARD = spline(VIEW_ELEVATION_DEG, np.linspace(0, 90, _STEPS))
_AROUND = spline(RELATIVE_AZIMUTH_DEG, np.linspace(0, 180, _STEPS), flat_ends=True)
_FADE = 1 - (DISTANCE_DEG / DISTANCE_DEG[-1]) ** 4


def light_at(view: SkyView, elevation_deg: np.ndarray, azimuth_deg: np.ndarray) -> np.ndarray:
    """Tristimulus values [cd m⁻²] of the sky, and below the horizon of the lit ground, (..., XYZ); no sun's disc.

    View elevation −90 to 90, azimuth from the sun −360 to 360 [deg]; they broadcast.
    """
    elevation, turned = np.broadcast_arrays(np.asarray(elevation_deg, float), np.abs(azimuth_deg) % 360.0)
    azimuth = np.minimum(turned, 360 - turned)
    found = np.empty((*elevation.shape, 3))
    up = elevation >= 0
    found[up] = sky_at(view, elevation[up], azimuth[up])
    found[~up] = _ground_at(view, elevation[~up], azimuth[~up])
    return found


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


def _ground_at(view: SkyView, elevation_deg: np.ndarray, azimuth_deg: np.ndarray) -> np.ndarray:
    """Below the horizon, linear in the logarithm between the nodes; the highest of them is held up to the horizon.

    A ground that is black, seen from where it begins, sends nothing.
    """
    if not view.below_XYZ.any():
        return np.zeros((len(elevation_deg), 3))
    log = np.einsum("az,dzx->dax", _AROUND, np.log(np.maximum(view.below_XYZ, _FLOOR)))
    place = np.interp(elevation_deg, BELOW_ELEVATION_DEG, np.arange(len(BELOW_ELEVATION_DEG), dtype=float))
    return np.exp(_between(log, place, azimuth_deg))


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
    return _between(fine, 2 * elevation_deg, azimuth_deg)


def _between(fine: np.ndarray, row: np.ndarray, column: np.ndarray) -> np.ndarray:
    """Bilinear between rows and columns of `fine`, (row, column, XYZ)."""
    i = np.minimum(row.astype(int), fine.shape[0] - 2)
    j = np.minimum(column.astype(int), fine.shape[1] - 2)
    s, t = (row - i)[..., None], (column - j)[..., None]
    upper = (1 - t) * fine[i, j] + t * fine[i, j + 1]
    lower = (1 - t) * fine[i + 1, j] + t * fine[i + 1, j + 1]
    return (1 - s) * upper + s * lower
