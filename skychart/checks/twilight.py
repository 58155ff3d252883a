"""Luminance of the zenith in twilight against measurements.

Sources: Koomen et al. 1952, Patat, Ugolnikov & Postylyakov 2006; see the tables. Below a sun of about -11 degrees the
night sky, which is not computed, takes part, so nothing is compared there. Of Patat et al. only the rate is compared:
their magnitudes would need a spectrum to become luminances. At their last sun the night sky is a thirtieth of the
light, so it is added here. Koomen's sites are compared with the air called clear, the clean mountain of Patat et al.
with air without haze. Mountains stand on the nearest boundary of the solution's layers, at most 0.1 km off.
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
_SITES = {  # column of the table: place as printed
    "sacramento_peak": "Sacramento Peak, 2800 m",
    "maryland": "Maryland, 30 m, computed at sea level",
}
_KOOMEN_MOUNTAIN_KM, _PARANAL_KM = 2.8, 2.635
_NIGHT_SKY_CD_M2 = 1.08e5 * 10 ** (-0.4 * 21.61)  # V of the dark zenith at Paranal, Patat 2003, A&A 400, 1183
_COMPARED_DEG = (0.0, -3.0, -6.0, -9.0)  # with Koomen's luminances
_SEA_RATE_DEG = (-3.0, -11.0)
_MOUNTAIN_RATE_DEG = (-5.0, -10.0)


def koomen1952_zenith_luminance(site: str) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    """Solar elevations [degrees] and measured zenith luminance [cd/m²] at "sacramento_peak" or "maryland"."""
    columns = load_table("checks/published_zenith_luminance_koomen1952").columns
    return columns["solar_elevation_deg"], columns[f"{site}_cd_ft2"] * _CD_M2_PER_CD_FT2


def clear_checks(clear: StandardSky) -> tuple[Check, ...]:
    """Luminance at two sites, and the rate at which the zenith darkens."""
    sea = _luminances(clear, {*_COMPARED_DEG, *_SEA_RATE_DEG}, 0.0)
    mountain = _luminances(clear, set(_COMPARED_DEG), _KOOMEN_MOUNTAIN_KM)
    return (
        *_koomen("sacramento_peak", mountain),
        *_koomen("maryland", sea),
        _koomen_rate(_darkening(sea, *_SEA_RATE_DEG)),
    )


def molecular_checks(molecular: StandardSky) -> tuple[Check, ...]:
    """The rate at which the zenith of a clean mountain darkens."""
    paranal = _luminances(molecular, set(_MOUNTAIN_RATE_DEG), _PARANAL_KM)
    dimmest = {sun: luminance + _NIGHT_SKY_CD_M2 for sun, luminance in paranal.items()}
    return (_patat_rate(_darkening(dimmest, *_MOUNTAIN_RATE_DEG)),)


def _luminances(sky: StandardSky, suns_deg: set[float], altitude_km: float) -> dict[float, float]:
    suns = np.array(sorted(suns_deg))
    return dict(zip(suns.tolist(), sky.zenith_luminance(suns, altitude_km).tolist(), strict=True))


def _darkening(luminance: dict[float, float], from_deg: float, to_deg: float) -> float:
    """Mean rate [magnitudes per degree] at which the zenith darkens while the sun sinks."""
    return 2.5 * math.log10(luminance[from_deg] / luminance[to_deg]) / (from_deg - to_deg)


def _koomen(site: str, luminance: dict[float, float]) -> list[Check]:
    measured = dict(zip(*koomen1952_zenith_luminance(site), strict=True))
    return [
        Check(
            key=f"zenith-koomen1952-{site}-sun{sun:+g}",
            topic=TOPIC,
            quantity="Zenith luminance, log₁₀ of cd/m²",
            conditions=(
                f"{_SITES[site]}, sun at {sun:g}°; published {measured[sun]:.3g} cd/m², "
                f"computed {luminance[sun]:.3g} cd/m² in air called clear"
            ),
            source=_KOOMEN.format("Tables I and II"),
            published=math.log10(measured[sun]),
            computed=math.log10(luminance[sun]),
            tolerance=math.log10(2),
            tolerance_reason="a factor 2: one or two printed digits, haze of that air unknown",
            unit="log₁₀ cd/m²",
            relative=False,
        )
        for sun in _COMPARED_DEG
    ]


def _koomen_rate(computed: float) -> Check:
    return Check(
        key="zenith-koomen1952-rate",
        topic=TOPIC,
        quantity="Darkening of the zenith per degree of sun",
        conditions="sea level, mean from a sun of −3° to −11°",
        source=_KOOMEN.format("abstract: the sky changes by about a factor 10 in 2°"),
        published=1.25,
        computed=computed,
        tolerance=0.125,
        tolerance_reason="10 %: “about”",
        unit="mag/°",
        relative=False,
    )


def _patat_rate(computed: float) -> Check:
    columns = load_table("checks/published_zenith_twilight_patat2006").columns
    (band,) = np.flatnonzero(columns["band"] == "V")
    linear, square, rms_mag = (float(columns[name][band]) for name in ("a1", "a2", "rms_mag"))
    return Check(
        key="zenith-patat2006-rate",
        topic=TOPIC,
        quantity="Darkening of the zenith per degree of sun",
        conditions=(
            "Paranal, 2635 m, sun from −5° to −10°; band V there, here luminance in air without haze and the published "
            "light of the night sky"
        ),
        source=(
            "Patat, Ugolnikov & Postylyakov 2006, Astron. Astrophys. 455, 385, Table 1, measured "
            "(derived here from the published fit, read in copies that agree)"
        ),
        published=linear + 5 * square,
        computed=computed,
        tolerance=math.sqrt(2) * rms_mag / 5,
        tolerance_reason=f"the stated scatter of {rms_mag} mag at either end, over 5°",
        unit="mag/°",
        relative=False,
    )
