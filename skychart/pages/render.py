"""Each kind of page with all its files, from finished chart data: a mapping of path in the site to bytes."""

import functools
from collections.abc import Sequence
from dataclasses import dataclass
from itertools import groupby
from typing import Any

import numpy as np
from jinja2 import Environment

from skychart.charts.checks import Methods
from skychart.charts.comparison import Comparison
from skychart.charts.direction import DirectionSheet
from skychart.charts.ground import air_summary
from skychart.charts.light import SunLight
from skychart.charts.light_box import light_box
from skychart.charts.overview import DayBand, Overview
from skychart.charts.sheet import Sheet
from skychart.export.light import sheet_light
from skychart.export.png import srgb_png
from skychart.export.tables import readings_json, table_csv
from skychart.pages.environment import environment, render
from skychart.pages.figures import direction_figures, methods_figures, sheet_figures
from skychart.pages.sheet_archive import sheet_archive
from skychart.pages.site import COMPARE_FOLDER, METHODS_PATH, SITE_TITLE, Atlas, Link, neighbours, sun_in_words
from skychart.plots.picture import DOME_PIXELS, OVERLAP_PIXELS, RIM_PIXELS, day_band, half_dome, half_sky

_DAY_COLUMN_PIXELS = 32
_DAY_HEIGHT_PIXELS = 160
_DOME_RADIUS = 100


@dataclass(frozen=True)
class Dome:
    """How pictures of one side of the sky, one below the other in one file, and the sun sit on a disc of radius 100.

    `keys` name the pictures from the top.
    """

    picture: str
    keys: tuple[str, ...]
    left: float
    top: float
    sun_y: float


@dataclass(frozen=True)
class BandImage:
    """A band of the start page's picture."""

    title: str
    path: str
    alt: str
    width: int
    height: int


def sheet_files(atlas: Atlas, chart: Sheet, light: SunLight) -> dict[str, bytes]:
    """An elevation sheet, with the light of its sun."""
    stem = f"{chart.atmosphere}/{chart.stem}"
    ruler = atlas.ruler(chart.atmosphere, chart.solar_elevation_deg)
    before, after = neighbours(ruler)
    heading = sun_in_words(chart.solar_elevation_deg)
    title = f"Sun {chart.label}, {chart.atmosphere}"
    description = f"{heading}: colour, luminance and polarisation of the {chart.atmosphere} sky by direction."
    page = atlas.page("sun", chart.atmosphere, f"{stem}.html", title, description, before, after)
    figures, files = sheet_figures(chart)
    picture, pixels = f"{stem}-sky.png", half_sky(chart.sky)
    files[picture] = _domes_png([half_dome(pixels, shown.exposure) for shown in chart.renderings])
    keys = tuple(shown.exposure.key for shown in chart.renderings)
    about = file_head(atlas, chart.atmosphere) | {
        "solar_elevation_deg": chart.solar_elevation_deg,
        "apparent_elevation_deg": round(chart.apparent_elevation_deg, 3),
    }
    numbers = (chart.readings, chart.ground, chart.spectra, sheet_light(light))
    exports, downloads = table_files(stem, title, about, chart.table, numbers)
    archive = sheet_archive(atlas, chart)
    context = {
        "page": page,
        "chart": chart,
        "heading": heading,
        "air": atlas.air(chart.atmosphere),
        "switch": atlas.sun_switch(chart.atmosphere, chart.solar_elevation_deg),
        "ruler": ruler,
        "dome": _dome(picture, keys, chart.apparent_elevation_deg),
        "box": light_box(light),
        "figures": figures,
        "downloads": (*downloads, Link("ZIP for other programs", archive.path)),
        "archive": archive,
    }
    return {page.path: render(templates(), "sheet.html", context), **files, **exports, archive.path: archive.data}


def direction_files(atlas: Atlas, chart: DirectionSheet) -> dict[str, bytes]:
    """A direction sheet."""
    view = chart.direction
    stem = f"{chart.atmosphere}/{view.stem}"
    directions = atlas.directions(chart.atmosphere, view)
    before, after = neighbours(directions)
    title = f"{view.title}, {chart.atmosphere}"
    description = f"{view.title}: colour, luminance and polarisation of the {chart.atmosphere} sky through the day."
    page = atlas.page("view", chart.atmosphere, f"{stem}.html", title, description, before, after)
    figures, files = direction_figures(chart)
    about = file_head(atlas, chart.atmosphere) | {
        "view_elevation_deg": view.view_elevation_deg,
        "relative_azimuth_deg": view.relative_azimuth_deg,
    }
    exports, downloads = table_files(stem, title, about, chart.table, (chart.readings,))
    context = {
        "page": page,
        "chart": chart,
        "air": atlas.air(chart.atmosphere),
        "switch": atlas.switch(chart.atmosphere, view.stem),
        "directions": directions,
        "figures": figures,
        "downloads": downloads,
    }
    return {page.path: render(templates(), "direction.html", context), **files, **exports}


