"""The light of one sun in a small box: what an elevation sheet takes from the light sheet, written for reading."""

from dataclasses import dataclass

import numpy as np

from skychart.charts.exposure import Exposure, Swatch, swatches
from skychart.charts.ground import Fact
from skychart.charts.harmonics import EVEN, HARMONICS
from skychart.charts.light import BOTH, PARTS, SHADOW, SUN, LightSheet, SunLight
from skychart.charts.light_tables import CHOSEN, harmonic_title, scientific, signed
from skychart.charts.numbers import fixed, kelvin, short_xy, significant, spaced
from skychart.charts.planes import PLANES

_SHOWN_LUMINANCE = 0.4
"""Luminance of every swatch of light, of display white: light enough to print on, and few lights pass the screen."""

_EXPOSURE = Exposure("light", "All equally bright", 1.0)


@dataclass(frozen=True)
class LightCell:
    """A light as a swatch with its illuminance and chromaticity; without a swatch where there is none."""

    swatch: Swatch | None
    lines: tuple[str, ...]


@dataclass(frozen=True)
class LightRow:
    """Lights side by side, or numbers side by side."""

    label: str
    cells: tuple[LightCell, ...]


@dataclass(frozen=True)
class NumberLine:
    """A row of numbers: text for reading, for each column."""

    label: str
    cells: tuple[str, ...]


@dataclass(frozen=True)
class LightBox:
    """The box: facts of sun and exposure, lights on the planes, RGB of the shadow side, and the coefficients."""

    facts: tuple[Fact, ...]
    planes: tuple[str, ...]
    rows: tuple[LightRow, ...]
    shadow: tuple[NumberLine, ...]
    coefficients: tuple[NumberLine, ...]


def light_box(light: SunLight) -> LightBox:
    """The box of one sun; RGB is linear sRGB."""
    parts = [SUN, SHADOW, BOTH] if np.isfinite(light.beam.illuminance_lx) else [SHADOW]
    return LightBox(
        facts=_facts(light),
        planes=tuple(plane.title for plane in PLANES),
        rows=tuple(_row(light, part) for part in parts),
        shadow=tuple(_shadow(light, index) for index in range(len(PLANES))),
        coefficients=tuple(NumberLine(harmonic_title(HARMONICS[i]), _rgb(light.coefficients["srgb"][i])) for i in EVEN),
    )


def chosen_lights(sheet: LightSheet) -> tuple[LightRow, ...]:
    """The sun and the chosen lights of the light sheet, a swatch for each sun, with their colour temperature."""
    sun = tuple(
        _cell(light.XYZ[0, SUN], (spaced(kelvin(light.beam.cct_k)), short_xy(light.beam.xy))) for light in sheet.suns
    )
    rows = [LightRow("Sun", sun)]
    for _, title, plane, part in CHOSEN:
        cells = tuple(
            _cell(light.XYZ[plane, part], (_kelvin(light, plane, part), short_xy(light.xy[plane, part])))
            for light in sheet.suns
        )
        rows.append(LightRow(title, cells))
    return tuple(rows)


def _facts(light: SunLight) -> tuple[Fact, ...]:
    beam = light.beam
    exposure = _pair(light.card_ev100, light.grey_ev100, 1)
    card = Fact("card", "EV100, level white card and 18 % grey", exposure, "")
    if not np.isfinite(beam.illuminance_lx):
        return (card,)
    colour = "  ".join(spaced(fixed(float(value), 3)) for value in beam.colour["srgb"])
    return (
        Fact("beam", "Sun, on a plane facing it", spaced(significant(beam.illuminance_lx, 3)), "lx"),
        Fact("colour", "Its colour, linear sRGB", colour, ""),
        Fact("disc", "Its disc, mean", spaced(scientific(beam.disc_luminance_cd_m2, 3)), "cd/m²"),
        Fact("ratio", "Lit : shadow, facing it and level", _pair(light.facing_stops, light.level_stops, 2), "stops"),
        card,
    )


def _pair(first: float, second: float, decimals: int) -> str:
    return ", ".join(spaced(fixed(value, decimals)) for value in (first, second))


def _row(light: SunLight, part: int) -> LightRow:
    cells = tuple(
        _cell(light.XYZ[plane, part], (_lux(light, plane, part), short_xy(light.xy[plane, part])))
        for plane in range(len(PLANES))
    )
    return LightRow(PARTS[part][1], cells)


def _cell(XYZ: np.ndarray, lines: tuple[str, str]) -> LightCell:
    if not XYZ[1] > 0:
        return LightCell(None, ())
    return LightCell(swatches((XYZ / XYZ[1] * _SHOWN_LUMINANCE)[None], _EXPOSURE)[0], lines)


def _shadow(light: SunLight, plane: int) -> NumberLine:
    cells = (
        *_rgb(light.rgb["srgb"][plane, SHADOW]),
        _kelvin(light, plane, SHADOW),
        spaced(fixed(100 * float(light.ground_share[plane]), 0)),
        spaced(signed(100 * float(light.coefficient_error[plane]))),
    )
    return NumberLine(PLANES[plane].title, cells)


def _rgb(linear: np.ndarray) -> tuple[str, ...]:
    return tuple(spaced(significant(float(value), 3)) for value in linear)


def _lux(light: SunLight, plane: int, part: int) -> str:
    return spaced(significant(float(light.illuminance_lx[plane, part]), 3))


def _kelvin(light: SunLight, plane: int, part: int) -> str:
    return spaced(kelvin(float(light.cct_k[plane, part])))
