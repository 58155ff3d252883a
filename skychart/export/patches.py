"""The blocks of an elevation sheet as a scene-linear picture of even patches, in OpenEXR.

Linear with the primaries of ITU-R BT.709, since everything reads them; 32-bit float keeps what lies outside that gamut
as negative components.
"""

import numpy as np

from skychart.charts.sheet import Sheet
from skychart.export.openexr import exr_bytes

PATCH_PIXELS = 32
PATCH_SPACE = "srgb"


def patches_exr(chart: Sheet, software: str) -> bytes:
    """The blocks in the grid of the page, the sun's surroundings below them, 1.0 being 1 cd m⁻².

    A block that spans columns fills them; where a row has no block the picture is 0. Raises OutputError without the
    library.
    """
    rows = chart.block_rows + chart.aureole_rows
    colours = iter(chart.readings.rgb[PATCH_SPACE])
    grid = np.zeros((len(rows), len(chart.azimuth_labels), 3))
    for row, line in zip(grid, rows, strict=True):
        start = 0
        for block in line.blocks:
            row[start : start + block.span] = next(colours)
            start += block.span
    pixels = grid.repeat(PATCH_PIXELS, axis=0).repeat(PATCH_PIXELS, axis=1)
    attributes = {
        "software": software,
        "atmosphere": chart.atmosphere,
        "sunElevation": f"{chart.solar_elevation_deg:g} deg geometric, {chart.apparent_elevation_deg:.3f} deg as seen",
        "comments": _comments(chart),
    }
    return exr_bytes(pixels, PATCH_SPACE, 1.0, attributes)


def _comments(chart: Sheet) -> str:
    views = ", ".join(row.label for row in chart.block_rows).replace("°", "")
    azimuths = ", ".join(chart.azimuth_labels).replace("°", "")
    near = ""
    if chart.aureole_rows:
        arms = " and ".join(row.label.lower() for row in chart.aureole_rows)
        distances = ", ".join(chart.aureole_labels).replace("°", "")
        near = f" Then {arms} the sun as it is seen, {distances} deg away from it."
    return (
        f"Sky colours, {PATCH_PIXELS} pixels a patch. Scene-linear BT.709; 1.0 is 1 cd/m2; colours outside the gamut "
        f"have negative components. Rows from the top: view elevation {views} deg; columns from the left: azimuth "
        f"{azimuths} deg from the sun.{near}"
    )
