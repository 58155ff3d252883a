"""Correlated colour temperature and distance from the Planckian locus, or neither.

Definitions: Ohno Y. 2013, Practical Use and Calculation of CCT and Duv, LEUKOS 10, 47-55,
doi:10.1080/15502724.2014.839020: nearest point of the Planckian locus in the CIE 1960 diagram, and the distance to it,
positive above the locus. He interpolates over temperature in two ways and switches between them; here the locus is
interpolated over reciprocal temperature, which needs no switch and goes on smoothly to infinite temperature.
"""

import functools

import numpy as np
from numpy.typing import ArrayLike

from skychart.colour.chromaticity import uv_1960
from skychart.colour.observers import library_observer
from skychart.library import colour_science

LOWEST_K = 1_000.0
HIGHEST_K = 100_000.0
LARGEST_DUV = 0.05

_MIRED = np.arange(2.0, 1011, 2)  # 1e6 / T of the points that the locus is interpolated from
_BLOCK = 8192  # colours compared with all those points at a time; bounds the memory


def cct_duv(XYZ: ArrayLike, observer: str = "cie-1931-2") -> tuple[np.ndarray, np.ndarray]:
    """Correlated colour temperature [K] and Duv, both of shape (...), of tristimulus values of shape (..., 3).

    Both are nan where the notion has no meaning: temperature above 100 000 K (bluer than a black body ever gets, as
    most of a clear sky is) or below 1000 K, |Duv| above 0.05, or no light. `observer` is the one that `XYZ` belongs to;
    its locus is used, though the notion is standardised for CIE 1931 alone.
    """
    locus = _planckian_locus(observer)
    uv = uv_1960(XYZ)
    flat = uv.reshape(-1, 2)
    result = np.full((2, len(flat)), np.nan)
    for start in range(0, len(flat), _BLOCK):
        result[:, start : start + _BLOCK] = _nearest_on_locus(flat[start : start + _BLOCK], locus)
    cct, duv = result.reshape(2, *uv.shape[:-1])
    return cct, duv


def planckian_locus(observer: str = "cie-1931-2") -> tuple[np.ndarray, np.ndarray]:
    """Reciprocal temperature [MK⁻¹], evenly spaced, shape (n,), and CIE 1960 uv, (n, 2), that `cct_duv` works with."""
    return _MIRED, _planckian_locus(observer)


def _nearest_on_locus(uv: np.ndarray, locus: np.ndarray) -> np.ndarray:
    """Temperature and Duv, shape (2, n), of chromaticities of shape (n, 2)."""
    result = np.full((2, len(uv)), np.nan)
    # |uv - locus|² without the |uv|² that is the same for all points
    nearest = np.argmin(np.sum(locus**2, axis=1) - 2 * uv @ locus.T, axis=1)
    distance = np.hypot(*(uv - locus[nearest]).T)
    near = np.flatnonzero(distance < LARGEST_DUV + 0.01)  # also leaves out nan
    middle = np.clip(nearest[near], 1, len(locus) - 2)
    mired, duv = _foot_of_perpendicular(uv[near], middle, locus)
    meaningful = (mired >= 1e6 / HIGHEST_K) & (mired <= 1e6 / LOWEST_K) & (np.abs(duv) <= LARGEST_DUV)
    result[0, near[meaningful]] = 1e6 / mired[meaningful]
    result[1, near[meaningful]] = duv[meaningful]
    return result


def _foot_of_perpendicular(uv: np.ndarray, middle: np.ndarray, locus: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """Reciprocal temperature [MK⁻¹] and signed distance of the nearest point of the locus, each of shape (n,).

    The locus is a parabola through the points before, at and behind `middle`, p = p0 + s a + s² b. Newton's method
    finds the s where the line to the colour stands at right angles to the curve; three steps leave nothing to gain.
    """
    before, centre, behind = locus[middle - 1], locus[middle], locus[middle + 1]
    a, b = (behind - before) / 2, (behind + before) / 2 - centre
    s = np.zeros(len(uv))
    for _ in range(3):
        offset = centre + s[:, None] * (a + s[:, None] * b) - uv
        tangent = a + 2 * s[:, None] * b
        slope = np.sum(tangent**2 + 2 * b * offset, axis=1)
        s = np.clip(s - np.sum(offset * tangent, axis=1) / slope, -2, 2)
    offset = uv - (centre + s[:, None] * (a + s[:, None] * b))
    tangent = a + 2 * s[:, None] * b
    above = np.sign(tangent[:, 0] * offset[:, 1] - tangent[:, 1] * offset[:, 0])
    return _MIRED[middle] + s * (_MIRED[1] - _MIRED[0]), above * np.hypot(*offset.T)


@functools.cache
def _planckian_locus(observer: str) -> np.ndarray:
    return np.asarray(colour_science().temperature.CCT_to_uv_Planck1900(1e6 / _MIRED, library_observer(observer)))
