"""Figures of a display sheet over the elevation of the sun: gamut, luminance, code steps."""

from collections.abc import Sequence

import numpy as np
from matplotlib.figure import Figure

from skychart.charts.bands import INVISIBLE_DELTA_E
from skychart.charts.columns import SPACE_TITLES
from skychart.charts.display import DisplaySheet
from skychart.charts.reach import PEAKS_CD_M2
from skychart.colour.coding import CODINGS
from skychart.plots.course import sun_scale
from skychart.plots.frame import MUTED, Box, Panel, Scale, figure_svg, log_scale

SIZE_IN = (5.8, 4.7)

_LEFT_IN, _WIDTH_IN = 0.76, 4.4
_BOX = Box(_LEFT_IN, 0.82, _WIDTH_IN, 3.5)
_UPPER = Box(_LEFT_IN, 2.72, _WIDTH_IN, 1.6)
_LOWER = Box(_LEFT_IN, 0.82, _WIDTH_IN, 1.3)
_APART_BITS = 0.08
_STEP_BITS = 10
_NICE = (0.01, 0.02, 0.05, 0.1, 0.2, 0.5, 1, 2, 5, 10, 20, 50, 100)


def gamut_svg(chart: DisplaySheet) -> bytes:
    """How far skies go beyond the triangle of each space, and the share of the sky outside."""

    def draw(figure: Figure) -> None:
        suns = chart.solar_elevation_deg
        spaces = list(zip(*(found.outside for found in chart.reaches), strict=True))
        beyond = np.array([[found.beyond_uv for found in own] for own in spaces])
        share = np.array([[100 * found.share for found in own] for own in spaces])
        title = "Farthest beyond the triangle, Δu′v′; below 0 inside"
        upper = Panel(figure, _UPPER, sun_scale(suns, False), _signed(beyond, title))
        lower = Panel(figure, _LOWER, sun_scale(suns), _from_zero(np.append(share, 1), "Share outside, % of the sky"))
        upper.line(np.array([suns.min(), suns.max()]), np.zeros(2), color=MUTED, linewidth=0.9)
        for number in range(len(spaces)):
            upper.curve(suns, beyond[number], number)
            lower.curve(suns, share[number], number)
        titles = [SPACE_TITLES[own[0].space] for own in spaces]
        _key(lower, titles)

    return figure_svg(SIZE_IN, draw)


def luminance_svg(chart: DisplaySheet) -> bytes:
    """Brightest and darkest sky and the white card, with the peaks of screens."""

    def draw(figure: Figure) -> None:
        suns = chart.solar_elevation_deg
        ranges = [found.luminance for found in chart.reaches]
        curves = np.array([[r.brightest_cd_m2, r.card_cd_m2, r.darkest_cd_m2] for r in ranges]).T
        scale = log_scale(np.append(curves, PEAKS_CD_M2), "Luminance, cd/m²", most=9)
        panel = Panel(figure, _BOX, sun_scale(suns), scale)
        ends = np.array([panel.x.low, panel.x.high])
        for peak in PEAKS_CD_M2:
            panel.line(ends, np.full(2, peak), color=MUTED, linewidth=0.8)
            text = f"{peak:,.0f}".replace(",", "\u2009") if peak >= 10_000 else f"{peak:.0f}"
            panel.text(panel.x.high, peak, text, (0.06, 0), va="center", color=MUTED)
        for number, values in enumerate(curves):
            panel.curve(suns, values, number)
        _key(panel, ("brightest sky", "white card", "darkest sky"))

    return figure_svg(SIZE_IN, draw)


def bits_svg(chart: DisplaySheet) -> bytes:
    """Fewest bits without a visible step in each coding; the lines stand a little apart."""

    def draw(figure: Figure) -> None:
        suns = chart.solar_elevation_deg
        bits = np.array([chart.least_bits(coding) for coding in CODINGS])
        panel = Panel(figure, _BOX, sun_scale(suns), _bits_scale(bits))
        between = (suns[1:] + suns[:-1]) / 2
        edges = np.repeat(np.concatenate([suns[:1], between, suns[-1:]]), 2)[1:-1]
        for number, values in enumerate(bits):
            panel.curve(edges, np.repeat(values, 2) + _APART_BITS * (number - (len(CODINGS) - 1) / 2), number)
        _key(panel, [coding.title for coding in CODINGS])

    return figure_svg(SIZE_IN, draw)


def steps_svg(chart: DisplaySheet) -> bytes:
    """The largest step of 10 bits in each coding."""

    def draw(figure: Figure) -> None:
        suns = chart.solar_elevation_deg
        step = np.array([chart.largest_step(coding, _STEP_BITS) for coding in CODINGS])
        high = np.append(step[np.isfinite(step)], INVISIBLE_DELTA_E)
        panel = Panel(figure, _BOX, sun_scale(suns), _from_zero(high, f"Largest step with {_STEP_BITS} bits, ΔE_ITP"))
        panel.line(np.array([panel.x.low, panel.x.high]), np.full(2, INVISIBLE_DELTA_E), color=MUTED, linewidth=0.9)
        panel.text(panel.x.high, INVISIBLE_DELTA_E, "visible", (0.06, 0.02), va="bottom", color=MUTED)
        for number, values in enumerate(step):
            panel.curve(suns, values, number)
        _key(panel, [coding.title for coding in CODINGS])

    return figure_svg(SIZE_IN, draw)


def _key(panel: Panel, names: Sequence[str]) -> None:
    """Names of the curves in one line below the panel."""
    panel.key(names, [_WIDTH_IN * number / len(names) for number in range(len(names))], -0.62, 1)


def _bits_scale(bits: np.ndarray) -> Scale:
    """Whole bits around those found."""
    some = bits[np.isfinite(bits)]
    low, high = (int(some.min()) - 1, int(some.max()) + 1) if some.size else (8, 16)
    ticks = list(range(low, high + 1))
    return Scale(low, high, ticks, [str(tick) for tick in ticks], "Fewest bits without a visible step")


def _from_zero(values: np.ndarray, title: str) -> Scale:
    """Up from 0 in three to six steps of a round size."""
    step = _step(max(float(values.max()), 1e-9))
    count = max(int(np.ceil(float(values.max()) / step)), 1)
    ticks = [step * i for i in range(count + 1)]
    return Scale(0, ticks[-1], ticks, [f"{tick:g}" for tick in ticks], title)


def _signed(values: np.ndarray, title: str) -> Scale:
    """Both sides of 0 in steps of a round size."""
    step = _step(float(np.abs(values).max()))
    low, high = int(np.floor(values.min() / step)), int(np.ceil(max(values.max(), 0) / step))
    ticks = [step * i for i in range(min(low, -1), max(high, 1) + 1)]
    return Scale(ticks[0], ticks[-1], ticks, [f"{tick:g}".replace("-", "−") for tick in ticks], title)


def _step(size: float) -> float:
    """The smallest round step that needs at most six to pass `size`."""
    return next((step for step in _NICE if 6 * step >= size), _NICE[-1])
