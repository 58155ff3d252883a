"""Light through the day beside what was published: illuminance of level ground and luminance of the zenith."""

import numpy as np
from matplotlib.figure import Figure

from skychart.charts.checks import LightCourse
from skychart.plots.course import sun_limits
from skychart.plots.frame import INK, MUTED, Scale, add_axes, curve, figure_svg, key, log_ticks, note

SIZE_IN = (6.4, 7.4)
_TOP_IN = (0.8, 4.15, 5.4, 2.85)
_BOTTOM_IN = (0.8, 0.48, 5.4, 2.85)
_MARKERS = ("o", "s")


def light_svg(chart: LightCourse) -> bytes:
    """Figure of two panels over the same suns."""

    def draw(figure: Figure) -> None:
        published = chart.published_illuminance
        top = _panel(figure, _TOP_IN, chart, chart.illuminance_lx, "Illuminance of level ground, lx", "")
        curve(top, chart.solar_elevation_deg, chart.illuminance_lx)
        curve(top, published.solar_elevation_deg, published.values, 1)
        key(top, _TOP_IN, (2.9, 0.7), ("computed, air and ozone", published.title))
        title = "Sun elevation, degrees"
        bottom = _panel(figure, _BOTTOM_IN, chart, chart.zenith_cd_m2, "Luminance of the zenith, cd/m²", title)
        curve(bottom, chart.solar_elevation_deg, chart.zenith_cd_m2)
        for number, measured in enumerate(chart.measured_zenith):
            bottom.plot(measured.solar_elevation_deg, measured.values, linestyle="none", marker=_MARKERS[number],
                        markersize=5, markerfacecolor="white", markeredgecolor=INK, markeredgewidth=1)  # fmt: skip
            y = 0.16 - 0.075 * number
            bottom.plot([0.55], [y], transform=bottom.transAxes, marker=_MARKERS[number], markersize=5,
                        markerfacecolor="white", markeredgecolor=INK, markeredgewidth=1)  # fmt: skip
            note(bottom, 0.575, y, measured.title, va="center", color=MUTED)

    return figure_svg(*SIZE_IN, draw)


def _panel(figure: Figure, box_in: tuple[float, float, float, float], chart: LightCourse, values: np.ndarray, name: str,
           title: str):  # fmt: skip
    low, high = sun_limits(chart.solar_elevation_deg)
    ticks = [tick for tick in range(-90, 91, 10) if low <= tick <= high]
    labels = [f"{tick}".replace("-", "−") for tick in ticks]
    bottom, top = 10.0 ** np.floor(np.log10(values.min())), 10.0 ** np.ceil(np.log10(values.max()))
    x, y = Scale(low, high, ticks, labels, title), Scale(bottom, top, *log_ticks(bottom, top, most=8), name, log=True)
    return add_axes(figure, box_in, x, y)
