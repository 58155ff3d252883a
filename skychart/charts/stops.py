"""Gradient stops: the few colours between which a straight gradient follows the sky best.

Between two stops the linear components of any RGB space run straight (all are linear in tristimulus values), in equal
steps of the angle along the line. What is least is the largest CIEDE2000 on a screen whose white is that of the
sheet's own rendering, "metered for the sky", D65 and unadapted: colours brighter than this white, as near the sun, are
scaled down whole first, as on the blocks of the sheet. The search judges every half degree or closer; the differences
that are told are the largest of every twentieth. ΔE_ITP is told as well, absolute and nothing scaled down.
"""

from dataclasses import dataclass

import numpy as np

from skychart.charts.columns import Column, NumberTable, Row
from skychart.charts.dome import light_at
from skychart.charts.exposure import Exposure, Swatch, exposures, swatches
from skychart.charts.lines import LINES, Line
from skychart.charts.minimax import Pieces
from skychart.charts.numbers import fixed, significant, spaced
from skychart.charts.survey import SkyView, Survey
from skychart.colour.chromaticity import xyz_of_xy
from skychart.colour.differences import delta_e_2000, delta_e_itp
from skychart.colour.observers import D65_XY
from skychart.colour.spaces import rgb

COUNTS = (3, 5, 8)
CLOSE_DELTA_E = 1.0
MOST_STOPS = 24

_LOW_DEG = 5.0
_FINE_DEG = 0.05
_SPACES = ("srgb", "acescg")
_LABELS = (
    Column("line", "Line", "", ""),
    Column("stops", "Stops", "", ""),
    Column("position_deg", "Position", "°", ""),
    Column("view_elevation_deg", "View elevation", "°", ""),
    Column("azimuth_deg", "Azimuth", "°", ""),
)


@dataclass(frozen=True)
class Stop:
    """A stop: where it stands and its colour; `linear` is sRGB over the luminance of the white card, as printed."""

    label: str
    linear: tuple[str, ...]
    swatch: Swatch


@dataclass(frozen=True)
class StopSet:
    """The best stops of one count: `position_deg` (k,), `XYZ` [cd m⁻²] (k, 3), and the largest differences."""

    count: int
    position_deg: np.ndarray
    XYZ: np.ndarray
    delta_e_2000: float
    delta_e_itp: float
    stops: tuple[Stop, ...]

    @property
    def errors(self) -> tuple[str, str]:
        """Both differences as they are printed."""
        return fixed(self.delta_e_2000, 1), fixed(self.delta_e_itp, 0 if self.delta_e_itp >= 10 else 1)


@dataclass(frozen=True)
class Gradient:
    """A line of the sky with its best stops; `fewest` keep every difference at 1 or below, None if over 24 do."""

    line: Line
    sets: tuple[StopSet, ...]
    fewest: int | None


@dataclass(frozen=True)
class SheetStops:
    """What a sheet shows of gradient stops: the display white they are judged for, and their table for a file."""

    gradients: tuple[Gradient, ...]
    white: str
    table: NumberTable


def sheet_stops(survey: Survey, sun: int) -> SheetStops:
    """Gradient stops of both lines at the `sun`-th elevation."""
    own = exposures(survey.sky_XYZ[sun], survey.card_XYZ[sun])[0]
    card = float(survey.card_XYZ[sun, 1])
    view = survey.sky_view(sun)
    seen = survey.sun_seen(sun)
    gradients = tuple(_gradient(view, line, own, card, seen) for line in LINES)
    white = f"{spaced(significant(own.display_white_cd_m2, 3))} cd/m²"
    return SheetStops(gradients, white, _table(gradients, card))


def scaled_down(XYZ: np.ndarray, white_cd_m2: float) -> np.ndarray:
    """Tristimulus values (..., 3) as a screen of that white shows them: brighter ones scaled down, hue kept."""
    return XYZ / np.maximum(rgb(XYZ, "srgb").max(axis=-1, keepdims=True) / white_cd_m2, 1)


