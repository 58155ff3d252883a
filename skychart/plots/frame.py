"""Frame of every figure: neutral greys, one font, and an SVG without clock, chance or waste.

Curves differ by dash, weight and marker, never by hue: hue is left to the colours that are measured. A panel is
drawn as a few lines and texts on the bare figure; matplotlib's axes would cost four times the time and the bytes.
"""

import io
import math
import re
from collections import Counter
from collections.abc import Callable, Iterator, Mapping, Sequence
from contextlib import contextmanager
from dataclasses import dataclass
from typing import Any

import matplotlib as mpl
import numpy as np
from matplotlib.backends.backend_svg import FigureCanvasSVG
from matplotlib.collections import PathCollection
from matplotlib.figure import Figure
from matplotlib.lines import Line2D
from matplotlib.patches import Rectangle
from matplotlib.path import Path
from matplotlib.text import Text
from matplotlib.transforms import Affine2D

INK = "#1a1a1a"
MUTED = "#5c5c5c"
RULE = "#cccccc"
PAPER = "#f7f7f7"
DASHES = ("-", (0, (6, 2)), (0, (3, 1.6)), (0, (1, 1.3)), (0, (7, 1.6, 1, 1.6)), "-")
WEIGHTS = (1.7, 1.3, 1.3, 1.5, 1.2, 0.7)

_FONT = "DejaVu Sans"
_FONT_ON_PAGE = "system-ui,sans-serif"
_FONT_SIZE = 9
_STYLE: dict[Any, Any] = {
    "svg.fonttype": "none",
    "svg.hashsalt": "skychart",
    "font.family": _FONT,
    "font.size": _FONT_SIZE,
    "text.color": INK,
    "figure.facecolor": PAPER,
    "path.simplify": True,
    "path.simplify_threshold": 0.2,
}
_NO_METADATA = {"Date": None, "Creator": None, "Type": None, "Format": None}
_ON_EDGE = 1e-9
_KEY_LINE_IN = 0.32
_KEY_STEP_IN = 0.185
_MARKS = re.compile(r'<use [^>]* class="(s\d+)"/>\n(?:<use [^>]* class="\1"/>\n){2,}')  # alike, one after the other
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

    def share(self, values: np.ndarray) -> np.ndarray:
        """Where values lie between the ends, 0 to 1."""
        if self.log:
            return np.log(np.asarray(values) / self.low) / np.log(self.high / self.low)
        return (np.asarray(values) - self.low) / (self.high - self.low)


@dataclass(frozen=True)
class Box:
    """A rectangle on the figure [in], from its lower left corner."""

    left: float
    bottom: float
    width: float
    height: float


