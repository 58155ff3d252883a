"""Shape of the sky's luminance against the CIE standard clear sky.

Source: CIE S 011/E:2003 = ISO 15469:2004, Spatial distribution of daylight, type 12. The standard sky stands for
measured clear air with some haze, so only features are compared, not values, and at low suns: at 45 degrees the aureole
of the standard sky reaches the zenith, and its darkest point lies 11 degrees further from the sun than in air without
haze. The air called clear is compared.
"""

import functools

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skychart.checks.check import Check
from skychart.checks.standard import StandardSky

TOPIC = "Shape of the clear sky"

_SOURCE = "CIE S 011/E:2003 = ISO 15469:2004, type 12 (coefficients in copies that agree; value derived here from them)"
_SUNS_DEG = (15, 30)
_ARC_DEG = np.arange(2.0, 179.0, 0.5)  # principal plane: 0 the horizon below the sun, 90 the zenith
_A, _B, _C, _D, _E = -1.0, -0.32, 10.0, -3.0, 0.45


def cie_clear_sky(solar_elevation_deg: float, arc_deg: ArrayLike) -> NDArray[np.float64]:
    """Luminance of type 12 over that of the zenith along the principal plane, ``arc_deg`` from the sun's horizon."""
    arc = np.radians(arc_deg)
    sun = np.radians(solar_elevation_deg)
    relative = _indicatrix(np.abs(arc - sun)) * _gradation(np.sin(arc))
    return relative / (_indicatrix(np.pi / 2 - sun) * _gradation(np.array(1.0)))


def clear_checks(sky: StandardSky) -> tuple[Check, ...]:
    """Where the darkest point of the principal plane lies, and how dark it is, at two suns."""
    suns = np.array(_SUNS_DEG, dtype=float)
    view = np.minimum(_ARC_DEG, 180 - _ARC_DEG)
    luminance = sky.sky_XYZ(suns[:, None], view, np.where(_ARC_DEG <= 90, 0.0, 180.0))[..., 1]
    relative = luminance / luminance[:, _ARC_DEG == 90]
    found: list[Check] = []
    for sun, ours in zip(_SUNS_DEG, relative, strict=True):
        found += _darkest_point(sun, cie_clear_sky(sun, _ARC_DEG), ours)
    return tuple(found)


def _indicatrix(angle: NDArray[np.float64]) -> NDArray[np.float64]:
    return 1 + _C * (np.exp(_D * angle) - np.exp(_D * np.pi / 2)) + _E * np.cos(angle) ** 2


def _gradation(cos_zenith: NDArray[np.float64]) -> NDArray[np.float64]:
    return 1 + _A * np.exp(_B / cos_zenith)


def _darkest_point(sun_deg: int, standard: NDArray[np.float64], ours: NDArray[np.float64]) -> list[Check]:
    place, our_place = int(np.argmin(standard)), int(np.argmin(ours))
    entry = functools.partial(
        Check,
        topic=TOPIC,
        conditions=f"principal plane, sun {sun_deg}° up; air called clear; haze of the standard sky unknown",
        source=_SOURCE,
    )
    return [
        entry(
            key=f"cie-clear-sky-place-{sun_deg}",
            quantity="Distance of the darkest point from the sun",
            published=float(_ARC_DEG[place]) - sun_deg,
            computed=float(_ARC_DEG[our_place]) - sun_deg,
            tolerance=10.0,
            tolerance_reason="comparison of shapes only; the standard states no uncertainty",
            unit="°",
            relative=False,
        ),
        entry(
            key=f"cie-clear-sky-depth-{sun_deg}",
            quantity="Luminance of the darkest point over that of the zenith",
            published=float(standard[place]),
            computed=float(ours[our_place]),
            tolerance=0.35,
            tolerance_reason="comparison of shapes only; with less haze the sky is evener",
            unit="1",
            relative=True,
        ),
    ]
