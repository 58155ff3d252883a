"""Every check, in pieces that can be worked on side by side; what is solved for one piece is shared within it."""

from collections.abc import Callable, Iterable

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
from skychart.sky.spectral import SpectralSky, solve_spectral

COMPARED_AIRS = (NAMED_AIRS["clear"], NAMED_AIRS["molecular"])
"""Atmospheres whose solved skies are compared with published values, see `sky_checks`."""

_TOPICS = tuple(
    module.TOPIC
    for module in (
        *(rayleigh, depolarisation, ozone, haze, refraction, sun, natraj, fluxes, polarisation, sphere, haze_sphere),
        *(g173, illuminance, twilight, chromaticity, shape, colorimetry, coding),
    )
)


def run_checks() -> tuple[Check, ...]:
    """Every published value beside the computed one, by topic: from the optics of air to the colours of the sky."""
    skies = [sky_checks(solve_spectral(air)) for air in COMPARED_AIRS]
    return by_topic([*skies, *(piece() for piece in PIECES)])


def by_topic(pieces: Iterable[tuple[Check, ...]]) -> tuple[Check, ...]:
    """The checks of all pieces, topic after topic."""
    return tuple(sorted((check for piece in pieces for check in piece), key=lambda check: _TOPICS.index(check.topic)))


def sky_checks(sky: SpectralSky) -> tuple[Check, ...]:
    """Comparisons with a solved sky: of air called clear and of molecular air; none of any other."""
    compare = dict(zip(COMPARED_AIRS, (_clear, _molecular), strict=True)).get(sky.settings)
    return compare(StandardSky(sky)) if compare else ()


def _clear(clear: StandardSky) -> tuple[Check, ...]:
    return (
        *illuminance.clear_checks(clear),
        *twilight.clear_checks(clear),
        *chromaticity.clear_checks(clear),
        *shape.clear_checks(clear),
    )


def _molecular(molecular: StandardSky) -> tuple[Check, ...]:
    return (
        *refraction.molecular_checks(molecular),
        *illuminance.molecular_checks(molecular),
        *twilight.molecular_checks(molecular),
    )


def _optics() -> tuple[Check, ...]:
    return (
        *rayleigh.checks(),
        *ozone.checks(),
        *haze.checks(),
        *refraction.checks(),
        *sun.checks(),
        *chromaticity.checks(),
        *colorimetry.checks(),
        *coding.checks(),
    )


def _flat() -> tuple[Check, ...]:
    flat = FlatSky()
    return (
        *depolarisation.checks(flat),
        *natraj.checks(flat),
        *fluxes.checks(flat),
        *polarisation.checks(flat),
    )


def _hazy() -> tuple[Check, ...]:
    hazy = HazeCases()
    return (*haze_sphere.checks(hazy), *illuminance.average_checks(hazy))


PIECES: tuple[Callable[[], tuple[Check, ...]], ...] = (_hazy, _flat, sphere.checks, g173.checks, _optics)
"""Pieces that ask for no solved sky of an atmosphere, the longest work first."""
