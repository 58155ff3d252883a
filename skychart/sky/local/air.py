"""Flat air for the local solver: each place taken as flat, its direct light as it truly arrives."""

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from skychart.sky.haze import Haze

Array = NDArray[np.float64]

_ISOTROPIC = 1e-6
_SMOOTH_MOMENTS = 128  # of light scattered twice, forward by the peak and then by all the haze
_LEAST = 1e-3


@dataclass(frozen=True, eq=False)
class FlatAir:
    """Layers of molecules, absorbing gas and haze over a Lambert ground, under many suns at once.

    ``rayleigh_depth``, ``absorption_depth``: vertical optical depth of each layer from the ground up, shape (layer,
    wavelength). ``haze``: its depths in the same layers. ``depolarisation``, ``ground_albedo``: (wavelength,).
    ``solar_zenith_angle`` [rad]: (sun,). ``beam``: transmission from the sun to each layer boundary, the ground first,
    (layer + 1, sun, wavelength); it need not be that of flat layers, and may be 0 in the planet's shadow.
    ``scaled_beam``: the same where the haze's optical depth is reduced by the part ``Haze.peak`` of its scattering,
    as the closure has it. Trusted to be in range: they come from a checked Atmosphere.
    """

    rayleigh_depth: Array
    absorption_depth: Array
    haze: Haze
    depolarisation: Array
    ground_albedo: Array
    solar_zenith_angle: Array
    beam: Array
    scaled_beam: Array


@dataclass(frozen=True, eq=False)
class Optics:
    """What the equations of transfer need of the air, with a part of the haze's scattering taken for unscattered.

    ``scattering`` (species, layer, wavelength), molecules first, and ``extinction`` (layer, wavelength): vertical
    optical depths. ``moments`` (moment, wavelength) of the haze's phase function. ``beam`` (boundary, sun, wavelength).
    ``remainder``: phase function that the beam's unscattered remainder is scattered by.
    """

    scattering: Array
    extinction: Array
    moments: Array
    beam: Array
    remainder: Haze


def through_peak(haze: Haze, moments: int, fraction: Array) -> Haze:
    """The haze with the phase function of light that its forward peak has scattered before.

    The peak is the ``fraction`` (wavelength,) taken for unscattered where ``moments`` moments are kept: it has moments
    of 1 below ``moments``, and chi_l / fraction from there. Nakajima & Tanaka 1988, Algorithms for radiative intensity
    calculations, doi:10.1016/0022-4073(88)90031-3, correct secondary scattering by the same products.
    """
    chi = haze.moments(_SMOOTH_MOMENTS)
    degree = np.arange(_SMOOTH_MOMENTS)[:, None]
    peak = np.clip(chi / np.maximum(fraction, _ISOTROPIC), 0, 1)
    series = (2 * degree + 1) * chi * np.where(degree < moments, 1, peak)
    phase = np.polynomial.legendre.legval(np.cos(np.radians(haze.scattering_angle_deg)), series)
    return replace(haze, phase_function=np.maximum(phase, _LEAST))


def unscaled(air: FlatAir, moments: int) -> Optics:
    """The air as it is, with so many moments of the phase function."""
    return _optics(air, air.haze.moments(moments), np.zeros_like(air.depolarisation), air.beam)


def delta_m(air: FlatAir, moments: int) -> Optics:
    """The haze's forward peak, all that ``moments`` moments cannot hold, taken for unscattered.

    Wiscombe 1977, The delta-M method, doi:10.1175/1520-0469(1977)034<1408:TDMRYA>2.0.CO;2.
    """
    values = air.haze.moments(moments + 1)
    fraction = np.maximum(values[-1], 0)
    whole = air.haze.peak
    power = np.where(whole > _ISOTROPIC, fraction / np.maximum(whole, _ISOTROPIC), 0)
    lit = air.beam > 0
    beam = np.where(lit, air.beam * (air.scaled_beam / np.where(lit, air.beam, 1)) ** power, 0)
    return _optics(air, (values[:-1] - fraction) / (1 - fraction), fraction, beam)


def delta_eddington(air: FlatAir) -> Optics:
    """The haze with two moments, the square of its asymmetry taken for unscattered."""
    asymmetry = air.haze.moments(2)[1]
    moments = np.array([np.ones_like(asymmetry), asymmetry / (1 + asymmetry)])
    return _optics(air, moments, air.haze.peak, air.scaled_beam)


def _optics(air: FlatAir, moments: Array, fraction: Array, beam: Array) -> Optics:
    haze = air.haze.depth * air.haze.single_scattering_albedo * (1 - fraction)
    absorbed = air.absorption_depth + air.haze.depth * (1 - air.haze.single_scattering_albedo)
    scattering = np.stack([air.rayleigh_depth, haze])
    remainder = through_peak(air.haze, len(moments), fraction)
    return Optics(scattering, scattering.sum(axis=0) + absorbed, moments, beam, remainder)
