"""Air mass along the refracted path, the refraction itself, and the sun elevation at which the sun sets.

Sources: Kasten & Young 1989 (table and formula), Bennett 1982, the almanac's horizon refraction, and Hohenkerk &
Sinclair 1985 (a quadrature). Refraction goes with the density of the air at the ground: published values are brought
from their temperature and pressure to those of the standard atmosphere.
"""

import functools
import math
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skychart.checks.check import Check
from skychart.checks.standard import StandardSky
from skychart.data.tables import load_table
from skychart.sky import Atmosphere
from skychart.sky.grid import Grid
from skychart.sky.refraction import BentRays
from skychart.sky.shells import Shells, level_altitudes, subdivide
from skychart.sky.sun import SOLAR_DISC_DIAMETER_DEG

Array = NDArray[np.float64]

TOPIC = "Air mass and refraction"

FORMULA_LIMIT, TABLE_LIMIT, BENNETT_LIMIT_ARCMIN = 0.007, 0.003, 1.0  # agreed before anything was measured
ELEVATIONS_DEG = np.concatenate([np.arange(0, 5, 0.25), np.arange(5, 90.5, 1)])

_KASTEN = "Kasten & Young 1989, Appl. Opt. 28, 4735, {}"
_BENNETT = "Bennett 1982, J. Inst. Navig. 35, 255 (formula from memory, widely reproduced; evaluated here)"
_ALMANAC = "almanacs: horizon refraction 34′, semidiameter of the sun 16′ (from memory, standard)"
_ALMANAC_REFRACTION_ARCMIN, _SEMIDIAMETER_ARCMIN = 34.0, 16.0
_STANDARD_AIR = "US Standard Atmosphere 1976, 550 nm"
# Density of the ground's air: 15 °C and 1013.25 hPa here, 10 °C and 1010 hPa with Bennett and the almanac.
_TO_STANDARD_AIR = (1013.25 / 1010) * (283.15 / 288.15)
_LOWEST_SET_DEG, _HIGHEST_SET_DEG, _SET_STEPS = -1.0, 0.0, 20


@dataclass(frozen=True)
class MountainCase:
    """The published quadrature: its air told by the ground's, zenith angle [rad] and refraction [rad]."""

    altitude_km: float = 3.4567
    temperature_k: float = 280.0
    pressure_hpa: float = 678.9
    vapour_hpa: float = 0.9 * (280 / 247.1) ** 18.36  # relative humidity 0.9
    lapse_k_per_km: float = 6.0
    zenith_angle: float = 1.4
    refraction: float = 0.00106715763018568
    radius_km: float = 6378.12
    gravity_m_s2: float = 9.784 * (1 - 0.0026 * np.cos(0.6) - 0.00028 * 3.4567)  # latitude -0.3 rad

    def refractivity(self) -> float:
        """Refractive index of the ground's air less one at 0.55 micrometres (Barrell & Sears 1939, with vapour)."""
        dry = (287.6155 + 1.62887 / 0.55**2 + 0.01360 / 0.55**4) * 273.15 / 1013.25
        return (dry * self.pressure_hpa - 11.2684 * self.vapour_hpa) / self.temperature_k * 1e-6


def kasten1989_air_mass(apparent_elevation_deg: ArrayLike) -> Array:
    """Relative optical air mass for apparent elevations of 0 to 90 degrees: the closed formula."""
    elevation = np.asarray(apparent_elevation_deg, dtype=float)
    return 1 / (np.sin(np.radians(elevation)) + 0.50572 * (elevation + 6.07995) ** -1.6364)


def bennett1982_refraction_arcmin(apparent_elevation_deg: ArrayLike) -> Array:
    """Refraction [arc minutes] for apparent elevations of 0 to 90 degrees at 10 °C and 1010 hPa."""
    elevation = np.asarray(apparent_elevation_deg, dtype=float)
    return 1 / np.tan(np.radians(elevation + 7.31 / (elevation + 4.4)))


def checks() -> tuple[Check, ...]:
    """Air mass and refraction."""
    return (*_air_mass(), *_refraction(), _quadrature())


