"""Walls toward and away from the sun, and what nine coefficients miss: `python tests/benchmarks/light_of_walls.py`.

The default atmospheres are solved anew; some seconds for molecular air, half a minute for each hazy one.
"""

import sys
from pathlib import Path

import numpy as np

ROOT = Path(__file__).parents[2]
sys.path.insert(0, str(ROOT))

from skychart.charts.light import BOTH, PARTS, LightSheet, light_sheet  # noqa: E402
from skychart.charts.numbers import fixed, kelvin, significant  # noqa: E402
from skychart.charts.planes import PLANES  # noqa: E402
from skychart.charts.survey import survey  # noqa: E402
from skychart.config import DEFAULT_SETTINGS  # noqa: E402
from skychart.sky.spectral import solve_spectral  # noqa: E402

KEYS = [plane.key for plane in PLANES]
SUN_DEG = 30.0
HIGH_DEG = 10.0


def walls(sheet: LightSheet) -> None:
    """The walls toward and away from a sun at 30°: colour temperature, illuminance, and how far apart they are."""
    light = next(light for light in sheet.suns if light.solar_elevation_deg == SUN_DEG)
    toward, away = KEYS.index("toward"), KEYS.index("away")
    for part, (_, title) in enumerate(PARTS[1:], start=1):
        lux, cct = light.illuminance_lx[:, part], light.cct_k[:, part]
        stops = np.log2(lux[toward] / lux[away])
        print(
            f"  {title + ':':<16} toward {significant(lux[toward], 3):>6} lx {kelvin(cct[toward]) or 'no CCT':>6} K, "
            f"away {significant(lux[away], 3):>5} lx {kelvin(cct[away]) or 'no CCT':>6} K, "
            f"ratio {fixed(stops, 2)} stops"
        )
    u_v = light.uv_prime[[away, toward], BOTH]
    print(
        "  u'v' of the wall away less that of the wall toward: " + "  ".join(f"{part:+.4f}" for part in u_v[0] - u_v[1])
    )


def coefficients(sheet: LightSheet) -> None:
    """The largest error of the nine coefficients on each plane, for suns from 10° up and for lower ones."""
    suns, errors = sheet.solar_elevation_deg, np.array([light.coefficient_error for light in sheet.suns])
    print(f"  {'error of the nine, largest, %':<32}" + "".join(f"{key:>11}" for key in KEYS))
    for title, some in ((f"suns from {HIGH_DEG:g}°", suns >= HIGH_DEG), ("lower suns", suns < HIGH_DEG)):
        worst = errors[some][np.abs(errors[some]).argmax(axis=0), range(len(KEYS))]
        print(f"  {title:<32}" + "".join(f"{100 * error:>+11.1f}" for error in worst))


def main() -> None:
    """Print both for each default atmosphere."""
    for air in DEFAULT_SETTINGS.atmospheres:
        found = survey(solve_spectral(air), DEFAULT_SETTINGS.solar_elevations_deg, DEFAULT_SETTINGS.observer)
        print(f"{air.name}, sun at {SUN_DEG:g}°")
        sheet = light_sheet(found)
        walls(sheet)
        coefficients(sheet)


if __name__ == "__main__":
    main()
