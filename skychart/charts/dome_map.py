"""Everything around an observer as the pixels of a latitude-longitude map: the sky above, the lit ground below.

The middle of the map looks along the horizon, its upper edge is the zenith, its lower edge the nadir, and azimuth grows
clockwise, as seen from above, from left to right. A pixel is an area, so the horizon lies between two rows and a pixel
holds the mean over its solid angle.

The sun's disc is far smaller than many a pixel. Its light is therefore handed to the four pixels around each point of
the disc, by weights that keep both the sum and the mean direction: every plane gets the illuminance that the sun
itself would give it, wherever the sun falls between the pixels.
"""

from dataclasses import dataclass

import numpy as np

from skychart.charts.aureole import distance_and_side
from skychart.charts.dome import light_at
from skychart.charts.survey import SkyView, Survey
from skychart.config import AirSettings
from skychart.sky.sun import SOLAR_DISC_DIAMETER_DEG

_SAMPLES = 2
_NEAR_SAMPLES = 8
_NEAR_DEG = 5.0
_ROWS_AT_ONCE = 32
_RINGS = 48
_SPOKES = 96


@dataclass(frozen=True)
class DomeMap:
    """A map of one sky: `XYZ` [cd m⁻²] are means over pixels, shape (row, column, XYZ), zenith in the first row.

    `sun_azimuth_deg` is counted clockwise from the middle of the map; `disc` tells whether the sun's disc is in.
    """

    air: AirSettings
    observer: str
    solar_elevation_deg: float
    apparent_elevation_deg: float
    sun_azimuth_deg: float
    disc: bool
    XYZ: np.ndarray


def dome_map(survey: Survey, sun: int, width: int, sun_azimuth_deg: float = 0.0, disc: bool = False) -> DomeMap:
    """The map of the `sun`-th sky, `width` pixels wide and half as high; `width` is divisible by 4.

    `disc` draws the sun as an evenly bright disc of its mean diameter, none of it below the horizon; a sun that is not
    seen adds nothing.
    """
    view = survey.sky_view(sun)
    pixels = _means(view, width, sun_azimuth_deg)
    if disc and survey.sun_seen(sun):
        shares = disc_shares(view.sun_elevation_deg, sun_azimuth_deg, width)
        row, column = np.nonzero(shares)
        pixels[row, column] += np.outer(shares[row, column] / pixel_solid_angle_sr(width)[row], survey.beam_XYZ[sun])
    return DomeMap(
        air=survey.air,
        observer=survey.observer,
        solar_elevation_deg=float(survey.solar_elevation_deg[sun]),
        apparent_elevation_deg=view.sun_elevation_deg,
        sun_azimuth_deg=sun_azimuth_deg,
        disc=disc,
        XYZ=pixels,
    )


def pixel_solid_angle_sr(width: int) -> np.ndarray:
    """Solid angle [sr] of a pixel of each row, shape (row,)."""
    return -np.diff(_edge_sines(width)) * 2 * np.pi / width


def pixel_mean_sine(width: int) -> np.ndarray:
    """Mean over a pixel's solid angle of the sine of its elevation, by row, shape (row,)."""
    edges = _edge_sines(width)
    return (edges[:-1] + edges[1:]) / 2


def level_XYZ(dome: DomeMap) -> np.ndarray:
    """Illuminance of the level ground [lx] by all pixels above the horizon, as XYZ, shape (3,)."""
    width = dome.XYZ.shape[1]
    weight = np.maximum(pixel_mean_sine(width), 0) * pixel_solid_angle_sr(width)
    return np.einsum("r,rcx->x", weight, dome.XYZ)


