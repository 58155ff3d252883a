"""Straight paths through flat layers: what light starting at one boundary counts at another.

Sources are given at the layer boundaries and taken linear in optical depth between them; the sun's beam is taken
exponential. Arrays here have the wavelength first, since the solver works on one matrix a wavelength.
"""

import numpy as np
from numpy.typing import NDArray

from skychart.sky.rays import _segment_weights

Array = NDArray[np.float64]

# A layer whose foot gets less than exp(-3) of the beam at its top holds the edge of the planet's shadow.
_STEEPEST_BEAM = 3.0


def path_weights(scattering: Array, extinction: Array, cosine: Array) -> Array:
    """Weights of sources at boundaries in the radiance at boundaries.

    ``scattering`` (species, layer, wavelength) and ``extinction`` (layer, wavelength): vertical optical depths.
    ``cosine`` of the zenith angle of sight, not 0, shape (direction,). A source is radiance per unit of its species'
    scattering optical depth. Shape (species, wavelength, direction, boundary seen from, boundary of the source).
    """
    slant = 1 / np.abs(cosine)[:, None]
    thickness = extinction.T[:, None] * slant
    near, far = _segment_weights(np.moveaxis(scattering, -1, 1)[:, :, None] * slant, thickness)
    up = (cosine > 0)[:, None]
    arriving = _arriving(thickness, cosine)
    weights = np.zeros((*near.shape[:3], arriving.shape[2], arriving.shape[2]))
    weights[..., :-1] += arriving * np.where(up, near, far)[..., None, :]
    weights[..., 1:] += arriving * np.where(up, far, near)[..., None, :]
    return weights


def beam_averages(scattering: Array, extinction: Array, cosine: Array, beam: Array) -> Array:
    """The beam summed along paths by the scattering optical depth and transmission of each piece.

    As ``path_weights``; ``beam`` (boundary, sun, wavelength): transmission from the sun to each boundary, exponential
    in between. Shape (species, wavelength, direction, boundary seen from, sun).
    """
    slant = 1 / np.abs(cosine)[:, None]
    thickness = extinction.T[:, None] * slant
    light = np.moveaxis(beam, -1, 0)
    top, foot = light[:, 1:], light[:, :-1]
    steep = np.exp(-_STEEPEST_BEAM)
    fall = -np.log(np.clip(foot / np.where(top > 0, top, 1.0), steep, 1.0))[:, None]
    x = thickness[..., None]
    up = (cosine > 0)[:, None, None]
    mean = top[:, None] * np.where(up, np.exp(-fall) * _mean_decay(x - fall), _mean_decay(x + fall))
    arriving = _arriving(thickness, cosine)
    depth = np.moveaxis(scattering, -1, 1)[:, :, None] * slant
    return np.stack([(arriving * one[..., None, :]) @ mean for one in depth])


def from_ground(extinction: Array, cosine: Array) -> Array:
    """Transmission from the ground to every boundary, 0 for directions of sight above the horizon.

    Shape (wavelength, direction, boundary).
    """
    depth = np.concatenate([np.zeros_like(extinction[:1]), np.cumsum(extinction, axis=0)]).T
    return np.exp(-depth[:, None] / np.abs(cosine)[:, None]) * (cosine < 0)[:, None]


def _arriving(thickness: Array, cosine: Array) -> Array:
    """Transmission to each boundary from the nearer end of each layer in sight, 0 for the layers out of sight.

    ``thickness`` (wavelength, direction, layer), along the path; shape (wavelength, direction, boundary, layer).
    """
    depth = np.concatenate([np.zeros_like(thickness[..., :1]), np.cumsum(thickness, axis=-1)], axis=-1)
    layers = thickness.shape[-1]
    boundary, layer = np.arange(layers + 1)[:, None], np.arange(layers)
    up = (cosine > 0)[:, None, None]
    seen = np.where(up, layer >= boundary, layer < boundary)
    near = np.where(up[..., 0], depth[..., :-1], depth[..., 1:])
    return np.exp(-np.abs(near[..., None, :] - depth[..., None])) * seen


def _mean_decay(x: Array) -> Array:
    """Mean of exp(-x t) for t in 0 to 1."""
    small = np.abs(x) < 1e-6
    return np.where(small, 1 - x / 2, -np.expm1(-x) / np.where(small, 1.0, x))
