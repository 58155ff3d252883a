"""Straight paths through flat layers: what light starting at one boundary counts at another.

Sources are given at the layer boundaries. Between them they follow the cubic spline over optical depth, which is taken
linear in parts of each layer; a species' spline runs from the ground to the top of its highest layer. The sun's beam is
taken exponential within a layer. Arrays here have the wavelength first, as the solver works on one matrix a wavelength.
"""

import numpy as np
from numpy.typing import NDArray

from skychart.sky.interpolation import spline_matrix

Array = NDArray[np.float64]

PARTS = 4  # of each layer

# A layer whose foot gets less than exp(-5) of the beam at its top holds the edge of the planet's shadow.
_STEEPEST_BEAM = 5.0
_SPLINE_NODES = 4  # the fewest that a cubic spline takes
_THINNEST = 1e-9  # layer, as a share of all, that still parts two nodes


def path_weights(scattering: Array, extinction: Array, cosine: Array) -> Array:
    """Weights of sources at boundaries in the radiance at boundaries.

    ``scattering`` (species, layer, wavelength) and ``extinction`` (layer, wavelength): vertical optical depths.
    ``cosine`` of the zenith angle of sight, not 0, shape (direction,). A source is radiance per unit of its species'
    scattering optical depth. Shape (species, wavelength, direction, boundary seen from, boundary of the source).
    """
    slant = 1 / np.abs(cosine)[:, None]
    thickness = extinction.T[:, None] * slant
    arriving = _arriving(thickness, cosine)
    boundaries = arriving.shape[2]
    weights = np.zeros((len(scattering), *arriving.shape[:3], boundaries))
    for species, depth in enumerate(scattering):
        top = top_boundary(depth)
        at_near_end = _layer_weights(depth[:top].T[:, None] * slant, thickness[..., :top], cosine > 0)
        source = _between(extinction[:top])
        sent = at_near_end.transpose(0, 2, 1, 3) @ source
        weights[species, ..., : top + 1] = arriving[..., :top] @ sent.transpose(0, 2, 1, 3)
    return weights


def top_boundary(depth: Array) -> int:
    """Index of the boundary on top of the highest layer where ``depth`` (layer, wavelength) is not 0; 1 if none."""
    return int(np.flatnonzero(depth.any(axis=1)).max(initial=0)) + 1


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


def _layer_weights(scattering: Array, thickness: Array, up: NDArray[np.bool_]) -> Array:
    """Shares of the ends of a layer's parts, the lowest first, in the light it sends to its nearer end.

    Slant depths (wavelength, direction, layer); shape (wavelength, direction, layer, end of part).
    """
    near, far = (share[..., None] * scattering[..., None] / PARTS for share in _end_shares(thickness / PARTS))
    passed = np.exp(-thickness[..., None] * np.arange(PARTS) / PARTS)
    shares = np.zeros((*thickness.shape, PARTS + 1))
    shares[..., :-1] += passed * near
    shares[..., 1:] += passed * far
    return np.where(up[:, None, None], shares, shares[..., ::-1])


def _between(extinction: Array) -> Array:
    """What sources at boundaries count at the ends of each layer's parts, (wavelength, layer, end, boundary)."""
    layers, wavelengths = extinction.shape
    place = np.arange(layers)[:, None] + np.arange(PARTS + 1) / PARTS
    if layers + 1 < _SPLINE_NODES:
        hat = np.maximum(0, 1 - np.abs(place[..., None] - np.arange(layers + 1)))
        return np.broadcast_to(hat, (wavelengths, *hat.shape))
    step = np.maximum(extinction, _THINNEST * extinction.sum(axis=0) + np.finfo(float).tiny)
    depth = np.concatenate([np.zeros_like(step[:1]), np.cumsum(step, axis=0)])
    ends = depth[:-1, None] + step[:, None] * (np.arange(PARTS + 1) / PARTS)[:, None]
    matrices = [spline_matrix(x, q.ravel()) for x, q in zip(depth.T, ends.transpose(2, 0, 1), strict=True)]
    return np.stack(matrices).reshape(wavelengths, layers, PARTS + 1, layers + 1)


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


def _end_shares(x: Array) -> tuple[Array, Array]:
    """Means of (1 - t) exp(-x t) and of t exp(-x t) for t in 0 to 1."""
    small = x < 1e-2
    series = 1 / 2 - x * (1 / 3 - x * (1 / 8 - x / 30))
    both = _mean_decay(x)
    far = np.where(small, series, (both - np.exp(-x)) / np.where(small, 1.0, x))
    return both - far, far
