"""The numbers most wanted of a sun elevation: what falls on level ground, and how a white card is exposed."""

from dataclasses import dataclass

import numpy as np

from skychart.charts.numbers import fixed, significant, spaced
from skychart.charts.survey import Survey
from skychart.config import NO_HAZE, AirSettings
from skychart.sky.haze_types import HAZE_TYPES

_REFLECTED_LIGHT_CONSTANT = 12.5
"""K of reflected-light exposure meters [cd s m⁻² ISO] (ISO 2720:1974 allows 10.6 to 13.4)."""


@dataclass(frozen=True)
class Fact:
    """A number with its name and unit, written for reading; `unit` may be empty."""

    key: str
    title: str
    text: str
    unit: str


@dataclass(frozen=True)
class Ground:
    """Light on level ground: illuminances [lx], lit : shadow in stops (nan in no light), EV at ISO 100."""

    sun_lx: float
    sky_lx: float
    lit_to_shadow_stops: float
    card_ev100: float
    card_luminance_cd_m2: float

    def facts(self) -> tuple[Fact, ...]:
        """The one line of the head of a sheet."""
        return (
            Fact("sun_lx", "Sun on level ground", spaced(significant(self.sun_lx, 3)), "lx"),
            Fact("sky_lx", "Sky on level ground", spaced(significant(self.sky_lx, 3)), "lx"),
            Fact("stops", "Lit : shadow", spaced(fixed(self.lit_to_shadow_stops, 2)), "stops"),
            Fact("ev100", "White card, EV100", spaced(fixed(self.card_ev100, 1)), ""),
        )


def ground(survey: Survey, sun: int) -> Ground:
    """Light on level ground at the `sun`-th elevation; shadow is what the sky alone lights."""
    sun_lx, sky_lx = float(survey.sun_XYZ[sun, 1]), float(survey.sky_XYZ[sun, 1])
    card = float(survey.card_XYZ[sun, 1])
    return Ground(
        sun_lx=sun_lx,
        sky_lx=sky_lx,
        lit_to_shadow_stops=float(np.log2((sun_lx + sky_lx) / sky_lx)),
        card_ev100=float(np.log2(card * 100 / _REFLECTED_LIGHT_CONSTANT)),
        card_luminance_cd_m2=card,
    )


def air_summary(air: AirSettings) -> str:
    """An atmosphere in one line, from its settings."""
    parts = [
        _haze(air),
        f"ozone {air.ozone_du:g} Dobson units",
        f"water {air.water_cm:g} cm",
        f"nitrogen dioxide {air.no2_du:g} Dobson units" if air.no2_du else "",
        f"{air.pressure_hpa:.4g} hPa",
        _ground(air.ground_albedo),
        "observer at sea level" if air.altitude_km == 0 else f"observer at {air.altitude_km:g} km",
    ]
    return ", ".join(part for part in parts if part)


def _haze(air: AirSettings) -> str:
    """Kind, optical depth and scale height of the haze, its own where the settings leave them to it."""
    if air.haze == NO_HAZE:
        return "no haze"
    kind = HAZE_TYPES[air.haze]
    depth = kind.depth_550 if air.haze_depth_550 is None else air.haze_depth_550
    height = kind.scale_height_km if air.haze_scale_height_km is None else air.haze_scale_height_km
    return f"haze “{air.haze}” of optical depth {depth:g} at 550 nm, scale height {height:g} km"


def _ground(albedo: float | str) -> str:
    return f"ground {albedo}" if isinstance(albedo, str) else f"{100 * albedo:g} % grey ground"
