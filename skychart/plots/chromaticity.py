"""CIE 1976 diagram with gamuts, daylight locus and the colours of the sky, and an enlarged part of it."""

import numpy as np
from matplotlib.axes import Axes
from matplotlib.figure import Figure

from skychart.charts.curves import Chromaticities
from skychart.charts.diagram import Landmarks, landmarks
from skychart.plots.frame import INK, MUTED, Scale, add_axes, figure_svg, note

SIZE_IN = (6.4, 5.9)
_BOX_IN = (0.5, 0.48, 5.8, 5.1)
_INSET_IN = (3.6, 0.85, 2.55, 2.55)
_GAMUT_DASHES = {"srgb": "-", "display-p3": (0, (5, 1.5)), "bt2020": (0, (1.2, 1.2))}
_GAMUT_KEY = (("srgb", "sRGB"), ("display-p3", "Display P3"), ("bt2020", "BT.2020"))
_INSET_STEPS = (0.01, 0.02, 0.05, 0.1)
_U = (0.0, 0.1, 0.2, 0.3, 0.4, 0.5, 0.6)
_V = (0.1, 0.2, 0.3, 0.4, 0.5, 0.6)


def chromaticity_svg(chart: Chromaticities) -> bytes:
    """Figure of one sheet's colours; the large scale is the same on every sheet, the small one follows the data."""

    def draw(figure: Figure) -> None:
        marks = landmarks()
        x = Scale(0.0, 0.64, _U, tuple(f"{tick:.1f}" for tick in _U), "u′")
        y = Scale(0.05, 0.61, _V, tuple(f"{tick:.1f}" for tick in _V), "v′")
        axes = add_axes(figure, _BOX_IN, x, y)
        _landmarks(axes, marks)
        for label, u, v in marks.marked:
            axes.plot([u], [v], marker="o", markersize=2.2, color=MUTED)
            axes.annotate(label, (u, v), (-3, 3), textcoords="offset points", ha="right", fontsize=8, color=MUTED)
        _data(axes, chart, size=4.5)
        inset = add_axes(figure, _INSET_IN, *_inset_scales(chart))
        _landmarks(inset, marks)
        _data(inset, chart, size=6.5)
        _key(axes)

    return figure_svg(*SIZE_IN, draw)


def _landmarks(axes: Axes, marks: Landmarks) -> None:
    axes.plot(*marks.locus.T, color=MUTED, linewidth=0.9)
    for space, triangle in marks.gamuts.items():
        axes.plot(*triangle.T, color=MUTED, linewidth=1.0, linestyle=_GAMUT_DASHES[space])
    axes.plot(*marks.daylight.T, color=INK, linewidth=1.6)
    axes.plot(*marks.d65, marker="+", markersize=9, markeredgewidth=1.2, color=INK)


def _data(axes: Axes, chart: Chromaticities, size: float) -> None:
    """Dots in the colours they stand for; for one direction through the day joined in the order of the suns."""
    if chart.track:
        axes.plot(*chart.sky_uv.T, color=INK, linewidth=0.6)
    axes.scatter(*chart.sky_uv.T, s=size**2, c=list(chart.sky_hex), edgecolors=INK, linewidths=0.4, zorder=3)
    if chart.sun_uv is not None:
        axes.plot(*chart.sun_uv, marker="*", markersize=size + 5, markerfacecolor="white", markeredgecolor=INK,
                  markeredgewidth=0.9, zorder=4)  # fmt: skip


def _inset_scales(chart: Chromaticities) -> tuple[Scale, Scale]:
    """Square part of the diagram around the sky colours, on round limits."""
    low, high = chart.sky_uv.min(axis=0), chart.sky_uv.max(axis=0)
    reach = max(float((high - low).max()) * 1.15, 0.02)
    step = next((step for step in _INSET_STEPS if reach / step <= 4), _INSET_STEPS[-1])
    scales = []
    for name, middle in zip(("u′", "v′"), (low + high) / 2, strict=True):
        start = float(np.floor((middle - reach / 2) / step) * step)
        ticks = [start + i * step for i in range(int(np.ceil(reach / step)) + 2)]
        scales.append(Scale(ticks[0], ticks[-1], ticks, [f"{tick:.2f}" for tick in ticks], name))
    return scales[0], scales[1]


def _key(axes: Axes) -> None:
    for number, (space, name) in enumerate(_GAMUT_KEY):
        y = 0.97 - 0.037 * number
        axes.plot([0.76, 0.82], [y, y], transform=axes.transAxes, color=MUTED, linewidth=1.0,
                  linestyle=_GAMUT_DASHES[space])  # fmt: skip
        note(axes, 0.835, y, name, va="center")
    for number, (marker, name) in enumerate((("_", "daylight"), ("+", "D65"), ("*", "sun, direct"))):
        y = 0.97 - 0.037 * (len(_GAMUT_KEY) + number)
        face = "white" if marker == "*" else INK
        axes.plot([0.79], [y], transform=axes.transAxes, marker=marker, markersize=9, markerfacecolor=face,
                  markeredgecolor=INK, markeredgewidth=1.6 if marker == "_" else 1.0)  # fmt: skip
        note(axes, 0.835, y, name, va="center")
