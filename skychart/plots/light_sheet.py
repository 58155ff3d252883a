"""Light on planes through the day: how much, of which colour, and how far lit and shadow lie apart."""

import numpy as np
from matplotlib.figure import Figure

from skychart.charts.light import BOTH, FACING, SHADOW, SUN, LightSheet
from skychart.charts.light_tables import CHOSEN
from skychart.charts.planes import PLANES
from skychart.plots.course import sun_scale
from skychart.plots.frame import Box, Panel, Scale, figure_svg, log_scale

ILLUMINANCE_IN = (5.8, 8.0)
COLOUR_IN = (5.8, 7.8)
RATIO_IN = (5.8, 5.6)
_CURVES = 3
"""Of the chosen lights; undersides, the last, mostly have the colour of level planes."""

_LEFT_IN, _WIDTH_IN = 0.76, 4.85
_KELVINS = (1000, 2000, 3000, 5000, 10_000, 20_000, 50_000, 100_000)
_CCT = Scale(
    1000,
    100_000,
    _KELVINS,
    tuple(f"{kelvin:,}".replace(",", "\u2009") if kelvin >= 10_000 else f"{kelvin}" for kelvin in _KELVINS),
    "Correlated colour temperature, K (a gap where there is none)",
    log=True,
)
_STOPS = tuple(range(5))
_RATIO = Scale(0, 4, _STOPS, tuple(f"{stop}" for stop in _STOPS), "Lit to shadow, stops")


def illuminance_svg(sheet: LightSheet) -> bytes:
    """Figure of two panels, with the sun and without it, a curve for each plane."""

    def draw(figure: Figure) -> None:
        suns = sheet.solar_elevation_deg
        lux = np.stack([light.illuminance_lx for light in sheet.suns])
        lit = np.where(lux > 0, lux, np.nan)
        top = Panel(
            figure,
            _box(4.45, 3.2),
            sun_scale(suns, labelled=False),
            log_scale(lit[..., BOTH], "Sun and sky, lx", most=9),
        )
        bottom = Panel(figure, _box(1.4, 2.5), sun_scale(suns), _klx_scale(lux[..., SHADOW]))
        for number in range(len(PLANES)):
            top.curve(suns, lit[:, number, BOTH], number)
            bottom.curve(suns, lux[:, number, SHADOW] / 1000, number)
        bottom.key([plane.title for plane in PLANES], (0.0, 2.5), -0.72, 3)

    return figure_svg(ILLUMINANCE_IN, draw)


def colour_svg(sheet: LightSheet) -> bytes:
    """Figure of colour temperature, u' and v' of the sun and of the chosen lights."""

    def draw(figure: Figure) -> None:
        chosen = CHOSEN[:_CURVES]
        lights = ((FACING, SUN), *((plane, part) for _, _, plane, part in chosen))
        uv = np.stack([[light.uv_prime[at] for at in lights] for light in sheet.suns])
        kelvins = np.stack([[light.cct_k[at] for at in lights] for light in sheet.suns])
        panels = (
            (_box(5.1, 2.4), _CCT, kelvins),
            (_box(3.2, 1.4), _fitted(uv[..., 1], "v′"), uv[..., 1]),
            (_box(1.2, 1.5), _fitted(uv[..., 0], "u′"), uv[..., 0]),
        )
        for number, (box, y, values) in enumerate(panels):
            panel = Panel(figure, box, sun_scale(sheet.solar_elevation_deg, number == 2), y)
            for curve in range(len(lights)):
                panel.curve(sheet.solar_elevation_deg, values[:, curve], curve)
        panel.key(("Sun", *(title for _, title, _, _ in chosen)), (0.0, 2.5), -0.72, 2)

    return figure_svg(COLOUR_IN, draw)


def ratio_svg(sheet: LightSheet) -> bytes:
    """Figure of lit to shadow in stops above the exposure of a level card."""

    def draw(figure: Figure) -> None:
        suns = sheet.solar_elevation_deg
        top = Panel(figure, _box(3.3, 1.95), sun_scale(suns, labelled=False), _RATIO)
        for number, key in enumerate(("facing_stops", "level_stops")):
            top.curve(suns, np.array([getattr(light, key) for light in sheet.suns]), number)
        top.key(("facing the sun", "level"), (3.1,), 0.45, 2)
        ev = np.array([[light.card_ev100, light.grey_ev100] for light in sheet.suns])
        bottom = Panel(figure, _box(0.48, 2.4), sun_scale(suns), _ev_scale(ev))
        for number in range(2):
            bottom.curve(suns, ev[:, number], number)
        bottom.key(("white card", "18 % grey card"), (3.1,), 0.45, 2)

    return figure_svg(RATIO_IN, draw)


def _box(bottom_in: float, height_in: float) -> Box:
    return Box(_LEFT_IN, bottom_in, _WIDTH_IN, height_in)


def _klx_scale(lux: np.ndarray) -> Scale:
    """From nothing to the next ten thousand."""
    high = max(10, 10 * int(np.ceil(lux.max() / 10_000)))
    ticks = range(0, high + 1, 5 if high <= 30 else 10)
    return Scale(0, high, ticks, [f"{tick}" for tick in ticks], "Sky and ground without the sun, klx")


def _fitted(values: np.ndarray, title: str) -> Scale:
    """Twentieths around the values."""
    low = np.floor(20 * np.nanmin(values)) / 20
    high = max(np.ceil(20 * np.nanmax(values)) / 20, low + 0.05)
    ticks = np.arange(round(20 * low), round(20 * high) + 1) / 20
    every = 2 if len(ticks) > 6 else 1
    labels = [f"{tick:.2f}" if index % every == 0 else "" for index, tick in enumerate(ticks)]
    return Scale(float(low), float(high), ticks.tolist(), labels, title)


def _ev_scale(ev: np.ndarray) -> Scale:
    low, high = 4 * np.floor(ev.min() / 4), 4 * np.ceil(ev.max() / 4)
    ticks = np.arange(low, max(high, low + 4) + 1, 4)
    labels = [f"{tick:.0f}".replace("-", "−") for tick in ticks]
    return Scale(float(ticks[0]), float(ticks[-1]), ticks.tolist(), labels, "Exposure value at ISO 100, level card")
