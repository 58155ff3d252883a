"""The display page of one atmosphere: tables, figures and files from a finished display sheet."""

from collections.abc import Callable

from skychart.charts.display import DisplaySheet
from skychart.charts.numbers import degrees
from skychart.charts.sheet import sheet_stem
from skychart.export.columns import columns_json
from skychart.export.tables import table_csv
from skychart.pages.environment import render
from skychart.pages.figures import Figure
from skychart.pages.render import file_head, templates
from skychart.pages.site import SITE_TITLE, Atlas, Link
from skychart.plots.display import SIZE_IN, bits_svg, gamut_svg, luminance_svg, steps_svg

_PIXELS_PER_INCH = 96
_REMARKS = (
    "gradients: the vertical through the sun and the one 90 degrees beside it; codes: sRGB full range, others narrow",
    "sRGB and BT.1886: white 100 cd/m2, metered for the sky; PQ and HLG: a level white card at 203 cd/m2 (BT.2408)",
    "largest step as dE_ITP (BT.2124); widest band in pixels of 60 degrees over 1080, twice as many over 2160",
)
_FIGURES: tuple[tuple[str, Callable[[DisplaySheet], bytes], str, str, str], ...] = (
    (
        "gamut",
        gamut_svg,
        "Gamut",
        "Above, how far the farthest chromaticity of the sky lies beyond the triangle of each space; below 0 it is "
        "inside, by so much. Below, the share of the sky’s solid angle that lies outside.",
        "Distance from the gamut triangles and share of the sky outside, by sun elevation",
    ),
    (
        "luminance",
        luminance_svg,
        "Luminance",
        "The brightest sky, without the sun’s disc, the darkest, and a level white card. Lines at 100, 203, 1000, "
        "4000 and 10\u2009000\u00a0cd/m².",
        "Luminance of the brightest and darkest sky and of a white card by sun elevation, with peaks of screens",
    ),
    (
        "bits",
        bits_svg,
        "Bits",
        "The fewest bits with which no step of either gradient passes ΔE_ITP 1. Whole numbers; the lines are set apart "
        "a little.",
        "Fewest bits without a visible step in four codings, by sun elevation",
    ),
    (
        "steps",
        steps_svg,
        "Code steps",
        "The largest step of either gradient with 10 bits; the line at 1 is what the most critical observer just sees.",
        "Largest step of code values with 10 bits in four codings, by sun elevation",
    ),
)


def display_files(atlas: Atlas, chart: DisplaySheet) -> dict[str, bytes]:
    """The page with its figures and files."""
    name = chart.atmosphere
    stem = f"{name}/display"
    suns = chart.solar_elevation_deg.tolist()
    sheets = [sheet_stem(sun) for sun in suns]
    title = f"Display, {name}"
    description = f"What screens lose of the {name} sky: gamut, luminance and steps of code values by sun elevation."
    page = atlas.page("display", name, f"{stem}.html", title, description)
    about = file_head(atlas, name)
    remarks = (f"{SITE_TITLE}: {title}", f"skychart {about['version']}; {about['air']}; {about['observer']}", *_REMARKS)
    files = {
        f"{stem}.csv": table_csv(chart.table, remarks),
        f"{stem}.json": columns_json(about | {"remarks": list(_REMARKS)}, chart.table),
    }
    figures = []
    for key, draw, heading, caption, alt in _FIGURES:
        path = f"{stem}-{key}.svg"
        files[path] = draw(chart)
        width, height = (round(inches * _PIXELS_PER_INCH) for inches in SIZE_IN)
        figures.append(Figure(path, heading, caption, alt, width, height))
    context = {
        "page": page,
        "chart": chart,
        "air": atlas.air(name),
        "switch": atlas.switch(name, "display"),
        "figures": figures,
        "sheets": [f"{name}/{sheet}.html" for sheet in sheets],
        "ramps": [Link(degrees(sun), f"{name}/{sheet}-files.zip") for sun, sheet in zip(suns, sheets, strict=True)],
        "downloads": (Link("CSV", f"{stem}.csv"), Link("JSON", f"{stem}.json")),
    }
    return {page.path: render(templates(), "display.html", context), **files}
