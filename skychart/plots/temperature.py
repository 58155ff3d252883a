"""Colour temperature of pieces of sky over their luminance, beside a fit to measured skies."""

from typing import Any

import numpy as np
from matplotlib.figure import Figure

from skychart.charts.checks import SkyTemperatures
from skychart.plots.frame import INK, Box, Panel, figure_svg, key_line, log_scale

SIZE_IN = (5.8, 4.7)
_BOX = Box(0.76, 1.15, 4.85, 3.22)
_KEY_TOP_IN = 0.58
_KEY_COLUMN_IN = 3.3
_KEY_STEP_IN = 0.19
_KEY_ROWS = 2
_MARK: dict[str, Any] = {"markersize": 3.4, "markeredgecolor": INK, "markeredgewidth": 0.7}
_KINDS: tuple[dict[str, Any], ...] = (
    {"marker": "o", "markerfacecolor": "white"},
    {"marker": "s", "markerfacecolor": INK},
    {"marker": "^", "markerfacecolor": "white"},
)


def temperature_svg(chart: SkyTemperatures) -> bytes:
    """Figure of one mark for each piece of sky that has a colour temperature, a kind of mark for each sun."""

    def draw(figure: Figure) -> None:
        luminance = np.concatenate([chart.published_cd_m2, *(sky.luminance_cd_m2 for sky in chart.skies)])
        kelvins = np.concatenate([chart.published_k, *(sky.cct_k for sky in chart.skies)])
        x = log_scale(luminance, "Luminance, cd/m²")
        y = log_scale(kelvins[np.isfinite(kelvins)], "Correlated colour temperature, K")
        panel = Panel(figure, _BOX, x, y)
        for sky, kind in zip(chart.skies, _KINDS, strict=False):
            known = np.isfinite(sky.cct_k)
            panel.marks(sky.luminance_cd_m2[known], sky.cct_k[known], **_MARK, **kind)
        panel.line(chart.published_cd_m2, chart.published_k, linewidth=1.7)
        _key(figure, chart)

    return figure_svg(SIZE_IN, draw)


def _key(figure: Figure, chart: SkyTemperatures) -> None:
    entries: list[tuple[str, dict[str, Any]]] = [(chart.published_title, {"linewidth": 1.7})]
    entries += [(sky.title, _MARK | kind) for sky, kind in zip(chart.skies, _KINDS, strict=False)]
    for number, (name, style) in enumerate(entries):
        column, row = divmod(number, _KEY_ROWS)
        left = _BOX.left + column * _KEY_COLUMN_IN
        key_line(figure, left, _KEY_TOP_IN - row * _KEY_STEP_IN, name, style)
