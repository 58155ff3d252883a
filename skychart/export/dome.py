"""A dome map as an OpenEXR latitude-longitude environment map.

Source of the mapping: OpenEXR project, ImfEnvmap.h, LatLongMap: latitude 90° (+y) at the top, longitude 180° at the
left edge, falling to −180° at the right; longitude 0 looks along +z, longitude 90° along +x. A picture seen from
within, so that azimuth counted clockwise from above is the longitude with its sign turned. The header file places the
centres of the corner pixels on the corners of that range; here, as renderers sample textures, their outer corners lie
there: half a pixel apart at the edges, nothing in the middle.
"""

import numpy as np

from skychart.charts.columns import SPACE_TITLES
from skychart.charts.dome_map import DomeMap, level_XYZ
from skychart.charts.ground import air_summary
from skychart.charts.numbers import significant
from skychart.colour.spaces import rgb
from skychart.export.openexr import HALF_MAX, exr_bytes, openexr


def dome_exr(dome: DomeMap, space: str, half: bool, software: str) -> bytes:
    """The map as a file, linear in `space`; `software` is the name of the writer. Raises OutputError."""
    pixels = rgb(dome.XYZ, space)
    white = _white_luminance(pixels) if half else 1.0
    pixels /= white
    attributes = {
        "envmap": openexr().ENVMAP_LATLONG,
        "software": software,
        "comments": _comments(dome, space, white),
        "atmosphere": f"{dome.air.name}: {air_summary(dome.air)}",
        "observer": dome.observer,
        "sunElevation": f"{dome.solar_elevation_deg:g} deg geometric, {dome.apparent_elevation_deg:.3f} deg as seen",
        "sunAzimuth": f"{dome.sun_azimuth_deg:g} deg clockwise from the middle of the picture",
        "sunDisc": "drawn" if dome.disc else "left out",
    }
    return exr_bytes(pixels, space, white, attributes, half)


def dome_line(dome: DomeMap, space: str, half: bool) -> str:
    """What the file holds, in one line."""
    height, width, _ = dome.XYZ.shape
    white = _white_luminance(rgb(dome.XYZ, space)) if half else 1.0
    level = significant(float(level_XYZ(dome)[1]), 4)
    disc = "with" if dome.disc else "without"
    return (
        f"{width} × {height} pixels, linear {SPACE_TITLES[space]}, {16 if half else 32}-bit float, "
        f"1.0 is {white:g} cd/m²; level ground gets {level} lx from it, {disc} the sun's disc"
    )


def _white_luminance(pixels: np.ndarray) -> float:
    """Luminance [cd m⁻²] that 1, 1, 1 stands for in 16 bits: 1, or the first power of ten that keeps all in range."""
    largest = max(float(pixels.max()), -float(pixels.min()))
    return 1.0 if largest <= HALF_MAX else float(10 ** np.ceil(np.log10(largest / HALF_MAX)))


def _comments(dome: DomeMap, space: str, white: float) -> str:
    """What a reader of the header has to know."""
    disc = (
        "The sun's disc is drawn; its light is shared among neighbouring pixels so that every plane gets its "
        "illuminance."
        if dome.disc
        else "The sun's disc is left out: add it as a light of its own."
    )
    adapted = (
        " D65 is brought to the white of the chromaticities by Bradford adaptation: undo it for absolute XYZ."
        if space == "acescg"
        else ""
    )
    return (
        f"Clear sky and lit ground, sun {dome.solar_elevation_deg:g} deg above the horizon (geometric). "
        f"Scene-linear {SPACE_TITLES[space]}; 1.0 is {white:g} cd/m2.{adapted} Colours outside the gamut have negative "
        f"components. The top edge is the zenith (+y), the middle looks along +z, the right half is clockwise from it; "
        f"a pixel is the mean over its area, the outer edges are the ends of the range. {disc}"
    )
