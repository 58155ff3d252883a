"""Irradiance of a level plane by the sky above it: sums over directions.

The directions that do for the whole sky pass by the narrow peak that haze has about the sun. But what haze sends from
the beam is its phase function times the light that the line of sight meets, and that light is as smooth as the rest:
it is interpolated between the same directions, and within 90 degrees of the sun summed with the phase function over
many more, under a window that ends flat (product integration).
"""

from collections.abc import Callable
from functools import cache

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skychart.sky.grid import Grid

Array = NDArray[np.float64]
Light = Callable[..., Array]
Phase = Callable[[Array], Array]

_WHOLE_SKY = Grid(zenith=16, azimuth=8)
_PEAK_RADIUS = np.radians(90)
_DISTANCES, _TURNS = 24, 24


def over_hemisphere(stokes: Light, solar_elevation_deg: ArrayLike, *place: float) -> Array:
    """Sum of radiance times cosine over 16 zenith angles, clustered at the horizon, and 8 azimuths of the half turn.

    ``stokes`` takes solar elevation, view elevation, azimuth [degrees] and ``place``; result (..., wavelength).
    """
    cosine, azimuth, weight = _whole_sky()
    sun = np.asarray(solar_elevation_deg, dtype=float)[..., None, None]
    radiance = stokes(sun, np.degrees(np.arcsin(cosine))[:, None], np.degrees(azimuth), *place)[..., 0, :]
    return np.einsum("...zpl,zp->...l", radiance, weight)


def peak_missed(
    met: Light, phase: Phase, solar_elevation_deg: ArrayLike, seen_elevation_deg: ArrayLike, *place: float
) -> Array:
    """What ``over_hemisphere`` misses of light with a peak about the sun, (..., wavelength).

    ``met`` gives what ``phase``, a function of the cosine of the angle from the sun, multiplies, (..., wavelength), of
    the same arguments as ``stokes`` above; ``seen_elevation_deg``: where the refracted sun stands, shaped as its
    geometric elevation.
    """
    sun, seen = np.broadcast_arrays(np.asarray(solar_elevation_deg, dtype=float), seen_elevation_deg)
    cosine, azimuth, _ = _whole_sky()
    light = met(sun[..., None, None], np.degrees(np.arcsin(cosine))[:, None], np.degrees(azimuth), *place)
    light = light.reshape(sun.size, len(cosine) * len(azimuth), -1)
    missed = [
        np.einsum("dl,dl->l", here, _missing(phase, float(height)))
        for here, height in zip(light, np.radians(seen).ravel(), strict=True)
    ]
    return np.array(missed).reshape(*sun.shape, -1)


def _missing(phase: Phase, seen: float) -> Array:
    """Weights that light met in directions of the whole sky lacks, (direction, wavelength); sun at ``seen`` [rad]."""
    cosine, azimuth, weight = _whole_sky()
    across = np.sqrt(1 - cosine**2)[:, None] * np.cos(azimuth)
    to_sun = (cosine[:, None] * np.sin(seen) + across * np.cos(seen)).ravel()
    taken = (weight.ravel() * _window(np.arccos(np.clip(to_sun, -1, 1))))[:, None] * phase(to_sun)
    distance, height, turned, part = _about(seen)
    up, around = _toward_height(height), _toward_azimuth(turned)
    between = (up[:, :, None] * around[:, None, :]).reshape(len(part), -1)
    return np.asarray(between.T @ (part[:, None] * phase(np.cos(distance))) - taken)


@cache
def _whole_sky() -> tuple[Array, Array, Array]:
    """Sines of view elevations (zenith,), azimuths (azimuth,) [rad], and weights times cosine (zenith, azimuth)."""
    cosine, weight = (part[: _WHOLE_SKY.zenith] for part in _WHOLE_SKY.cosines(0.0))
    cos_phi, _, phi_weight = _WHOLE_SKY.azimuths()
    return cosine, np.arccos(cos_phi), np.outer(cosine * weight * phi_weight, np.ones(len(cos_phi)))


def _about(seen: float) -> tuple[Array, Array, Array, Array]:
    """Directions above the horizon about a sun at ``seen`` [rad], each (direction,).

    Distance from it, sine of the elevation, azimuth, and weight times cosine and window.
    """
    node, weight = np.polynomial.legendre.leggauss(_DISTANCES)
    place = 0.5 * (node + 1)[:, None]
    distance = _PEAK_RADIUS * place**2
    turn = (np.arange(_TURNS) + 0.5) * np.pi / _TURNS
    sine = np.sin(seen) * np.cos(distance) + np.cos(seen) * np.sin(distance) * np.cos(turn)
    ahead = np.cos(seen) * np.cos(distance) - np.sin(seen) * np.sin(distance) * np.cos(turn)
    azimuth = np.arctan2(np.sin(distance) * np.sin(turn), ahead)
    solid_angle = np.sin(distance) * (_PEAK_RADIUS * place * weight[:, None]) * (2 * np.pi / _TURNS)
    above = sine > 0
    distance = np.broadcast_to(distance, sine.shape)[above]
    return distance, sine[above], azimuth[above], (sine * solid_angle)[above] * _window(distance)


def _toward_height(sine: Array) -> Array:
    """Weights of the view elevations of the whole sky at others, given by their sines: (n, zenith).

    A polynomial in the square root of the sine, in which those elevations are nodes of a Gaussian rule.
    """
    node = np.sqrt(_whole_sky()[0])
    basis = np.polynomial.legendre.legvander(2 * node - 1, len(node) - 1)
    wanted = np.polynomial.legendre.legvander(2 * np.sqrt(np.minimum(sine, 1)) - 1, len(node) - 1)
    return np.linalg.solve(basis.T, wanted.T).T


def _toward_azimuth(azimuth: Array) -> Array:
    """Weights of the azimuths of the whole sky at others [rad], (n, azimuth): cosine waves through them."""
    node = _whole_sky()[1]
    wave = np.arange(len(node))
    return np.cos(azimuth[:, None] * wave) @ np.linalg.inv(np.cos(node[:, None] * wave))


def _window(distance: Array) -> Array:
    """1 at the sun, falling flat to 0 at the radius of the peak."""
    return (1 - np.minimum(distance / _PEAK_RADIUS, 1) ** 2) ** 2
