"""Every check, with the physics solved once and shared."""

from collections.abc import Iterable

from skychart.checks import (
    chromaticity,
    colorimetry,
    depolarisation,
    fluxes,
    illuminance,
    natraj,
    ozone,
    polarisation,
    rayleigh,
    shape,
    sphere,
    sun,
    twilight,
)
from skychart.checks.check import Check
from skychart.checks.flat import FlatSky
from skychart.checks.standard import StandardSky
from skychart.sky.spectral import SpectralSky


def run_checks(solved: Iterable[SpectralSky] = ()) -> tuple[Check, ...]:
    """Every published value beside the computed one, by topic: from the optics of air to the colours of the sky.

    ``solved``: skies at hand, to spare the time of solving that of the default settings again if it is among them.
    """
    flat, standard = FlatSky(), StandardSky(solved)
    return (
        *rayleigh.checks(),
        *depolarisation.checks(flat),
        *ozone.checks(),
        *sun.checks(),
        *natraj.checks(flat),
        *fluxes.checks(flat),
        *polarisation.checks(flat),
        *sphere.checks(),
        *illuminance.checks(standard),
        *twilight.checks(standard),
        *chromaticity.checks(standard),
        *shape.checks(standard),
        *colorimetry.checks(),
    )
