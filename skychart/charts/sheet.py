"""Elevation sheet: one atmosphere at one elevation of the sun."""

from dataclasses import dataclass

import numpy as np

from skychart.charts.aureole import ARMS, DISTANCE_DEG, arms
from skychart.charts.columns import Column, NumberTable, number_table
from skychart.charts.curves import (
    Chromaticities,
    Polarisation,
    PrincipalPlane,
    Spectra,
    polarisation_map,
    principal_plane,
    spectra,
)
from skychart.charts.exposure import Exposure, Swatch, exposures, swatches
from skychart.charts.ground import Ground, ground
from skychart.charts.numbers import degrees, fixed, short_xy, signed_stem, significant, spaced
from skychart.charts.reading import Reading, read_colours
from skychart.charts.stops import SheetStops, sheet_stops
from skychart.charts.survey import SkyView, Survey, azimuth_index, elevation_index
from skychart.colour.differences import uv_prime

TABLE_ELEVATION_DEG = (90.0, 60.0, 45.0, 30.0, 20.0, 10.0, 5.0, 2.0, 0.0)
TABLE_AZIMUTH_DEG = (0.0, 30.0, 60.0, 90.0, 135.0, 180.0)
AUREOLE_DISTANCE_DEG = (1.0, 2.0, 5.0, 10.0)
AUREOLE_ARMS = (("up", "Above"), ("beside", "Beside"))
LABELS = (
    Column("view_elevation_deg", "View elevation", "°", ""),
    Column("relative_azimuth_deg", "Azimuth", "°", ""),
)
DEEP_TWILIGHT_DEG = -6.0
_ON_SUN_DEG = 0.75


@dataclass(frozen=True)
class Block:
    """A block of the swatch table: its colour, the lines printed in it, and the anchor of its row of numbers."""

    swatch: Swatch
    lines: tuple[str, ...]
    anchor: str
    span: int = 1


@dataclass(frozen=True)
class BlockRow:
    """Blocks of one view elevation, azimuth from the sun to the right."""

    label: str
    blocks: tuple[Block, ...]


@dataclass(frozen=True)
class Rendering:
    """How one picture is shown, in words; `ink` reads where its circles are labelled."""

    exposure: Exposure
    white: str
    note: str
    ink: str


@dataclass(frozen=True)
class Sheet:
    """Everything an elevation sheet shows; `sky` is for the pictures, `aureole_rows` stand where a sun is seen."""

    atmosphere: str
    stem: str
    solar_elevation_deg: float
    label: str
    apparent_elevation_deg: float
    apparent: str
    ground: Ground
    renderings: tuple[Rendering, ...]
    azimuth_labels: tuple[str, ...]
    block_rows: tuple[BlockRow, ...]
    aureole_labels: tuple[str, ...]
    aureole_rows: tuple[BlockRow, ...]
    over_range: int
    on_sun: str
    table: NumberTable
    readings: Reading
    sky: SkyView
    spectra: Spectra
    chromaticities: Chromaticities
    principal_plane: PrincipalPlane
    polarisation: Polarisation
    stops: SheetStops
    deep_twilight: bool


def sheet_stem(solar_elevation_deg: float) -> str:
    """File stem of the sheet of a sun elevation [deg]: `sun+02`."""
    return signed_stem("sun", solar_elevation_deg)


def elevation_sheet(survey: Survey, sun: int) -> Sheet:
    """The sheet of the `sun`-th elevation of a survey."""
    elevation = float(survey.solar_elevation_deg[sun])
    shown = exposures(survey.sky_XYZ[sun], survey.card_XYZ[sun])
    views = [(view, azimuth) for view in TABLE_ELEVATION_DEG for azimuth in _azimuths(view)]
    picks = tuple(zip(*((elevation_index(v), azimuth_index(a)) for v, a in views), strict=True))
    anchors = [f"e{view:02.0f}a{azimuth:03.0f}" for view, azimuth in views]
    labels = [(f"{view:g}", f"{azimuth:g}") for view, azimuth in views]
    grid_count, near = len(views), _near_the_sun(survey, sun)
    views += [near_view for _, near_view, _ in near]
    anchors += [anchor for anchor, _, _ in near]
    labels += [(fixed(view, 2), fixed(azimuth, 2)) for _, (view, azimuth), _ in near]
    stokes = np.stack([*survey.stokes_XYZ[sun][picks], *(light for _, _, light in near)])
    view_deg, azimuth_deg = (np.array(axis) for axis in zip(*views, strict=True))
    card = np.full(len(views), survey.card_XYZ[sun, 1])
    readings, colours = read_colours(
        survey.air.name, np.full(len(views), elevation), view_deg, azimuth_deg, stokes, card
    )
    colour_swatches = swatches(readings.XYZ, shown[0])
    hexes = [swatch.hex for swatch in colour_swatches]
    return Sheet(
        atmosphere=survey.air.name,
        stem=sheet_stem(elevation),
        solar_elevation_deg=elevation,
        label=degrees(elevation),
        apparent_elevation_deg=float(survey.apparent_elevation_deg[sun]),
        apparent=apparent_label(survey, sun),
        ground=ground(survey, sun),
        renderings=tuple(_rendering(exposure, survey.stokes_XYZ[sun, :, :, 0]) for exposure in shown),
        azimuth_labels=tuple(degrees(azimuth) for azimuth in TABLE_AZIMUTH_DEG),
        block_rows=_block_rows(views[:grid_count], readings, colour_swatches, anchors),
        aureole_labels=tuple(degrees(distance) for distance in AUREOLE_DISTANCE_DEG),
        aureole_rows=_aureole_rows(range(grid_count, len(views)), readings, colour_swatches, anchors),
        over_range=int(shown[0].over_range(readings.XYZ).sum()),
        on_sun=_on_sun(survey, sun),
        table=number_table(LABELS, anchors, labels, readings, colours, hexes),
        readings=readings,
        sky=survey.sky_view(sun),
        spectra=spectra(survey, sun),
        chromaticities=Chromaticities(readings.uv_prime, tuple(hexes), sun_uv(survey, sun)),
        principal_plane=principal_plane(survey, sun),
        polarisation=polarisation_map(survey, sun),
        stops=sheet_stops(survey, sun),
        deep_twilight=elevation <= DEEP_TWILIGHT_DEG,
    )


