"""The sun outside the atmosphere: its spectrum and its disc.

Spectrum: Coddington O. M. et al. 2021, Geophys. Res. Lett. 48, e2020GL091709, doi:10.1029/2020GL091709, and 2023,
Earth and Space Science 10, e2022EA002637, doi:10.1029/2022EA002637 (TSIS-1 HSRS, version 2).
"""

import math

import numpy as np
from numpy.typing import ArrayLike

from skychart.data import load_table
from skychart.sky.wavelengths import checked_wavelength

SOLAR_DISC_DIAMETER_DEG = 0.533
"""Mean angular diameter of the sun, twice arcsin(6.957e8 m / 1 au) (nominal solar radius, IAU 2015 resolution B3)."""

SOLAR_DISC_SOLID_ANGLE_SR = 2 * math.pi * (1 - math.cos(math.radians(SOLAR_DISC_DIAMETER_DEG / 2)))
"""Solid angle of that disc [sr], 6.796e-5."""


def solar_irradiance(wavelength_nm: ArrayLike) -> np.ndarray:
    """Spectral irradiance [W m⁻² nm⁻¹] on a plane facing the sun, at 1 au, outside the atmosphere.

    `wavelength_nm`: wavelength in air [nm], 300 to 1100, any shape; the result has the same shape. Values are means
    over 1 nm about whole nanometres, linear in between. Raises InputError outside the range.
    """
    columns = load_table("solar_tsis1_hsrs_v2_1nm").columns
    tabulated_nm = columns["wavelength_nm"]
    wavelength = checked_wavelength(wavelength_nm, tabulated_nm[0], tabulated_nm[-1])
    return np.asarray(np.interp(wavelength, tabulated_nm, columns["irradiance_w_m2_nm"]))
