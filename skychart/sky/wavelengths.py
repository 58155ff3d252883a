"""Wavelengths as they come in from outside, checked against the range of a table or formula."""

import numpy as np
from numpy.typing import ArrayLike

from skychart.errors import InputError


def checked_wavelength(wavelength_nm: ArrayLike, lowest_nm: float, highest_nm: float) -> np.ndarray:
    """`wavelength_nm` [nm] as an array of its own shape; InputError names the first one outside the range."""
    wavelength = np.asarray(wavelength_nm, dtype=float)
    outside = ~((wavelength >= lowest_nm) & (wavelength <= highest_nm))
    if outside.any():
        raise InputError(f"wavelength is {wavelength[outside][0]:g} nm, accepted is {lowest_nm:g} to {highest_nm:g} nm")
    return wavelength
