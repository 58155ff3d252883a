"""Gases that absorb: how much a molecule absorbs, and how the molecules are spread over the air.

Ozone: Gorshelev V. et al. 2014, Atmos. Meas. Tech. 7, 609-624, doi:10.5194/amt-7-609-2014, and Serdyuchenko A. et al.
2014, Atmos. Meas. Tech. 7, 625-636, doi:10.5194/amt-7-625-2014.
Pairs of oxygen molecules: HITRAN collision-induced absorption at 296 K; Fally S. et al. 2000, J. Mol. Spectrosc. 204,
10-20, doi:10.1006/jmsp.2000.8204. That their number is the square of the density at every temperature: Thalman R.,
Volkamer R. 2013, Phys. Chem. Chem. Phys. 15, 15371-15381, doi:10.1039/C3CP50968K.
Nitrogen dioxide: Vandaele A. C. et al. 1998, JQSRT 59, 171-184, doi:10.1016/S0022-4073(97)00168-4; beyond 666 nm
Bogumil K. et al. 2003, J. Photochem. Photobiol. A 157, 167-184, doi:10.1016/S1010-6030(03)00062-5.
Profiles: Anderson G. P. et al. 1986, AFGL Atmospheric Constituent Profiles, AFGL-TR-86-0110, US standard.
The lines of water vapour and oxygen are in `lines`.
"""

import numpy as np
from numpy.typing import ArrayLike

from skychart.data import load_table
from skychart.errors import InputError
from skychart.sky.air import column_of_layers
from skychart.sky.wavelengths import checked_wavelength

DOBSON_UNIT = 2.6867e20  # molecules m⁻²: 0.01 mm of gas at 0 °C and 1 atm
OXYGEN_SHARE = 0.209476  # of the molecules of dry air, US Standard Atmosphere 1976, table 3


def ozone_cross_section(wavelength_nm: ArrayLike) -> np.ndarray:
    """Absorption cross-section of ozone [m² per molecule] at 223 K, the temperature of the ozone layer.

    `wavelength_nm`: wavelength in air [nm], 300 to 830, any shape; the result has the same shape. Measured means over
    1 nm about whole nanometres, linear in between; noise below zero (between 360 and 400 nm) is taken as zero.
    Raises InputError outside the range.
    """
    columns = load_table("ozone_cross_section_serdyuchenko_1nm").columns
    return _at(wavelength_nm, columns["wavelength_nm"], np.maximum(columns["sigma_223K"], 0)) * 1e-4


def ozone_layers(altitude_km: ArrayLike, ozone_du: float) -> np.ndarray:
    """Molecules of ozone above a square metre [m⁻²] in each layer, shape (level - 1,).

    `altitude_km`: ascending borders of the layers, 0 to 100 [km], shape (level,). `ozone_du`: all of the ozone between
    0 and 100 km, 0 or more [Dobson units]. It is spread as in the AFGL US standard atmosphere, the logarithm of the
    density linear between the levels of that profile, so a layer's share does not depend on where the other borders
    are. Raises InputError otherwise.
    """
    tabulated_km, profile = _standard_profile("o3_cm3")
    return _share(altitude_km, tabulated_km, profile) * _amount("ozone", ozone_du, "Dobson units") * DOBSON_UNIT


def o2_o2_coefficient(wavelength_nm: ArrayLike) -> np.ndarray:
    """Absorption coefficient of colliding pairs of oxygen molecules [m⁵ per molecule²] near 296 K.

    `wavelength_nm`: wavelength in air [nm], 300 to 830, any shape; the result has the same shape. The optical depth is
    this times the path integral of the squared density of oxygen. Means over 1 nm about whole nanometres, linear in
    between. In colder air the bands are narrower and higher, their area the same within 3 % (Thalman & Volkamer 2013).
    Raises InputError outside the range.
    """
    columns = load_table("o4_cross_section_1nm").columns
    return _at(wavelength_nm, columns["wavelength_nm"], columns["k_o4"]) * 1e-10


def o2_o2_layers(altitude_km: ArrayLike, number_density: ArrayLike) -> np.ndarray:
    """Integral over each layer of the squared number density of oxygen [molecules² m⁻⁵], shape (level - 1,).

    `altitude_km` [km] ascends, shape (level,); `number_density`: of air [m⁻³], positive, same shape, its logarithm
    linear within a layer. Oxygen is the same share of the air at all altitudes, so the scale height is half
    of the air's and pressure counts squared. Raises InputError otherwise.
    """
    density = np.asarray(number_density, dtype=float)
    if not np.all(density > 0):
        raise InputError(f"smallest number density is {density.min():g} m⁻³, accepted are finite values above 0")
    return column_of_layers(altitude_km, (OXYGEN_SHARE * density) ** 2)


