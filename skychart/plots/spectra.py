"""Spectra of the key directions and of the sun, each relative to its value at 560 nm."""

from matplotlib.figure import Figure

from skychart.charts.curves import Spectra
from skychart.plots.frame import Scale, add_axes, curve, figure_svg, key

SIZE_IN = (6.4, 4.1)
_BOX_IN = (0.5, 0.48, 5.75, 3.3)
_LOW, _HIGH = 0.03, 10.0
_X = Scale(360, 830, (400, 500, 600, 700, 800), ("400", "500", "600", "700", "800"), "Wavelength, nm")
_TICKS = (0.03, 0.1, 0.3, 1, 3, 10)
_Y = Scale(_LOW, _HIGH, _TICKS, tuple(f"{tick:g}" for tick in _TICKS), "Spectral radiance, 560 nm = 1", log=True)


def spectra_svg(chart: Spectra) -> bytes:
    """Figure of all curves of a sheet; the scale is the same on every sheet."""

    def draw(figure: Figure) -> None:
        axes = add_axes(figure, _BOX_IN, _X, _Y)
        for number, spectrum in enumerate(chart.curves):
            curve(axes, chart.wavelength_nm, spectrum.relative, number)
        key(axes, _BOX_IN, (3.6, 3.17), [spectrum.title for spectrum in chart.curves])

    return figure_svg(*SIZE_IN, draw)
