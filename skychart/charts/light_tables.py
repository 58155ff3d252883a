"""Tables of the light sheet: the chosen ones of the page, and the full one of its CSV file."""

import math
from collections.abc import Callable, Iterable, Sequence

import numpy as np

from skychart.charts.columns import Column, NumberTable, Row
from skychart.charts.harmonics import EVEN, HARMONICS, Harmonic
from skychart.charts.light import AWAY, BOTH, PARTS, SHADOW, SUN, UNDERSIDE, LightSheet, SunLight
from skychart.charts.numbers import fixed, kelvin, significant, spaced
from skychart.charts.planes import LEVEL, PLANES
from skychart.colour.spaces import SPACES

CHOSEN = (
    ("level-both", "Level, sun and sky", LEVEL, BOTH),
    ("level-shadow", "Level, sky alone", LEVEL, SHADOW),
    ("away-shadow", "Wall away from the sun", AWAY, SHADOW),
    ("underside-shadow", "Underside", UNDERSIDE, SHADOW),
)
"""Key, title, plane and part of the lights whose colours the page gives."""

_LABELS = (Column("solar_elevation_deg", "Sun", "", ""),)
_Cell = tuple[Column, Callable[[SunLight], str]]


def illuminance_table(sheet: LightSheet) -> NumberTable:
    """Illuminances of all planes: with the sun where it ever shines on them, and in its shadow."""
    lit = np.any([light.illuminance_lx[:, SUN] > 0 for light in sheet.suns], axis=0)
    parts = [(plane, part) for plane in range(len(PLANES)) for part in ((BOTH, SHADOW) if lit[plane] else (SHADOW,))]
    return _table(sheet, [_lux(plane, part) for plane, part in parts])


def lamp_table(sheet: LightSheet) -> NumberTable:
    """The sun as colour and strength, lit to shadow, and exposure."""
    sun, colour, ratio, exposure = (
        "Sun on a plane facing it",
        "linear sRGB of luminance 1",
        "Lit : shadow, stops",
        "Level, EV100",
    )
    return _table(
        sheet,
        [
            (Column("lx", "Illuminance", "lx", sun), lambda light: significant(light.beam.illuminance_lx, 3)),
            (Column("x", "x", "", sun), lambda light: fixed(float(light.beam.xy[0]), 4)),
            (Column("y", "y", "", sun), lambda light: fixed(float(light.beam.xy[1]), 4)),
            (Column("cct_k", "CCT", "K", sun), lambda light: kelvin(light.beam.cct_k)),
            (Column("duv", "Duv", "", sun), lambda light: fixed(light.beam.duv, 4)),
            *((Column(c, c, "", colour), _beam_channel(i)) for i, c in enumerate("RGB")),
            (Column("disc", "Luminance", "cd/m²", "Disc"), lambda li: scientific(li.beam.disc_luminance_cd_m2, 3)),
            (Column("facing", "facing the sun", "", ratio), lambda light: fixed(light.facing_stops, 2)),
            (Column("level", "level", "", ratio), lambda light: fixed(light.level_stops, 2)),
            (Column("card", "white card", "", exposure), lambda light: fixed(light.card_ev100, 1)),
            (Column("grey", "18 % grey", "", exposure), lambda light: fixed(light.grey_ev100, 1)),
        ],
    )


def colour_table(sheet: LightSheet) -> NumberTable:
    """Chromaticity and colour temperature of the chosen lights."""
    return _table(sheet, [cell for _, title, plane, part in CHOSEN for cell in _colour(title, plane, part)])


def coefficient_table(sheet: LightSheet) -> NumberTable:
    """Coefficients of sky and ground, without those that are 0, in linear sRGB."""
    cells = [
        (Column(f"{HARMONICS[i].name}_{c}", c, "", harmonic_title(HARMONICS[i])), _coefficient(i, channel))
        for i in EVEN
        for channel, c in enumerate("RGB")
    ]
    return _table(sheet, cells)


