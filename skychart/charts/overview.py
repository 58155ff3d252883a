"""Start page: the sky of one atmosphere through the day."""

from dataclasses import dataclass

import numpy as np

from skychart.charts.columns import Column, Row
from skychart.charts.exposure import Exposure, exposures
from skychart.charts.ground import ground
from skychart.charts.numbers import degrees, fixed, kelvin, significant, spaced
from skychart.charts.reading import read_colours
from skychart.charts.sheet import sheet_stem
from skychart.charts.survey import DIRECTIONS, SkyView, Survey, azimuth_index, elevation_index

BANDS = (("toward", "Toward the sun", 0.0), ("beside", "Beside the sun", 90.0), ("away", "Away from the sun", 180.0))
_COLUMNS = (
    Column("sun_lx", "Sun", "lx", "Level ground"),
    Column("sky_lx", "Sky", "lx", "Level ground"),
    Column("stops", "Lit : shadow", "stops", "Level ground"),
    Column("ev100", "White card", "EV100", "Level ground"),
    Column("card_cct", "White card", "K", "Level ground"),
    Column("zenith", "Luminance", "cd/m²", "Zenith"),
    Column("zenith_x", "x", "", "Zenith"),
    Column("zenith_y", "y", "", "Zenith"),
    Column("toward", "toward", "cd/m²", "2° above the horizon"),
    Column("beside", "beside", "cd/m²", "2° above the horizon"),
    Column("away", "away", "cd/m²", "2° above the horizon"),
)


@dataclass(frozen=True)
class DayBand:
    """A band of the picture, at an azimuth from the sun [deg], from horizon to zenith."""

    key: str
    title: str
    relative_azimuth_deg: float


@dataclass(frozen=True)
class DayColumn:
    """A column of the picture: its sun, and the stem of the sheet it leads to."""

    label: str
    stem: str


@dataclass(frozen=True)
class Overview:
    """Everything the start page shows of one atmosphere; `exposures` and `skies` have one entry for each sun."""

    atmosphere: str
    columns: tuple[DayColumn, ...]
    exposures: tuple[Exposure, ...]
    skies: tuple[SkyView, ...]
    bands: tuple[DayBand, ...]
    heads: tuple[Column, ...]
    rows: tuple[Row, ...]


def overview(survey: Survey) -> Overview:
    """The day of a survey, suns in their order."""
    own = [exposures(sky, card)[0] for sky, card in zip(survey.sky_XYZ, survey.card_XYZ, strict=True)]
    skies = [survey.sky_view(sun) for sun in range(len(survey.solar_elevation_deg))]
    bands = [DayBand(*band) for band in BANDS]
    rows = _rows(survey)
    columns = [DayColumn(row.labels[0], row.anchor) for row in rows]
    return Overview(survey.air.name, tuple(columns), tuple(own), tuple(skies), tuple(bands), _COLUMNS, rows)


def _rows(survey: Survey) -> tuple[Row, ...]:
    """The main numbers of every sun, written for reading."""
    suns = survey.solar_elevation_deg
    card = np.zeros((len(suns), 3, 3))
    card[:, 0] = survey.card_XYZ
    _, card_colours = read_colours(survey.air.name, suns, suns, suns, card, survey.card_XYZ[:, 1])
    seen = {
        direction.stem: survey.stokes_XYZ[
            :, elevation_index(direction.view_elevation_deg), azimuth_index(direction.relative_azimuth_deg), 0
        ]
        for direction in DIRECTIONS
    }
    rows = []
    for i, sun in enumerate(suns):
        light, zenith = ground(survey, i), seen["view-zenith"][i]
        low = [seen[f"view-02-{side}"][i, 1] for side in ("toward", "beside", "away")]
        cells = [
            *(fact.text for fact in light.facts()),
            spaced(kelvin(float(card_colours.cct_k[i]))),
            spaced(significant(float(zenith[1]), 3)),
            *(spaced(fixed(float(value), 4)) for value in zenith[:2] / zenith.sum()),
            *(spaced(significant(float(value), 3)) for value in low),
        ]
        rows.append(Row(sheet_stem(float(sun)), (degrees(float(sun)),), tuple(cells)))
    return tuple(rows)
