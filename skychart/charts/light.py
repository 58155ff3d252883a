"""Light sheet: what one atmosphere's sun, sky and ground give to planes, for all elevations of the sun."""

from dataclasses import dataclass

import numpy as np

from skychart.charts.harmonics import illuminance
from skychart.charts.numbers import degrees
from skychart.charts.planes import LEVEL, PLANES, PlaneLight, plane_light
from skychart.charts.sheet import sheet_stem
from skychart.charts.survey import Survey
from skychart.colour.chromaticity import uv_prime
from skychart.colour.describe import Colours, describe, ev100
from skychart.colour.spaces import SPACES, rgb

PARTS = (("sun", "Sun"), ("shadow", "Sky and ground"), ("both", "Sun and sky"))
SUN, SHADOW, BOTH = range(len(PARTS))
FACING = 0
AWAY = next(i for i, plane in enumerate(PLANES) if plane.key == "away")
UNDERSIDE = next(i for i, plane in enumerate(PLANES) if plane.key == "underside")
GREY_CARD = 0.18
"""Luminance factor of the grey card (common practice, no source)."""


@dataclass(frozen=True, eq=False)
class Beam:
    """The sun alone, on a plane facing it; nan where it is not seen.

    `colour`: linear RGB of luminance 1 in each space, (3,), so that colour times `illuminance_lx` [lx] is the light.
    `disc_luminance_cd_m2`: mean over the disc, of solid angle `disc_sr` [sr], flattened by refraction.
    """

    illuminance_lx: float
    xy: np.ndarray
    cct_k: float
    duv: float
    colour: dict[str, np.ndarray]
    disc_luminance_cd_m2: float
    disc_sr: float


@dataclass(frozen=True, eq=False)
class SunLight:
    """Light under one sun on `PLANES`, by `PARTS`.

    `XYZ` [lx] and `rgb` of each space, (plane, part, 3): linear and absolute, white of 1 lx is 1, 1, 1; `xy` (plane,
    part, 2), `cct_k` and `duv` (plane, part), nan where there is none; `ground_share` (plane,) of sky and ground.
    `coefficients`: the nine of sky and ground in each space and in XYZ, (9, 3), of light whose white of 1 cd m⁻² is
    1, 1, 1; `coefficient_error` (plane,): illuminance from them over the true one, less 1; nan where
    no light falls, under a black ground. `facing_stops`,
    `level_stops`: lit to shadow. `card_ev100`, `grey_ev100`: of a level white and grey card.
    """

    atmosphere: str
    stem: str
    label: str
    solar_elevation_deg: float
    apparent_elevation_deg: float
    beam: Beam
    XYZ: np.ndarray
    xy: np.ndarray
    cct_k: np.ndarray
    duv: np.ndarray
    rgb: dict[str, np.ndarray]
    ground_share: np.ndarray
    coefficients: dict[str, np.ndarray]
    coefficient_error: np.ndarray
    facing_stops: float
    level_stops: float
    card_ev100: float
    grey_ev100: float

    @property
    def illuminance_lx(self) -> np.ndarray:
        """Illuminance [lx], (plane, part)."""
        return self.XYZ[..., 1]

    @property
    def uv_prime(self) -> np.ndarray:
        """Chromaticity u'v', (plane, part, 2)."""
        return uv_prime(self.XYZ)


@dataclass(frozen=True, eq=False)
class LightSheet:
    """Everything a light sheet shows: the light under every sun of one atmosphere."""

    atmosphere: str
    suns: tuple[SunLight, ...]

    @property
    def solar_elevation_deg(self) -> np.ndarray:
        """Geometric elevations [deg], (sun,)."""
        return np.array([light.solar_elevation_deg for light in self.suns])


def light_sheet(survey: Survey) -> LightSheet:
    """The light sheet of a survey, suns in their order."""
    light = plane_light(survey)
    shadow = light.sky_XYZ + light.ground_XYZ
    parts = np.stack([light.sun_XYZ, shadow, light.sun_XYZ + shadow], axis=2)
    colours = describe(parts, 1.0, survey.observer)
    beams = describe(survey.beam_XYZ, 1.0, survey.observer)
    return LightSheet(
        survey.air.name,
        tuple(_sun_light(survey, sun, light, colours, beams) for sun in range(len(survey.solar_elevation_deg))),
    )


def _sun_light(survey: Survey, sun: int, light: PlaneLight, colours: Colours, beams: Colours) -> SunLight:
    elevation = float(survey.solar_elevation_deg[sun])
    lux = colours.luminance_cd_m2[sun]
    shadow = lux[:, SHADOW]
    modelled = illuminance(light.coefficients_XYZ[sun], light.normals[sun])[:, 1]
    lit = np.where(shadow > 0, shadow, np.nan)
    stops = np.log2(lux[:, BOTH] / lit)
    card = lux[LEVEL, BOTH] / np.pi
    return SunLight(
        atmosphere=survey.air.name,
        stem=sheet_stem(elevation),
        label=degrees(elevation),
        solar_elevation_deg=elevation,
        apparent_elevation_deg=float(survey.apparent_elevation_deg[sun]),
        beam=_beam(survey, sun, beams),
        XYZ=colours.XYZ[sun],
        xy=colours.xy[sun],
        cct_k=colours.cct_k[sun],
        duv=colours.duv[sun],
        rgb={space: values[sun] for space, values in colours.rgb.items()},
        ground_share=light.ground_XYZ[sun, :, 1] / lit,
        coefficients=_in_all_spaces(light.coefficients_XYZ[sun]),
        coefficient_error=modelled / lit - 1,
        facing_stops=float(stops[FACING]),
        level_stops=float(stops[LEVEL]),
        card_ev100=float(ev100(card)),
        grey_ev100=float(ev100(GREY_CARD * card)),
    )


def _beam(survey: Survey, sun: int, beams: Colours) -> Beam:
    seen = survey.sun_seen(sun)
    lux = float(beams.luminance_cd_m2[sun]) if seen else np.nan
    return Beam(
        illuminance_lx=lux,
        xy=beams.xy[sun],
        cct_k=float(beams.cct_k[sun]),
        duv=float(beams.duv[sun]),
        colour={space: values[sun] / lux for space, values in beams.rgb.items()},
        disc_luminance_cd_m2=lux / float(survey.disc_sr[sun]),
        disc_sr=float(survey.disc_sr[sun]),
    )


def _in_all_spaces(XYZ: np.ndarray) -> dict[str, np.ndarray]:
    return {"XYZ": XYZ} | {space: rgb(XYZ, space) for space in SPACES}
