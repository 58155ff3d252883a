"""Luminance, chromaticity and polarisation along the principal plane, one above the other."""

import numpy as np
from matplotlib.axes import Axes
from matplotlib.figure import Figure

from skychart.charts.curves import PrincipalPlane
from skychart.plots.frame import MUTED, Scale, add_axes, curve, figure_svg, key, log_ticks, note

SIZE_IN = (6.4, 6.2)
_LEFT_IN, _WIDTH_IN = 0.62, 5.6
_ARC_TICKS = (0, 30, 60, 90, 120, 150, 180)
_ARC_LABELS = ("0°", "30°", "60°", "zenith", "60°", "30°", "0°")
_ARC_TITLE = "View elevation, from below the sun to the horizon opposite"


def principal_plane_svg(chart: PrincipalPlane) -> bytes:
    """Figure of three panels over the same arc."""

    def draw(figure: Figure) -> None:
        _luminance(figure, chart)
        _chromaticity(figure, chart)
        _polarisation(figure, chart)

    return figure_svg(*SIZE_IN, draw)


def _luminance(figure: Figure, chart: PrincipalPlane) -> None:
    low = 10.0 ** np.floor(np.log10(chart.luminance_cd_m2.min()))
    high = 10.0 ** np.ceil(np.log10(chart.luminance_cd_m2.max()))
    ticks, labels = log_ticks(low, high)
    axes = _panel(figure, 4.4, 1.5, Scale(low, high, ticks, labels, "Luminance, cd/m²", log=True), "")
    curve(axes, chart.arc_deg, chart.luminance_cd_m2)
    if chart.sun_arc_deg >= 0:
        note(axes, chart.sun_arc_deg / 180 + 0.01, 0.93, "sun", color=MUTED)
    _mark_sun(axes, chart)


def _chromaticity(figure: Figure, chart: PrincipalPlane) -> None:
    ticks = (0.1, 0.2, 0.3, 0.4, 0.5, 0.6)
    scale = Scale(0.1, 0.6, ticks, tuple(f"{tick:.1f}" for tick in ticks), "Chromaticity")
    axes = _panel(figure, 2.4, 1.5, scale, "")
    for number in range(2):
        curve(axes, chart.arc_deg, chart.uv[:, 1 - number], number)
    key(axes, (_LEFT_IN, 2.4, _WIDTH_IN, 1.5), (4.6, 0.9), ("v′", "u′"))
    _mark_sun(axes, chart)


def _polarisation(figure: Figure, chart: PrincipalPlane) -> None:
    ticks = (-0.2, 0, 0.2, 0.4, 0.6, 0.8, 1.0)
    labels = ("−0.2", "0", "0.2", "0.4", "0.6", "0.8", "1")
    title = "Degree of polarisation, negative where the electric vector lies in the plane"
    axes = _panel(figure, 0.48, 1.42, Scale(-0.3, 1.0, ticks, labels, title), _ARC_TITLE)
    curve(axes, chart.arc_deg, chart.degree)
    _mark_sun(axes, chart)


def _panel(figure: Figure, bottom_in: float, height_in: float, y: Scale, title: str) -> Axes:
    labels = _ARC_LABELS if title else ("",) * len(_ARC_TICKS)
    return add_axes(
        figure, (_LEFT_IN, bottom_in, _WIDTH_IN, height_in), Scale(0, 180, _ARC_TICKS, labels, title), y
    )


def _mark_sun(axes: Axes, chart: PrincipalPlane) -> None:
    if chart.sun_arc_deg >= 0:
        axes.axvline(chart.sun_arc_deg, color=MUTED, linewidth=0.8, linestyle=(0, (2, 2)), zorder=1)
