"""How far two colours are apart, in three measures.

CIEDE2000: ISO/CIE 11664-6:2014. ΔE_ITP: ITU-R BT.2124-0 (2019), with the ICtCp of ITU-R BT.2100-2 (PQ).
u'v': CIE 1976 chromaticity, CIE 015:2018, section 8.1.
"""

import numpy as np
from numpy.typing import ArrayLike

from skychart.colour.chromaticity import uv_prime, xy
from skychart.colour.spaces import rgb
from skychart.library import colour_science

__all__ = [
    "delta_e_2000",
    "delta_e_2000_of_lab",
    "delta_e_itp",
    "delta_e_of_itp",
    "delta_uv_prime",
    "itp",
    "lab",
    "uv_prime",
]


def delta_uv_prime(XYZ_1: ArrayLike, XYZ_2: ArrayLike) -> np.ndarray:
    """Distance in CIE 1976 u'v', shape (...), of tristimulus values of shape (..., 3); about 0.004 is just visible."""
    difference = uv_prime(XYZ_2) - uv_prime(XYZ_1)
    return np.hypot(difference[..., 0], difference[..., 1])


def delta_e_2000(XYZ_1: ArrayLike, XYZ_2: ArrayLike, white_XYZ: ArrayLike) -> np.ndarray:
    """CIEDE2000, shape (...), of tristimulus values of shape (..., 3) seen against `white_XYZ`, shape (3,).

    All in one unit; L* is 100 at the luminance of the white. Broadcasts.
    """
    return delta_e_2000_of_lab(lab(XYZ_1, white_XYZ), lab(XYZ_2, white_XYZ))


def lab(XYZ: ArrayLike, white_XYZ: ArrayLike) -> np.ndarray:
    """CIE L*a*b*, shape (..., 3), of tristimulus values seen against `white_XYZ`, shape (3,), in one unit."""
    white = np.asarray(white_XYZ, dtype=float)
    return np.asarray(colour_science().XYZ_to_Lab(np.asarray(XYZ, dtype=float) / white[1], illuminant=xy(white)))


def delta_e_2000_of_lab(lab_1: np.ndarray, lab_2: np.ndarray) -> np.ndarray:
    """CIEDE2000, shape (...), of L*a*b* of shape (..., 3); for many comparisons with the same colours."""
    return np.asarray(colour_science().difference.delta_E_CIE2000(lab_1, lab_2))


def delta_e_itp(XYZ_1: ArrayLike, XYZ_2: ArrayLike) -> np.ndarray:
    """ΔE_ITP, shape (...), of absolute tristimulus values [cd/m²] of shape (..., 3), meant for 0 to 10 000 cd/m².

    1 is a difference that the most critical observer can just see. Broadcasts.
    """
    return delta_e_of_itp(itp(XYZ_1), itp(XYZ_2))


def delta_e_of_itp(itp_1: np.ndarray, itp_2: np.ndarray) -> np.ndarray:
    """ΔE_ITP, shape (...), of ITP of shape (..., 3)."""
    return 720 * np.sqrt(np.sum((itp_2 - itp_1) ** 2, axis=-1))


def itp(XYZ: ArrayLike) -> np.ndarray:
    """I, T = C_T / 2 and P = C_P of BT.2124, shape (..., 3), of absolute tristimulus values [cd/m²]."""
    return np.asarray(colour_science().RGB_to_ICtCp(rgb(XYZ, "bt2020"), method="ITU-R BT.2100-2 PQ")) * (1, 0.5, 1)
