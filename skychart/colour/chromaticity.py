"""Chromaticity coordinates.

CIE 015:2018, Colorimetry, sections 7.3 (xy) and 8.1 (u'v'); CIE 1960 uv for colour temperatures.
"""

import numpy as np
from numpy.typing import ArrayLike


def xy(XYZ: ArrayLike) -> np.ndarray:
    """CIE 1931 chromaticity, shape (..., 2), of tristimulus values of shape (..., 3); nan unless their sum is > 0."""
    scaled = _scaled(XYZ)
    return _quotient(scaled[..., :2], scaled.sum(axis=-1))


def uv_prime(XYZ: ArrayLike) -> np.ndarray:
    """CIE 1976 chromaticity u'v', shape (..., 2), of tristimulus values of shape (..., 3); nan as for `xy`."""
    scaled = _scaled(XYZ)
    return _quotient(scaled[..., :2] * (4, 9), scaled @ np.array([1.0, 15.0, 3.0]))


def uv_1960(XYZ: ArrayLike) -> np.ndarray:
    """CIE 1960 chromaticity uv, shape (..., 2): u' and two thirds of v'; nan as for `xy`."""
    return uv_prime(XYZ) * (1, 2 / 3)


def xyz_of_xy(chromaticity: ArrayLike) -> np.ndarray:
    """Tristimulus values with Y = 1, shape (..., 3), of CIE 1931 chromaticities with y > 0, shape (..., 2)."""
    x, y = np.moveaxis(np.asarray(chromaticity, dtype=float), -1, 0)
    return np.stack([x / y, np.ones_like(y), (1 - x - y) / y], axis=-1)


def _scaled(XYZ: ArrayLike) -> np.ndarray:
    """Divided by the largest of the three, so that neither deep night nor the solar disc over- or underflows."""
    values = np.asarray(XYZ, dtype=float)
    largest = np.max(np.abs(values), axis=-1, keepdims=True)
    return values / np.where(largest > 0, largest, 1)


def _quotient(numerator: np.ndarray, denominator: np.ndarray) -> np.ndarray:
    positive = denominator > 0
    quotient = numerator / np.where(positive, denominator, 1)[..., None]
    return np.where(positive[..., None], quotient, np.nan)