def molecular_checks(sky: StandardSky) -> tuple[Check, ...]:
    """Where the sun's light ends."""
    entry = functools.partial(Check, topic=TOPIC, unit="′", relative=False)
    last = set_elevation_deg(sky) * 60
    return (
        entry(
            key="sunset-centre",
            quantity="Geometric elevation of the sun’s centre when it sets",
            conditions="the last direct light in the solved molecular sky, at sea level",
            source=f"{_ALMANAC}; refraction brought to 15 °C and 1013.25 hPa",
            published=-_ALMANAC_REFRACTION_ARCMIN * _TO_STANDARD_AIR,
            computed=last,
            tolerance=BENNETT_LIMIT_ARCMIN,
            tolerance_reason="1′, as for the refraction at the horizon",
        ),
        entry(
            key="sunset-upper-limb",
            quantity="Geometric elevation of the sun’s centre when its upper limb sets",
            conditions="the last direct light in the solved molecular sky, less the semidiameter used for the disc",
            source=f"{_ALMANAC}, −50′ together; refraction brought to 15 °C and 1013.25 hPa",
            published=-_ALMANAC_REFRACTION_ARCMIN * _TO_STANDARD_AIR - _SEMIDIAMETER_ARCMIN,
            computed=last - 30 * SOLAR_DISC_DIAMETER_DEG,
            tolerance=BENNETT_LIMIT_ARCMIN,
            tolerance_reason="1′, as for the refraction at the horizon",
        ),
    )


@functools.cache
def molecules() -> BentRays:
    """Rays through the molecules of standard air in the shells of the solver, seen from the ground."""
    air = Atmosphere.standard([550.0])
    altitude_km = subdivide(level_altitudes(float(air.level_altitude_km[-1]), Grid().levels), Grid().substeps)
    return BentRays.of(Shells.of(replace(air, absorption_depth=np.zeros((1, 1))), altitude_km))


def air_mass(apparent_elevation_deg: ArrayLike) -> Array:
    """Molecules along the refracted ray over those above the observer at the ground, (...)."""
    depth = molecules().depth(0, np.sin(np.radians(np.append(np.atleast_1d(apparent_elevation_deg), 90.0))))[:, 0]
    return depth[:-1] / depth[-1]


def refraction_arcmin(apparent_elevation_deg: ArrayLike) -> Array:
    """Refraction [arc minutes] of the ray that reaches the ground at an apparent elevation, (...)."""
    return 60 * np.degrees(molecules().refraction(0, np.sin(np.radians(apparent_elevation_deg))))


def mountain_refraction(case: MountainCase = MountainCase()) -> float:
    """Refraction [rad] that our rays have in the air of the published quadrature, rebuilt from the ground's values.

    Temperature falls evenly to 11 km and stays; pressure is hydrostatic, in dry air.
    """
    height_km = np.arange(0, 80.5, 0.5)
    tropopause_km = 11 - case.altitude_km
    fall_per_km = 1000 * case.gravity_m_s2 * 0.0289644 / 8.314
    warmth = 1 - case.lapse_k_per_km / case.temperature_k * np.minimum(height_km, tropopause_km)
    above = np.maximum(height_km - tropopause_km, 0) / (warmth[-1] * case.temperature_k)
    density = warmth ** (fall_per_km / case.lapse_k_per_km - 1) * np.exp(-fall_per_km * above)
    column = np.diff(height_km) * np.diff(density) / np.diff(np.log(density))
    air = Atmosphere(
        level_altitude_km=height_km,
        wavelength_nm=np.array([550.0]),
        rayleigh_depth=column[:, None] / column.sum(),
        absorption_depth=np.zeros((1, 1)),
        depolarisation=np.zeros(1),
        ground_albedo=np.zeros(1),
        planet_radius_km=case.radius_km + case.altitude_km,
        refractivity=case.refractivity(),
    )
    rays = BentRays.of(Shells.of(air, height_km))
    return float(rays.refraction(0, np.array([np.cos(case.zenith_angle)]))[0])


