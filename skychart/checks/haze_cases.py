"""Air with haze in three cases that are compared with the outside, solved once together.

Each case is some entries on the wavelength axis of one atmosphere, as every wavelength is solved for itself: the
benchmark of an independent Monte Carlo; the reference atmosphere of ASTM G173-03; the air called average. Light goes
straight here: the benchmark has no refraction, and at the suns of the other two it moves the light by less than 1 %.
"""

import dataclasses
from collections.abc import Sequence

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skychart.checks.sphere import benchmark_atmosphere
from skychart.sky import Atmosphere, solve
from skychart.sky.haze import Haze
from skychart.sky.haze_types import haze_of

Array = NDArray[np.float64]

BENCHMARK_NM = (450.0, 550.0)
G173_NM = (400.0, 550.0, 700.0)
AVERAGE_NM = (450.0, 550.0, 650.0)
AVERAGE_DEPTH_550 = 0.15

_SCALE_HEIGHT_KM = 2.0
_BENCHMARK_DEPTH_550, _BENCHMARK_EXPONENT = 0.1, 1.3  # this and the next: header of checks/haze_sphere_mc
_BENCHMARK_ASYMMETRY, _BENCHMARK_ALBEDO, _BENCHMARK_GROUND = 0.7, 0.95, 0.2
_G173_OZONE_DU, _G173_GROUND = 343.8, "sand"
_G173_DEPTH_500, _G173_EXPONENTS = 0.084, (0.964, 1.095)  # exponents below and above 500 nm
# Rural aerosol in few numbers: Bird & Riordan 1986, J. Climate Appl. Meteorol. 25, 87
_RURAL_ASYMMETRY, _RURAL_ALBEDO_400, _RURAL_ALBEDO_BEND = 0.65, 0.945, 0.095


class HazeCases:
    """Light in the three cases, every one at its own few wavelengths."""

    def __init__(self) -> None:
        self._sky = solve(_side_by_side((benchmark_air(), g173_air(G173_NM), average_air())))
        ends = np.cumsum([len(BENCHMARK_NM), len(G173_NM), len(AVERAGE_NM)])
        self._benchmark, self._g173, self._average = (slice(*pair) for pair in zip([0, *ends], ends, strict=False))

    def benchmark_stokes(
        self, solar_elevation_deg: ArrayLike, view_elevation_deg: ArrayLike, relative_azimuth_deg: ArrayLike
    ) -> Array:
        """I, Q, U of the benchmark, (..., 3, 2)."""
        view = solar_elevation_deg, view_elevation_deg, relative_azimuth_deg
        return self._sky.stokes(*view)[..., self._benchmark]

    def g173_radiance(
        self, solar_elevation_deg: ArrayLike, view_elevation_deg: ArrayLike, relative_azimuth_deg: ArrayLike
    ) -> Array:
        """Sky radiance of ASTM G173-03, (..., 3)."""
        view = solar_elevation_deg, view_elevation_deg, relative_azimuth_deg
        return self._sky.stokes(*view)[..., 0, self._g173]

    def g173_ground_irradiance(self, solar_elevation_deg: ArrayLike) -> Array:
        """Light that falls on level ground in ASTM G173-03, (..., 3)."""
        diffuse, direct = self._sky.ground_irradiance(solar_elevation_deg)
        return (diffuse + direct)[..., self._g173]

    @property
    def g173_ground_albedo(self) -> Array:
        """Share of light that the ground of the reference atmosphere returns, (3,)."""
        return self._sky.air.ground_albedo[self._g173]

    def average_ground_irradiance(self, solar_elevation_deg: ArrayLike) -> Array:
        """Light that falls on level ground under average air, (..., 3)."""
        diffuse, direct = self._sky.ground_irradiance(solar_elevation_deg)
        return (diffuse + direct)[..., self._average]


