"""The reader: one page for all atmospheres, and a script of numbers for each, loaded when it is chosen."""

from skychart.charts.reader import ReaderSky, reader_constants
from skychart.charts.sheet import sheet_stem
from skychart.export.reader_data import reader_script
from skychart.pages.environment import render
from skychart.pages.render import templates
from skychart.pages.site import READER_PATH, Atlas

_SCRIPTS = (
    *("reader-numbers", "reader-colour", "reader-sun", "reader-data", "reader-sky", "reader-picture"),
    *("reader-reading", "reader-words", "reader-state", "reader-widgets", "reader-scope", "reader"),
)


def data_path(atmosphere: str) -> str:
    """Where the numbers of an atmosphere lie in the site."""
    return f"{atmosphere}/reader.js"


def reader_data_files(chart: ReaderSky) -> dict[str, bytes]:
    """The numbers of one atmosphere."""
    return {data_path(chart.atmosphere): reader_script(chart)}


def reader_files(atlas: Atlas) -> dict[str, bytes]:
    """The page itself."""
    first = atlas.atmospheres[0]
    description = "Point at the sky under any sun: luminance, colour, RGB and polarisation of that direction."
    page = atlas.page("reader", first, READER_PATH, "Reader", description)
    constants = reader_constants(atlas.settings.observer) | {
        "version": atlas.version,
        "observer": atlas.settings.observer,
        "atmospheres": [{"name": name, "air": atlas.air(name), "data": data_path(name)} for name in atlas.atmospheres],
    }
    context = {
        "page": page,
        "constants": constants,
        "scripts": [f"static/{name}.js" for name in _SCRIPTS],
        "sheet": f"{first}/{sheet_stem(atlas.middle_sun)}.html",
    }
    return {page.path: render(templates(), "reader.html", context)}
