"""Ozone: how much a molecule absorbs, and how the molecules are spread over the air.

Cross-section: Gorshelev V. et al. 2014, Atmos. Meas. Tech. 7, 609-624, doi:10.5194/amt-7-609-2014, and Serdyuchenko A.
et al. 2014, Atmos. Meas. Tech. 7, 625-636, doi:10.5194/amt-7-625-2014.
Profile: Anderson G. P. et al. 1986, AFGL Atmospheric Constituent Profiles, AFGL-TR-86-0110, US standard.
"""

import numpy as np
from numpy.typing import ArrayLike

from skychart.data import load_table
from skychart.errors import InputError
from skychart.sky.air import column_of_layers
from skychart.sky.wavelengths import checked_wavelength

DOBSON_UNIT = 2.6867e20  # molecules m⁻²: 0.01 mm of gas at 0 °C and 1 atm


def ozone_cross_section(wavelength_nm: ArrayLike) -> np.ndarray:
    """Absorption cross-section of ozone [m² per molecule] at 223 K, the temperature of the ozone layer.

    `wavelength_nm`: wavelength in air [nm], 300 to 830, any shape; the result has the same shape. Measured means over
    1 nm about whole nanometres, linear in between; noise below zero (between 360 and 400 nm) is taken as zero.
    Raises InputError outside the range.
    """
    columns = load_table("ozone_cross_section_serdyuchenko_1nm").columns
    tabulated_nm = columns["wavelength_nm"]
    wavelength = checked_wavelength(wavelength_nm, tabulated_nm[0], tabulated_nm[-1])
    cross_section_cm2 = np.maximum(columns["sigma_223K"], 0)
    return np.asarray(np.interp(wavelength, tabulated_nm, cross_section_cm2)) * 1e-4


def ozone_layers(altitude_km: ArrayLike, ozone_du: float) -> np.ndarray:
    """Molecules of ozone above a square metre [m⁻²] in each layer, shape (level - 1,).

    `altitude_km`: ascending borders of the layers, 0 to 100 [km], shape (level,). `ozone_du`: all of the ozone between
    0 and 100 km, 0 or more [Dobson units]. It is spread as in the AFGL US standard atmosphere, the logarithm of the
    density linear between the levels of that profile, so a layer's share does not depend on where the other borders
    are. Raises InputError otherwise.
    """
    altitude = np.asarray(altitude_km, dtype=float)
    columns = load_table("atmosphere_profiles_afgl").columns
    rows = columns["profile"] == "us_standard"
    tabulated_km, density = columns["z_km"][rows], columns["o3_cm3"][rows]
    if altitude.ndim != 1 or altitude.size < 2 or not np.all(np.diff(altitude) > 0):
        raise InputError(f"altitude has shape {altitude.shape}, accepted are two or more ascending altitudes")
    if not (altitude[0] >= tabulated_km[0] and altitude[-1] <= tabulated_km[-1]):
        raise InputError(f"altitude goes from {altitude[0]:g} to {altitude[-1]:g} km, accepted is 0 to 100 km")
    if not (np.isfinite(ozone_du) and ozone_du >= 0):
        raise InputError(f"ozone column is {ozone_du} Dobson units, accepted is 0 or more")
    borders_km = np.union1d(tabulated_km, altitude)
    pieces = column_of_layers(borders_km, np.exp(np.interp(borders_km, tabulated_km, np.log(density))))
    layer = np.searchsorted(altitude, borders_km[:-1], side="right") - 1
    inside = (layer >= 0) & (borders_km[:-1] < altitude[-1])
    share = np.bincount(layer[inside], pieces[inside], minlength=altitude.size - 1) / pieces.sum()
    return share * ozone_du * DOBSON_UNIT
