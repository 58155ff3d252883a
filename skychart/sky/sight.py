"""Lines of sight: where they cross the levels, their axes there, and what a level's field sends along them."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from skychart.sky import dipole
from skychart.sky.rays import Crossings

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Lines:
    """Lines of sight: sun, view and azimuth angles [rad], each shape (line,)."""

    solar_zenith: Array
    view_cosine: Array
    relative_azimuth: Array

    def some(self, chosen: NDArray[np.bool_]) -> "Lines":
        """Those that are ``chosen``, (line,)."""
        return Lines(self.solar_zenith[chosen], self.view_cosine[chosen], self.relative_azimuth[chosen])


def along(
    fan: Crossings, ray: int, lines: Lines, chosen: NDArray[np.intp]
) -> tuple[NDArray[np.intp], Array, Array, Array]:
    """Levels crossed (crossing,); cosine of the solar zenith angle and turn of the axes, each (line, crossing)."""
    reached = fan.reached[ray]
    phi, chi = lines.relative_azimuth[chosen, None], lines.solar_zenith[chosen, None]
    cos_there, cosine, sine = dipole.moved(
        fan.cos_turn[ray][reached], fan.sin_turn[ray][reached], np.cos(phi), np.sin(phi), np.cos(chi), np.sin(chi)
    )
    return np.nonzero(reached)[1], cos_there, cosine, sine


def cosine_to_sun(lines: Lines, chosen: NDArray[np.intp], solar_zenith: Array) -> Array:
    """Cosine of the angle between some lines of sight and the sun at ``solar_zenith`` [rad]."""
    cos_theta = lines.view_cosine[chosen]
    across = np.sqrt(1 - cos_theta**2) * np.sin(solar_zenith) * np.cos(lines.relative_azimuth[chosen])
    return cos_theta * np.cos(solar_zenith) + across


def axes(lines: Lines, chosen: NDArray[np.intp]) -> tuple[dipole.Vector, dipole.Vector, dipole.Vector]:
    """Direction of sight, and across it the horizontal axis and the one in its vertical plane."""
    cos_theta = lines.view_cosine[chosen]
    sin_theta = np.sqrt(1 - cos_theta**2)
    phi, chi = lines.relative_azimuth[chosen], lines.solar_zenith[chosen]
    trig = np.cos(phi), np.sin(phi), np.cos(chi), np.sin(chi)
    omega = dipole.sight(cos_theta, sin_theta, *trig)
    vertical = dipole.sight(-sin_theta, cos_theta, *trig)
    cos_phi, sin_phi, cos_chi, sin_chi = trig
    return omega, dipole.Vector(-sin_phi * sin_chi, sin_phi * cos_chi, -cos_phi), vertical


def source_coefficients(h: dipole.Vector, v: dipole.Vector, cosine: Array, sine: Array) -> tuple[Array, Array, Array]:
    """What the four entries at each crossing give to hh, vv and hv; each (line, crossing, entry)."""

    def turned(x: dipole.Vector) -> dipole.Vector:
        rho, alpha = x.rho[:, None], x.alpha[:, None]
        return dipole.Vector(
            np.broadcast_to(x.s[:, None], cosine.shape), cosine * rho + sine * alpha, cosine * alpha - sine * rho
        )

    def product(x: dipole.Vector, y: dipole.Vector) -> Array:
        return np.stack([x.s * y.s, x.s * y.rho + x.rho * y.s, x.rho * y.rho, x.alpha * y.alpha], axis=-1)

    here_h, here_v = turned(h), turned(v)
    return product(here_h, here_h), product(here_v, here_v), product(here_h, here_v)


def along_rho(sight: dipole.Vector, cosine: Array, sine: Array) -> Array:
    """Component of the sight along the rho axis of each crossing, (line, crossing)."""
    return cosine * sight.rho[:, None] + sine * sight.alpha[:, None]
