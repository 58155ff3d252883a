"""Frame of every figure: neutral greys, one font, and an SVG without clock, chance or waste.

Curves differ by dash, weight and marker, never by hue: hue is left to the colours that are measured. Scales are
drawn here as one path and a few texts, not by matplotlib's axis objects: a third of the time and of the bytes.
"""

import io
import math
import re
from collections.abc import Callable, Iterator, Sequence
from contextlib import contextmanager
from dataclasses import dataclass

import matplotlib as mpl
import numpy as np
from matplotlib.axes import Axes
from matplotlib.backends.backend_svg import FigureCanvasSVG
from matplotlib.figure import Figure

INK = "#1a1a1a"
MUTED = "#5c5c5c"
RULE = "#c4c4c4"
PAPER = "#f7f7f7"
SURROUND = "#777777"
DASHES = ("-", (0, (6, 2)), (0, (3, 1.6)), (0, (1, 1.3)), (0, (7, 1.6, 1, 1.6)), "-")
WEIGHTS = (1.6, 1.3, 1.3, 1.5, 1.2, 0.8)

_FONT = "DejaVu Sans"
_FONT_ON_PAGE = "system-ui,sans-serif"
_STYLE = {
    "svg.fonttype": "none",
    "svg.hashsalt": "skychart",
    "font.family": _FONT,
    "font.size": 9.5,
    "text.color": INK,
    "axes.facecolor": "none",
    "figure.facecolor": PAPER,
    "path.simplify": True,
    "path.simplify_threshold": 0.2,
}
_NO_METADATA = {"Date": None, "Creator": None, "Type": None, "Format": None}
_KEY_LINE_IN = 0.32
_KEY_STEP_IN = 0.19
_SUPERSCRIPT = str.maketrans("-0123456789", "⁻⁰¹²³⁴⁵⁶⁷⁸⁹")


@dataclass(frozen=True)
class Scale:
    """One axis: its ends, where it is ruled, what is written there and what it measures."""

    low: float
    high: float
    ticks: Sequence[float]
    labels: Sequence[str]
    title: str
    log: bool = False


def figure_svg(width_in: float, height_in: float, draw: Callable[[Figure], None]) -> bytes:
    """An SVG of the figure that `draw` fills, at 72 units an inch."""
    with _frame():
        figure = Figure(figsize=(width_in, height_in))
        FigureCanvasSVG(figure)
        draw(figure)
        buffer = io.StringIO()
        figure.savefig(buffer, format="svg", metadata=_NO_METADATA)
    return _lean(buffer.getvalue()).encode("utf-8")


def add_axes(figure: Figure, box_in: tuple[float, float, float, float], x: Scale, y: Scale) -> Axes:
    """Axes at `box_in` (left, bottom, width, height) [in] with ruled scales, clipped to their box."""
    width, height = figure.get_size_inches()
    left, bottom, wide, high = box_in
    axes = figure.add_axes((left / width, bottom / height, wide / width, high / height))
    axes.set_xscale("log" if x.log else "linear")
    axes.set_yscale("log" if y.log else "linear")
    axes.set_xlim(x.low, x.high)
    axes.set_ylim(y.low, y.high)
    axes.axis("off")
    _rule(axes, x, y)
    _write_scales(axes, box_in, x, y)
    return axes


def curve(axes: Axes, x: np.ndarray, y: np.ndarray, number: int = 0) -> None:
    """The `number`-th of several curves, told apart by dash and weight."""
    axes.plot(x, y, color=INK, linestyle=DASHES[number], linewidth=WEIGHTS[number], solid_capstyle="butt")


def key(axes: Axes, box_in: tuple[float, float, float, float], at_in: tuple[float, float], names: Sequence[str]) -> None:
    """Names of the first curves below each other, the first at `at_in` [in] from the lower left of the axes."""
    for number, name in enumerate(names):
        x, y = at_in[0] / box_in[2], (at_in[1] - number * _KEY_STEP_IN) / box_in[3]
        end = x + _KEY_LINE_IN / box_in[2]
        axes.plot(
            [x, end], [y, y], transform=axes.transAxes, color=INK, linestyle=DASHES[number], linewidth=WEIGHTS[number],
            clip_on=False, solid_capstyle="butt",
        )  # fmt: skip
        note(axes, end + 0.07 / box_in[2], y, name, va="center")