def set_elevation_deg(sky: StandardSky) -> float:
    """Geometric elevation [degrees] of the sun's centre at which its light stops reaching the ground."""
    dark, bright = _LOWEST_SET_DEG, _HIGHEST_SET_DEG
    for _ in range(_SET_STEPS):
        middle = 0.5 * (dark + bright)
        dark, bright = (dark, middle) if sky.sun_shines(middle) else (middle, bright)
    return 0.5 * (dark + bright)


def _air_mass() -> list[Check]:
    entry = functools.partial(Check, topic=TOPIC, quantity="Relative air mass", unit="1", relative=True)
    columns = load_table("checks/published_air_mass_kasten1989").columns
    elevations, published = columns["apparent_elevation_deg"], columns["air_mass"]
    rows = [
        entry(
            key=f"air-mass-kasten1989-{elevation:g}",
            conditions=f"sun seen {elevation:g}° up, {_STANDARD_AIR}",
            source=_KASTEN.format("Table II (one secondary copy)"),
            published=float(theirs),
            computed=float(ours),
            tolerance=TABLE_LIMIT,
            tolerance_reason="0.3 %, set before it was measured: another standard atmosphere (ISO), 0.7 µm there",
        )
        for elevation, theirs, ours in zip(elevations, published, air_mass(elevations), strict=True)
    ]
    formula = kasten1989_air_mass(ELEVATIONS_DEG)
    worst = int(np.argmax(np.abs(air_mass(ELEVATIONS_DEG) / formula - 1)))
    furthest = float(ELEVATIONS_DEG[worst])
    return [
        *rows,
        entry(
            key="air-mass-kasten1989-formula",
            conditions=f"worst of {len(ELEVATIONS_DEG)} elevations from 0° to 90°, at {furthest:g}°; {_STANDARD_AIR}",
            source=_KASTEN.format("formula (coefficients cross-checked)"),
            published=float(formula[worst]),
            computed=float(air_mass(furthest)[0]),
            tolerance=FORMULA_LIMIT,
            tolerance_reason="0.7 %: the fit lies up to 0.5 % from its own table",
        ),
    ]


def _refraction() -> list[Check]:
    entry = functools.partial(Check, topic=TOPIC, quantity="Refraction", unit="′", relative=False)
    scaled = "brought from 10 °C and 1010 hPa to 15 °C and 1013.25 hPa"
    found = [
        entry(
            key=f"refraction-bennett1982-{elevation:g}",
            conditions=f"seen {elevation:g}° up, {_STANDARD_AIR}; formula {scaled}",
            source=_BENNETT,
            published=float(bennett1982_refraction_arcmin(elevation)) * _TO_STANDARD_AIR,
            computed=float(refraction_arcmin(elevation)),
            tolerance=BENNETT_LIMIT_ARCMIN,
            tolerance_reason="1′: the temperature gradient near the ground, which decides at the horizon, differs",
        )
        for elevation in (0, 1, 2, 5, 10, 20, 45)
    ]
    return [
        *found,
        entry(
            key="refraction-almanac-horizon",
            conditions=f"at the horizon, {_STANDARD_AIR}; value {scaled}",
            source=_ALMANAC,
            published=_ALMANAC_REFRACTION_ARCMIN * _TO_STANDARD_AIR,
            computed=float(refraction_arcmin(0.0)),
            tolerance=BENNETT_LIMIT_ARCMIN,
            tolerance_reason="1′: a round number, for ordinary temperature gradients near the ground",
        ),
    ]


def _quadrature() -> Check:
    case = MountainCase()
    to_arcmin = 60 * 180 / math.pi
    return Check(
        key="refraction-hohenkerk1985",
        topic=TOPIC,
        quantity="Refraction",
        conditions="seen 9.79° up from 3457 m, 280 K, 678.9 hPa, 0.55 µm, in the air of the source rebuilt here",
        source=(
            "Hohenkerk & Sinclair 1985, NAO Technical Note 63: value of a public library's test (nine copies agree)"
        ),
        published=case.refraction * to_arcmin,
        computed=mountain_refraction(case) * to_arcmin,
        tolerance=0.002,
        tolerance_reason="0.2 %: the profile of water vapour, 0.2 % of the refractivity, is left out here",
        unit="′",
        relative=True,
    )