def no2_cross_section(wavelength_nm: ArrayLike) -> np.ndarray:
    """Absorption cross-section of nitrogen dioxide [m² per molecule] at 220 K, the temperature of the stratosphere.

    `wavelength_nm`: wavelength in air [nm], 300 to 830, any shape; the result has the same shape. Means over 1 nm about
    whole nanometres, linear in between. From 667 to 759 nm, where it is below 2 % of its peak, values measured at 293 K
    stand in; beyond there are none and it is taken as zero. Raises InputError outside the range.
    """
    columns = load_table("no2_cross_section_1nm").columns
    cold, warm = columns["vandaele_220K"], columns["bogumil_293K"]
    cross_section_cm2 = np.where(cold >= 0, cold, np.maximum(warm, 0))
    return _at(wavelength_nm, columns["wavelength_nm"], cross_section_cm2) * 1e-4


def no2_layers(altitude_km: ArrayLike, no2_du: float) -> np.ndarray:
    """Molecules of nitrogen dioxide above a square metre [m⁻²] in each layer, shape (level - 1,).

    `altitude_km`: as for `ozone_layers`. `no2_du`: all of it between 0 and 100 km, 0 or more [Dobson units]; clean air
    holds about 0.2, and 1e15 molecules per cm² are 0.0372. Spread as in the AFGL US standard atmosphere, nine tenths
    of it above 10 km; over towns most of it would lie near the ground instead. Raises InputError otherwise.
    """
    tabulated_km, air = _standard_profile("air_cm3")
    profile = air * load_table("no2_mixing_ratio_afgl").columns["no2_ppmv"]
    return _share(altitude_km, tabulated_km, profile) * _amount("NO2", no2_du, "Dobson units") * DOBSON_UNIT


def water_layers(altitude_km: ArrayLike, water_cm: float) -> np.ndarray:
    """Water vapour in each layer as the depth of liquid it would make [cm], shape (level - 1,).

    `altitude_km`: as for `ozone_layers`. `water_cm`: all of it between 0 and 100 km, 0 or more [cm of precipitable
    water]. Spread as in the AFGL US standard atmosphere, which holds 1.42 cm, half of it below 1.55 km. The sum over
    layers, each times its slant path over its height, is the path that `lines` asks for. Raises InputError otherwise.
    """
    tabulated_km, profile = _standard_profile("h2o_cm3")
    return _share(altitude_km, tabulated_km, profile) * _amount("water", water_cm, "cm")


def _at(wavelength_nm: ArrayLike, tabulated_nm: np.ndarray, values: np.ndarray) -> np.ndarray:
    wavelength = checked_wavelength(wavelength_nm, tabulated_nm[0], tabulated_nm[-1])
    return np.asarray(np.interp(wavelength, tabulated_nm, values))


def _standard_profile(column: str) -> tuple[np.ndarray, np.ndarray]:
    """Altitude [km] and the named column of the AFGL US standard atmosphere."""
    columns = load_table("atmosphere_profiles_afgl").columns
    rows = columns["profile"] == "us_standard"
    return columns["z_km"][rows], columns[column][rows]


def _amount(gas: str, amount: float, unit: str) -> float:
    if not (np.isfinite(amount) and amount >= 0):
        raise InputError(f"{gas} column is {amount} {unit}, accepted is 0 or more")
    return amount


def _share(altitude_km: ArrayLike, tabulated_km: np.ndarray, density: np.ndarray) -> np.ndarray:
    """Part of the column of a gas in each layer, its density given from 0 to 100 km in any unit."""
    altitude = np.asarray(altitude_km, dtype=float)
    if altitude.ndim != 1 or altitude.size < 2 or not np.all(np.diff(altitude) > 0):
        raise InputError(f"altitude has shape {altitude.shape}, accepted are two or more ascending altitudes")
    if not (altitude[0] >= tabulated_km[0] and altitude[-1] <= tabulated_km[-1]):
        raise InputError(f"altitude goes from {altitude[0]:g} to {altitude[-1]:g} km, accepted is 0 to 100 km")
    borders_km = np.union1d(tabulated_km, altitude)
    pieces = column_of_layers(borders_km, np.exp(np.interp(borders_km, tabulated_km, np.log(density))))
    layer = np.searchsorted(altitude, borders_km[:-1], side="right") - 1
    inside = (layer >= 0) & (borders_km[:-1] < altitude[-1])
    return np.bincount(layer[inside], pieces[inside], minlength=altitude.size - 1) / pieces.sum()
