"""Scattering by molecules in the tensor form: light at a point is four numbers in axes fixed by the sun.

Axes at a point: s toward the sun; rho away from the sun's axis, in the plane of s and the vertical; alpha = s x rho.
The vertical is cos(chi) s + sin(chi) rho. The coherency tensor of light integrated over the sphere has by symmetry the
entries ss, s-rho, rho-rho, alpha-alpha alone, in this order. A direction of sight at zenith angle theta and azimuth phi
from the sun is omega. A source P sends along omega, per unit of scattering optical depth, a Pi P Pi + b tr(P) Pi with
Pi = I - omega omega^T; a and b follow from the depolarisation ratio
(Chandrasekhar 1950, Radiative Transfer, section 18).
"""

from collections.abc import Sequence
from typing import NamedTuple

import numpy as np
from numpy.typing import ArrayLike, NDArray

Array = NDArray[np.float64]

ENTRIES = 4  # ss, s-rho, rho-rho, alpha-alpha
TRACE = (1.0, 0.0, 1.0, 1.0)
FLUXES = 2  # along s and rho
ISOTROPIC = 1 / (8 * np.pi)  # of unpolarised light in all directions alike, on the entries of the projector


class Vector(NamedTuple):
    """Components along s, rho, alpha; each any shape."""

    s: Array
    rho: Array
    alpha: Array

    def of(self, index: int | NDArray[np.intp]) -> "Vector":
        """The vectors at ``index`` of the first axis."""
        return Vector(self.s[index], self.rho[index], self.alpha[index])


class Scatterers(NamedTuple):
    """What scatters at each wavelength: molecules by ``a`` and ``b`` [1/sr], and haze if ``forward`` is there.

    Haze sends (1 + forward x cosine of the scattering angle) / 4 pi, unpolarised: ``forward`` is three times its
    asymmetry. With haze the field has six entries a point: after the tensor's, the flux vector along s and rho.
    """

    a: Array
    b: Array
    forward: Array | None = None

    @property
    def entries(self) -> int:
        """Entries of the field at a point."""
        return ENTRIES if self.forward is None else ENTRIES + FLUXES

    def of(self, wavelengths: range) -> "Scatterers":
        """Some of the wavelengths."""
        some = slice(wavelengths.start, wavelengths.stop)
        return Scatterers(self.a[some], self.b[some], None if self.forward is None else self.forward[some])


def molecular_coefficients(depolarisation: Array) -> tuple[Array, Array]:
    """The coefficients a and b [1/sr] of molecules with the given depolarisation ratio for natural light."""
    anisotropy = (1 - depolarisation) / (1 + depolarisation / 2)
    return 3 * anisotropy / (8 * np.pi), (1 - anisotropy) / (8 * np.pi)


def sight(cos_theta: Array, sin_theta: Array, cos_phi: Array, sin_phi: Array, cos_chi: Array, sin_chi: Array) -> Vector:
    """The direction of sight in the axes at its start; arguments broadcast."""
    return Vector(
        cos_theta * cos_chi + sin_theta * cos_phi * sin_chi,
        cos_theta * sin_chi - sin_theta * cos_phi * cos_chi,
        -sin_theta * sin_phi * np.ones_like(cos_chi),
    )


def moved(
    cos_turn: Array, sin_turn: Array, cos_phi: Array, sin_phi: Array, cos_chi: Array, sin_chi: Array
) -> tuple[Array, Array, Array]:
    """At a point along the ray: cosine of the solar zenith angle, cosine and sine of the turn of its axes about s."""
    cos_there = np.clip(cos_chi * cos_turn + sin_chi * sin_turn * cos_phi, -1, 1)
    outward = sin_chi * cos_turn - cos_chi * sin_turn * cos_phi
    aside = -sin_turn * sin_phi
    length = np.hypot(outward, aside)
    on_axis = length < 1e-12
    scale = 1 / np.where(on_axis, 1.0, length)
    return cos_there, np.where(on_axis, 1.0, outward * scale), np.where(on_axis, 0.0, aside * scale)


def projected_axes(omega: Vector) -> tuple[Vector, Vector, Vector]:
    """The axes s, rho, alpha with their parts along the sight removed."""
    s, rho, alpha = omega
    return (
        Vector(1 - s * s, -s * rho, -s * alpha),
        Vector(-s * rho, 1 - rho * rho, -rho * alpha),
        Vector(-s * alpha, -rho * alpha, 1 - alpha * alpha),
    )


def projector_entries(omega: Vector) -> tuple[Array, Array, Array, Array]:
    """Entries of I - omega omega^T."""
    return 1 - omega.s**2, -omega.s * omega.rho, 1 - omega.rho**2, 1 - omega.alpha**2


def turned_axes(e_rho: Vector, e_alpha: Vector, cosine: Array, sine: Array) -> tuple[Vector, Vector]:
    """The rho and alpha axes of a point whose axes are turned about s by the given angle."""
    return (
        Vector(*(cosine * r + sine * a for r, a in zip(e_rho, e_alpha, strict=True))),
        Vector(*(cosine * a - sine * r for r, a in zip(e_rho, e_alpha, strict=True))),
    )


def tensor_entries(v: Vector, w: Vector) -> tuple[Array, Array, Array, Array]:
    """The four entries of the symmetrised product (v w^T + w v^T) / 2."""
    return v.s * w.s, 0.5 * (v.s * w.rho + v.rho * w.s), v.rho * w.rho, v.alpha * w.alpha


def outputs(entries: Sequence[Array], omega: Vector, count: int, cosine: Array | None = None) -> list[Array]:
    """What light along ``omega`` with the given entries adds to a field of ``count`` entries, and to irradiance.

    ``cosine``: of the angle of incidence for the irradiance, which then comes last.
    """
    radiance = entries[0] + entries[2] + entries[3]
    along = [omega.s, omega.rho] if count > ENTRIES else []
    return [*entries, *(part * radiance for part in along), *([] if cosine is None else [cosine * radiance])]


def trace(entries: ArrayLike, axis: int) -> Array:
    """Trace of a tensor given by its four entries along ``axis``."""
    return np.tensordot(np.asarray(entries), np.asarray(TRACE), axes=([axis], [0]))
