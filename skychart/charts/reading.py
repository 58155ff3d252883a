"""One direction of one sky, read: the single place where spectra become the numbers that are handed out.

Degree and angle of polarisation are those of the luminance: Stokes I, Q and U are weighted by the luminous
efficiency and the solar spectrum before they are combined. Angles are measured from the horizontal, since
Q > 0 where the electric vector is perpendicular to the vertical plane of the line of sight.
"""

from dataclasses import dataclass
from typing import Protocol

import numpy as np

from skychart.colour.describe import Colours, describe
from skychart.colour.integrate import tristimulus_matrix
from skychart.config import AirSettings

DEFAULT_OBSERVER = "cie-1931-2"
_ROUNDING = 1e-8


class Sky(Protocol):
    """What charts ask of a sky; `skychart.sky.spectral.SpectralSky` is one."""

    @property
    def settings(self) -> AirSettings:
        """The air it was solved for."""

    @property
    def wavelength_nm(self) -> np.ndarray:
        """Wavelengths of all spectra [nm], ascending, shape (wavelength,)."""

    @property
    def ground_albedo(self) -> np.ndarray:
        """Share of the light that the ground returns, shape (wavelength,)."""

    def stokes(
        self,
        solar_elevation_deg: np.ndarray | float,
        view_elevation_deg: np.ndarray | float,
        relative_azimuth_deg: np.ndarray | float,
    ) -> np.ndarray:
        """I, Q, U of the diffuse light per unit solar irradiance [sr⁻¹], shape (..., 3, wavelength)."""

    def beam(self, solar_elevation_deg: np.ndarray | float) -> np.ndarray:
        """Direct transmission, shape (..., wavelength)."""

    def ground_irradiance(self, solar_elevation_deg: np.ndarray | float) -> tuple[np.ndarray, np.ndarray]:
        """Diffuse and direct irradiance of the level ground per unit solar irradiance, (..., wavelength)."""

    def apparent_elevation_deg(self, solar_elevation_deg: np.ndarray | float) -> np.ndarray:
        """Elevation of the refracted sun's centre [deg]; below the horizon, where it would stand."""


@dataclass(frozen=True)
class Reading:
    """Numbers of one direction, or of many: every field has the broadcast shape of the three angles."""

    atmosphere: str
    solar_elevation_deg: np.ndarray
    view_elevation_deg: np.ndarray
    relative_azimuth_deg: np.ndarray
    luminance_cd_m2: np.ndarray
    XYZ: np.ndarray
    xy: np.ndarray
    uv_prime: np.ndarray
    cct_k: np.ndarray
    duv: np.ndarray
    rgb: dict[str, np.ndarray]
    srgb_hex: np.ndarray
    in_gamut: dict[str, np.ndarray]
    polarisation_degree: np.ndarray
    polarisation_angle_deg: np.ndarray


def reading(
    sky: Sky,
    solar_elevation_deg: np.ndarray | float,
    view_elevation_deg: np.ndarray | float,
    relative_azimuth_deg: np.ndarray | float,
    observer: str = DEFAULT_OBSERVER,
) -> Reading:
    """The sky's colour, luminance and polarisation; the three angles [deg] broadcast together.

    `srgb_hex` shows a level, perfectly white card under the same sun and sky as display white.
    """
    angles = np.broadcast_arrays(solar_elevation_deg, view_elevation_deg, relative_azimuth_deg)
    matrix = tristimulus_matrix(sky.wavelength_nm, observer)
    stokes_XYZ = sky.stokes(*angles) @ matrix
    diffuse, direct = sky.ground_irradiance(angles[0])
    card_luminance = ((diffuse + direct) @ matrix)[..., 1] / np.pi
    sun, view, azimuth = angles
    return read_colours(sky.settings.name, sun, view, azimuth, stokes_XYZ, card_luminance)[0]


def read_colours(
    atmosphere: str,
    solar_elevation_deg: np.ndarray,
    view_elevation_deg: np.ndarray,
    relative_azimuth_deg: np.ndarray,
    stokes_XYZ: np.ndarray,
    card_luminance_cd_m2: np.ndarray,
) -> tuple[Reading, Colours]:
    """A `Reading` and its fuller colour description from Stokes I, Q, U as tristimulus values.

    `stokes_XYZ` [cd m⁻²] has shape (..., 3 Stokes, 3 XYZ), `card_luminance_cd_m2` the shape of the angles.
    """
    colours = describe(stokes_XYZ[..., 0, :], card_luminance_cd_m2)
    degree, angle = polarisation(stokes_XYZ[..., 1])
    result = Reading(
        atmosphere=atmosphere,
        solar_elevation_deg=np.asarray(solar_elevation_deg, float),
        view_elevation_deg=np.asarray(view_elevation_deg, float),
        relative_azimuth_deg=np.asarray(relative_azimuth_deg, float),
        luminance_cd_m2=colours.luminance_cd_m2,
        XYZ=colours.XYZ,
        xy=colours.xy,
        uv_prime=colours.uv_prime,
        cct_k=colours.cct_k,
        duv=colours.duv,
        rgb=colours.rgb,
        srgb_hex=colours.srgb_hex,
        in_gamut=colours.in_gamut,
        polarisation_degree=degree,
        polarisation_angle_deg=angle,
    )
    return result, colours


def polarisation(stokes: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """Degree of linear polarisation [0..1] and angle from the horizontal [deg, −90..90] of (..., I Q U).

    The angle is nan where the light is unpolarised. A Q or U below 1e-8 of I is what rounding leaves of 0.
    """
    intensity, *parts = np.moveaxis(np.asarray(stokes, float), -1, 0)
    q, u = (np.where(np.abs(part) > _ROUNDING * intensity, part, 0) for part in parts)
    polarised = np.hypot(q, u)
    degree = np.divide(polarised, intensity, out=np.zeros_like(polarised), where=intensity > 0)
    angle = np.degrees(0.5 * np.arctan2(u, q))
    return degree, np.where(polarised > 0, angle, np.nan)
