"""Direction sheet: one view direction of one atmosphere through all elevations of the sun."""

from dataclasses import dataclass

import numpy as np

from skychart.charts.columns import Column, NumberTable, number_table
from skychart.charts.curves import Chromaticities
from skychart.charts.exposure import Exposure, Swatch, exposures, swatches
from skychart.charts.numbers import degrees, significant, spaced
from skychart.charts.reading import Reading, read_colours
from skychart.charts.sheet import Block, block, rendering_note, sheet_stem, stops_block
from skychart.charts.survey import Direction, Survey, azimuth_index, elevation_index

LABELS = (Column("solar_elevation_deg", "Sun elevation", "°", ""),)


@dataclass(frozen=True)
class Band:
    """One exposure of the direction, a block for each sun."""

    title: str
    note: str
    blocks: tuple[Block, ...]


@dataclass(frozen=True)
class SunHead:
    """A sun elevation as a column head, with the stem of its sheet."""

    label: str
    stem: str


@dataclass(frozen=True)
class Course:
    """Curves over the sun's elevation [deg]: luminance, u'v' (sun, 2) and degree of polarisation."""

    solar_elevation_deg: np.ndarray
    luminance_cd_m2: np.ndarray
    uv: np.ndarray
    degree: np.ndarray


@dataclass(frozen=True)
class DirectionSheet:
    """Everything a direction sheet shows."""

    atmosphere: str
    direction: Direction
    suns: tuple[SunHead, ...]
    bands: tuple[Band, ...]
    table: NumberTable
    readings: Reading
    chromaticities: Chromaticities
    course: Course


def direction_sheet(survey: Survey, direction: Direction) -> DirectionSheet:
    """The sheet of `direction` over all suns of a survey, in their order."""
    suns = survey.solar_elevation_deg
    place = elevation_index(direction.view_elevation_deg), azimuth_index(direction.relative_azimuth_deg)
    stokes = survey.stokes_XYZ[(slice(None), *place)]
    views = np.full(len(suns), direction.view_elevation_deg), np.full(len(suns), direction.relative_azimuth_deg)
    readings, colours = read_colours(survey.air.name, suns, *views, stokes, survey.card_XYZ[:, 1])
    stems = [sheet_stem(float(sun)) for sun in suns]
    bands = _bands(survey, readings, stems)
    hexes = [shown.swatch.hex for shown in bands[0].blocks]
    labels = [(f"{sun:g}",) for sun in suns]
    return DirectionSheet(
        atmosphere=survey.air.name,
        direction=direction,
        suns=tuple(SunHead(degrees(float(sun)), stem) for sun, stem in zip(suns, stems, strict=True)),
        bands=bands,
        table=number_table(LABELS, stems, labels, readings, colours, hexes),
        readings=readings,
        chromaticities=Chromaticities(readings.uv_prime, tuple(hexes), None, track=True),
        course=Course(suns, readings.luminance_cd_m2, readings.uv_prime, readings.polarisation_degree),
    )


def _bands(survey: Survey, readings: Reading, stems: list[str]) -> tuple[Band, ...]:
    """A band for each of the three exposures."""
    by_sun = [exposures(sky, card) for sky, card in zip(survey.sky_XYZ, survey.card_XYZ, strict=True)]
    bands = []
    for shown in zip(*by_sun, strict=True):
        colours = [swatches(readings.XYZ[i : i + 1], exposure)[0] for i, exposure in enumerate(shown)]
        blocks = [_block(exposure, i, readings, colours[i], stems[i]) for i, exposure in enumerate(shown)]
        bands.append(Band(shown[0].title, _band_note(shown[0].key, shown[0].display_white_cd_m2), tuple(blocks)))
    return tuple(bands)


def _block(exposure: Exposure, sun: int, readings: Reading, colour: Swatch, anchor: str) -> Block:
    """Luminance and chromaticity in the first exposure, distance from display white in the others."""
    if exposure.key == "own":
        return block(sun, readings, colour, anchor)
    return stops_block(float(readings.luminance_cd_m2[sun]), exposure.display_white_cd_m2, colour, anchor)


def _band_note(key: str, white: float) -> str:
    if key == "fixed":
        return (
            f"Display white is {spaced(significant(white, 3))} cd/m² for every sun. Printed: stops from display white."
        )
    printed = "luminance in cd/m², chromaticity x y" if key == "own" else "stops from the card"
    return f"Set anew for each sun. {rendering_note(key)} Printed: {printed}."
