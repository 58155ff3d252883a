"""One direction through the day: luminance, chromaticity and polarisation over the sun's elevation."""

import numpy as np
from matplotlib.axes import Axes
from matplotlib.figure import Figure

from skychart.charts.direction import Course
from skychart.plots.frame import Scale, add_axes, curve, figure_svg, key, log_ticks

SIZE_IN = (6.4, 6.2)
_LEFT_IN, _WIDTH_IN = 0.72, 5.5


def course_svg(chart: Course) -> bytes:
    """Figure of three panels over the same elevations."""

    def draw(figure: Figure) -> None:
        low = 10.0 ** np.floor(np.log10(chart.luminance_cd_m2.min()))
        high = 10.0 ** np.ceil(np.log10(chart.luminance_cd_m2.max()))
        ticks, labels = log_ticks(low, high, most=7)
        luminance = _panel(figure, chart, 4.4, Scale(low, high, ticks, labels, "Luminance, cd/m²", log=True))
        curve(luminance, chart.solar_elevation_deg, chart.luminance_cd_m2)
        parts = (0.1, 0.2, 0.3, 0.4, 0.5, 0.6)
        chroma = _panel(figure, chart, 2.4, Scale(0.1, 0.6, parts, [f"{part:.1f}" for part in parts], "Chromaticity"))
        for number in range(2):
            curve(chroma, chart.solar_elevation_deg, chart.uv[:, 1 - number], number)
        key(chroma, (_LEFT_IN, 2.4, _WIDTH_IN, 1.5), (4.5, 0.9), ("v′", "u′"))
        fifths = (0, 0.2, 0.4, 0.6, 0.8, 1)
        scale = Scale(0, 1, fifths, [f"{part:g}" for part in fifths], "Degree of polarisation")
        degree = _panel(figure, chart, 0.48, scale, "Sun elevation, degrees")
        curve(degree, chart.solar_elevation_deg, chart.degree)

    return figure_svg(*SIZE_IN, draw)


def _panel(figure: Figure, chart: Course, bottom_in: float, y: Scale, title: str = "") -> Axes:
    low, high = sun_limits(chart.solar_elevation_deg)
    ticks = [tick for tick in range(-90, 91, 10) if low <= tick <= high]
    labels = [f"{tick}".replace("-", "−") if title else "" for tick in ticks]
    return add_axes(figure, (_LEFT_IN, bottom_in, _WIDTH_IN, 1.45), Scale(low, high, ticks, labels, title), y)


def sun_limits(solar_elevation_deg: np.ndarray) -> tuple[float, float]:
    """Ends of a scale of sun elevations: the data's own, a degree wider where there is one sun only."""
    low, high = float(solar_elevation_deg.min()), float(solar_elevation_deg.max())
    return (low, high) if high > low else (low - 1, high + 1)