def apparent_label(survey: Survey, sun: int) -> str:
    """Where the refracted sun is seen, in words; it is not, once refraction no longer lifts it over the horizon."""
    if not survey.sun_seen(sun):
        return "below the horizon"
    return spaced(fixed(float(survey.apparent_elevation_deg[sun]), 2)) + "°"


def _on_sun(survey: Survey, sun: int) -> str:
    """View elevation, in words, of the block whose direction falls on the sun or beside it; none is an empty text."""
    apparent = float(survey.apparent_elevation_deg[sun])
    close = [view for view in TABLE_ELEVATION_DEG if abs(view - apparent) < _ON_SUN_DEG]
    return degrees(close[0]) if close and survey.sun_seen(sun) else ""


def sun_uv(survey: Survey, sun: int) -> np.ndarray | None:
    """Chromaticity u'v' of the direct sun, None while it gives no light."""
    return uv_prime(survey.beam_XYZ[sun]) if survey.sun_XYZ[sun, 1] > 0 else None


def block(reading_index: int, readings: Reading, swatch: Swatch, anchor: str, span: int = 1) -> Block:
    """A block that prints luminance and chromaticity."""
    luminance = spaced(significant(float(readings.luminance_cd_m2[reading_index]), 3))
    return Block(swatch, (luminance, short_xy(readings.xy[reading_index])), anchor, span)


def stops_block(luminance_cd_m2: float, display_white_cd_m2: float, swatch: Swatch, anchor: str) -> Block:
    """A block that prints how far its luminance lies from display white."""
    stops = float(np.log2(luminance_cd_m2 / display_white_cd_m2))
    text = fixed(stops, 1)
    return Block(swatch, (f"+{text}" if float(text) > 0 else spaced(text), "stops"), anchor)


def rendering_note(key: str) -> str:
    """What an exposure is for."""
    return {
        "own": "The mean sky is as bright as the grey around it. Unadapted, against D65.",
        "card": "A level white card lit by this sun and sky is display white, in brightness and in colour.",
        "fixed": "The same scale on every sheet. Unadapted, against D65.",
    }[key]


def _azimuths(view_elevation_deg: float) -> tuple[float, ...]:
    """The zenith has no azimuth: it is one block."""
    return (0.0,) if view_elevation_deg == 90 else TABLE_AZIMUTH_DEG


def _block_rows(
    views: list[tuple[float, float]], readings: Reading, colours: tuple[Swatch, ...], anchors: list[str]
) -> tuple[BlockRow, ...]:
    rows = []
    for view in TABLE_ELEVATION_DEG:
        blocks = [
            block(i, readings, colours[i], anchors[i], len(TABLE_AZIMUTH_DEG) if view == 90 else 1)
            for i in range(len(views))
            if views[i][0] == view
        ]
        rows.append(BlockRow(degrees(view), tuple(blocks)))
    return tuple(rows)


def _near_the_sun(survey: Survey, sun: int) -> list[tuple[str, tuple[float, float], np.ndarray]]:
    """Anchor, view elevation and azimuth [deg], and light of each block of the aureole; none of a sun not seen."""
    apparent = float(survey.apparent_elevation_deg[sun])
    if not survey.sun_seen(sun) or apparent < 0:
        return []
    view, azimuth = arms(apparent)
    return [
        (f"{arm}{distance:02.0f}", (float(view[row, column]), float(azimuth[row, column])), light)
        for arm, _ in AUREOLE_ARMS
        for distance in AUREOLE_DISTANCE_DEG
        for row, column in [(ARMS.index(arm), int(np.flatnonzero(distance == DISTANCE_DEG)[0]))]
        for light in [survey.aureole_XYZ[sun, row, column]]
    ]


def _aureole_rows(
    places: range, readings: Reading, colours: tuple[Swatch, ...], anchors: list[str]
) -> tuple[BlockRow, ...]:
    blocks = [block(i, readings, colours[i], anchors[i]) for i in places]
    count = len(AUREOLE_DISTANCE_DEG)
    rows = (tuple(blocks[i : i + count]) for i in range(0, len(blocks), count))
    return tuple(BlockRow(title, row) for (_, title), row in zip(AUREOLE_ARMS, rows, strict=False))


def _rendering(exposure: Exposure, sky_XYZ: np.ndarray) -> Rendering:
    screen = exposure.screen(sky_XYZ)
    note = rendering_note(exposure.key)
    if screen.max() < 0.5 / 255:
        note = "Every direction is darker than the first step of an 8-bit screen: black on this scale."
    white = f"{spaced(significant(exposure.display_white_cd_m2, 3))} cd/m²"
    behind_labels = sky_XYZ[elevation_index(45), azimuth_index(180)]
    return Rendering(exposure, white, note, swatches(behind_labels[None], exposure)[0].ink)
