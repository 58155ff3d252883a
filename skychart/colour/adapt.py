"""Chromatic adaptation: how a colour would look to an eye or camera that is balanced to the light on a white card.

CAT16: Li C. et al. 2017, Comprehensive color solutions: CAM16, CAT16, and CAM16-UCS, Color Res. Appl. 42, 703-718,
doi:10.1002/col.22131, with complete adaptation. It is preferred to Bradford because the light of a low sun or of
twilight, which is strongly coloured, gives no negative responses in it.
"""

import functools

import numpy as np
from numpy.typing import ArrayLike

from skychart.colour.chromaticity import xyz_of_xy
from skychart.colour.observers import D65_XY
from skychart.errors import InputError
from skychart.library import colour_science


def balance(XYZ: ArrayLike, white_XYZ: ArrayLike) -> np.ndarray:
    """Tristimulus values, shape (..., 3), adapted by CAT16 so that `white_XYZ` becomes D65 of its own luminance.

    `white_XYZ`, shape (3,) or broadcasting with `XYZ`: the white card, in the unit of `XYZ`. The scale of Y is kept:
    the card stays as bright as it was. Raises InputError if the card has no luminance or no colour that an eye could
    adapt to (a CAT16 response that is not above 0).
    """
    white = np.asarray(white_XYZ, dtype=float)
    to_response = _response_matrix()
    response = white @ to_response.T
    luminance = white[..., 1:2]
    if not (np.all(luminance > 0) and np.all(response > 0) and np.all(np.isfinite(white))):
        raise InputError(f"white card has XYZ {white_XYZ!r}, accepted is light with three positive CAT16 responses")
    gain = luminance * (to_response @ xyz_of_xy(D65_XY)) / response
    return (np.asarray(XYZ, dtype=float) @ to_response.T * gain) @ np.linalg.inv(to_response).T


@functools.cache
def _response_matrix() -> np.ndarray:
    return np.asarray(colour_science().CHROMATIC_ADAPTATION_TRANSFORMS["CAT16"])
