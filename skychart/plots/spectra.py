"""Spectra of the key directions and of the sun, each relative to its value at 560 nm."""

from matplotlib.figure import Figure

from skychart.charts.curves import Spectra
from skychart.plots.frame import Box, Panel, Scale, figure_svg

SIZE_IN = (5.8, 4.7)
_BOX = Box(0.5, 1.15, 5.1, 3.22)
_KEY_COLUMNS_IN = (0.0, 2.6)
_KEY_ROWS = 3
_X = Scale(360, 830, (400, 500, 600, 700, 800), ("400", "500", "600", "700", "800"), "Wavelength, nm")
_TICKS = (0.03, 0.1, 0.3, 1, 3, 10)
_Y = Scale(0.03, 10, _TICKS, tuple(f"{tick:g}" for tick in _TICKS), "Spectral radiance, 560 nm = 1", log=True)


def spectra_svg(chart: Spectra) -> bytes:
    """Figure of all curves of a sheet; the scale is the same on every sheet."""

    def draw(figure: Figure) -> None:
        panel = Panel(figure, _BOX, _X, _Y)
        for number, spectrum in enumerate(chart.curves):
            panel.curve(chart.wavelength_nm, spectrum.relative, number)
        panel.key([spectrum.title for spectrum in chart.curves], _KEY_COLUMNS_IN, -0.56, _KEY_ROWS)

    return figure_svg(SIZE_IN, draw)
