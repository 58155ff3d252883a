"""Luminance of the zenith in twilight against measurements.

Sources: Koomen et al. 1952, Patat, Ugolnikov & Postylyakov 2006; see the tables. Below a sun of about -11 degrees the
night sky, which is not computed, takes part, so nothing is compared there. Of Patat et al. only the rate is compared:
their magnitudes would need a spectrum to become luminances, and a sun that refraction lifts.
"""

import math

import numpy as np
from numpy.typing import NDArray

from skychart.checks.check import Check
from skychart.checks.standard import StandardSky
from skychart.data.tables import load_table

TOPIC = "Zenith in twilight"

_KOOMEN = "Koomen et al. 1952, J. Opt. Soc. Am. 42, 353, {} (measured; one secondary copy)"
_CD_M2_PER_CD_FT2 = 10.7639
_SITES = {  # place as printed, altitude computed for
    "sacramento_peak": ("Sacramento Peak, 2800 m", 2.8),
    "maryland": ("Maryland, 30 m, computed at sea level", 0.0),
}
_LOWEST_SUN_DEG = -9
_PARANAL_KM = 2.6


def koomen1952_zenith_luminance(site: str) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    """Solar elevations [degrees] and measured zenith luminance [cd/m²] at "sacramento_peak" or "maryland"."""
    columns = load_table("checks/published_zenith_luminance_koomen1952").columns
    return columns["solar_elevation_deg"], columns[f"{site}_cd_ft2"] * _CD_M2_PER_CD_FT2


def checks(sky: StandardSky) -> tuple[Check, ...]:
    """Luminance at two sites, and the rate at which the zenith darkens."""
    return (*_koomen(sky), *_koomen_rate(sky), *_patat_rate(sky))


def _koomen(sky: StandardSky) -> list[Check]:
    found = []
    for site, (title, altitude_km) in _SITES.items():
        elevation, measured = koomen1952_zenith_luminance(site)
        compared = elevation >= _LOWEST_SUN_DEG
        computed = sky.zenith_luminance(elevation[compared], altitude_km)
        found += [
            Check(
                key=f"zenith-koomen1952-{site}-sun{sun:+g}",
                topic=TOPIC,
                quantity="Zenith luminance, log₁₀ of cd/m²",
                conditions=f"{title}, sun at {sun:g}°; {published:.3g} against {value:.3g} cd/m² here",
                source=_KOOMEN.format("Tables I and II"),
                published=math.log10(published),
                computed=math.log10(value),
                tolerance=math.log10(2),
                tolerance_reason="a factor 2: one or two printed digits, one evening, haze of that air unknown",
                unit="log₁₀ cd/m²",
                relative=False,
            )
            for sun, published, value in zip(elevation[compared], measured[compared], computed, strict=True)
        ]
    return found


def _koomen_rate(sky: StandardSky) -> list[Check]:
    return [
        Check(
            key="zenith-koomen1952-rate",
            topic=TOPIC,
            quantity="Darkening of the zenith per degree of sun",
            conditions="sea level, mean from a sun of −3° to −11°",
            source=_KOOMEN.format("abstract: the sky changes by about a factor 10 in 2°"),
            published=1.25,
            computed=_darkening(sky, -3.0, -11.0, 0.0),
            tolerance=0.125,
            tolerance_reason="10 %: “about”",
            unit="mag/°",
            relative=False,
        )
    ]


def _patat_rate(sky: StandardSky) -> list[Check]:
    columns = load_table("checks/published_zenith_twilight_patat2006").columns
    (band,) = np.flatnonzero(columns["band"] == "V")
    linear, square, rms_mag = (float(columns[name][band]) for name in ("a1", "a2", "rms_mag"))
    return [
        Check(
            key="zenith-patat2006-rate",
            topic=TOPIC,
            quantity="Darkening of the zenith per degree of sun",
            conditions="Paranal, 2600 m, mean from a sun of −5° to −10°; band V there, luminance here",
            source=(
                "Patat, Ugolnikov & Postylyakov 2006, Astron. Astrophys. 455, 385, Table 1, measured "
                "(derived here from the published fit, read in copies that agree)"
            ),
            published=linear + 5 * square,
            computed=_darkening(sky, -5.0, -10.0, _PARANAL_KM),
            tolerance=math.sqrt(2) * rms_mag / 5,
            tolerance_reason=f"the stated scatter of {rms_mag} mag at either end, over 5°",
            unit="mag/°",
            relative=False,
        )
    ]


def _darkening(sky: StandardSky, from_deg: float, to_deg: float, altitude_km: float) -> float:
    """Mean rate [magnitudes per degree] at which the zenith darkens while the sun sinks."""
    start, end = sky.zenith_luminance(np.array([from_deg, to_deg]), altitude_km)
    return float(2.5 * np.log10(start / end) / (from_deg - to_deg))
