"""The sky along two lines, finely enough for a screen: what a test picture of a gradient shows."""

from dataclasses import dataclass

import numpy as np

from skychart.charts.dome import sky_at
from skychart.charts.splines import spline
from skychart.charts.survey import SkyView

RAMP_PIXELS = 1280
_KNOTS_DEG = np.linspace(0, 90, 181)


@dataclass(frozen=True)
class Ramp:
    """Colours `XYZ` [cd m⁻²] along a line through the sky, evenly spaced in angle, shape (pixel, XYZ)."""

    key: str
    title: str
    XYZ: np.ndarray


def ramps(view: SkyView) -> tuple[Ramp, Ramp]:
    """The vertical beside the sun, and the principal plane over the zenith; no sun's disc.

    Beside the sun the logarithm is a spline of view elevation, so that no slope jumps where a test looks for bands.
    """
    place = (np.arange(RAMP_PIXELS) + 0.5) / RAMP_PIXELS
    arc = 180 * place
    elevation, azimuth = np.minimum(arc, 180 - arc), np.where(arc > 90, 180.0, 0.0)
    return (
        Ramp(
            "beside",
            "From the horizon (left) to the zenith, 90 degrees from the sun's azimuth",
            np.exp(spline(_KNOTS_DEG, 90 * place) @ np.log(sky_at(view, _KNOTS_DEG, np.asarray(90.0)))),
        ),
        Ramp(
            "plane",
            "From the horizon below the sun (left) over the zenith to the horizon opposite",
            sky_at(view, elevation, azimuth),
        ),
    )
