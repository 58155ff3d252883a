"""Horizontal illuminance from day to the end of nautical twilight.

Sources: Janiczek & DeYoung 1987, U.S. Naval Observatory Circular No. 171, a fit to measurements under clear skies, and
the clear-sky formula of the IES 1984. The skies that were measured carry haze: the air called clear is compared, and
average air where two formulas bound it. Air without haze is brighter at low sun and in twilight, for haze takes from
the beam and returns part of it to space; it is compared beside.
"""

import functools
import math

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skychart.checks.check import Check
from skychart.checks.haze_cases import AVERAGE_NM, HazeCases, carried
from skychart.checks.standard import StandardSky
from skychart.colour.integrate import tristimulus_matrix
from skychart.data.tables import load_table

Array = NDArray[np.float64]

TOPIC = "Illuminance on the horizontal"

_USNO = (
    "Janiczek & DeYoung 1987, U.S. Naval Observatory Circular No. 171 (coefficients in four copies that agree; "
    "values derived here from them)"
)
_IES = "IES 1984, RP-21, J. IES 13, 381, clear sky (from memory)"
_TWO_FORMULAS_DEG = (10, 20, 30, 40, 50, 60)
_CIRCULAR_DEG = (90, 5, 0, -3, -6, -8, -10, -12)
_HIGH_SUN_DEG = 60
_NODES_NM = np.arange(360.0, 831.0, 10.0)


def usno1987_illuminance(solar_elevation_deg: ArrayLike) -> Array:
    """Horizontal illuminance [lx] by the published curve for solar elevations of -12 to 90 degrees; nan elsewhere."""
    elevation = np.asarray(solar_elevation_deg, dtype=float)
    x = elevation / 90
    exponent = np.full(elevation.shape, np.nan)
    columns = load_table("checks/published_illuminance_usno171").columns
    for low, high, *coefficients in zip(*columns.values(), strict=True):
        if low >= -12:
            inside = (elevation >= low) & (elevation <= high)
            exponent = np.where(inside, np.polynomial.polynomial.polyval(x, coefficients), exponent)
    return 10**exponent


def ies1984_illuminance(solar_elevation_deg: ArrayLike) -> Array:
    """Horizontal illuminance [lx] by sun and clear sky for solar elevations above 0 to 90 degrees; nan elsewhere."""
    elevation = np.asarray(solar_elevation_deg, dtype=float)
    height = np.sin(np.radians(np.where((elevation > 0) & (elevation <= 90), elevation, np.nan)))
    columns = load_table("checks/published_illuminance_ies1984").columns
    direct, extinction, sky, slope, exponent = (values[0] for name, values in columns.items() if name != "sky")
    return 1000 * (direct * np.exp(-extinction / height) * height + sky + slope * height**exponent)


def clear_checks(clear: StandardSky) -> tuple[Check, ...]:
    """Decimal logarithms of the illuminance under air called clear: between two formulas by day, and in twilight."""
    suns = np.array(_TWO_FORMULAS_DEG, dtype=float)
    return (
        *_between_formulas("clear", "air called clear", clear.horizontal_XYZ(suns)[:, 1]),
        *_circular("clear", "in air called clear", clear),
    )


def molecular_checks(molecular: StandardSky) -> tuple[Check, ...]:
    """The same without haze, which bounds the measured air on the other side."""
    return tuple(_circular("molecular", "in air without haze", molecular))


def average_checks(haze: HazeCases) -> tuple[Check, ...]:
    """The same under average air, between the two formulas."""
    suns = np.array(_TWO_FORMULAS_DEG, dtype=float)
    light = carried(haze.average_ground_irradiance(suns), AVERAGE_NM, _NODES_NM)
    average = (light @ tristimulus_matrix(_NODES_NM))[:, 1]
    air = "air called average, from three wavelengths, no lines or refraction"
    return tuple(_between_formulas("average", air, average))


def _between_formulas(name: str, air: str, computed: Array) -> list[Check]:
    """Illuminance between 0.9 of the lower and 1.1 of the higher formula: from the middle of these, half their span."""
    found = []
    for sun, ours in zip(_TWO_FORMULAS_DEG, computed, strict=True):
        circular, ies = float(usno1987_illuminance(sun)), float(ies1984_illuminance(sun))
        low, high = math.log10(0.9 * min(circular, ies)), math.log10(1.1 * max(circular, ies))
        found.append(
            Check(
                key=f"illuminance-{name}-sun{sun:+d}",
                topic=TOPIC,
                quantity="Illuminance by sun and sky, log₁₀ of lux",
                conditions=(
                    f"sun at {sun}°; published {circular:.3g} lx (Circular 171) and {ies:.3g} lx (IES), computed "
                    f"{ours:.3g} lx; {air}"
                ),
                source=f"middle of {_USNO}; and {_IES}",
                published=0.5 * (low + high),
                computed=math.log10(ours),
                tolerance=0.5 * (high - low),
                tolerance_reason="from 0.9 of the lower to 1.1 of the higher of the two, which differ by up to 25 %",
                unit="log₁₀ lx",
                relative=False,
            )
        )
    return found


def _circular(name: str, air: str, sky: StandardSky) -> list[Check]:
    suns = np.array(_CIRCULAR_DEG, dtype=float)
    entry = functools.partial(
        Check, topic=TOPIC, quantity="Illuminance by sun and sky, log₁₀ of lux", source=_USNO, unit="log₁₀ lx",
        relative=False,
    )  # fmt: skip
    rows = zip(_CIRCULAR_DEG, usno1987_illuminance(suns), sky.horizontal_XYZ(suns)[:, 1], strict=True)
    return [
        entry(
            key=f"illuminance-usno1987-{name}-sun{sun:+d}",
            conditions=f"sun at {sun}°; published {published:.3g} lx, computed {ours:.3g} lx {air}",
            published=math.log10(published),
            computed=math.log10(ours),
            tolerance=math.log10(1.3 if sun >= _HIGH_SUN_DEG else 1.5),
            tolerance_reason=(
                "a factor 1.3: haze of the skies that were measured is not known"
                if sun >= _HIGH_SUN_DEG
                else "a factor 1.5: haze of the skies that were measured is not known, and dims a low sun most"
            ),
        )
        for sun, published, ours in rows
    ]
