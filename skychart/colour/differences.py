"""How far two colours are apart, in three measures.

CIEDE2000: ISO/CIE 11664-6:2014. ΔE_ITP: ITU-R BT.2124-0 (2019), with the ICtCp of ITU-R BT.2100-2 (PQ).
u'v': CIE 1976 chromaticity, CIE 015:2018, section 8.1.
"""

import numpy as np
from numpy.typing import ArrayLike

from skychart.colour.chromaticity import uv_prime, xy
from skychart.colour.spaces import rgb
from skychart.library import colour_science

__all__ = ["delta_e_2000", "delta_e_itp", "delta_uv_prime", "uv_prime"]


def delta_uv_prime(XYZ_1: ArrayLike, XYZ_2: ArrayLike) -> np.ndarray:
    """Distance in CIE 1976 u'v', shape (...), of tristimulus values of shape (..., 3); about 0.004 is just visible."""
    difference = uv_prime(XYZ_2) - uv_prime(XYZ_1)
    return np.hypot(difference[..., 0], difference[..., 1])


def delta_e_2000(XYZ_1: ArrayLike, XYZ_2: ArrayLike, white_XYZ: ArrayLike) -> np.ndarray:
    """CIEDE2000, shape (...), of tristimulus values of shape (..., 3) seen against `white_XYZ`, shape (3,).

    All in one unit; L* is 100 at the luminance of the white. Broadcasts.
    """
    colour = colour_science()
    white = np.asarray(white_XYZ, dtype=float)
    first, second = (
        colour.XYZ_to_Lab(np.asarray(XYZ, dtype=float) / white[1], illuminant=xy(white)) for XYZ in (XYZ_1, XYZ_2)
    )
    return np.asarray(colour.difference.delta_E_CIE2000(first, second))


def delta_e_itp(XYZ_1: ArrayLike, XYZ_2: ArrayLike) -> np.ndarray:
    """ΔE_ITP, shape (...), of absolute tristimulus values [cd/m²] of shape (..., 3), meant for 0 to 10 000 cd/m².

    1 is a difference that the most critical observer can just see. Broadcasts.
    """
    first, second = _itp(XYZ_1), _itp(XYZ_2)
    return 720 * np.sqrt(np.sum((second - first) ** 2, axis=-1))


def _itp(XYZ: ArrayLike) -> np.ndarray:
    """I, T = C_T / 2 and P = C_P of BT.2124."""
    return np.asarray(colour_science().RGB_to_ICtCp(rgb(XYZ, "bt2020"), method="ITU-R BT.2100-2 PQ")) * (1, 0.5, 1)
