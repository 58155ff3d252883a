"""Air with haze in two cases that are compared with the outside, solved once together.

Each case is some entries on the wavelength axis of one atmosphere, as every wavelength is solved for itself: the
benchmark of an independent Monte Carlo, and the air called average. Light goes straight here: the benchmark has no
refraction, and at the suns of the other it moves the light by less than 1 %.
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
AVERAGE_NM = (450.0, 550.0, 650.0)

_SCALE_HEIGHT_KM = 2.0
_BENCHMARK_DEPTH_550, _BENCHMARK_EXPONENT = 0.1, 1.3  # this and the next: header of checks/haze_sphere_mc
_BENCHMARK_ASYMMETRY, _BENCHMARK_ALBEDO, _BENCHMARK_GROUND = 0.7, 0.95, 0.2


class HazeCases:
    """Light in the two cases, each at its own few wavelengths."""

    def __init__(self) -> None:
        self._sky = solve(_side_by_side((benchmark_air(), average_air())))

    def benchmark_stokes(
        self, solar_elevation_deg: ArrayLike, view_elevation_deg: ArrayLike, relative_azimuth_deg: ArrayLike
    ) -> Array:
        """I, Q, U of the benchmark, (..., 3, 2)."""
        view = solar_elevation_deg, view_elevation_deg, relative_azimuth_deg
        return self._sky.stokes(*view)[..., : len(BENCHMARK_NM)]

    def average_ground_irradiance(self, solar_elevation_deg: ArrayLike) -> Array:
        """Light that falls on level ground under average air, (..., 3)."""
        diffuse, direct = self._sky.ground_irradiance(solar_elevation_deg)
        return (diffuse + direct)[..., len(BENCHMARK_NM) :]


def benchmark_air() -> Atmosphere:
    """The air of the Monte Carlo with haze."""
    clear = benchmark_atmosphere(BENCHMARK_NM)
    wavelength = clear.wavelength_nm
    depth = _BENCHMARK_DEPTH_550 * (wavelength / 550) ** -_BENCHMARK_EXPONENT
    albedo = np.full(len(wavelength), _BENCHMARK_ALBEDO)
    haze = henyey_greenstein1941(clear.level_altitude_km, depth, albedo, _BENCHMARK_ASYMMETRY)
    return dataclasses.replace(clear, ground_albedo=np.full(len(wavelength), _BENCHMARK_GROUND), haze=haze)


def average_air() -> Atmosphere:
    """The air called average, without lines and refraction."""
    air = Atmosphere.standard(AVERAGE_NM, haze="average")
    return dataclasses.replace(air, refractivity=0.0)


def henyey_greenstein1941(altitude_km: Array, depth: Array, albedo: Array, asymmetry: float) -> Haze:
    """Haze of scale height 2 km with a depth and albedo (wavelength,), at the angles of the tabulated kinds."""
    angle_deg = haze_of("average", altitude_km, [550.0]).scattering_angle_deg
    phase = (1 - asymmetry**2) / (1 + asymmetry**2 - 2 * asymmetry * np.cos(np.radians(angle_deg))) ** 1.5
    falling = np.exp(-altitude_km / _SCALE_HEIGHT_KM)
    share = -np.diff(falling) / (falling[0] - falling[-1])
    return Haze(share[:, None] * depth, albedo, angle_deg, np.tile(phase, (len(depth), 1)))


def carried(light: Array, from_nm: Sequence[float], to_nm: Array) -> Array:
    """Light (..., 3) at three wavelengths carried to others, (..., wavelength): its logarithm quadratic in theirs."""
    node, wanted = np.log(from_nm), np.log(to_nm)
    weights = [np.prod([(wanted - other) / (here - other) for other in node if other != here], axis=0) for here in node]
    return np.exp(np.log(light) @ np.array(weights))


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