def disc_shares(sun_elevation_deg: float, sun_azimuth_deg: float, width: int) -> np.ndarray:
    """Shares of the disc's light by pixel of a map, (row, column), which add up to 1.

    No row lies lower than the lowest one of the sky: a disc that reaches below its middle is squeezed upon it.
    """
    radius = np.sqrt((np.arange(_RINGS) + 0.5) / _RINGS) * np.radians(SOLAR_DISC_DIAMETER_DEG / 2)
    turn = 2 * np.pi * (np.arange(_SPOKES) + 0.5) / _SPOKES
    sun, away = np.radians(sun_elevation_deg), radius[:, None]
    sine = np.sin(sun) * np.cos(away) + np.cos(sun) * np.sin(away) * np.cos(turn)
    ahead = np.cos(sun) * np.cos(away) - np.sin(sun) * np.sin(away) * np.cos(turn)
    azimuth = np.degrees(np.arctan2(np.sin(away) * np.sin(turn), ahead)) + sun_azimuth_deg
    rows = pixel_mean_sine(width)[: width // 4]
    height = np.maximum(sine - rows[-1], 0)
    squeeze = max(float((sine - rows[-1]).mean()), 0) / max(float(height.mean()), 1e-12)
    down = np.interp(-rows[-1] - height * min(squeeze, 1), -rows, np.arange(width // 4, dtype=float))
    across = width * (azimuth / 360 + 0.5) - 0.5
    row, column = np.floor(down).astype(int), np.floor(across).astype(int)
    shares = np.zeros((width // 2, width))
    for below, lower in ((0, 1 - (down - row)), (1, down - row)):
        for right, side in ((0, 1 - (across - column)), (1, across - column)):
            np.add.at(shares, (row + below, (column + right) % width), lower * side / sine.size)
    return shares


def _edge_sines(width: int) -> np.ndarray:
    """Sines of the elevations between which the rows lie, from 1 at the zenith to −1."""
    return np.sin(np.radians(np.linspace(90, -90, width // 2 + 1)))


def _means(view: SkyView, width: int, sun_azimuth_deg: float) -> np.ndarray:
    """Means over pixels [cd m⁻²], (row, column, XYZ): a few samples of equal solid angle, more of them near the sun."""
    height = width // 2
    found = np.empty((height, width, 3))
    columns = np.arange(width)
    for first in range(0, height, _ROWS_AT_ONCE):
        rows = np.arange(first, min(first + _ROWS_AT_ONCE, height))
        found[rows] = _pixel_means(view, width, sun_azimuth_deg, rows[:, None], columns, _SAMPLES)
    elevation = np.degrees(np.arcsin(pixel_mean_sine(width)))[:, None]
    distance, _ = distance_and_side(
        view.sun_elevation_deg, elevation, _azimuth_deg(columns + 0.5, width, sun_azimuth_deg)
    )
    row, column = np.nonzero(distance < _NEAR_DEG)
    for some in np.array_split(np.arange(len(row)), 1 + len(row) // 8192):
        at = row[some], column[some]
        found[at] = _pixel_means(view, width, sun_azimuth_deg, *at, _NEAR_SAMPLES)
    return found


def _pixel_means(
    view: SkyView, width: int, sun_azimuth_deg: float, row: np.ndarray, column: np.ndarray, samples: int
) -> np.ndarray:
    """Means over the pixels of `row` and `column`, which broadcast, by `samples` in each direction, (..., XYZ)."""
    inside = (np.arange(samples) + 0.5) / samples
    edges = _edge_sines(width)
    sine = edges[row][..., None, None] * (1 - inside[:, None]) + edges[row + 1][..., None, None] * inside[:, None]
    azimuth = _azimuth_deg(column[..., None, None] + inside, width, sun_azimuth_deg)
    return light_at(view, np.degrees(np.arcsin(sine)), azimuth).mean(axis=(-3, -2))


def _azimuth_deg(across: np.ndarray, width: int, sun_azimuth_deg: float) -> np.ndarray:
    """Azimuth from the sun [deg] of a place `across` the map, counted in pixels from its left edge."""
    return 360 * across / width - 180 - sun_azimuth_deg
