"""Molecules in flat air: their tensor in axes fixed by the vertical z and the sun's azimuth x.

P is the sphere-integrated coherency tensor. About the vertical it falls into three parts that never mix, one an azimuth
mode: zz and (xx + yy)/2 in mode 0, xz in mode 1, (xx - yy)/2 in mode 2. Flat transport along a direction keeps the
direction, so the light along it follows from the average of P over the path, and its sum over azimuth is closed.
Sources per unit of molecular scattering optical depth are a Pi P Pi + b tr(P) Pi, as in ``skychart.sky.dipole``.
"""

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]

MODES = 3
_ENTRIES = (slice(0, 2), slice(2, 3), slice(3, 4), slice(4, 4))  # of azimuth modes 0, 1, 2 and all higher ones


def entries_of(mode: int) -> slice:
    """Which of zz, (xx + yy)/2, xz, (xx - yy)/2 belong to an azimuth mode."""
    return _ENTRIES[min(mode, MODES)]


def gathered(mode: int, cosine: Array, a: Array, b: Array) -> Array:
    """The tensor that the light from a source P brings, summed over azimuth.

    ``cosine`` (direction,); ``a``, ``b`` (wavelength,). Shape (wavelength, direction, entry out, entry in).
    """
    c2, s2 = cosine**2, 1 - cosine**2
    if mode == 0:
        dipolar = np.array([[s2**2, c2 * s2], [0.5 * c2 * s2, 0.5 * (1 + c2**2)]])
        plain = np.array([[s2, 2 * s2], [0.5 * (1 + c2), 1 + c2]])
    else:
        dipolar = np.array([[s2 * (0.5 + c2)]]) if mode == 1 else np.array([[c2 + 0.25 * s2**2]])
        plain = np.zeros_like(dipolar)
    dipolar, plain = dipolar.transpose(2, 0, 1), plain.transpose(2, 0, 1)
    return 2 * np.pi * (a[:, None, None, None] * dipolar + b[:, None, None, None] * plain)


def emitted(mode: int, cosine: Array, a: Array, b: Array) -> Array:
    """Radiance mode that a source P sends along ``cosine`` (direction,): (wavelength, direction, entry)."""
    c2, s2 = cosine**2, 1 - cosine**2
    if mode == 0:
        dipolar, plain = np.array([s2, 1 + c2]), np.array([2 * np.ones_like(c2), 4 * np.ones_like(c2)])
    else:
        dipolar = np.array([-2 * cosine * np.sqrt(s2)]) if mode == 1 else np.array([-s2])
        plain = np.zeros_like(dipolar)
    return a[:, None, None] * dipolar.T + b[:, None, None] * plain.T


def unpolarised(mode: int, cosine: Array) -> Array:
    """The tensor that unpolarised light of one radiance mode brings, summed over azimuth: (direction, entry)."""
    c2, s2 = cosine**2, 1 - cosine**2
    if mode == 0:
        return np.pi * np.array([s2, 0.5 * (1 + c2)]).T
    return np.pi * np.array([-0.5 * cosine * np.sqrt(s2) if mode == 1 else -0.25 * s2]).T


def of_beam(cos_sun: Array) -> Array:
    """The tensor (entry, sun) of a beam of unit flux from zenith angle arccos(``cos_sun``), (sun,)."""
    c2, s2 = cos_sun**2, 1 - cos_sun**2
    return np.array([0.5 * s2, 0.25 * (1 + c2), -0.5 * cos_sun * np.sqrt(s2), -0.25 * s2])


def stokes(tensor: Array, cosine: Array, azimuth: Array, a: Array, b: Array) -> Array:
    """I, Q, U of the light from path-averaged tensors ``tensor`` (..., entry, wavelength).

    ``cosine`` of the zenith angle of sight and ``azimuth`` from the sun [rad] have shape (...). Q > 0 where the
    electric vector is perpendicular to the vertical plane of sight. Shape (..., 3, wavelength).
    """
    c, phi = np.asarray(cosine)[..., None], np.asarray(azimuth)[..., None]
    s = np.sqrt(1 - c**2)
    zz, mean, xz, half = np.moveaxis(tensor, -2, 0)
    across = mean - half * np.cos(2 * phi)
    upright = c**2 * (mean + half * np.cos(2 * phi)) + s**2 * zz - 2 * c * s * np.cos(phi) * xz
    mixed = s * np.sin(phi) * xz - c * half * np.sin(2 * phi)
    plain = 2 * b * (zz + 2 * mean)
    return np.stack([a * (across + upright) + plain, a * (across - upright), -2 * a * mixed], axis=-2)
