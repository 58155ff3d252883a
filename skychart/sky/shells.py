"""Spherical shells: the solver's own levels, and straight rays through them.

A straight ray is known by its tangent altitude (the altitude of its point nearest to the planet's centre, which may be
behind the observer or underground) and the signed distance s from that point: r^2 = (R + tangent)^2 + s^2.
All products of r are taken as products of altitude differences, so that a planet a thousand times the earth's size
(the flat case) loses no digits.
"""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from skychart.sky.atmosphere import Atmosphere
from skychart.sky.interpolation import monotone_cubic, spline_matrix

Array = NDArray[np.float64]

_UPPER_KM = 80.0
_SPLINE_NODES = 4  # the fewest that a cubic spline takes
_PATH_NODES, _PATH_WEIGHTS = np.polynomial.legendre.leggauss(3)


def level_altitudes(top_km: float, count: int) -> Array:
    """Altitudes [km] of ``count`` levels from the ground to ``top_km``, closest together at the ground.

    One level stands for all that lies above 80 km, some 1e-5 of the air.
    """
    above = top_km > _UPPER_KM
    x = np.linspace(0.0, 1.0, count - above)
    levels = min(top_km, _UPPER_KM) * (0.12 * x + 0.88 * x**2.4)
    return np.append(levels, top_km) if above else levels


def subdivide(altitude_km: Array, parts: int) -> Array:
    """Each interval of ``altitude_km`` cut into ``parts``; the given altitudes stay, at every ``parts``-th place."""
    fraction = np.arange(parts) / parts
    inner = altitude_km[:-1, None] + np.diff(altitude_km)[:, None] * fraction
    return np.append(inner.ravel(), altitude_km[-1])


@dataclass(frozen=True, eq=False)
class Shells:
    """Optical depths of thin layers. Altitudes [km], shape (layer + 1,); depths (layer, wavelength).

    ``scattering_depth`` has one array for each scatterer: molecules, then haze if the air has any.
    """

    altitude_km: Array
    scattering_depth: tuple[Array, ...]
    extinction_depth: Array
    decay_per_km: Array  # of the molecular density within each layer, shape (layer,)
    refractivity: Array  # refractive index less one at each boundary, shape (layer + 1,)
    planet_radius_km: float

    @classmethod
    def of(cls, air: Atmosphere, altitude_km: Array, unscattered: Array | float = 0.0) -> "Shells":
        """The layers of ``air`` redistributed to the boundaries ``altitude_km`` [km], shape (layer + 1,).

        ``unscattered``: the part of what the haze scatters that is taken as not scattered at all, (wavelength,).
        """
        rayleigh = redistribute(air, air.rayleigh_depth, altitude_km)
        absorption = redistribute(air, air.absorption_depth, altitude_km)
        extinction = rayleigh + absorption
        scattering: tuple[Array, ...] = (rayleigh,)
        if air.haze is not None:
            depth = redistribute(air, air.haze.depth, altitude_km)
            scattered = air.haze.single_scattering_albedo
            scattering = rayleigh, depth * scattered * (1 - unscattered)
            extinction = extinction + depth * (1 - scattered * unscattered)
        log_density = _log_density(air, altitude_km)
        return cls(
            altitude_km=altitude_km,
            scattering_depth=scattering,
            extinction_depth=extinction,
            decay_per_km=-np.diff(log_density) / np.diff(altitude_km),
            refractivity=air.refractivity * np.exp(log_density - log_density[0]),
            planet_radius_km=air.planet_radius_km,
        )

    def slant_factors(self, tangent_km: Array, lowest: int = 0) -> Array:
        """Path through each layer on one side of the tangent point, weighted by density, over the vertical one.

        ``tangent_km`` has any shape (...); the result has shape (..., layer) from layer ``lowest`` upward, 0 where the
        layer lies below the tangent.
        """
        (factors,) = self.weighted_paths(tangent_km, (self.decay_per_km,), lowest)
        return factors

    def weighted_paths(self, tangent_km: Array, decays_per_km: Sequence[Array], lowest: int = 0) -> list[Array]:
        """``slant_factors`` for each of some decays within the layers, each (layer,), along the same rays."""
        tangent = np.asarray(tangent_km, dtype=float)[..., None]
        bottom, top = self.altitude_km[lowest:-1], self.altitude_km[lowest + 1 :]
        start = distance_from_tangent(np.maximum(bottom, tangent), tangent, self.planet_radius_km)
        end = distance_from_tangent(np.maximum(top, tangent), tangent, self.planet_radius_km)
        nearest = self.planet_radius_km + tangent
        half, middle = 0.5 * (end - start), 0.5 * (end + start)
        decays = [decay[lowest:] for decay in decays_per_km]
        totals = [np.zeros(half.shape) for _ in decays]
        for node, weight in zip(_PATH_NODES, _PATH_WEIGHTS, strict=True):
            distance = middle + half * node
            rise = tangent + distance**2 / (np.sqrt(nearest**2 + distance**2) + nearest) - bottom
            for total, decay in zip(totals, decays, strict=True):
                total += weight * np.exp(-decay * rise)
        return [
            total * half / vertical_weight(decay, top - bottom) for total, decay in zip(totals, decays, strict=True)
        ]


def tangent_altitude(altitude_km: Array, cos_zenith: Array, planet_radius_km: float) -> Array:
    """Tangent altitude [km] of the ray from ``altitude_km`` at zenith angle arccos(``cos_zenith``); broadcasts."""
    sine = np.sqrt(np.maximum(0.0, 1 - np.square(cos_zenith)))
    return altitude_km * sine - planet_radius_km * np.square(cos_zenith) / (1 + sine)


def distance_from_tangent(altitude_km: Array, tangent_km: Array, planet_radius_km: float) -> Array:
    """Distance [km] along a ray from its tangent point to ``altitude_km`` >= ``tangent_km``; broadcasts."""
    return np.sqrt(np.maximum(0.0, (altitude_km - tangent_km) * (2 * planet_radius_km + altitude_km + tangent_km)))


def redistribute(air: Atmosphere, depth: Array, altitude_km: Array) -> Array:
    """Depths between ``altitude_km``, from the column below each level of ``air``."""
    column = np.concatenate([np.zeros((1, depth.shape[1])), np.cumsum(depth, axis=0)])
    return np.diff(monotone_cubic(air.level_altitude_km, column, altitude_km)[0], axis=0)


def _log_density(air: Atmosphere, altitude_km: Array) -> Array:
    """Logarithm of the molecules' density at ``altitude_km``, up to a constant: smooth through the layers' means."""
    mean = (air.rayleigh_depth / np.diff(air.level_altitude_km)[:, None]).mean(axis=1)
    log = np.log(np.maximum(mean, 1e-12 * mean.max()))
    middle = 0.5 * (air.level_altitude_km[1:] + air.level_altitude_km[:-1])
    if len(log) < _SPLINE_NODES:
        return np.interp(altitude_km, middle, log)
    return spline_matrix(middle, altitude_km) @ log


def vertical_weight(decay: Array, thickness: Array) -> Array:
    """Integral of exp(-decay z) over a layer."""
    x = decay * thickness
    small = np.abs(x) < 1e-5
    return thickness * np.where(small, 1 - x / 2, -np.expm1(-x) / np.where(small, 1.0, x))
