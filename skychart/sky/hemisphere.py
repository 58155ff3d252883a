"""Irradiance of a level plane by the sky above it: sums over directions.

The directions that do for the whole sky pass by the narrow peak that haze has about the sun. For light that has the
peak, directions about the sun itself take their place within 60 degrees of it, under a window that ends flat.
"""

from collections.abc import Callable

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skychart.sky.grid import Grid

Array = NDArray[np.float64]
Light = Callable[..., Array]

_PEAK_RADIUS = np.radians(60)
_DISTANCES, _TURNS = 8, 6
_SUNS_AT_ONCE = 4  # for the sake of memory


def over_hemisphere(stokes: Light, solar_elevation_deg: ArrayLike, *place: float) -> Array:
    """Sum of radiance times cosine over 16 zenith angles, clustered at the horizon, and 8 azimuths of the half turn.

    ``stokes`` takes solar elevation, view elevation, azimuth [degrees] and ``place``; result (..., wavelength).
    """
    elevation, azimuth, weight = _whole_sky()
    sun = np.asarray(solar_elevation_deg, dtype=float)[..., None, None]
    radiance = stokes(sun, np.degrees(elevation), np.degrees(azimuth), *place)[..., 0, :]
    return np.einsum("...zpl,zp->...l", radiance, weight)


def peak_missed(stokes: Light, solar_elevation_deg: ArrayLike, seen_elevation_deg: ArrayLike, *place: float) -> Array:
    """What ``over_hemisphere`` misses of light with a peak about the sun, (..., wavelength).

    ``seen_elevation_deg``: where the refracted sun stands, shaped as its geometric elevation.
    """
    sun, seen = np.broadcast_arrays(np.asarray(solar_elevation_deg, dtype=float), seen_elevation_deg)
    pairs = np.stack([sun.ravel(), seen.ravel()], axis=1)
    parts = np.split(pairs, range(_SUNS_AT_ONCE, len(pairs), _SUNS_AT_ONCE))
    missed = np.concatenate([_missed(stokes, *part.T, *place) for part in parts])
    return missed.reshape(*sun.shape, -1)


def _missed(stokes: Light, sun_deg: Array, seen_deg: Array, *place: float) -> Array:
    """The same for suns (sun,): the sum over directions about each less that over those of the whole sky."""
    seen = np.radians(seen_deg)[:, None, None]
    elevation, azimuth, weight = _whole_sky()
    cosine = np.sin(elevation) * np.sin(seen) + np.cos(elevation) * np.cos(seen) * np.cos(azimuth)
    coarse = weight * _window(np.arccos(np.clip(cosine, -1, 1)))
    fine_elevation, fine_azimuth, fine = _about(seen)
    total = 0.0
    for sign, view, turned, part in ((1, fine_elevation, fine_azimuth, fine), (-1, elevation, azimuth, coarse)):
        radiance = stokes(sun_deg[:, None, None], np.degrees(view), np.degrees(turned), *place)[..., 0, :]
        total = total + sign * np.einsum("szpl,szp->sl", radiance, part)
    return np.asarray(total)


def _whole_sky() -> tuple[Array, Array, Array]:
    """View elevations (zenith, 1) and azimuths (azimuth,) [rad], and weights times cosine (zenith, azimuth)."""
    quadrature = Grid(zenith=16, azimuth=8)
    cosine, weight = (part[: quadrature.zenith, None] for part in quadrature.cosines(0.0))
    cos_phi, _, phi_weight = quadrature.azimuths()
    return np.arcsin(cosine), np.arccos(cos_phi), np.broadcast_to(cosine * weight * phi_weight, (16, 8))


def _about(seen: Array) -> tuple[Array, Array, Array]:
    """Directions about suns (sun, 1, 1) [rad]: elevation, azimuth and weight times cosine and window.

    Each (sun, distance, turn); of directions below the horizon the weight is 0.
    """
    node, weight = np.polynomial.legendre.leggauss(_DISTANCES)
    place = 0.5 * (node + 1)[:, None]
    distance = _PEAK_RADIUS * place**2
    turn = (np.arange(_TURNS) + 0.5) * np.pi / _TURNS
    sine = np.sin(seen) * np.cos(distance) + np.cos(seen) * np.sin(distance) * np.cos(turn)
    ahead = np.cos(seen) * np.cos(distance) - np.sin(seen) * np.sin(distance) * np.cos(turn)
    azimuth = np.arctan2(np.sin(distance) * np.sin(turn), ahead)
    solid_angle = np.sin(distance) * (_PEAK_RADIUS * place * weight[:, None]) * (2 * np.pi / _TURNS)
    above = np.maximum(sine, 0)
    return np.arcsin(np.minimum(above, 1)), azimuth, above * solid_angle * _window(distance)


def _window(distance: Array) -> Array:
    """1 at the sun, falling flat to 0 at the radius of the peak."""
    return (1 - np.minimum(distance / _PEAK_RADIUS, 1) ** 2) ** 2
