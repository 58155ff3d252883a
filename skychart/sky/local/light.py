"""What an observer in flat air sees besides the light scattered once: one exact scattering of a solved field.

The light that falls on a point is the field's, plus the beam its scaled haze let pass but the true haze does not,
scaled beam minus true beam, about the sun's direction as the peak scatters it. All of it is scattered by the full phase
function and gathered along the line of sight with the true extinction. From the full field this gives the multiply
scattered light; from the closure's, what the closure makes of it.
"""

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skychart.sky.dipole import molecular_coefficients
from skychart.sky.haze import Haze
from skychart.sky.local import tensor
from skychart.sky.local.air import FlatAir, unscaled
from skychart.sky.local.field import FlatField
from skychart.sky.local.paths import beam_averages, from_ground, path_weights
from skychart.sky.local.streams import scattering_kernel
from skychart.sky.local.system import HAZE, MOLECULES

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class FlatLight:
    """Light scattered more than once, seen along ``view_cosine`` (view,), cosines of the zenith angle of sight.

    ``tensor`` (sun, view, entry, wavelength): the molecules' tensor averaged along the line of sight (entries as in
    FlatField). ``haze`` (sun, view, mode, wavelength) [1/sr]: light sent by the haze, in cosine modes of azimuth.
    ``peak`` (sun, view, wavelength) [1/sr]: what the phase function of ``remainder`` at the angle from the sun
    multiplies to give the light that the haze scatters from the beam's remainder, which its peak has blurred.
    ``ground`` (sun, view, wavelength) [1/sr]: the lit ground.
    """

    air: FlatAir
    remainder: Haze
    view_cosine: Array
    tensor: Array
    haze: Array
    peak: Array
    ground: Array

    def stokes(self, sun: ArrayLike, view: ArrayLike, relative_azimuth: ArrayLike) -> Array:
        """I, Q, U [1/sr] per unit solar irradiance, (..., 3, wavelength); light of haze and ground is unpolarised.

        ``sun`` and ``view`` are indices, ``relative_azimuth`` [rad] from the sun's; they broadcast to (...). Q > 0
        where the electric vector is perpendicular to the vertical plane of sight.
        """
        suns, views = np.broadcast_arrays(np.asarray(sun, np.intp), np.asarray(view, np.intp))
        azimuth = np.asarray(relative_azimuth, dtype=float)
        cosine, cos_sun = self.view_cosine[views], np.cos(self.air.solar_zenith_angle[suns])
        a, b = molecular_coefficients(self.air.depolarisation)
        light = tensor.stokes(self.tensor[suns, views], cosine, azimuth, a, b)
        waves = np.cos(azimuth[..., None] * np.arange(self.haze.shape[2]))
        by_haze = (waves[..., None, :] @ self.haze[suns, views])[..., 0, :]
        angle = cosine * cos_sun + np.sqrt((1 - cosine**2) * (1 - cos_sun**2)) * np.cos(azimuth)
        by_peak = self.peak[suns, views] * self.remainder.phase_at(angle)
        light[..., 0, :] += by_haze + by_peak + self.ground[suns, views]
        return light


def one_scattering(field: FlatField, view_cosine: Array, boundary: int = 0) -> FlatLight:
    """One exact scattering of ``field`` as seen from ``boundary`` along ``view_cosine`` (view,), not 0."""
    air, streams = field.air, field.streams
    optics = unscaled(air, streams.moments)
    weights = path_weights(optics.scattering, optics.extinction, view_cosine)[:, :, :, boundary]
    passed, kept = (
        beam_averages(optics.scattering, optics.extinction, view_cosine, beam)[:, :, :, boundary]
        for beam in (field.optics.beam, air.beam)
    )
    remainder = passed - kept
    kernel = scattering_kernel(optics.moments, streams, view_cosine, len(field.moments))
    incident = field.at_streams
    source = kernel @ incident.reshape(*incident.shape[:3], -1)
    source = source.reshape(*source.shape[:3], *incident.shape[3:])
    haze = (weights[HAZE][..., None, field.hazy] @ source)[..., 0, :].transpose(3, 2, 0, 1)
    molecules = np.einsum("wvk,knew->nvew", weights[MOLECULES], field.tensor, optimize=True)
    molecules += np.einsum("wvn,en->nvew", remainder[MOLECULES], tensor.of_beam(np.cos(air.solar_zenith_angle)))
    below = from_ground(optics.extinction, view_cosine)[:, :, boundary]
    return FlatLight(
        air=air,
        remainder=field.optics.remainder,
        view_cosine=view_cosine,
        tensor=molecules,
        haze=haze,
        peak=np.moveaxis(remainder[HAZE], 0, 2).swapaxes(0, 1) / (4 * np.pi),
        ground=np.einsum("wv,nw->nvw", below, air.ground_albedo / np.pi * field.ground),
    )
