"""CIE 1976 diagram: an enlarged part around the colours, and the whole with the gamuts."""

from typing import Any

import numpy as np
from matplotlib.figure import Figure

from skychart.charts.curves import Chromaticities
from skychart.charts.diagram import Landmarks, landmarks
from skychart.plots.frame import INK, MUTED, Box, Panel, Scale, figure_svg, key_line

SIZE_IN = (5.8, 4.7)
_LARGE = Box(0.5, 0.55, 3.76, 3.76)
_SMALL = Box(4.42, 3.06, 1.25, 1.25)
_KEY_AT_IN = (4.42, 2.7)
_KEY_STEP_IN = 0.19
_GAMUT_DASHES = {"srgb": "-", "display-p3": (0, (5, 1.5)), "bt2020": (0, (1.2, 1.2))}
_MARK: dict[str, Any] = {"linestyle": "none", "markeredgecolor": INK, "markerfacecolor": "white"}
_D65 = _MARK | {"marker": "+", "markersize": 8, "markeredgewidth": 1.1}
_SUN = _MARK | {"marker": "*", "markersize": 10, "markeredgewidth": 0.9}
_STEPS = (0.01, 0.02, 0.05, 0.1)
_MOST_STEPS = 5
_MARGIN_STEPS = 0.15
_U = Scale(0.0, 0.64, (), (), "")
_V = Scale(0.0, 0.64, (), (), "whole diagram")


def chromaticity_svg(chart: Chromaticities) -> bytes:
    """Figure of one sheet's colours; the large scale follows the data, the small diagram is the same everywhere."""

    def draw(figure: Figure) -> None:
        marks = landmarks()
        large = Panel(figure, _LARGE, *_scales(chart))
        small = Panel(figure, _SMALL, _U, _V)
        for panel in (large, small):
            _landmarks(panel, marks)
        _data(large, chart)
        _outline(small, large)
        _key(figure, chart)

    return figure_svg(SIZE_IN, draw)


def _landmarks(panel: Panel, marks: Landmarks) -> None:
    panel.line(*marks.locus.T, color=MUTED, linewidth=0.8)
    for space, triangle in marks.gamuts.items():
        panel.line(*triangle.T, color=MUTED, linewidth=0.9, linestyle=_GAMUT_DASHES[space])
    panel.line(*marks.daylight.T, linewidth=1.6)
    if panel.box is _LARGE:
        panel.line(marks.d65[:1], marks.d65[1:], **_D65)


def _data(panel: Panel, chart: Chromaticities) -> None:
    """Dots in the colours they stand for; for one direction through the day joined in the order of the suns."""
    if chart.track:
        panel.line(*chart.sky_uv.T, linewidth=0.6)
    u, v = chart.sky_uv.T
    panel.dots(u, v, chart.sky_hex, size_pt=6.5)
    if chart.sun_uv is not None:
        panel.line(chart.sun_uv[:1], chart.sun_uv[1:], **_SUN)


def _outline(small: Panel, large: Panel) -> None:
    """Where the enlarged part lies in the whole."""
    u = np.array([large.x.low, large.x.high, large.x.high, large.x.low, large.x.low])
    v = np.array([large.y.low, large.y.low, large.y.high, large.y.high, large.y.low])
    small.line(u, v, linewidth=1.4)


def _scales(chart: Chromaticities) -> tuple[Scale, Scale]:
    """A square part of the diagram on round limits that holds all colours of the sky."""
    low, high = chart.sky_uv.min(axis=0), chart.sky_uv.max(axis=0)
    reach = max(float((high - low).max()), _STEPS[0])
    step = next((step for step in _STEPS if reach / step <= _MOST_STEPS - 1), _STEPS[-1])
    starts = np.floor(low / step - _MARGIN_STEPS)
    count = int((np.ceil(high / step + _MARGIN_STEPS) - starts).max())
    return _scale("u′", starts[0], count, step), _scale("v′", starts[1], count, step)


def _scale(name: str, start: float, count: int, step: float) -> Scale:
    ticks = [(start + i) * step for i in range(count + 1)]
    return Scale(ticks[0], ticks[-1], ticks, [f"{tick:.2f}" for tick in ticks], name)


def _key(figure: Figure, chart: Chromaticities) -> None:
    outline = {"color": MUTED, "linewidth": 0.9}
    entries: list[tuple[str, dict[str, Any]]] = [
        ("sRGB", outline | {"linestyle": _GAMUT_DASHES["srgb"]}),
        ("Display P3", outline | {"linestyle": _GAMUT_DASHES["display-p3"]}),
        ("BT.2020", outline | {"linestyle": _GAMUT_DASHES["bt2020"]}),
        ("daylight locus", {"linewidth": 1.6}),
        ("D65", _D65),
    ]
    if chart.sun_uv is not None:
        entries.append(("sun, direct", _SUN))
    for number, (name, style) in enumerate(entries):
        key_line(figure, _KEY_AT_IN[0], _KEY_AT_IN[1] - number * _KEY_STEP_IN, name, style)
