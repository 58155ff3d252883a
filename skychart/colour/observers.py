"""Colour-matching functions by the names that settings use, and the neutral chromaticity everything refers to.

CIE 1931 and 1964: CIE 015:2018, Colorimetry, tables 5 and 6; CIE 2015: CIE 170-2:2015. As kept in colour-science.
"""

import functools
from typing import Any

import numpy as np

from skychart.errors import InputError
from skychart.library import colour_science

D65_XY = np.array([0.3127, 0.3290])
"""White of sRGB, Display P3 and BT.2020 (IEC 61966-2-1, ITU-R BT.2020-2), and the neutral that colours are named by."""
D65_XY.setflags(write=False)

_LIBRARY_NAMES = {
    "cie-1931-2": "CIE 1931 2 Degree Standard Observer",
    "cie-1964-10": "CIE 1964 10 Degree Standard Observer",
    "cie-2015-2": "CIE 2015 2 Degree Standard Observer",
    "cie-2015-10": "CIE 2015 10 Degree Standard Observer",
}
OBSERVERS = tuple(_LIBRARY_NAMES)


@functools.cache
def colour_matching_functions(observer: str) -> tuple[np.ndarray, np.ndarray]:
    """Wavelength [nm], shape (n,), every nanometre, and the functions x̄, ȳ, z̄ of `observer` there, shape (n, 3).

    1931 and 1964 cover 360 to 830 nm, 2015 covers 390 to 830 nm. The arrays are read-only.
    Raises InputError unless `observer` is one of `OBSERVERS`.
    """
    functions = library_observer(observer)
    wavelength_nm, values = np.array(functions.wavelengths), np.array(functions.values)
    wavelength_nm.setflags(write=False)
    values.setflags(write=False)
    return wavelength_nm, values


def library_observer(observer: str) -> Any:
    """The same functions as the object that colour-science works with. Raises InputError as above."""
    if observer not in _LIBRARY_NAMES:
        raise InputError(f"unknown observer {observer!r}; known: {', '.join(OBSERVERS)}")
    return colour_science().MSDS_CMFS[_LIBRARY_NAMES[observer]]
