"""One direction through the day: luminance, chromaticity and polarisation over the sun's elevation."""

import numpy as np
from matplotlib.figure import Figure

from skychart.charts.direction import Course
from skychart.plots.frame import Box, Panel, Scale, figure_svg, log_scale

SIZE_IN = (5.8, 6.0)
_LEFT_IN, _WIDTH_IN, _HEIGHT_IN = 0.66, 4.85, 1.42
_BOTTOMS_IN = (4.28, 2.38, 0.48)
_CHROMA_TICKS = (0.1, 0.2, 0.3, 0.4, 0.5, 0.6)
_CHROMA = Scale(0.1, 0.6, _CHROMA_TICKS, tuple(f"{tick:.1f}" for tick in _CHROMA_TICKS), "Chromaticity")
_FIFTHS = (0, 0.2, 0.4, 0.6, 0.8, 1)
_DEGREE = Scale(0, 1, _FIFTHS, tuple(f"{part:g}" for part in _FIFTHS), "Degree of polarisation")


def course_svg(chart: Course) -> bytes:
    """Figure of three panels over the same elevations."""

    def draw(figure: Figure) -> None:
        luminance = _panel(figure, 0, log_scale(chart.luminance_cd_m2, "Luminance, cd/m²"), chart)
        _course(luminance, chart, chart.luminance_cd_m2)
        chroma = _panel(figure, 1, _CHROMA, chart)
        for number in range(2):
            _course(chroma, chart, chart.uv[:, 1 - number], number)
            chroma.text(chroma.x.high, chart.uv[-1, 1 - number], ("v′", "u′")[number], (0.06, 0), va="center")
        degree = _panel(figure, 2, _DEGREE, chart)
        _course(degree, chart, chart.degree)

    return figure_svg(SIZE_IN, draw)


def sun_scale(solar_elevation_deg: np.ndarray, labelled: bool = True) -> Scale:
    """Sun elevations from the first to the last, a degree wider where there is one only."""
    low, high = float(solar_elevation_deg.min()), float(solar_elevation_deg.max())
    low, high = (low, high) if high > low else (low - 1, high + 1)
    ticks = [tick for tick in range(-90, 91, 10) if low <= tick <= high]
    labels = [f"{tick}".replace("-", "−") if labelled else "" for tick in ticks]
    return Scale(low, high, ticks, labels, "Sun elevation, degrees" if labelled else "")


def _course(panel: Panel, chart: Course, values: np.ndarray, number: int = 0) -> None:
    """A curve with a mark at each sun that was computed."""
    panel.curve(chart.solar_elevation_deg, values, number)
    panel.marks(chart.solar_elevation_deg, values, "o", markersize=3)


def _panel(figure: Figure, number: int, y: Scale, chart: Course) -> Panel:
    box = Box(_LEFT_IN, _BOTTOMS_IN[number], _WIDTH_IN, _HEIGHT_IN)
    return Panel(figure, box, sun_scale(chart.solar_elevation_deg, number == len(_BOTTOMS_IN) - 1), y)
