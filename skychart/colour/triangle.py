"""How far a chromaticity lies beyond the triangle of an RGB space, in CIE 1976 u'v'."""

import numpy as np
from numpy.typing import ArrayLike

from skychart.colour.chromaticity import uv_prime
from skychart.colour.coding import xyz_of_rgb
from skychart.colour.spaces import in_gamut, rgb


def distance_beyond(XYZ: ArrayLike, space: str) -> np.ndarray:
    """Shortest distance in u'v', shape (...), between chromaticities of `XYZ` (..., 3) and the triangle of `space`.

    Above 0 outside the triangle, below 0 inside. Its corners are the primaries of the space; ACEScg, whose white is
    not D65, is taken as adapted to D65, see `spaces.rgb`.
    """
    values = np.asarray(XYZ, dtype=float)
    corner = uv_prime(xyz_of_rgb(np.eye(3), space))
    point = uv_prime(values)[..., None, :]
    along = np.roll(corner, -1, axis=0) - corner
    share = np.clip(np.sum((point - corner) * along, axis=-1) / np.sum(along**2, axis=-1), 0, 1)
    apart = point - corner - share[..., None] * along
    distance = np.hypot(apart[..., 0], apart[..., 1]).min(axis=-1)
    return np.where(in_gamut(rgb(values, space)), -distance, distance)


def lowest_over_luminance(XYZ: ArrayLike, space: str) -> np.ndarray:
    """The lowest linear component in `space` over the luminance, shape (...), of `XYZ` (..., 3): 1 for D65."""
    values = np.asarray(XYZ, dtype=float)
    return rgb(values, space).min(axis=-1) / values[..., 1]
