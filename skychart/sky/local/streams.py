"""Directions of the local solver: zenith angles by Gauss, azimuth by cosine modes, phase functions by Legendre moments.

Light is written I(mu, phi) = sum over modes m of I_m(mu) cos(m phi), with mu the cosine of the zenith angle of the
direction of sight (mu > 0: light on its way down) and phi the azimuth from the sun. By the addition theorem a phase
function with moments chi_l scatters each mode for itself,

    S_m(mu) = 1/2 sum_l (2 l + 1) chi_l Y_lm(mu) integral of Y_lm(mu') I_m(mu') dmu',

with Y_lm = sqrt((l - m)! / (l + m)!) P_l^m (Chandrasekhar 1950, Radiative Transfer, section 48). Zenith nodes are
double-Gauss, Gauss-Legendre on each hemisphere (Sykes 1951, doi:10.1093/mnras/111.4.377).
"""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]

PER_HEMISPHERE = 12
MODES = 16
MOMENTS = 16  # solved for; the last scattering, by the full phase function, takes as many as there are streams


@dataclass(frozen=True, eq=False)
class Streams:
    """Cosines of zenith angle of the directions of sight, upward ones first, and their weights; each (stream,)."""

    cosine: Array
    weight: Array

    @classmethod
    def double_gauss(cls, per_hemisphere: int = PER_HEMISPHERE) -> "Streams":
        """As many nodes above the horizon as below it."""
        node, weight = np.polynomial.legendre.leggauss(per_hemisphere)
        up = 0.5 * (node + 1)
        return cls(np.concatenate([up, -up]), np.tile(0.5 * weight, 2))

    @property
    def moments(self) -> int:
        """How many Legendre moments the nodes carry."""
        return len(self.cosine)


def legendre(modes: int, moments: int, cosine: Array) -> Array:
    """Y_lm at ``cosine`` (direction,), shape (mode, direction, moment); 0 where l < m."""
    sine = np.sqrt(1 - cosine**2)
    values = np.zeros((max(modes, moments) + 1, len(cosine), moments))
    values[0, :, 0] = 1
    for l in range(1, moments):  # noqa: E741
        m = np.arange(l)[:, None]
        older = values[:l, :, l - 2] if l > 1 else 0.0
        values[:l, :, l] = (
            (2 * l - 1) * cosine * values[:l, :, l - 1] - np.sqrt(np.maximum((l - 1.0) ** 2 - m**2, 0)) * older
        ) / np.sqrt(float(l) ** 2 - m**2)
        values[l, :, l] = np.sqrt((2 * l - 1) / (2 * l)) * sine * values[l - 1, :, l - 1]
    return values[:modes]


def scattering_kernel(moments: Array, streams: Streams, view_cosine: Array, modes: int) -> Array:
    """What light at the streams gives to the source at ``view_cosine`` (view,), mode by mode.

    ``moments`` of the phase function (moment, wavelength). Shape (mode, wavelength, view, stream).
    """
    count = len(moments)
    there = legendre(modes, count, view_cosine)[:, None]
    here = legendre(modes, count, streams.cosine) * streams.weight[:, None]
    share = 0.5 * (2 * np.arange(count) + 1) * moments.T
    return (there * share[:, None, :]) @ here[:, None].swapaxes(2, 3)
