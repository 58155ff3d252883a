"""The numbers most wanted of a sun elevation: what falls on level ground, and how a white card is exposed."""

from dataclasses import dataclass

import numpy as np

from skychart.charts.numbers import fixed, significant, spaced
from skychart.charts.survey import Survey

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


def air_summary(ozone_du: float, ground_albedo: float, altitude_km: float) -> str:
    """An atmosphere in one line, from its settings."""
    altitude = "at sea level" if altitude_km == 0 else f"at {altitude_km:g} km"
    ground_share = f"{100 * ground_albedo:g} % grey ground"
    return f"air and ozone, {ozone_du:g} Dobson units, {ground_share}, observer {altitude}"