class Panel:
    """Two scales in a box of a figure; what is drawn in data coordinates is clipped to the box."""

    def __init__(self, figure: Figure, box: Box, x: Scale, y: Scale) -> None:
        self.figure, self.box, self.x, self.y = figure, box, x, y
        self._clip = Rectangle((box.left, box.bottom), box.width, box.height, transform=figure.dpi_scale_trans)
        self._rule()
        self._write_scales()

    def place(self, x: np.ndarray, y: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
        """Inches on the figure of data coordinates."""
        across, up = self.x.share(x), self.y.share(y)
        return self.box.left + self.box.width * across, self.box.bottom + self.box.height * up

    def line(self, x: np.ndarray, y: np.ndarray, **style: Any) -> None:
        """A line in data coordinates; `style` as of matplotlib's Line2D."""
        self._add(Line2D(*self.place(x, y), **({"color": INK, "solid_capstyle": "butt"} | style)))

    def marks(self, x: np.ndarray, y: np.ndarray, marker: str, **style: Any) -> None:
        """Marks at those points that lie within both scales, whole ones also on the edge of the box."""
        places = np.array([self.x.share(x), self.y.share(y)])
        inside = np.all((places >= -_ON_EDGE) & (places <= 1 + _ON_EDGE), axis=0)
        found = Line2D(*self.place(x[inside], y[inside]), **({"color": INK, "linestyle": "none"} | style))
        found.set(marker=marker, transform=self.figure.dpi_scale_trans)
        self.figure.add_artist(found, clip=False)

    def curve(self, x: np.ndarray, y: np.ndarray, number: int = 0) -> None:
        """The `number`-th of several curves, told apart by dash and weight."""
        self.line(x, y, linestyle=DASHES[number], linewidth=WEIGHTS[number])

    def dots(self, x: np.ndarray, y: np.ndarray, fills: Sequence[str], size_pt: float) -> None:
        """Discs in their own colours with a thin dark edge."""
        offsets = np.column_stack(self.place(x, y))
        found = PathCollection(
            [Path.unit_circle()], sizes=[size_pt**2 / 4], facecolors=list(fills), edgecolors=INK, linewidths=0.4,
            offsets=offsets, offset_transform=self.figure.dpi_scale_trans,
        )  # fmt: skip
        found.set_transform(Affine2D())
        self._add(found, placed=True)

    def text(self, x: float, y: float, text: str, shift_in: tuple[float, float] = (0, 0), **style: Any) -> None:
        """A text at data coordinates, shifted by inches."""
        at_x, at_y = self.place(np.array(x), np.array(y))
        write(self.figure, float(at_x) + shift_in[0], float(at_y) + shift_in[1], text, **style)

    def key(self, names: Sequence[str], lefts_in: Sequence[float], top_in: float, rows: int) -> None:
        """Names of the first curves in columns of `rows`, from places [in] counted from the box's lower left."""
        for number, name in enumerate(names):
            column, row = divmod(number, rows)
            style = {"linestyle": DASHES[number], "linewidth": WEIGHTS[number]}
            left, top = self.box.left + lefts_in[column], self.box.bottom + top_in
            key_line(self.figure, left, top - row * _KEY_STEP_IN, name, style)

    def _rule(self) -> None:
        """Grid and base lines, as two paths below the data."""
        x, y, gap = self.x, self.y, math.nan
        grid_x = [end for tick in x.ticks for end in (tick, tick, gap)] + [x.low, x.high, gap] * len(y.ticks)
        grid_y = [y.low, y.high, gap] * len(x.ticks) + [end for tick in y.ticks for end in (tick, tick, gap)]
        self._add(Line2D(*self.place(np.array(grid_x), np.array(grid_y)), color=RULE, linewidth=0.5, zorder=0))
        base = self.place(np.array([x.low, x.low, x.high]), np.array([y.high, y.low, y.low]))
        self.figure.add_artist(
            Line2D(*base, color=MUTED, linewidth=0.8, zorder=1, transform=self.figure.dpi_scale_trans)
        )

    def _write_scales(self) -> None:
        box = self.box
        for tick, label in zip(self.x.ticks, self.x.labels, strict=True):
            if label:
                self.text(tick, self.y.low, label, (0, -0.06), ha="center", va="top")
        for tick, label in zip(self.y.ticks, self.y.labels, strict=True):
            self.text(self.x.low, tick, label, (-0.06, 0), ha="right", va="center")
        right, top = box.left + box.width, box.bottom + box.height
        if self.x.title:
            write(self.figure, right, box.bottom - 0.25, self.x.title, ha="right", va="top", color=MUTED)
        write(self.figure, box.left, top + 0.08, self.y.title, ha="left", va="bottom", color=MUTED)

    def _add(self, artist: Line2D | PathCollection, placed: bool = False) -> None:
        if not placed:
            artist.set_transform(self.figure.dpi_scale_trans)
        self.figure.add_artist(artist, clip=False)
        artist.set_clip_path(self._clip)


def figure_svg(size_in: tuple[float, float], draw: Callable[[Figure], None]) -> bytes:
    """An SVG of the figure that `draw` fills, at 72 units an inch."""
    with _frame():
        figure = Figure(figsize=size_in)
        FigureCanvasSVG(figure)
        draw(figure)
        buffer = io.StringIO()
        figure.savefig(buffer, format="svg", metadata=_NO_METADATA)
    return _lean(buffer.getvalue()).encode("utf-8")


def write(figure: Figure, x_in: float, y_in: float, text: str, **style: Any) -> None:
    """A text at a place on the figure [in]; `style` as of matplotlib's Text."""
    figure.add_artist(Text(x_in, y_in, text, transform=figure.dpi_scale_trans, **style))


def key_line(figure: Figure, x_in: float, y_in: float, name: str, style: Mapping[str, Any]) -> None:
    """A short line or mark in `style` with its name, from a place on the figure [in]."""
    mark = "marker" in style
    x = [x_in + _KEY_LINE_IN / 2] if mark else [x_in, x_in + _KEY_LINE_IN]
    shown = {"color": INK, "solid_capstyle": "butt", **style}
    figure.add_artist(Line2D(x, [y_in] * len(x), transform=figure.dpi_scale_trans, **shown))
    write(figure, x_in + _KEY_LINE_IN + 0.08, y_in, name, va="center_baseline")


def log_scale(values: np.ndarray, title: str, most: int = 6) -> Scale:
    """Whole decades around `values`, nan left out, with a power of ten at most `most` times."""
    low, high = math.floor(math.log10(np.nanmin(values))), math.ceil(math.log10(np.nanmax(values)))
    high = max(high, low + 1)
    powers = range(low, high + 1, max(1, math.ceil((high - low + 1) / most)))
    return Scale(10.0**low, 10.0**high, [10.0**power for power in powers], [_power(p) for p in powers], title, True)


def _power(power: int) -> str:
    if 0 <= power <= 5:
        return f"{10**power:,}".replace(",", "\u2009") if power > 3 else f"{10**power}"
    return f"{10.0**power:.{-power}f}" if -4 <= power < 0 else f"10{str(power).translate(_SUPERSCRIPT)}"


@contextmanager
def _frame() -> Iterator[None]:
    """The style, for the time of one figure."""
    with mpl.rc_context(_STYLE):
        yield


def _lean(svg: str) -> str:
    """Without comments, needless groups, digits and repeated styles, and in the page's font."""
    svg = re.sub(r"<!DOCTYPE.*?>|<!--.*?-->|<metadata>.*?</metadata>", "", svg, flags=re.DOTALL)
    svg = svg[svg.index("<svg") :]
    svg = re.sub(r"'DejaVu Sans'(, [^;\"]*)?", _FONT_ON_PAGE, svg)
    svg = re.sub(r"<[^>]*>", lambda tag: re.sub(r"(?<![\w.#])-?\d+\.\d+(?![\w.])", _short, tag.group()), svg)
    svg = re.sub(r' transform="rotate\(-?0 [^)]*\)"', "", svg)
    svg = re.sub(r' d="([^"]*)"', lambda path: f' d="{_joined(path.group(1))}"', svg)
    svg = re.sub(r'<path d="[Mm][\d.]+ [\d.]+"[^>]*/>', "", svg)  # the line through a single marker
    svg = re.sub(r'<g id="[^"]*">', "<g>", svg)
    count = 1
    while count:
        svg, count = re.subn(r"<g>((?:(?!<g\b|</g>).)*)</g>", r"\1", svg, flags=re.DOTALL)
    svg = re.sub(r' style="fill: (#\w+); ([^"]*)"', r' fill="\1" style="\2"', svg)
    svg = re.sub(r'style="[^"]*"', lambda style: style.group().replace(": ", ":").replace("; ", ";"), svg)
    svg = re.sub(r"\s*\n\s*", "\n", _classed(_renamed(svg)))
    svg = "\n".join(_regrouped(svg.replace("xlink:href=", "href=").split("\n")))
    return _MARKS.sub(lambda run: f'<g class="{run[1]}">\n{run[0].replace(_class_of(run[1]), "")}</g>\n', svg)


def _class_of(name: str) -> str:
    return f' class="{name}"'


def _regrouped(lines: Sequence[str]) -> Iterator[str]:
    """Without the end of a group, and the start of the next, where one under the same clip follows another."""
    opened: list[str] = []
    skip = False
    for line, following in zip(lines, [*lines[1:], ""], strict=True):
        if skip:
            skip = False
        elif line == "</g>" and opened and following == opened[-1] and "clip-path" in following:
            skip = True
        else:
            if line == "</g>":
                opened.pop()
            elif line.startswith("<g") and not line.endswith("/>"):
                opened.append(line)
            yield line


def _short(number: re.Match[str]) -> str:
    text = f"{float(number.group()):.1f}".removesuffix(".0")
    return "0" if text == "-0" else text


def _joined(path: str) -> str:
    """Path data on one line; after a move, further points are lines without saying so, counted from the last point."""
    joined = re.sub(r"\s+", " ", re.sub(r"(?<=[\d.])\s*\n?L ", " ", path.strip())).replace("M ", "M")
    return _relative(joined) if re.fullmatch(r"[M\d. -]+", joined) else joined


def _relative(path: str) -> str:
    """Lines between absolute points as steps of whole tenths, so that no rounding adds up."""
    parts, last = [], np.zeros(2, int)
    for piece in path.split("M")[1:]:
        points = np.rint(10 * np.array(piece.split(), float)).astype(int).reshape(-1, 2)
        steps = np.diff(points, axis=0, prepend=last[None])
        last = points[-1]
        parts.append("m" + " ".join(_tenths(int(step)) for step in steps.ravel()).replace(" -", "-"))
    return "".join(parts)


def _tenths(count: int) -> str:
    sign, size = "-" * (count < 0), abs(count)
    return sign + f"{size / 10:g}".removeprefix("0") if size else "0"


def _renamed(svg: str) -> str:
    """Short names for everything that is referred to."""
    names = {name: f"i{number}" for number, name in enumerate(re.findall(r'(?<= )id="([^"]+)"', svg))}
    return re.sub(r'(?<=[#"])(' + "|".join(map(re.escape, names)) + r')(?=[")])', lambda name: names[name.group()], svg)


def _classed(svg: str) -> str:
    """Styles that occur more than once as classes of the figure's own stylesheet."""
    uses = Counter(re.findall(r' style="([^"]*)"', svg))
    names = {style: f"s{number}" for number, style in enumerate(style for style, count in uses.items() if count > 1)}
    rules = "".join(f".{name}{{{style}}}" for style, name in names.items())

    def named(match: re.Match[str]) -> str:
        name = names.get(match.group(1))
        return f' class="{name}"' if name else match.group()

    return re.sub(r' style="([^"]*)"', named, svg).replace("</style>", f"{rules}</style>", 1)
