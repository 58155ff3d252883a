"""Luminance, chromaticity and polarisation along the principal plane, one above the other."""

import numpy as np
from matplotlib.figure import Figure

from skychart.charts.curves import PrincipalPlane
from skychart.plots.frame import MUTED, Box, Panel, Scale, figure_svg, log_scale

SIZE_IN = (5.8, 6.0)
_LEFT_IN, _WIDTH_IN, _HEIGHT_IN = 0.6, 4.9, 1.42
_BOTTOMS_IN = (4.28, 2.38, 0.48)
_ARC_TICKS = (0, 30, 60, 90, 120, 150, 180)
_ARC_LABELS = ("0°", "30°", "60°", "zenith", "60°", "30°", "0°")
_ARC_TITLE = "View elevation, from below the sun to the horizon opposite"
_CHROMA_TICKS = (0.1, 0.2, 0.3, 0.4, 0.5, 0.6)
_CHROMA = Scale(0.1, 0.6, _CHROMA_TICKS, tuple(f"{tick:.1f}" for tick in _CHROMA_TICKS), "Chromaticity")
_DEGREE = Scale(
    -0.25,
    1.0,
    (-0.25, 0, 0.25, 0.5, 0.75, 1.0),
    ("−0.25", "0", "0.25", "0.5", "0.75", "1"),
    "Degree of polarisation, negative: electric vector in the plane",
)


def principal_plane_svg(chart: PrincipalPlane) -> bytes:
    """Figure of three panels over the same arc."""

    def draw(figure: Figure) -> None:
        luminance = _panel(figure, 0, log_scale(chart.luminance_cd_m2, "Luminance, cd/m²", most=5), chart)
        luminance.curve(chart.arc_deg, chart.luminance_cd_m2)
        if chart.sun_arc_deg >= 0:
            luminance.text(chart.sun_arc_deg, luminance.y.high, "sun", (0.04, -0.03), va="top", color=MUTED)
        chroma = _panel(figure, 1, _CHROMA, chart)
        for number in range(2):
            chroma.curve(chart.arc_deg, chart.uv[:, 1 - number], number)
            chroma.text(180, chart.uv[-1, 1 - number], ("v′", "u′")[number], (0.06, 0), va="center")
        degree = _panel(figure, 2, _DEGREE, chart)
        degree.curve(chart.arc_deg, chart.degree)

    return figure_svg(SIZE_IN, draw)


def _panel(figure: Figure, number: int, y: Scale, chart: PrincipalPlane) -> Panel:
    """The panel at a place from the top; the lowest carries the arc's labels, all mark the sun."""
    lowest = number == len(_BOTTOMS_IN) - 1
    labels = _ARC_LABELS if lowest else ("",) * len(_ARC_TICKS)
    x = Scale(0, 180, _ARC_TICKS, labels, _ARC_TITLE if lowest else "")
    panel = Panel(figure, Box(_LEFT_IN, _BOTTOMS_IN[number], _WIDTH_IN, _HEIGHT_IN), x, y)
    if chart.sun_arc_deg >= 0:
        panel.line(
            np.full(2, chart.sun_arc_deg), np.array([y.low, y.high]), color=MUTED, linewidth=0.8, linestyle=(0, (2, 2))
        )
    return panel
