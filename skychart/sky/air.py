"""Dry air: how much a molecule scatters, and how many there are at each altitude.

Scattering: Bodhaine B. A., Wood N. B., Dutton E. G., Slusser J. R. 1999, On Rayleigh Optical Depth Calculations,
J. Atmos. Oceanic Technol. 16, 1854-1861, doi:10.1175/1520-0426(1999)016<1854:ORODC>2.0.CO;2, with the King factors of
Bates D. R. 1984, Planet. Space Sci. 32, 785-790, doi:10.1016/0032-0633(84)90102-8.
Density: U.S. Standard Atmosphere, 1976; above 80 km Anderson G. P. et al. 1986, AFGL-TR-86-0110.
"""

import numpy as np
from numpy.typing import ArrayLike

from skychart.data import load_table
from skychart.errors import InputError
from skychart.library import colour_science
from skychart.sky.wavelengths import checked_wavelength

CO2_PPM = 360.0  # the mixture Bodhaine et al. (1999) tabulate; 420 ppm would add 0.007 % to the cross-section
TOP_KM = 100
STANDARD_PRESSURE_HPA = 1013.25  # at sea level, US Standard Atmosphere 1976
PRESSURE_RANGE_HPA = (300.0, 1100.0)  # from the highest summit to more than has been measured at sea level
WAVELENGTH_RANGE_NM = (250.0, 1100.0)  # well inside the fits of refractive index and King factor


def rayleigh_cross_section(wavelength_nm: ArrayLike) -> np.ndarray:
    """Scattering cross-section [m² per molecule] of dry air with 360 ppm of carbon dioxide.

    `wavelength_nm`: 250 to 1100 [nm], any shape; the result has the same shape. It belongs to the molecule, so it holds
    at every pressure. From the refractive index and the King factor of air as in Bodhaine et al. 1999.
    Raises InputError outside the range.
    """
    wavelength = checked_wavelength(wavelength_nm, *WAVELENGTH_RANGE_NM)
    phenomena = colour_science().phenomena.rayleigh
    cross_section_cm2 = phenomena.scattering_cross_section(
        wavelength * 1e-7,
        CO2_concentration=CO2_PPM,
        # The library would take the refractive index at 300 ppm, whatever the concentration.
        n_s_function=lambda wavelength_um: phenomena.air_refraction_index_Bodhaine1999(wavelength_um, CO2_PPM),
    )
    return np.asarray(cross_section_cm2) * 1e-4


def depolarisation_ratio(wavelength_nm: ArrayLike) -> np.ndarray:
    """Depolarisation ratio ρ of dry air for natural light, rotational Raman lines included; about 0.028.

    `wavelength_nm`: 250 to 1100 [nm], any shape; the result has the same shape. From the King factor F of air
    (Bodhaine et al. 1999, with the nitrogen and oxygen of Bates 1984) by F = (6 + 3ρ) / (6 - 7ρ).
    Raises InputError outside the range.
    """
    wavelength = checked_wavelength(wavelength_nm, *WAVELENGTH_RANGE_NM)
    king_factor = colour_science().phenomena.rayleigh.F_air_Bodhaine1999(wavelength * 1e-3, CO2_concentration=CO2_PPM)
    return np.asarray(6 * (king_factor - 1) / (3 + 7 * king_factor))


def standard_air(pressure_hpa: float = STANDARD_PRESSURE_HPA) -> tuple[np.ndarray, np.ndarray]:
    """Altitude [km], shape (101,), every kilometre from 0 to 100, and number density of air [m⁻³], same shape.

    US Standard Atmosphere 1976 up to 80 km. Above, the AFGL US standard profile times 1.0015, so that it goes on
    without a step; together 0.001 % of the column. Between the rows of either table the logarithm is linear.
    `pressure_hpa`: air pressure at the ground, 300 to 1100 [hPa]; at all altitudes the density is the standard one
    times this over 1013.25 hPa. Raises InputError outside the range.
    """
    lowest, highest = PRESSURE_RANGE_HPA
    if not lowest <= pressure_hpa <= highest:
        raise InputError(f"air pressure is {pressure_hpa} hPa, accepted is {lowest:g} to {highest:g} hPa")
    altitude_km = np.arange(TOP_KM + 1.0)
    lower = load_table("us76_density_profile").columns
    log_lower = np.log(lower["number_density_cm3"])
    upper = load_table("atmosphere_profiles_afgl").columns
    rows = upper["profile"] == "us_standard"
    log_upper = np.log(upper["air_cm3"][rows])
    join_km = lower["z_km"][-1]
    step = log_lower[-1] - np.interp(join_km, upper["z_km"][rows], log_upper)
    log_density = np.where(
        altitude_km <= join_km,
        np.interp(altitude_km, lower["z_km"], log_lower),
        np.interp(altitude_km, upper["z_km"][rows], log_upper) + step,
    )
    return altitude_km, np.exp(log_density) * 1e6 * (pressure_hpa / STANDARD_PRESSURE_HPA)


def column_of_layers(altitude_km: ArrayLike, number_density: ArrayLike) -> np.ndarray:
    """Molecules above a square metre [m⁻²] in each layer, shape (level - 1,).

    `altitude_km` [km] ascends, shape (level,); `number_density` [m⁻³] is positive, same shape. Within a layer the
    logarithm of the density is linear in altitude. Raises InputError otherwise.
    """
    altitude, density = np.asarray(altitude_km, dtype=float), np.asarray(number_density, dtype=float)
    if altitude.ndim != 1 or altitude.shape != density.shape or altitude.size < 2 or not np.all(np.diff(altitude) > 0):
        raise InputError(
            f"altitude has shape {altitude.shape} and number density {density.shape}, accepted are two or more "
            "ascending altitudes and one density each"
        )
    if not np.all((density > 0) & np.isfinite(density)):
        raise InputError(f"smallest number density is {density.min():g} m⁻³, accepted are finite values above 0")
    rate = np.diff(np.log(density))
    # exp(rate) averaged over the layer; where the density hardly changes the quotient would lose its digits.
    level = np.abs(rate) < 1e-6
    mean_growth = np.where(level, 1 + rate / 2, np.expm1(rate) / np.where(level, 1.0, rate))
    return density[:-1] * mean_growth * np.diff(altitude) * 1e3
