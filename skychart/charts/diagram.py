"""Fixed landmarks of the CIE 1976 u'v' diagram: spectrum locus, gamuts, daylight locus and D65.

Sources: spectrum locus from the CIE 1931 2° observer; primaries from ITU-R BT.709-6, SMPTE RP 431-2 with D65
(Display P3) and ITU-R BT.2020-2; daylight locus from CIE 15:2018, equations 4.6 and 4.7.
"""

import functools
from dataclasses import dataclass

import numpy as np

from skychart.library import colour_science

_PRIMARIES = {
    "srgb": ((0.640, 0.330), (0.300, 0.600), (0.150, 0.060)),
    "display-p3": ((0.680, 0.320), (0.265, 0.690), (0.150, 0.060)),
    "bt2020": ((0.708, 0.292), (0.170, 0.797), (0.131, 0.046)),
}
_D65_XY = (0.3127, 0.3290)
_LOCUS_NM = np.array([380, *range(420, 641, 10), 660, 700])
_MARKED_NM = (460, 480, 500, 520, 560, 600)
_DAYLIGHT_K = np.array([4000, 4500, 5000, 5500, 6000, 6500, 7000, 8000, 10000, 13000, 18000, 25000], float)


@dataclass(frozen=True)
class Landmarks:
    """Curves and points as u'v', shape (n, 2); `gamuts` are closed triangles by name of the space."""

    locus: np.ndarray
    marked: tuple[tuple[str, float, float], ...]
    gamuts: dict[str, np.ndarray]
    daylight: np.ndarray
    d65: np.ndarray


@functools.cache
def landmarks() -> Landmarks:
    """The landmarks, computed once."""
    observer = colour_science().MSDS_CMFS["CIE 1931 2 Degree Standard Observer"]
    locus = _uv_of_XYZ(np.array([observer[float(nm)] for nm in _LOCUS_NM]))
    marked = _uv_of_XYZ(np.array([observer[float(nm)] for nm in _MARKED_NM]))
    return Landmarks(
        locus=np.vstack([locus, locus[:1]]),
        marked=tuple((str(nm), float(u), float(v)) for nm, (u, v) in zip(_MARKED_NM, marked, strict=True)),
        gamuts={name: uv_of_xy(np.array([*corners, corners[0]])) for name, corners in _PRIMARIES.items()},
        daylight=uv_of_xy(_daylight_xy(_DAYLIGHT_K)),
        d65=uv_of_xy(np.array(_D65_XY)),
    )


def uv_of_xy(xy: np.ndarray) -> np.ndarray:
    """u'v' of chromaticities xy, shape (..., 2) (CIE 15:2018, equation 8.24)."""
    x, y = np.moveaxis(np.asarray(xy, float), -1, 0)
    scale = -2 * x + 12 * y + 3
    return np.stack([4 * x / scale, 9 * y / scale], axis=-1)


def _uv_of_XYZ(XYZ: np.ndarray) -> np.ndarray:
    return uv_of_xy(XYZ[:, :2] / XYZ.sum(axis=1, keepdims=True))


def _daylight_xy(cct_k: np.ndarray) -> np.ndarray:
    """Daylight locus from 4000 K to 25 000 K."""
    inverse = 1e3 / cct_k
    warm = np.polynomial.polynomial.polyval(inverse, (0.244063, 0.09911, 2.9678, -4.6070))
    cool = np.polynomial.polynomial.polyval(inverse, (0.237040, 0.24748, 1.9018, -2.0064))
    x = np.where(cct_k <= 7000, warm, cool)
    return np.stack([x, -3.0 * x**2 + 2.870 * x - 0.275], axis=-1)