def note(axes: Axes, x: float, y: float, text: str, **style: object) -> None:
    """A text at (x, y) in shares of the axes."""
    axes.text(x, y, text, transform=axes.transAxes, **style)


def log_ticks(low: float, high: float, most: int = 6) -> tuple[list[float], list[str]]:
    """Powers of ten within the ends, at most `most` of them, with their labels."""
    first, last = math.ceil(math.log10(low) - 1e-9), math.floor(math.log10(high) + 1e-9)
    step = max(1, math.ceil((last - first + 1) / most))
    powers = range(first, last + 1, step)
    return [10.0**power for power in powers], [_power(power) for power in powers]


def _power(power: int) -> str:
    if -3 <= power <= 5:
        return f"{10**power:,}".replace(",", "\u2009") if power >= 0 else f"{10.0**power:.{-power}f}"
    return f"10{str(power).translate(_SUPERSCRIPT)}"


def _rule(axes: Axes, x: Scale, y: Scale) -> None:
    """Grid and base lines, as two paths behind the data."""
    grid_x: list[float] = []
    grid_y: list[float] = []
    for tick in x.ticks:
        grid_x += [tick, tick, math.nan]
        grid_y += [y.low, y.high, math.nan]
    for tick in y.ticks:
        grid_x += [x.low, x.high, math.nan]
        grid_y += [tick, tick, math.nan]
    axes.plot(grid_x, grid_y, color=RULE, linewidth=0.5, zorder=0)
    axes.plot([x.low, x.low, x.high], [y.high, y.low, y.low], color=MUTED, linewidth=0.8, zorder=0, clip_on=False)


def _write_scales(axes: Axes, box_in: tuple[float, float, float, float], x: Scale, y: Scale) -> None:
    gap = 0.06
    for tick, label in zip(x.ticks, x.labels, strict=True):
        at = axes.get_xaxis_transform()
        axes.text(tick, -gap / box_in[3], label, transform=at, ha="center", va="top")
    for tick, label in zip(y.ticks, y.labels, strict=True):
        at = axes.get_yaxis_transform()
        axes.text(-gap / box_in[2], tick, label, transform=at, ha="right", va="center")
    note(axes, 1, -0.26 / box_in[3], x.title, ha="right", va="top", color=MUTED)
    note(axes, 0, 1 + 0.08 / box_in[3], y.title, ha="left", va="bottom", color=MUTED)


@contextmanager
def _frame() -> Iterator[None]:
    """The style, for the time of one figure."""
    with mpl.rc_context(_STYLE):
        yield


def _lean(svg: str) -> str:
    """Without comments, needless groups and digits, and in the page's font: a third of the bytes."""
    svg = re.sub(r"<!DOCTYPE.*?>|<!--.*?-->|<metadata>.*?</metadata>", "", svg, flags=re.DOTALL)
    svg = svg[svg.index("<svg") :]
    svg = re.sub(r"'DejaVu Sans'(, [^;\"]*)?", _FONT_ON_PAGE, svg)
    svg = re.sub(r"(?<![\w.#])-?\d+\.\d+(?![\w.])", _short, svg)
    svg = re.sub(r' transform="rotate\(-?0 [^)]*\)"', "", svg)
    svg = re.sub(r'<g id="[^"]*">', "<g>", svg)
    svg = re.sub(r"\s*\n\s*", "\n", svg)
    count = 1
    while count:
        svg, count = re.subn(r"<g>((?:(?!<g\b|</g>).)*)</g>\n?", r"\1", svg, flags=re.DOTALL)
    return re.sub(r"\n+", "\n", svg)


def _short(match: re.Match[str]) -> str:
    text = f"{float(match.group()):.1f}".removesuffix(".0")
    return "0" if text == "-0" else text
