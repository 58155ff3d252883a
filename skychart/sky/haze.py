"""Haze: small particles that absorb a little and scatter mostly forward, unpolarised."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from skychart.errors import InputError

Array = NDArray[np.float64]

_MEAN_TOLERANCE = 0.02


@dataclass(frozen=True, eq=False)
class Haze:
    """Haze in the layers of an atmosphere.

    ``depth``: vertical extinction optical depth of each layer, shape (layer, wavelength), 0 to 100.
    ``single_scattering_albedo``: scattering over extinction, shape (wavelength,), 0 to 1.
    ``scattering_angle_deg``: [deg] ascending from 0 to 180, shape (angle,).
    ``phase_function``: mean 1 over the sphere, shape (wavelength, angle); brought to that mean exactly when within 2 %.

    Raises InputError.
    """

    depth: Array
    single_scattering_albedo: Array
    scattering_angle_deg: Array
    phase_function: Array

    def __post_init__(self) -> None:
        depth, albedo, angle, phase = (
            np.asarray(value, dtype=float)
            for value in (self.depth, self.single_scattering_albedo, self.scattering_angle_deg, self.phase_function)
        )
        if depth.ndim != 2 or not np.all((depth >= 0) & (depth <= 100)):
            raise InputError("haze depth: accepted is an array (layer, wavelength) of 0 to 100")
        if albedo.shape != depth.shape[1:] or not np.all((albedo >= 0) & (albedo <= 1)):
            raise InputError(f"haze single_scattering_albedo: accepted are {depth.shape[1]} values of 0 to 1")
        if angle.ndim != 1 or angle[0] != 0 or angle[-1] != 180 or not np.all(np.diff(angle) > 0):
            raise InputError("haze scattering_angle_deg: accepted are angles ascending from 0 to 180 degrees")
        if phase.shape != (depth.shape[1], len(angle)) or not np.all(phase > 0):
            raise InputError(
                f"haze phase_function: accepted are positive values of shape {(depth.shape[1], len(angle))}"
            )
        mean = _sphere_mean(angle, phase)
        if not np.all(np.abs(mean - 1) <= _MEAN_TOLERANCE):
            raise InputError(
                f"haze phase_function has a mean of {mean.min():.3f} over the sphere, accepted: 0.98 to 1.02"
            )
        object.__setattr__(self, "depth", depth)
        object.__setattr__(self, "single_scattering_albedo", albedo)
        object.__setattr__(self, "scattering_angle_deg", angle)
        object.__setattr__(self, "phase_function", phase / mean[:, None])

    def phase_at(self, cos_scattering_angle: Array) -> Array:
        """Phase function (..., wavelength) at angles given by their cosine (...): its logarithm is linear in angle."""
        angle = np.degrees(np.arccos(np.clip(cos_scattering_angle, -1, 1)))
        place = np.interp(angle, self.scattering_angle_deg, np.arange(len(self.scattering_angle_deg)))
        low = np.minimum(place.astype(np.intp), len(self.scattering_angle_deg) - 2)
        part = (place - low)[..., None]
        log = np.log(self.phase_function.T)
        return np.exp(log[low] + part * (log[low + 1] - log[low]))

    @property
    def asymmetry(self) -> Array:
        """Mean cosine of the scattering angle, (wavelength,)."""
        return self.moments(2)[1]

    @property
    def peak(self) -> Array:
        """Part of the scattered light that a solution with two moments takes for unscattered, (wavelength,).

        The square of the asymmetry: Joseph, Wiscombe & Weinman 1976, The delta-Eddington approximation,
        doi:10.1175/1520-0469(1976)033<2452:TDEAFR>2.0.CO;2.
        """
        return self.asymmetry**2

    def moments(self, count: int) -> Array:
        """Legendre moments: mean of P x P_l over the sphere, (count, wavelength): 1, the asymmetry, and so on."""
        angle, weight = _fine_angles(self.scattering_angle_deg)
        phase = self.phase_at(np.cos(angle))
        legendre = np.polynomial.legendre.legvander(np.cos(angle), count - 1)
        moments = legendre.T @ (weight[:, None] * phase)
        return moments / moments[0]


def _sphere_mean(angle_deg: Array, phase: Array) -> Array:
    angle, weight = _fine_angles(angle_deg)
    place = np.interp(np.degrees(angle), angle_deg, np.arange(len(angle_deg)))
    low = np.minimum(place.astype(np.intp), len(angle_deg) - 2)
    log = np.log(phase)
    return np.exp(log[:, low] + (place - low) * (log[:, low + 1] - log[:, low])) @ weight


def _fine_angles(angle_deg: Array) -> tuple[Array, Array]:
    """Angles [rad] and weights (sum 1) that integrate over the sphere, eight Gauss nodes in each tabulated interval."""
    node, weight = np.polynomial.legendre.leggauss(8)
    edges = np.radians(angle_deg)
    half = 0.5 * np.diff(edges)[:, None]
    angle = (0.5 * (edges[1:] + edges[:-1])[:, None] + half * node).ravel()
    return angle, (half * weight).ravel() * np.sin(angle) / 2
