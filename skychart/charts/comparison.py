"""Comparison: the skies of several atmospheres at one elevation of the sun, shown at one exposure."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from skychart.charts.exposure import Exposure, exposures, swatches
from skychart.charts.ground import ground
from skychart.charts.numbers import degrees, fixed, kelvin, short_xy, significant, spaced
from skychart.charts.sheet import DEEP_TWILIGHT_DEG, Block, apparent_label, sheet_stem
from skychart.charts.survey import DIRECTIONS, Direction, SkyView, Survey, azimuth_index, elevation_index
from skychart.colour.describe import describe


@dataclass(frozen=True)
class ComparedSky:
    """One of the skies; `ink` reads where the circles of its picture are labelled."""

    atmosphere: str
    sky: SkyView
    ink: str


@dataclass(frozen=True)
class ColourRow:
    """One direction in every sky; a block leads to the row of its sheet that has all its numbers."""

    label: str
    blocks: tuple[Block, ...]


@dataclass(frozen=True)
class NumberRow:
    """One quantity in every sky, written for reading."""

    label: str
    unit: str
    cells: tuple[str, ...]


@dataclass(frozen=True)
class Comparison:
    """Everything a comparison page shows."""

    solar_elevation_deg: float
    stem: str
    label: str
    exposure: Exposure
    white: str
    skies: tuple[ComparedSky, ...]
    colours: tuple[ColourRow, ...]
    numbers: tuple[NumberRow, ...]
    deep_twilight: bool


def comparison(surveys: Sequence[Survey], sun: int) -> Comparison:
    """The `sun`-th elevation of surveys of the same suns."""
    elevation = float(surveys[0].solar_elevation_deg[sun])
    exposure = _common([exposures(found.sky_XYZ[sun], found.card_XYZ[sun])[0] for found in surveys])
    return Comparison(
        solar_elevation_deg=elevation,
        stem=sheet_stem(elevation),
        label=degrees(elevation),
        exposure=exposure,
        white=f"{spaced(significant(exposure.display_white_cd_m2, 3))} cd/m²",
        skies=tuple(_compared(found, sun, exposure) for found in surveys),
        colours=tuple(_colour_row(surveys, sun, direction, exposure) for direction in DIRECTIONS),
        numbers=_numbers(surveys, sun),
        deep_twilight=elevation <= DEEP_TWILIGHT_DEG,
    )


def _common(own: Sequence[Exposure]) -> Exposure:
    """The exposure midway between those that suit each sky, in stops."""
    whites = [exposure.display_white_cd_m2 for exposure in own]
    return Exposure("common", "One exposure for all", float(np.exp(np.mean(np.log(whites)))))


def _compared(survey: Survey, sun: int, exposure: Exposure) -> ComparedSky:
    view = survey.sky_view(sun)
    behind_labels = view.grid_XYZ[elevation_index(45), azimuth_index(180)]
    return ComparedSky(survey.air.name, view, swatches(behind_labels[None], exposure)[0].ink)


def _colour_row(surveys: Sequence[Survey], sun: int, direction: Direction, exposure: Exposure) -> ColourRow:
    view, azimuth = direction.view_elevation_deg, direction.relative_azimuth_deg
    place = sun, elevation_index(view), azimuth_index(azimuth), 0
    XYZ = np.stack([found.stokes_XYZ[place] for found in surveys])
    anchor = f"e{view:02.0f}a{azimuth:03.0f}"
    blocks = []
    for colour, swatch in zip(XYZ, swatches(XYZ, exposure), strict=True):
        lines = spaced(significant(float(colour[1]), 3)), short_xy(colour[:2] / colour.sum())
        blocks.append(Block(swatch, lines, anchor))
    return ColourRow(direction.title, tuple(blocks))


def _numbers(surveys: Sequence[Survey], sun: int) -> tuple[NumberRow, ...]:
    """Where the sun is seen, what falls on level ground, and the colour of a white card there."""
    by_sky = [ground(found, sun).facts() for found in surveys]
    card = describe(np.stack([found.card_XYZ[sun] for found in surveys]), np.ones(len(surveys)))
    direct = [float(found.beam_XYZ[sun, 1]) for found in surveys]
    return (
        NumberRow("Sun seen at", "", tuple(apparent_label(found, sun) for found in surveys)),
        NumberRow("Sun on a plane facing it", "lx", tuple(spaced(significant(value, 3)) for value in direct)),
        *(
            NumberRow(same[0].title, same[0].unit, tuple(fact.text for fact in same))
            for same in zip(*by_sky, strict=True)
        ),
        NumberRow("White card, CCT", "K", tuple(spaced(kelvin(float(value))) for value in card.cct_k)),
        NumberRow("White card, x", "", tuple(fixed(float(value), 4) for value in card.xy[:, 0])),
        NumberRow("White card, y", "", tuple(fixed(float(value), 4) for value in card.xy[:, 1])),
    )
