"""All-sky figure of polarisation: contours of its degree, and ticks along the electric vector."""

import numpy as np
from matplotlib.axes import Axes
from matplotlib.figure import Figure
from matplotlib.patches import Circle
from numpy.typing import ArrayLike

from skychart.charts.curves import Polarisation
from skychart.plots.frame import INK, MUTED, RULE, figure_svg, write

SIZE_IN = (5.8, 5.0)
_REACH = 1.16
_LEVELS = (0.2, 0.4, 0.6, 0.8)
_TICK_LENGTH = 0.15


def polarisation_svg(chart: Polarisation) -> bytes:
    """Figure of the whole sky, zenith in the middle, sun toward the bottom; both sides are mirror images."""

    def draw(figure: Figure) -> None:
        axes = figure.add_axes((0, 0, 1, 1))
        across = _REACH * SIZE_IN[0] / SIZE_IN[1]
        axes.set(xlim=(-across, across), ylim=(-_REACH, _REACH))
        axes.axis("off")
        _grid(axes)
        _contours(axes, chart)
        _ticks(axes, chart)
        _sun(axes, chart.sun_elevation_deg)
        write(figure, 0.12, 0.12, f"largest degree {chart.largest:.2f}", color=MUTED)

    return figure_svg(SIZE_IN, draw)


def fisheye(view_elevation_deg: ArrayLike, relative_azimuth_deg: ArrayLike) -> tuple[np.ndarray, np.ndarray]:
    """Place on the equidistant all-sky disc of radius 1: x to the right, y up, the sun's azimuth downward."""
    radius = (90 - np.asarray(view_elevation_deg)) / 90
    azimuth = np.radians(relative_azimuth_deg)
    return radius * np.sin(azimuth), -radius * np.cos(azimuth)


def _grid(axes: Axes) -> None:
    for elevation in (30, 60):
        axes.add_patch(Circle((0, 0), (90 - elevation) / 90, fill=False, edgecolor=RULE, linewidth=0.6))
    axes.add_patch(Circle((0, 0), 1, fill=False, edgecolor=MUTED, linewidth=0.9))
    axes.plot([-1, 1, np.nan, 0, 0], [0, 0, np.nan, -1, 1], color=RULE, linewidth=0.6)
    for x, y, text in ((-0.1, -1.07, "0°"), (1.08, 0, "90°"), (-1.08, 0, "90°"), (0, 1.07, "180°")):
        axes.text(x, y, text, ha="center", va="center")


def _contours(axes: Axes, chart: Polarisation) -> None:
    """Contours over the mirrored sky, drawn as polylines in polar coordinates."""
    both = np.concatenate([-chart.relative_azimuth_deg[:0:-1], chart.relative_azimuth_deg])
    mirrored = np.concatenate([chart.degree_map[:, :0:-1], chart.degree_map], axis=1)
    x, y = fisheye(chart.view_elevation_deg[:, None], both)
    lines = axes.contour(x, y, mirrored, levels=_LEVELS, colors=MUTED, linewidths=0.7)
    axes.clabel(lines, fmt="%.1f", fontsize=8)


def _ticks(axes: Axes, chart: Polarisation) -> None:
    """Ticks as long as the degree; on the other side of the sun the angle has the other sign."""
    ends: list[np.ndarray] = []
    for elevation, azimuth, degree, angle in chart.ticks:
        for side in (1, -1) if 0 < azimuth < 180 else (1,):
            centre = np.array(fisheye(elevation, side * azimuth))
            turned = np.radians(side * azimuth)
            across = np.array([np.cos(turned), np.sin(turned)])
            outward = np.array([np.sin(turned), -np.cos(turned)])
            tilt = np.radians(side * angle)
            half = 0.5 * _TICK_LENGTH * degree * (np.cos(tilt) * across - np.sin(tilt) * outward)
            ends += [centre - half, centre + half, np.full(2, np.nan)]
    axes.plot(*np.array(ends).T, color=INK, linewidth=1.7, solid_capstyle="butt")


def _sun(axes: Axes, elevation_deg: float) -> None:
    x, y = fisheye(elevation_deg, 0.0)
    axes.plot([x], [y], marker="o", markersize=8, markerfacecolor="white", markeredgecolor=INK, markeredgewidth=1.2)
