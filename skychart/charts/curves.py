"""Data of the figures on a sheet: spectra, chromaticities, the principal plane and polarisation."""

from dataclasses import dataclass

import numpy as np

from skychart.charts.aureole import DISTANCE_DEG
from skychart.charts.survey import (
    DIRECTIONS,
    RELATIVE_AZIMUTH_DEG,
    VIEW_ELEVATION_DEG,
    Survey,
    azimuth_index,
    elevation_index,
)
from skychart.colour.differences import uv_prime

KEY_DIRECTIONS = ("view-zenith", "view-45-toward", "view-45-away", "view-02-toward", "view-02-away")
NORMALISED_AT_NM = 560.0
TICK_ELEVATION_DEG = (10, 30, 50, 70)
TICK_AZIMUTH_DEG = (0.0, 30.0, 60.0, 90.0, 120.0, 150.0, 180.0)


@dataclass(frozen=True)
class Spectrum:
    """A curve of `wavelength_nm`: `absolute` in `unit`, `relative` to its own value at 560 nm."""

    key: str
    title: str
    unit: str
    absolute: np.ndarray
    relative: np.ndarray


@dataclass(frozen=True)
class Spectra:
    """Spectra on common wavelengths; the sun's is missing while it is below the horizon."""

    wavelength_nm: np.ndarray
    curves: tuple[Spectrum, ...]


@dataclass(frozen=True)
class Chromaticities:
    """Points in the CIE 1976 diagram: sky colours with the hex they are drawn in, and the sun's where it is up."""

    sky_uv: np.ndarray
    sky_hex: tuple[str, ...]
    sun_uv: np.ndarray | None
    track: bool = False


@dataclass(frozen=True)
class PrincipalPlane:
    """From the horizon below the sun over the zenith to the horizon opposite.

    `arc_deg` runs from 0 through 90 (zenith) to 180. `degree` is the degree of polarisation, positive where the
    electric vector lies across the plane, so it changes sign at the neutral points.
    """

    arc_deg: np.ndarray
    sun_arc_deg: float
    luminance_cd_m2: np.ndarray
    uv: np.ndarray
    degree: np.ndarray


@dataclass(frozen=True)
class Polarisation:
    """Degree and direction of the electric vector over the half of the sky on one side of the sun.

    `degree_map` (view elevation, azimuth) on the survey's grid; ticks at (elevation, azimuth, degree, angle) [deg],
    angle from the horizontal.
    """

    view_elevation_deg: np.ndarray
    relative_azimuth_deg: np.ndarray
    degree_map: np.ndarray
    ticks: tuple[tuple[float, float, float, float], ...]
    sun_elevation_deg: float
    largest: float


def spectra(survey: Survey, sun: int) -> Spectra:
    """The five key directions and the sun at the `sun`-th elevation."""
    stems = [direction.stem for direction in DIRECTIONS]
    unit = "W m⁻² sr⁻¹ nm⁻¹"
    curves = [
        _spectrum(survey, stem, DIRECTIONS[stems.index(stem)].title, unit, survey.radiance[sun, stems.index(stem)])
        for stem in KEY_DIRECTIONS
    ]
    if survey.sun_seen(sun):
        beam = survey.beam_irradiance[sun]
        curves.append(_spectrum(survey, "sun", "Sun, direct", "W m⁻² nm⁻¹", beam))
    return Spectra(survey.wavelength_nm, tuple(curves))


def _spectrum(survey: Survey, key: str, title: str, unit: str, absolute: np.ndarray) -> Spectrum:
    reference = float(np.interp(NORMALISED_AT_NM, survey.wavelength_nm, absolute))
    return Spectrum(key, title, unit, absolute, absolute / reference)


def principal_plane(survey: Survey, sun: int) -> PrincipalPlane:
    """The vertical plane through the sun at the `sun`-th elevation."""
    apparent = float(survey.apparent_elevation_deg[sun])
    up, _, down = survey.aureole_XYZ[sun]
    nodes = [
        (VIEW_ELEVATION_DEG, survey.stokes_XYZ[sun, :, azimuth_index(0)]),
        (180 - VIEW_ELEVATION_DEG[:-1], survey.stokes_XYZ[sun, :-1, azimuth_index(180)]),
        (apparent + DISTANCE_DEG, up),
        (apparent - DISTANCE_DEG[1:], down[1:]),
    ]
    arc, plane = (np.concatenate(part) for part in zip(*nodes, strict=True))
    arc, first = np.unique(np.where(np.isfinite(plane[:, 0, 1]), arc, np.nan), return_index=True)
    arc, plane = arc[np.isfinite(arc)], plane[first[np.isfinite(arc)]]
    intensity, q = plane[:, 0, 1], plane[:, 1, 1]
    return PrincipalPlane(
        arc_deg=arc,
        sun_arc_deg=apparent,
        luminance_cd_m2=intensity,
        uv=uv_prime(plane[:, 0]),
        degree=q / intensity,
    )


def polarisation_map(survey: Survey, sun: int) -> Polarisation:
    """Degree of polarisation over the sky, and the electric vector at a few places."""
    intensity, q, u = np.moveaxis(survey.stokes_XYZ[sun, ..., 1], -1, 0)
    degree = np.hypot(q, u) / intensity
    angle = np.degrees(0.5 * np.arctan2(u, q))
    ticks = [
        (float(elevation), azimuth, float(degree[place]), float(angle[place]))
        for elevation in TICK_ELEVATION_DEG
        for azimuth in TICK_AZIMUTH_DEG
        for place in [(elevation_index(elevation), azimuth_index(azimuth))]
    ]
    return Polarisation(
        view_elevation_deg=VIEW_ELEVATION_DEG,
        relative_azimuth_deg=RELATIVE_AZIMUTH_DEG,
        degree_map=degree,
        ticks=tuple(ticks),
        sun_elevation_deg=float(survey.apparent_elevation_deg[sun]),
        largest=float(degree.max()),
    )