def start_files(atlas: Atlas, chart: Overview) -> dict[str, bytes]:
    """The start page of one atmosphere."""
    name = chart.atmosphere
    first = name == atlas.atmospheres[0]
    title = SITE_TITLE if first else f"The day, {name}"
    description = "Colour and brightness of the clear sky for every height of the sun, computed from scattering."
    page = atlas.page("start", name, atlas.start_path(name), title, description)
    files = {f"{name}/day-{band.key}.png": _band_png(chart, band) for band in chart.bands}
    bands = [
        BandImage(
            band.title,
            f"{name}/day-{band.key}.png",
            f"{band.title}: the sky from horizon to zenith for suns from {chart.columns[0].label} "
            f"to {chart.columns[-1].label}",
            _DAY_COLUMN_PIXELS * len(chart.columns),
            _DAY_HEIGHT_PIXELS,
        )
        for band in chart.bands
    ]
    context = {
        "page": page,
        "chart": chart,
        "air": atlas.air(name),
        "switch": atlas.switch(name, None),
        "directions": atlas.directions(name, None),
        "compared": atlas.compare_path(atlas.middle_sun) if atlas.compares else None,
        "bands": bands,
        "groups": [(group, len(list(heads))) for group, heads in groupby(chart.heads, lambda head: head.group)],
    }
    return {page.path: render(templates(), "start.html", context), **files}


def comparison_files(atlas: Atlas, chart: Comparison) -> dict[str, bytes]:
    """A page of all atmospheres side by side."""
    sun = chart.solar_elevation_deg
    path = atlas.compare_path(sun)
    stem = path.removesuffix(".html")
    ruler = atlas.ruler(COMPARE_FOLDER, sun)
    before, after = neighbours(ruler)
    heading = sun_in_words(sun)
    title = f"Sun {chart.label}, side by side"
    description = f"{heading}: {', '.join(atlas.atmospheres)} side by side at one exposure."
    page = atlas.page("compare", atlas.atmospheres[0], path, title, description, before, after)
    picture, airs = f"{stem}-sky.png", tuple(shown.atmosphere for shown in chart.skies)
    context = {
        "page": page,
        "chart": chart,
        "heading": heading,
        "switch": atlas.sun_switch(COMPARE_FOLDER, sun),
        "ruler": ruler,
        "domes": [_dome(picture, airs, shown.sky.sun_elevation_deg) for shown in chart.skies],
        "airs": [atlas.air(shown.atmosphere) for shown in chart.skies],
    }
    files = {picture: _domes_png([half_dome(half_sky(shown.sky), chart.exposure) for shown in chart.skies])}
    return {page.path: render(templates(), "compare.html", context), **files}


def methods_files(atlas: Atlas, chart: Methods) -> dict[str, bytes]:
    """The methods page."""
    description = "What is computed, from which data, and every published value beside the computed one."
    page = atlas.page("methods", atlas.atmospheres[0], METHODS_PATH, "Methods and checks", description)
    (light, temperature), files = methods_figures(chart)
    airs = [(air.name, air_summary(air)) for air in atlas.settings.atmospheres]
    context = {"page": page, "chart": chart, "light": light, "temperature": temperature, "atmospheres": airs}
    return {page.path: render(templates(), "methods.html", context), **files}


@functools.cache
def templates() -> Environment:
    """One environment a process, so that each template is compiled once."""
    return environment()


def _dome(picture: str, keys: tuple[str, ...], sun_elevation_deg: float) -> Dome:
    pixel = _DOME_RADIUS / (DOME_PIXELS / 2 - RIM_PIXELS)
    sun_y = _DOME_RADIUS * (90 - sun_elevation_deg) / 90
    return Dome(picture, keys, round(-OVERLAP_PIXELS * pixel, 2), round(-DOME_PIXELS / 2 * pixel, 2), round(sun_y, 2))


def _domes_png(pictures: list[np.ndarray]) -> bytes:
    return srgb_png(np.concatenate(pictures))


def _band_png(chart: Overview, band: DayBand) -> bytes:
    pixels = day_band(chart.skies, band.relative_azimuth_deg, chart.exposures, _DAY_COLUMN_PIXELS, _DAY_HEIGHT_PIXELS)
    return srgb_png(pixels)


def file_head(atlas: Atlas, atmosphere: str) -> dict[str, Any]:
    """Where a file comes from, for its head."""
    return {
        "title": SITE_TITLE,
        "version": atlas.version,
        "atmosphere": atmosphere,
        "air": atlas.air(atmosphere),
        "observer": atlas.settings.observer,
        "method": "multiple scattering with polarisation in a spherical atmosphere; geometric elevations of the sun",
    }


def table_files(
    stem: str, title: str, about: dict[str, Any], table: Any, readings: Sequence[Any]
) -> tuple[dict[str, bytes], tuple[Link, ...]]:
    """CSV and JSON of a sheet, and the links to them."""
    remarks = (
        f"{SITE_TITLE}: {title}",
        f"skychart {about['version']}; {about['air']}; {about['observer']}; {about['method']}",
        "linear RGB is absolute: white at 1 cd/m2 is 1, 1, 1; srgb_hex has a level white card as display white",
    )
    files = {
        f"{stem}.csv": table_csv(table, remarks),
        f"{stem}.json": readings_json(about, *readings),
    }
    return files, (Link("CSV", f"{stem}.csv"), Link("JSON", f"{stem}.json"))
