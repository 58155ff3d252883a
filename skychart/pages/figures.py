"""Figures of each kind of page: their file names, words and the functions that draw them."""

from collections.abc import Callable
from dataclasses import dataclass
from typing import Any

from skychart.charts.checks import Methods
from skychart.charts.direction import DirectionSheet
from skychart.charts.light import LightSheet
from skychart.charts.sheet import Sheet
from skychart.plots.chromaticity import SIZE_IN as CHROMATICITY_IN
from skychart.plots.chromaticity import chromaticity_svg
from skychart.plots.course import SIZE_IN as COURSE_IN
from skychart.plots.course import course_svg
from skychart.plots.light import SIZE_IN as LIGHT_IN
from skychart.plots.light import light_svg
from skychart.plots.light_sheet import COLOUR_IN, ILLUMINANCE_IN, RATIO_IN, colour_svg, illuminance_svg, ratio_svg
from skychart.plots.polarisation import SIZE_IN as POLARISATION_IN
from skychart.plots.polarisation import polarisation_svg
from skychart.plots.principal_plane import SIZE_IN as PLANE_IN
from skychart.plots.principal_plane import principal_plane_svg
from skychart.plots.spectra import SIZE_IN as SPECTRA_IN
from skychart.plots.spectra import spectra_svg
from skychart.plots.temperature import SIZE_IN as TEMPERATURE_IN
from skychart.plots.temperature import temperature_svg

_PIXELS_PER_INCH = 96


@dataclass(frozen=True)
class Figure:
    """An image of a page: path in the site, size [CSS px] and words."""

    path: str
    title: str
    caption: str
    alt: str
    width: int
    height: int


@dataclass(frozen=True)
class _Plan:
    suffix: str
    draw: Callable[[Any], bytes]
    size_in: tuple[float, float]
    title: str
    caption: str
    alt: str


_SPECTRA = _Plan(
    "spectra",
    spectra_svg,
    SPECTRA_IN,
    "Spectra",
    "Five directions of the sky, and the sun on a plane facing it while it is up, each divided by its own value at "
    "560 nm. Absolute values are in the JSON file.",
    "Spectra of five sky directions and of the sun, relative to 560 nm",
)
_CHROMATICITY = _Plan(
    "chromaticity",
    chromaticity_svg,
    CHROMATICITY_IN,
    "Chromaticity",
    "CIE 1976 u′v′ with gamut triangles and the daylight locus from 4000 K to 25\u202f000\u00a0K; "
    "dots are the blocks, in their "
    "own colours. The frame in the small diagram shows the part enlarged.",
    "u prime v prime diagram with the blocks of this page, gamut triangles and the daylight locus",
)
_PLANE = _Plan(
    "plane",
    principal_plane_svg,
    PLANE_IN,
    "Principal plane",
    "Luminance, chromaticity and degree of polarisation along the vertical through the sun. The degree passes zero at "
    "the neutral points.",
    "Luminance, u prime, v prime and degree of polarisation from the horizon below the sun over the zenith",
)
_POLARISATION = _Plan(
    "polarisation",
    polarisation_svg,
    POLARISATION_IN,
    "Polarisation",
    "Whole sky, the sun’s azimuth down. Ticks lie along the electric vector and are as long as its degree; contours at "
    "0.2, 0.4, 0.6 and 0.8.",
    "All-sky map of the degree and direction of polarisation",
)
_COURSE = _Plan(
    "course",
    course_svg,
    COURSE_IN,
    "Through the day",
    "Luminance, chromaticity and degree of polarisation over the geometric elevation of the sun.",
    "Luminance, u prime, v prime and degree of polarisation over the elevation of the sun",
)
_TRACK = _Plan(
    "chromaticity",
    chromaticity_svg,
    CHROMATICITY_IN,
    "Chromaticity",
    "CIE 1976 u′v′ with gamut triangles and the daylight locus from 4000 K to 25\u202f000\u00a0K; "
    "a dot for each sun, joined in "
    "their order.",
    "u prime v prime diagram with the track of this direction through the day",
)
_LIGHT = _Plan(
    "light",
    light_svg,
    LIGHT_IN,
    "Computed and published",
    "Above, sun and sky on level ground; below, the zenith, with the measurements of Koomen et al. 1952.",
    "Illuminance of level ground and zenith luminance by sun elevation, computed and published",
)


_TEMPERATURE = _Plan(
    "temperature",
    temperature_svg,
    TEMPERATURE_IN,
    "Colour temperature and luminance",
    "A mark for each piece of sky that has a colour temperature, beside a fit to measured clear skies. "
    "Bluer pieces have none.",
    "Correlated colour temperature of pieces of sky over their luminance, computed and measured",
)


_ILLUMINANCE = _Plan(
    "illuminance",
    illuminance_svg,
    ILLUMINANCE_IN,
    "Illuminance",
    "Of the six planes over the geometric elevation of the sun: above, sun and sky on a scale of powers; below, what "
    "is left in the sun’s shadow, in thousands of lux.",
    "Illuminance of six planes over the elevation of the sun, with the sun and in its shadow",
)
_LIGHT_COLOUR = _Plan(
    "colour",
    colour_svg,
    COLOUR_IN,
    "Colour",
    "Colour temperature and CIE 1976 u′v′ of the sun and of the light on some planes.",
    "Correlated colour temperature, u prime and v prime of the sun and of light on planes by the elevation of the sun",
)
_RATIO = _Plan(
    "ratio",
    ratio_svg,
    RATIO_IN,
    "Ratio and exposure",
    "Above, how much more a lit plane gets than the same plane in the sun’s shadow; below, exposure of level cards.",
    "Lit to shadow in stops, and exposure values, over the elevation of the sun",
)


def sheet_figures(chart: Sheet) -> tuple[tuple[Figure, ...], dict[str, bytes]]:
    """Figures of an elevation sheet, and their files by path."""
    data = (
        (_SPECTRA, chart.spectra),
        (_CHROMATICITY, chart.chromaticities),
        (_PLANE, chart.principal_plane),
        (_POLARISATION, chart.polarisation),
    )
    return _drawn(f"{chart.atmosphere}/{chart.stem}", data)


def direction_figures(chart: DirectionSheet) -> tuple[tuple[Figure, ...], dict[str, bytes]]:
    """Figures of a direction sheet, and their files by path."""
    data = ((_COURSE, chart.course), (_TRACK, chart.chromaticities))
    return _drawn(f"{chart.atmosphere}/{chart.direction.stem}", data)


def light_figures(chart: LightSheet) -> tuple[tuple[Figure, ...], dict[str, bytes]]:
    """Figures of a light sheet, and their files by path."""
    return _drawn(f"{chart.atmosphere}/light", ((_ILLUMINANCE, chart), (_LIGHT_COLOUR, chart), (_RATIO, chart)))


def methods_figures(chart: Methods) -> tuple[tuple[Figure, ...], dict[str, bytes]]:
    """Figures of the methods page, light first, and their files by path."""
    return _drawn("methods", ((_LIGHT, chart.course), (_TEMPERATURE, chart.temperatures)))


def _drawn(stem: str, data: tuple[tuple[_Plan, Any], ...]) -> tuple[tuple[Figure, ...], dict[str, bytes]]:
    figures, files = [], {}
    for plan, chart in data:
        path = f"{stem}-{plan.suffix}.svg"
        width, height = (round(inches * _PIXELS_PER_INCH) for inches in plan.size_in)
        figures.append(Figure(path, plan.title, plan.caption, plan.alt, width, height))
        files[path] = plan.draw(chart)
    return tuple(figures), files
