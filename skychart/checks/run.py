"""Every check, with the physics solved once and shared."""

from collections.abc import Iterable

from skychart.checks import (
    chromaticity,
    coding,
    colorimetry,
    depolarisation,
    fluxes,
    g173,
    haze,
    haze_sphere,
    illuminance,
    natraj,
    ozone,
    polarisation,
    rayleigh,
    refraction,
    shape,
    sphere,
    sun,
    twilight,
)
from skychart.checks.check import Check
from skychart.checks.flat import FlatSky
from skychart.checks.haze_cases import HazeCases
from skychart.checks.standard import StandardSky
from skychart.config import NAMED_AIRS
from skychart.sky.spectral import SpectralSky


def run_checks(solved: Iterable[SpectralSky] = ()) -> tuple[Check, ...]:
    """Every published value beside the computed one, by topic: from the optics of air to the colours of the sky.

    ``solved``: skies at hand, to spare the time of solving the airs called molecular and clear again if they are among
    them.
    """
    solved = tuple(solved)
    flat, hazy = FlatSky(), HazeCases()
    molecular, clear = (StandardSky(solved, NAMED_AIRS[name]) for name in ("molecular", "clear"))
    return (
        *rayleigh.checks(),
        *depolarisation.checks(flat),
        *ozone.checks(),
        *haze.checks(),
        *refraction.checks(molecular),
        *sun.checks(),
        *natraj.checks(flat),
        *fluxes.checks(flat),
        *polarisation.checks(flat),
        *sphere.checks(),
        *haze_sphere.checks(hazy),
        *g173.checks(),
        *illuminance.checks(clear, molecular, hazy),
        *twilight.checks(clear, molecular),
        *chromaticity.checks(clear),
        *shape.checks(clear),
        *colorimetry.checks(),
        *coding.checks(),
    )
