"""The light sheet of an atmosphere with its files."""

from dataclasses import dataclass

from skychart.charts.columns import NumberTable
from skychart.charts.harmonics import HARMONICS
from skychart.charts.light import LightSheet
from skychart.charts.light_box import chosen_lights
from skychart.charts.light_tables import (
    coefficient_table,
    colour_table,
    full_table,
    illuminance_table,
    lamp_table,
    share_table,
)
from skychart.export.light import REMARKS, light_json
from skychart.export.tables import table_csv
from skychart.pages.environment import render
from skychart.pages.figures import light_figures
from skychart.pages.render import file_head, templates
from skychart.pages.site import SITE_TITLE, Atlas, Link

LIGHT_STEM = "light"


@dataclass(frozen=True)
class TitledTable:
    """A table of the page: the stem of its ids, its caption, and its numbers."""

    key: str
    caption: str
    numbers: NumberTable


def light_files(atlas: Atlas, chart: LightSheet) -> dict[str, bytes]:
    """A light sheet, by path."""
    name = chart.atmosphere
    stem = f"{name}/{LIGHT_STEM}"
    title = f"Light, {name}"
    description = f"What sun, sky and ground give to planes under the {name} sky, for every height of the sun."
    page = atlas.page("light", name, f"{stem}.html", title, description)
    figures, files = light_figures(chart)
    about = file_head(atlas, name)
    remarks = (
        f"{SITE_TITLE}: {title}",
        f"skychart {about['version']}; {about['air']}; {about['observer']}; {about['method']}",
        *REMARKS,
    )
    files |= {
        f"{stem}.csv": table_csv(full_table(chart), remarks),
        f"{stem}.json": light_json(about, chart),
    }
    context = {
        "page": page,
        "chart": chart,
        "air": atlas.air(name),
        "switch": atlas.switch(name, LIGHT_STEM),
        "lights": chosen_lights(chart),
        "harmonics": HARMONICS,
        "tables": {table.key: table for table in _tables(chart)},
        "figures": figures,
        "downloads": (
            Link("CSV of all planes", f"{stem}.csv"),
            Link("JSON with the coefficients", f"{stem}.json"),
        ),
    }
    return {page.path: render(templates(), "light.html", context), **files}


def _tables(chart: LightSheet) -> tuple[TitledTable, ...]:
    return (
        TitledTable("lamp", "The sun alone, lit to shadow, and exposure", lamp_table(chart)),
        TitledTable("lux", "Illuminance of the six planes", illuminance_table(chart)),
        TitledTable("colour", "Colour of light on some planes", colour_table(chart)),
        TitledTable("nine", "Coefficients of sky and ground, linear sRGB, cd/m²", coefficient_table(chart)),
        TitledTable("share", "Share of the ground, and error of the coefficients", share_table(chart)),
    )