def positions(line: Line, sun_elevation_deg: float | None) -> tuple[np.ndarray, np.ndarray]:
    """Positions [deg] where the search takes differences, and indices of those where a stop may stand.

    Stops on whole degrees, near the horizon on half ones, and at the sun where there is one; twice as many are judged.
    """
    node, point = np.arange(0, line.end_deg + 1), np.arange(0, line.end_deg + 0.5, 0.5)
    low = np.arange(0, _LOW_DEG, 0.25)
    point, node = np.union1d(point, low), np.union1d(node, low[::2])
    if line.end_deg > 90:
        point, node = np.union1d(point, 180 - low), np.union1d(node, 180 - low[::2])
        if sun_elevation_deg is not None:
            node = np.union1d(node, round(sun_elevation_deg, 2))
    point = np.union1d(point, node)
    return point, np.searchsorted(point, node)


def _gradient(view: SkyView, line: Line, own: Exposure, card_cd_m2: float, seen: bool) -> Gradient:
    white = own.display_white_cd_m2
    position, node = positions(line, max(view.sun_elevation_deg, 0.0) if seen else None)
    XYZ = light_at(view, *line.directions(position))
    white_XYZ = white * xyz_of_xy(D65_XY)
    pieces = Pieces(position, XYZ, node, white_XYZ, lambda light: scaled_down(light, white))
    close = pieces.fewest(CLOSE_DELTA_E, MOST_STOPS)
    fine = np.union1d(position, np.linspace(0, line.end_deg, round(line.end_deg / _FINE_DEG) + 1))
    sky = light_at(view, *line.directions(fine))
    shown = scaled_down(sky, white)
    sets = []
    for count in COUNTS:
        at = node[pieces.best(count)]
        straight = np.stack([np.interp(fine, position[at], axis) for axis in XYZ[at].T], axis=-1)
        error = float(delta_e_2000(scaled_down(straight, white), shown, white_XYZ).max())
        itp = float(delta_e_itp(straight, sky).max())
        sets.append(
            StopSet(count, position[at], XYZ[at], error, itp, _stops(line, position[at], XYZ[at], own, card_cd_m2))
        )
    return Gradient(line, tuple(sets), None if close is None else len(close))


def _stops(line: Line, position_deg: np.ndarray, XYZ: np.ndarray, own: Exposure, card: float) -> tuple[Stop, ...]:
    linear = rgb(XYZ, "srgb") / card
    return tuple(
        Stop(line.label(float(at)), tuple(significant(float(part), 4) for part in parts), swatch)
        for at, parts, swatch in zip(position_deg, linear, swatches(XYZ, own), strict=True)
    )


def _table(gradients: tuple[Gradient, ...], card_cd_m2: float) -> NumberTable:
    """Every stop as a row: place, components over the white card, the code it is shown in, and its set's errors."""
    columns = [Column(f"{space}_{part}", part.upper(), "", space) for space in _SPACES for part in "rgb"]
    columns += [
        Column("shown_hex", "as shown", "", ""),
        Column("delta_e_2000", "ΔE2000", "", ""),
        Column("delta_e_itp", "ΔE_ITP", "", ""),
    ]
    rows = []
    for gradient in gradients:
        for found in gradient.sets:
            elevation, azimuth = gradient.line.directions(found.position_deg)
            linear = np.concatenate([rgb(found.XYZ, space) / card_cd_m2 for space in _SPACES], axis=-1)
            for at, up, around, parts, stop in zip(
                found.position_deg, elevation, azimuth, linear, found.stops, strict=True
            ):
                labels = gradient.line.key, str(found.count), f"{at:g}", f"{up:g}", f"{around:g}"
                cells = *(significant(float(part), 4) for part in parts), stop.swatch.hex, *found.errors
                rows.append(Row("", labels, cells))
    return NumberTable(_LABELS, tuple(columns), tuple(rows))