def share_table(sheet: LightSheet) -> NumberTable:
    """How much of sky and ground comes from the ground, and what nine coefficients make of each plane."""
    share, error = "From the ground, % of sky and ground", "Nine coefficients, error in %"
    return _table(
        sheet,
        [
            *((Column(plane.key, plane.title, "", share), _ground_share(i)) for i, plane in enumerate(PLANES)),
            *((Column(plane.key, plane.title, "", error), _error(i)) for i, plane in enumerate(PLANES)),
        ],
    )


def full_table(sheet: LightSheet) -> NumberTable:
    """Every plane and part of every sun, plain, for the CSV file."""
    labels = ("solar_elevation_deg", "apparent_elevation_deg", "plane", "part")
    numbers = ["illuminance_lx", "x", "y", "cct_k", "duv"]
    numbers += [f"{space}_{channel}" for space in SPACES for channel in "rgb"]
    rows = [
        Row(
            light.stem,
            (f"{light.solar_elevation_deg:g}", fixed(light.apparent_elevation_deg, 3), plane.key, key),
            tuple(_full_cells(light, index, part)),
        )
        for light in sheet.suns
        for index, plane in enumerate(PLANES)
        for part, (key, _) in enumerate(PARTS)
    ]
    heads, columns = ([Column(key, key, "", "") for key in keys] for keys in (labels, numbers))
    return NumberTable(tuple(heads), tuple(columns), tuple(rows))


def harmonic_title(term: Harmonic) -> str:
    """A harmonic by its degree, order and polynomial: `2, 1: xz`."""
    return f"{term.degree}, {spaced(str(term.order))}: {term.polynomial}"


def signed(percent: float) -> str:
    """A difference with its sign and one decimal."""
    text = fixed(percent, 1)
    return f"+{text}" if text and float(text) > 0 else text


def scientific(value: float, digits: int) -> str:
    """`value` as a number below ten and a power of ten; empty where it is nan."""
    return "" if math.isnan(value) else f"{value:.{digits - 1}e}"


def _table(sheet: LightSheet, cells: Sequence[_Cell]) -> NumberTable:
    """A row for each sun, written for reading."""
    rows = [Row(light.stem, (light.label,), tuple(spaced(write(light)) for _, write in cells)) for light in sheet.suns]
    return NumberTable(_LABELS, tuple(column for column, _ in cells), tuple(rows))


def _full_cells(light: SunLight, plane: int, part: int) -> Iterable[str]:
    yield significant(float(light.illuminance_lx[plane, part]), 4)
    yield from (fixed(float(value), 4) for value in light.xy[plane, part])
    yield kelvin(float(light.cct_k[plane, part]))
    yield fixed(float(light.duv[plane, part]), 4)
    yield from (significant(float(value), 4) for space in SPACES for value in light.rgb[space][plane, part])


def _lux(plane: int, part: int) -> _Cell:
    column = Column(f"{PLANES[plane].key}_{PARTS[part][0]}", PARTS[part][1].lower(), "lx", PLANES[plane].title)
    return column, lambda light: significant(float(light.illuminance_lx[plane, part]), 3)


def _colour(title: str, plane: int, part: int) -> list[_Cell]:
    return [
        (Column("x", "x", "", title), lambda light: fixed(float(light.xy[plane, part, 0]), 4)),
        (Column("y", "y", "", title), lambda light: fixed(float(light.xy[plane, part, 1]), 4)),
        (Column("cct_k", "CCT", "K", title), lambda light: kelvin(float(light.cct_k[plane, part]))),
        (Column("duv", "Duv", "", title), lambda light: fixed(float(light.duv[plane, part]), 4)),
    ]


def _beam_channel(channel: int) -> Callable[[SunLight], str]:
    return lambda light: fixed(float(light.beam.colour["srgb"][channel]), 3)


def _coefficient(index: int, channel: int) -> Callable[[SunLight], str]:
    return lambda light: significant(float(light.coefficients["srgb"][index, channel]), 3)


def _ground_share(plane: int) -> Callable[[SunLight], str]:
    return lambda light: fixed(100 * float(light.ground_share[plane]), 0)


def _error(plane: int) -> Callable[[SunLight], str]:
    return lambda light: signed(100 * float(light.coefficient_error[plane]))
