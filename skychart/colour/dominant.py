"""Dominant wavelength and excitation purity: CIE 015:2018, Colorimetry, section 9.3."""

import functools

import numpy as np
from numpy.typing import ArrayLike

from skychart.colour import chromaticity
from skychart.colour.observers import colour_matching_functions


def dominant_wavelength(
    xy: ArrayLike, white_xy: ArrayLike, observer: str = "cie-1931-2"
) -> tuple[np.ndarray, np.ndarray]:
    """Dominant wavelength [nm] and excitation purity, both of shape (...), of chromaticities of shape (..., 2).

    `white_xy`, shape (2,), is the neutral point, inside the spectral locus of `observer`. A purple has the
    complementary wavelength with a minus sign, and its purity is counted to the line of purples. Purity is 0 at the
    neutral point, where the wavelength is nan, and 1 on the locus. Both are nan where the chromaticity is.
    """
    wavelength_nm, angle, border, white = _fan(observer, tuple(np.asarray(white_xy, dtype=float)))
    offset = np.asarray(xy, dtype=float) - white
    turn = np.mod(np.arctan2(offset[..., 1], offset[..., 0]) - angle[0], 2 * np.pi)
    purple = turn > angle[-1] - angle[0]
    on_locus = np.where(purple, turn - np.pi, turn) + angle[0]
    k = np.clip(np.searchsorted(angle, on_locus, side="right") - 1, 0, len(angle) - 2)
    share, reach = _crossing(np.where(purple[..., None], -offset, offset), border[k], border[k + 1])
    nearest_nm = wavelength_nm[k] + share * (wavelength_nm[k + 1] - wavelength_nm[k])
    _, reach_purple = _crossing(offset, border[-1], border[0])
    distance = np.hypot(offset[..., 0], offset[..., 1])
    dominant_nm = np.where(distance > 1e-12, np.where(purple, -nearest_nm, nearest_nm), np.nan)
    return dominant_nm, distance / np.where(purple, reach_purple, reach)


def _crossing(direction: np.ndarray, start: np.ndarray, end: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """Where the line from the origin along `direction` meets the piece from `start` to `end`; all of shape (..., 2).

    The share of the piece that lies before the meeting point, and its distance from the origin.
    """
    along = end - start
    across = _cross(along, direction)
    share = np.clip(-_cross(start, direction) / np.where(across == 0, 1, across), 0, 1)
    meeting = start + share[..., None] * along
    return share, np.hypot(meeting[..., 0], meeting[..., 1])


def _cross(a: np.ndarray, b: np.ndarray) -> np.ndarray:
    return np.asarray(a[..., 0] * b[..., 1] - a[..., 1] * b[..., 0])


@functools.cache
def _fan(observer: str, white: tuple[float, float]) -> tuple[np.ndarray, np.ndarray, np.ndarray, np.ndarray]:
    """The spectral locus seen from the white: wavelength, ascending angle, offset from the white, and the white.

    Wavelengths run downward here, from red to violet, as the angle grows. The ends of the locus, where the chromaticity
    stands still or turns back, are cut at the wavelengths of least and greatest angle: those span the line of purples.
    """
    wavelength_nm, functions = colour_matching_functions(observer)
    wavelength_nm = wavelength_nm[::-1]
    offset = chromaticity.xy(functions[::-1]) - white
    angle = np.unwrap(np.arctan2(offset[:, 1], offset[:, 0]))
    kept = slice(int(np.argmin(angle)), int(np.argmax(angle)) + 1)
    return wavelength_nm[kept], np.maximum.accumulate(angle[kept]), offset[kept], np.array(white)
