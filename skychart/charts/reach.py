"""What of a sky lies beyond a screen: chromaticities outside its triangle, luminances above its peak.

Shares are of the solid angle of the whole sky: a sum over directions every degree of view elevation and two degrees of
azimuth, each with the solid angle of its cell. Extremes are looked for in the same directions and along the arms
around the sun. The disc of the sun is left out.
"""

from dataclasses import dataclass

import numpy as np

from skychart.charts.aureole import arms
from skychart.charts.dome import light_at
from skychart.charts.survey import Survey
from skychart.colour.spaces import in_gamut, rgb
from skychart.colour.triangle import distance_beyond, lowest_over_luminance

PEAKS_CD_M2 = (100.0, 203.0, 1000.0, 4000.0, 10_000.0)
ELEVATION_DEG = np.arange(0.0, 91.0)
AZIMUTH_DEG = np.arange(0.0, 181.0, 2.0)


@dataclass(frozen=True)
class Place:
    """A direction [deg]."""

    view_elevation_deg: float
    relative_azimuth_deg: float


@dataclass(frozen=True)
class Outside:
    """Of one sky and one space: the share of the sky outside, and where it goes farthest and how far.

    `beyond_uv` is the distance in u'v' from the triangle, below 0 if even there the sky lies inside; `lowest` is the
    lowest linear component over the luminance; both at `place`.
    """

    space: str
    share: float
    beyond_uv: float
    lowest: float
    place: Place


@dataclass(frozen=True)
class Range:
    """Luminances of one sky [cd m⁻²], where they are, and the share of the sky above each of `PEAKS_CD_M2`."""

    darkest_cd_m2: float
    darkest: Place
    brightest_cd_m2: float
    brightest: Place
    card_cd_m2: float
    share_above: tuple[float, ...]


@dataclass(frozen=True)
class Reach:
    """What of one sky lies beyond screens."""

    outside: tuple[Outside, ...]
    luminance: Range


def cell_shares() -> np.ndarray:
    """Share of the sky's solid angle of each direction, (view elevation, azimuth); their sum is 1.

    A cell reaches half way to the neighbouring directions; azimuths stand for both sides of the sun.
    """
    edge = np.clip(np.append(ELEVATION_DEG - 0.5, 90), 0, 90)
    height = np.diff(np.sin(np.radians(edge)))
    width = np.full(len(AZIMUTH_DEG), 1.0)
    width[[0, -1]] = 0.5
    return height[:, None] * width / width.sum()


def reach(survey: Survey, sun: int, spaces: tuple[str, ...]) -> Reach:
    """Of the `sun`-th sky, for each of `spaces`."""
    view = survey.sky_view(sun)
    elevation, azimuth = (axis.ravel() for axis in np.meshgrid(ELEVATION_DEG, AZIMUTH_DEG, indexing="ij"))
    share = cell_shares().ravel()
    if survey.sun_seen(sun):
        near = np.stack(arms(view.sun_elevation_deg))
        near = near[:, np.isfinite(near).all(axis=0)]
        elevation, azimuth = np.append(elevation, near[0]), np.append(azimuth, near[1])
        share = np.append(share, np.zeros(near.shape[1]))
    XYZ = light_at(view, elevation, azimuth)
    luminance = XYZ[:, 1]
    dark, bright = int(luminance.argmin()), int(luminance.argmax())

    def place(index: int) -> Place:
        return Place(float(elevation[index]), float(azimuth[index]))

    def outside(space: str) -> Outside:
        distance = distance_beyond(XYZ, space)
        far = int(distance.argmax())
        lowest = float(lowest_over_luminance(XYZ[far], space))
        return Outside(space, float(share @ ~in_gamut(rgb(XYZ, space))), float(distance[far]), lowest, place(far))

    return Reach(
        outside=tuple(outside(space) for space in spaces),
        luminance=Range(
            darkest_cd_m2=float(luminance[dark]),
            darkest=place(dark),
            brightest_cd_m2=float(luminance[bright]),
            brightest=place(bright),
            card_cd_m2=float(survey.card_XYZ[sun, 1]),
            share_above=tuple(float(share @ (luminance > peak)) for peak in PEAKS_CD_M2),
        ),
    )