def benchmark_air(wavelength_nm: Sequence[float] = BENCHMARK_NM, depth_550: float = _BENCHMARK_DEPTH_550) -> Atmosphere:
    """The air of the Monte Carlo with haze, `wavelength_nm` some of 450 and 550."""
    clear = benchmark_atmosphere(wavelength_nm)
    wavelength = clear.wavelength_nm
    depth = depth_550 * (wavelength / 550) ** -_BENCHMARK_EXPONENT
    albedo = np.full(len(wavelength), _BENCHMARK_ALBEDO)
    haze = _henyey_greenstein1941(clear.level_altitude_km, depth, albedo, _BENCHMARK_ASYMMETRY)
    return dataclasses.replace(clear, ground_albedo=np.full(len(wavelength), _BENCHMARK_GROUND), haze=haze)


def g173_air(wavelength_nm: ArrayLike) -> Atmosphere:
    """The reference atmosphere, without lines, at any wavelengths from 300 to 830 nm, (wavelength,).

    Where the standard names a model that is not at hand, something near it stands in: for rural aerosol few numbers and
    the phase function of Henyey & Greenstein 1941, for light soil the measured albedo of sand.
    """
    air = Atmosphere.standard(wavelength_nm, _G173_OZONE_DU, _G173_GROUND)
    wavelength = air.wavelength_nm
    exponent = np.where(wavelength < 500, *_G173_EXPONENTS)
    albedo = _RURAL_ALBEDO_400 * np.exp(-_RURAL_ALBEDO_BEND * np.log(wavelength / 400) ** 2)
    depth = _G173_DEPTH_500 * (wavelength / 500) ** -exponent
    haze = _henyey_greenstein1941(air.level_altitude_km, depth, albedo, _RURAL_ASYMMETRY)
    return dataclasses.replace(air, haze=haze, refractivity=0.0)


def average_air() -> Atmosphere:
    """The air called average, without lines and refraction."""
    air = Atmosphere.standard(AVERAGE_NM, haze="average", haze_depth_550=AVERAGE_DEPTH_550)
    return dataclasses.replace(air, refractivity=0.0)


def carried(light: Array, from_nm: Sequence[float], to_nm: Array) -> Array:
    """Light (..., 3) at three wavelengths carried to others, (..., wavelength): its logarithm quadratic in theirs."""
    node, wanted = np.log(from_nm), np.log(to_nm)
    weights = [np.prod([(wanted - other) / (here - other) for other in node if other != here], axis=0) for here in node]
    return np.exp(np.log(light) @ np.array(weights))


def _henyey_greenstein1941(altitude_km: Array, depth: Array, albedo: Array, asymmetry: float) -> Haze:
    """Haze of an optical depth and albedo (wavelength,), at the angles of the tabulated kinds."""
    angle_deg = haze_of("average", altitude_km, [550.0]).scattering_angle_deg
    phase = (1 - asymmetry**2) / (1 + asymmetry**2 - 2 * asymmetry * np.cos(np.radians(angle_deg))) ** 1.5
    falling = np.exp(-altitude_km / _SCALE_HEIGHT_KM)
    share = -np.diff(falling) / (falling[0] - falling[-1])
    return Haze(share[:, None] * depth, albedo, angle_deg, np.tile(phase, (len(depth), 1)))


def _side_by_side(airs: Sequence[Atmosphere]) -> Atmosphere:
    """One atmosphere whose wavelength axis holds those of all; they share levels and scattering angles.

    The first stands first among equals where a solver wants a typical wavelength.
    """
    hazes = [air.haze for air in airs if air.haze is not None]

    def joined(name: str) -> Array:
        return np.concatenate([getattr(air, name) for air in airs], axis=-1)

    return Atmosphere(
        level_altitude_km=airs[0].level_altitude_km,
        wavelength_nm=joined("wavelength_nm"),
        rayleigh_depth=joined("rayleigh_depth"),
        absorption_depth=joined("absorption_depth"),
        depolarisation=joined("depolarisation"),
        ground_albedo=joined("ground_albedo"),
        haze=Haze(
            depth=np.concatenate([haze.depth for haze in hazes], axis=1),
            single_scattering_albedo=np.concatenate([haze.single_scattering_albedo for haze in hazes]),
            scattering_angle_deg=hazes[0].scattering_angle_deg,
            phase_function=np.concatenate([haze.phase_function for haze in hazes]),
        ),
    )
