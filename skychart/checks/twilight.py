"""Luminance of the zenith in twilight against measurements.

Sources: Koomen et al. 1952, Patat, Ugolnikov & Postylyakov 2006; see the tables. Below a sun of about -11 degrees the
night sky, which is not computed, takes part, so nothing is compared there.
"""

import math

import numpy as np
from numpy.typing import NDArray

from skychart.checks.check import Check
from skychart.checks.standard import StandardSky
from skychart.data.tables import load_table

TOPIC = "Zenith in twilight"

_KOOMEN = "Koomen et al. 1952, J. Opt. Soc. Am. 42, 353, {} (measured; one secondary copy)"
_PATAT = "Patat, Ugolnikov & Postylyakov 2006, Astron. Astrophys. 455, 385, Table 1, band V (measured; {})"
_CD_M2_PER_CD_FT2 = 10.7639
_SITES_KM = {"sacramento_peak": 2.8, "maryland": 0.03}
_SITE_TITLES = {"sacramento_peak": "Sacramento Peak, 2800 m", "maryland": "Maryland, 30 m"}
_PARANAL_KM = 2.6
_LUMINANCE_OF_MAGNITUDE_0 = 1.08e5  # cd/m² of V = 0 mag/arcsec², from memory, of the kind Garstang uses


def koomen1952_zenith_luminance(site: str) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    """Solar elevations [degrees] and measured zenith luminance [cd/m²] at "sacramento_peak" or "maryland"."""
    columns = load_table("checks/published_zenith_luminance_koomen1952").columns
    return columns["solar_elevation_deg"], columns[f"{site}_cd_ft2"] * _CD_M2_PER_CD_FT2


def checks(sky: StandardSky) -> tuple[Check, ...]:
    """Koomen's two sites, the rate at which the zenith darkens, and the brightness at Paranal."""
    return (*_koomen(sky), *_koomen_rate(sky), *_patat(sky))


def _koomen(sky: StandardSky) -> list[Check]:
    found = []
    for site, altitude_km in _SITES_KM.items():
        elevation, measured = koomen1952_zenith_luminance(site)
        compared = elevation >= -9
        computed = sky.zenith_luminance(elevation[compared], altitude_km)
        found += [
            Check(
                key=f"zenith-koomen1952-{site}-{sun:g}",
                topic=TOPIC,
                quantity="Zenith luminance, log₁₀ of cd/m²",
                conditions=f"{_SITE_TITLES[site]}, sun at {sun:g}°; {published:.3g} against {value:.3g} cd/m² here",
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


def _patat(sky: StandardSky) -> list[Check]:
    columns = load_table("checks/published_zenith_twilight_patat2006").columns
    (band,) = np.flatnonzero(columns["band"] == "V")
    fit = [float(columns[name][band]) for name in ("a0", "a1", "a2")]
    rms_mag = float(columns["rms_mag"][band])
    zenith_distance = np.array([95.0, 96.0, 97.0, 98.0, 100.0])
    published = np.polynomial.polynomial.polyval(zenith_distance - 95, fit)
    computed = -2.5 * np.log10(sky.zenith_luminance(90 - zenith_distance, _PARANAL_KM) / _LUMINANCE_OF_MAGNITUDE_0)
    brightness = [
        Check(
            key=f"zenith-patat2006-V-{90 - distance:g}",
            topic=TOPIC,
            quantity="Surface brightness of the zenith",
            conditions=f"Paranal, 2600 m, sun at {90 - distance:g}°; luminance for band V, 1.08e5 cd/m² at 0 mag",
            source=_PATAT.format("coefficients in copies that agree; conversion to luminance from memory"),
            published=float(value),
            computed=float(ours),
            tolerance=2 * rms_mag,
            tolerance_reason=f"twice the stated scatter of {rms_mag} mag",
            unit="mag/arcsec²",
            relative=False,
        )
        for distance, value, ours in zip(zenith_distance, published, computed, strict=True)
    ]
    rate = Check(
        key="zenith-patat2006-rate",
        topic=TOPIC,
        quantity="Darkening of the zenith per degree of sun",
        conditions="Paranal, 2600 m, mean from a sun of −5° to −10°",
        source=_PATAT.format("derived here from the published fit"),
        published=float(published[-1] - published[0]) / 5,
        computed=_darkening(sky, -5.0, -10.0, _PARANAL_KM),
        tolerance=math.sqrt(2) * rms_mag / 5,
        tolerance_reason=f"the stated scatter of {rms_mag} mag at either end, over 5°",
        unit="mag/°",
        relative=False,
    )
    return [*brightness, rate]


def _darkening(sky: StandardSky, from_deg: float, to_deg: float, altitude_km: float) -> float:
    """Mean rate [magnitudes per degree] at which the zenith darkens while the sun sinks."""
    start, end = sky.zenith_luminance(np.array([from_deg, to_deg]), altitude_km)
    return float(2.5 * np.log10(start / end) / (from_deg - to_deg))
