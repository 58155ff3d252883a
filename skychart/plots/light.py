"""Light through the day beside what was published: illuminance of level ground and luminance of the zenith."""

from typing import Any

import numpy as np
from matplotlib.figure import Figure

from skychart.charts.checks import LightCourse
from skychart.plots.course import sun_scale
from skychart.plots.frame import INK, Box, Panel, figure_svg, key_line, log_scale

SIZE_IN = (5.8, 7.2)
_TOP = Box(0.76, 4.05, 4.85, 2.8)
_BOTTOM = Box(0.76, 0.48, 4.85, 2.8)
_MARKERS = ("o", "s")
_HOLLOW: dict[str, Any] = {"markersize": 5, "markerfacecolor": "white", "markeredgecolor": INK, "markeredgewidth": 1.0}


def light_svg(chart: LightCourse) -> bytes:
    """Figure of two panels over the same suns."""

    def draw(figure: Figure) -> None:
        published = chart.published_illuminance
        both = np.concatenate([chart.illuminance_lx, published.values[np.isfinite(published.values)]])
        unlabelled = sun_scale(chart.solar_elevation_deg, labelled=False)
        top = Panel(figure, _TOP, unlabelled, log_scale(both, "Illuminance of level ground, lx", most=8))
        top.curve(chart.solar_elevation_deg, chart.illuminance_lx)
        top.curve(published.solar_elevation_deg, published.values, 1)
        top.key((f"computed, {chart.air}", published.title), (1.9,), 0.62, 2)
        every = np.concatenate([chart.zenith_cd_m2, *(measured.values for measured in chart.measured_zenith)])
        scale = log_scale(every, "Luminance of the zenith, cd/m²", most=8)
        bottom = Panel(figure, _BOTTOM, sun_scale(chart.solar_elevation_deg), scale)
        bottom.curve(chart.solar_elevation_deg, chart.zenith_cd_m2)
        for number, measured in enumerate(chart.measured_zenith):
            mark = {"marker": _MARKERS[number]} | _HOLLOW
            bottom.marks(measured.solar_elevation_deg, measured.values, **mark)
            key_line(figure, _BOTTOM.left + 1.9, _BOTTOM.bottom + 0.62 - 0.19 * number, measured.title, mark)

    return figure_svg(SIZE_IN, draw)
