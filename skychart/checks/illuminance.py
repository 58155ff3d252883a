"""Horizontal illuminance from day to the end of nautical twilight.

Source: Janiczek & DeYoung 1987, U.S. Naval Observatory Circular No. 171, a fit to measurements under clear skies,
which carry haze. Air without haze is brighter at low sun: haze takes from the beam, and returns part of it to space.
"""

import math

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skychart.checks.check import Check
from skychart.checks.standard import StandardSky
from skychart.data.tables import load_table

TOPIC = "Illuminance on the horizontal"

_SOURCE = (
    "Janiczek & DeYoung 1987, U.S. Naval Observatory Circular No. 171 (coefficients in four copies that agree; "
    "values derived here from them)"
)
_ELEVATIONS_DEG = (90, 60, 30, 20, 10, 5, 0, -3, -6, -8, -10, -12)
_HIGH_SUN_DEG = 30


def usno1987_illuminance(solar_elevation_deg: ArrayLike) -> NDArray[np.float64]:
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


def checks(sky: StandardSky) -> tuple[Check, ...]:
    """Decimal logarithms of the illuminance, as the source gives them."""
    elevation = np.array(_ELEVATIONS_DEG, dtype=float)
    published = usno1987_illuminance(elevation)
    computed = sky.horizontal_XYZ(elevation)[:, 1]
    return tuple(_check(*row) for row in zip(_ELEVATIONS_DEG, published, computed, strict=True))


def _check(solar_elevation_deg: int, published: float, computed: float) -> Check:
    high = solar_elevation_deg >= _HIGH_SUN_DEG
    return Check(
        key=f"illuminance-usno1987-sun{solar_elevation_deg:+d}",
        topic=TOPIC,
        quantity="Illuminance by sun and sky, log₁₀ of lux",
        conditions=(
            f"sun at {solar_elevation_deg}°; published {published:.3g} lx under hazy clear skies, "
            f"computed {computed:.3g} lx without haze"
        ),
        source=_SOURCE,
        published=math.log10(published),
        computed=math.log10(computed),
        tolerance=math.log10(1.3 if high else 1.6),
        tolerance_reason=(
            "a factor 1.3: the sky that was measured carries haze"
            if high
            else "a factor 1.6: the sky that was measured carries haze, which dims a low sun most"
        ),
        unit="log₁₀ lx",
        relative=False,
    )
