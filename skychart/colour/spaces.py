"""Linear RGB in four spaces, and encoded sRGB.

Primaries and whites: IEC 61966-2-1:1999 (sRGB); SMPTE EG 432-1:2010 with the white and curve of sRGB (Display P3);
ITU-R BT.2020-2 (2015); Academy S-2014-004 (ACEScg). Matrices follow from them by SMPTE RP 177-1993, unrounded.
Adaptation to the ACES white: Lam K. M. 1985, Metamerism and Colour Constancy, University of Bradford ("Bradford").
"""

import functools
from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from skychart.colour.chromaticity import xyz_of_xy
from skychart.colour.observers import D65_XY
from skychart.errors import InputError
from skychart.library import colour_science

_LIBRARY_NAMES = {"srgb": "sRGB", "display-p3": "Display P3", "bt2020": "ITU-R BT.2020", "acescg": "ACEScg"}
SPACES = tuple(_LIBRARY_NAMES)
"""All have the D65 white but ACEScg, which gets D65 brought to its own white by Bradford adaptation."""


def rgb(XYZ: ArrayLike, space: str) -> np.ndarray:
    """Linear components in `space`, one of `SPACES`, shape (..., 3), of tristimulus values of shape (..., 3).

    Components keep the scale of Y: D65 of luminance L becomes (L, L, L) in every space. Nothing is clipped; a negative
    component means a colour outside the gamut. Raises InputError for an unknown space.
    """
    return np.asarray(XYZ, dtype=float) @ _matrix_from_xyz(space).T


def chromaticities(space: str) -> np.ndarray:
    """CIE 1931 xy of red, green, blue and white of `space`, shape (4, 2). Raises InputError for an unknown space."""
    standard = _standard(space)
    return np.vstack([standard.primaries, standard.whitepoint])


def in_gamut(linear: ArrayLike) -> np.ndarray:
    """Whether linear components of shape (..., 3) belong to a colour inside the triangle of their space, shape (...).

    Only chromaticity counts, not luminance: no component may be negative by more than rounding, 1e-9 of the largest.
    """
    components = np.asarray(linear, dtype=float)
    return np.all(components >= -1e-9 * np.max(np.abs(components), axis=-1, keepdims=True), axis=-1)


def encode_srgb(linear: ArrayLike) -> np.ndarray:
    """Non-linear sRGB signal of linear components (IEC 61966-2-1), any shape; 0 to 1 stays 0 to 1."""
    return np.asarray(colour_science().models.eotf_inverse_sRGB(np.asarray(linear, dtype=float)))


def srgb_hex(XYZ: ArrayLike, display_white_cd_m2: ArrayLike) -> np.ndarray:
    """Text "#rrggbb", array of shape (...), for tristimulus values [cd/m²] of shape (..., 3).

    `display_white_cd_m2` [cd/m²], above 0, is shown as #ffffff; it broadcasts to (...). Negative components become 0;
    a colour with a component above 1 is scaled down whole, so that it keeps its hue. Raises InputError for another
    display white.
    """
    white = np.asarray(display_white_cd_m2, dtype=float)
    if not np.all((white > 0) & np.isfinite(white)):
        raise InputError(f"display white is {display_white_cd_m2!r} cd/m², accepted are finite values above 0")
    with np.errstate(over="ignore"):  # what passes the largest number is scaled down with the rest
        linear = np.nan_to_num(np.maximum(rgb(XYZ, "srgb") / white[..., None], 0))
    linear = linear / np.maximum(linear.max(axis=-1, keepdims=True), 1)
    return _hex_of_bytes(np.rint(encode_srgb(linear) * 255).astype(np.uint8))


@functools.cache
def _matrix_from_xyz(space: str) -> np.ndarray:
    colour, standard = colour_science(), _standard(space)
    to_xyz = colour.normalised_primary_matrix(standard.primaries, standard.whitepoint)
    adaptation = colour.adaptation.matrix_chromatic_adaptation_VonKries(
        xyz_of_xy(D65_XY), xyz_of_xy(standard.whitepoint), transform="Bradford"
    )
    return np.linalg.inv(to_xyz) @ adaptation


def _standard(space: str) -> Any:
    """The space as the object that colour-science works with."""
    if space not in _LIBRARY_NAMES:
        raise InputError(f"unknown space {space!r}; known: {', '.join(SPACES)}")
    return colour_science().RGB_COLOURSPACES[_LIBRARY_NAMES[space]]


def _hex_of_bytes(values: np.ndarray) -> np.ndarray:
    """Bytes of shape (..., 3) as texts of shape (...), by way of character codes."""
    digits = np.frombuffer(b"0123456789abcdef", dtype=np.uint8)
    codes = np.full((*values.shape[:-1], 7), ord("#"), dtype=np.uint8)
    codes[..., 1::2], codes[..., 2::2] = digits[values >> 4], digits[values & 15]
    return codes.view("S7")[..., 0].astype("U7")
