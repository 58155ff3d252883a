"""The reference solar spectrum of ASTM G173-03 at air mass 1.5: direct light.

It is computed for the atmosphere of the standard and multiplied with its own spectrum outside the air; the header of
`checks/astm_g173` has its conditions. Numbers that tell a rural aerosol: Bird & Riordan 1986, J. Climate Appl.
Meteorol. 25, 87.
"""

import dataclasses

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skychart.checks.check import Check
from skychart.checks.haze_cases import henyey_greenstein1941
from skychart.checks.natraj import rms
from skychart.data.tables import load_table
from skychart.sky import Atmosphere
from skychart.sky.beam import transmission
from skychart.sky.lines import band_transmission
from skychart.sky.shells import Shells

Array = NDArray[np.float64]

TOPIC = "Reference solar spectrum, air mass 1.5"

SUN_DEG = 90 - 48.19
DIRECT_LIMIT = 0.02  # agreed before anything was measured

_AIR_MASS, _WATER_CM = 1.5, 1.4164
_OZONE_DU, _GROUND = 343.8, "sand"
_DEPTH_500, _EXPONENTS = 0.084, (0.964, 1.095)  # exponents below and above 500 nm
_RURAL_ASYMMETRY, _RURAL_ALBEDO_400, _RURAL_ALBEDO_BEND = 0.65, 0.945, 0.095


def checks() -> tuple[Check, ...]:
    """Direct normal spectrum, 400 to 700 nm."""
    columns = load_table("checks/astm_g173").columns
    direct = columns["extraterrestrial"] * direct_transmission()
    return (
        Check(
            key="g173-direct-rms",
            topic=TOPIC,
            quantity="RMS difference of the direct spectrum",
            conditions=f"facing the sun, {len(direct)} wavelengths from 400 to 700 nm, 5 nm wide",
            source="ASTM G173-03 (data file of a public package, its integrals cross-checked; conditions from memory)",
            published=0.0,
            computed=rms(direct / columns["direct_circumsolar"] - 1),
            tolerance=DIRECT_LIMIT,
            tolerance_reason=(
                "2 %, set before it was measured; the standard has the sky to 2.9° from the sun in it, some 0.1 %, and "
                "lines are averaged over bands here"
            ),
            unit="1",
            relative=False,
        ),
    )


def direct_transmission() -> Array:
    """Direct light over that outside the air at the rows of the table, (row,)."""
    wavelength = load_table("checks/astm_g173").columns["wavelength_nm"]
    air = g173_air(wavelength)
    shells = Shells.of(air, air.level_altitude_km)
    lines = band_transmission(wavelength, _WATER_CM * _AIR_MASS, _AIR_MASS)
    return transmission(shells, 0, np.sin(np.radians(SUN_DEG))) * lines


def g173_air(wavelength_nm: ArrayLike) -> Atmosphere:
    """The reference atmosphere, without lines and refraction, at wavelengths from 300 to 830 nm, (wavelength,).

    Where the standard names a model that is not at hand, something near it stands in: for rural aerosol few numbers and
    the phase function of Henyey & Greenstein 1941, for light soil the measured albedo of sand.
    """
    air = Atmosphere.standard(wavelength_nm, _OZONE_DU, _GROUND)
    wavelength = air.wavelength_nm
    exponent = np.where(wavelength < 500, *_EXPONENTS)
    albedo = _RURAL_ALBEDO_400 * np.exp(-_RURAL_ALBEDO_BEND * np.log(wavelength / 400) ** 2)
    depth = _DEPTH_500 * (wavelength / 500) ** -exponent
    haze = henyey_greenstein1941(air.level_altitude_km, depth, albedo, _RURAL_ASYMMETRY)
    return dataclasses.replace(air, haze=haze, refractivity=0.0)
