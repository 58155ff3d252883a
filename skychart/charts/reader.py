"""One atmosphere as the reader page takes it: what is smooth in direction and in the sun's height, and what is not.

The page reads any direction under any sun, so the numbers it gets must bear interpolation over both. Logarithms of the
sky's tristimulus values are split into three parts, each of which does: the peak of haze by its distance from the sun
(sampled far finer than the pictures need, along the arm beside the sun, which costs one view elevation a sun), what is
left of the grid of directions without it, and what the arms around the sun still differ by. The page interpolates each
over the sun's height and adds them. Haze light counts as unpolarised, so Q and U are kept beside the light without the
peak, where they are smooth as well.

Spectra are kept for the survey's few directions; the page joins them and bends the result until it has the colour read.
"""

from dataclasses import dataclass
from typing import Any

import numpy as np

from skychart.charts.aureole import ARMS, DISTANCE_DEG, LOWEST_SUN_DEG, arms, beside, distance_and_side, without_gaps
from skychart.charts.columns import GAMUTS, SPACE_TITLES
from skychart.charts.reading import Sky
from skychart.charts.splines import spline
from skychart.charts.survey import RELATIVE_AZIMUTH_DEG, VIEW_ELEVATION_DEG, Survey, at_suns
from skychart.colour.integrate import LUMINOUS_EFFICACY, tristimulus_matrix
from skychart.colour.observers import colour_matching_functions
from skychart.colour.spaces import SPACES, rgb
from skychart.colour.temperature import planckian_locus

READER_SUNS_DEG = (
    *(-12.0, -11.5, -11.0, -10.5, -10.0, -9.0, -8.0, -7.0, -6.0, -5.0, -4.0, -3.0, -2.0, -1.5, -1.0, -0.5, 0.0, 0.5),
    *(1.0, 1.5, 2.0, 2.5, 3.0, 3.5, 4.0, 4.5, 5.0, 6.0, 8.0, 10.0, 12.0, 15.0, 20.0, 25.0, 30.0, 35.0, 40.0, 50.0),
    *(60.0, 68.0, 75.0, 82.0, 90.0),
)
"""Suns between which the page interpolates, as few as keep its errors; close where haze reddens or the light ends."""

LIGHT_SUNS_DEG = tuple(sorted({*READER_SUNS_DEG, *np.arange(-0.5, 2, 0.125).tolist(), *np.arange(2, 6, 0.5).tolist()}))
"""Suns of the direct light and of refraction, which change fast near the horizon and cost little."""

PEAK_DEG = np.array([0, 0.2, 0.5, 1, 1.5, 2, 3, 5, 7.5, 10, 14, 20, 28])
"""Distances from the sun at which the peak is known."""

SPECTRUM_NM = np.arange(380.0, 781.0, 10.0)

_REACH_DEG = float(PEAK_DEG[-1])
_FADE = 1 - (DISTANCE_DEG / DISTANCE_DEG[-1]) ** 4
_DARKEST = 1e-12


@dataclass(frozen=True)
class ReaderSky:
    """One atmosphere for the reader; logarithms are natural, of tristimulus values in cd m⁻² or lx.

    `smooth_log` (sun, view elevation, azimuth, XYZ) without the peak, `peak_log` (sun, distance, XYZ), `sides_log`
    (sun, arm, distance, XYZ) of what the arms differ by; `polarised` (sun, view elevation, azimuth, Q U) over the
    luminance without the peak; `sky_log` (sun, XYZ) of the level ground under the sky alone; `spectra_log` (sun,
    direction, wavelength) of the radiance. On `light_deg`: `apparent_deg` (light,), and `beam_log` (lit, XYZ) of a
    plane that faces the sun, for the last suns, those that are seen.
    """

    atmosphere: str
    solar_elevation_deg: np.ndarray
    smooth_log: np.ndarray
    peak_log: np.ndarray
    sides_log: np.ndarray
    polarised: np.ndarray
    sky_log: np.ndarray
    spectra_log: np.ndarray
    light_deg: np.ndarray
    apparent_deg: np.ndarray
    beam_log: np.ndarray


def reader_sky(sky: Sky, found: Survey) -> ReaderSky:
    """The reader's numbers of `sky`, which `found` has surveyed at all `READER_SUNS_DEG` and maybe others."""
    found = at_suns(found, READER_SUNS_DEG)
    matrix = tristimulus_matrix(sky.wavelength_nm, found.observer)
    places = list(zip(found.apparent_elevation_deg, _near(sky, found, matrix), strict=True))
    grid = _log(found.stokes_XYZ[..., 0, :])
    peaks = np.stack([_peak(near) for _, near in places])
    on_grid = np.stack([_peak_on_grid(sun, values) for (sun, _), values in zip(places, peaks, strict=True)])
    smooth = grid - on_grid
    sides = [
        _sides(sun, _log(arm), rest, values)
        for (sun, _), arm, rest, values in zip(places, found.aureole_XYZ[..., 0, :], smooth, peaks, strict=True)
    ]
    beam = np.asarray(sky.beam(np.array(LIGHT_SUNS_DEG))) @ matrix
    columns = np.searchsorted(found.wavelength_nm, SPECTRUM_NM)
    return ReaderSky(
        atmosphere=found.air.name,
        solar_elevation_deg=found.solar_elevation_deg,
        smooth_log=smooth,
        peak_log=peaks,
        sides_log=np.stack(sides),
        polarised=found.stokes_XYZ[..., 1:, 1] / np.exp(smooth[..., 1:2]),
        sky_log=_log(found.sky_XYZ),
        spectra_log=_log(found.radiance[..., columns]),
        light_deg=np.array(LIGHT_SUNS_DEG),
        apparent_deg=np.asarray(sky.apparent_elevation_deg(np.array(LIGHT_SUNS_DEG)), float),
        beam_log=_log(beam[beam[:, 1] > 0]),
    )


def reader_constants(observer: str) -> dict[str, Any]:
    """What the page makes colours with, the same that the tables are made with: matrices, Planckian locus, functions.

    `spectrum_to_XYZ` (wavelength, XYZ) sums spectral radiance [W m⁻² sr⁻¹ nm⁻¹] at `SPECTRUM_NM` to cd m⁻².
    """
    mired, locus = planckian_locus(observer)
    fine_nm, functions = colour_matching_functions(observer)
    step = float(SPECTRUM_NM[1] - SPECTRUM_NM[0])
    at_nodes = np.stack([np.interp(SPECTRUM_NM, fine_nm, function, left=0) for function in functions.T], axis=-1)
    return {
        "spaces": {
            space: {"title": SPACE_TITLES[space], "from_xyz": _listed(rgb(np.eye(3), space).T, 12)} for space in SPACES
        },
        "gamuts": list(GAMUTS),
        "locus_uv": _listed(locus, 9),
        "locus_step_mired": float(mired[1] - mired[0]),
        "spectrum_to_XYZ": _listed(LUMINOUS_EFFICACY * step * at_nodes, 6),
    }


def _listed(values: np.ndarray, decimals: int) -> list[Any]:
    listed: list[Any] = np.round(values, decimals).tolist()
    return listed


def _near(sky: Sky, found: Survey, matrix: np.ndarray) -> np.ndarray:
    """Logarithms along the arm beside each sun at `PEAK_DEG`, (sun, distance, XYZ); nan below the horizon."""
    places = [beside(np.radians(PEAK_DEG), float(np.radians(sun))) for sun in found.apparent_elevation_deg]
    view, azimuth = (np.stack(axis) for axis in zip(*places, strict=True))
    seen = (view >= 0) & np.isfinite(azimuth) & (found.apparent_elevation_deg >= LOWEST_SUN_DEG)[:, None]
    light = np.full((*view.shape, 3), np.nan)
    suns = np.broadcast_to(found.solar_elevation_deg[:, None], view.shape)
    light[seen] = sky.stokes(suns[seen], view[seen], azimuth[seen])[..., 0, :] @ matrix
    return _log(light)


def _peak(near: np.ndarray) -> np.ndarray:
    """An arm's logarithms (distance, XYZ) less the parabola that they end in, held where the horizon hides them."""
    if not np.isfinite(near).any():
        return np.zeros_like(near)
    known = np.flatnonzero(np.isfinite(near[:, 0]))
    whole = near[known[np.argmin(np.abs(np.arange(len(near))[:, None] - known), axis=1)]]
    squared = PEAK_DEG[:, None] ** 2
    curve = (whole[-1] - whole[-2]) / (squared[-1] - squared[-2])
    return whole - whole[-1] - curve * (squared - squared[-1])


def _peak_at(peak: np.ndarray, distance_deg: np.ndarray) -> np.ndarray:
    """A peak (distance, XYZ) at any distances, (n,) to (n, XYZ); the last value, nothing, is held beyond."""
    place = np.sqrt(np.clip(distance_deg / _REACH_DEG, 0, 1))
    return spline(np.sqrt(PEAK_DEG / _REACH_DEG), place, flat_ends=True) @ peak


def _peak_on_grid(sun_deg: float, peak: np.ndarray) -> np.ndarray:
    distance, _ = distance_and_side(sun_deg, VIEW_ELEVATION_DEG[:, None], RELATIVE_AZIMUTH_DEG)
    return _peak_at(peak, distance.ravel()).reshape(*distance.shape, 3)


def _sides(sun_deg: float, around: np.ndarray, smooth: np.ndarray, peak: np.ndarray) -> np.ndarray:
    """What grid and peak leave of the arms' logarithms `around` (arm, distance, XYZ), fading to nothing outward."""
    view, azimuth = arms(sun_deg)
    seen = np.isfinite(view)
    if not seen.any():
        return np.zeros((len(ARMS), len(DISTANCE_DEG), 3))
    upward = spline(VIEW_ELEVATION_DEG, view[seen])
    sideways = spline(RELATIVE_AZIMUTH_DEG, azimuth[seen], flat_ends=True)
    distance, _ = distance_and_side(sun_deg, view[seen], azimuth[seen])
    left = np.full_like(around, np.nan)
    left[seen] = around[seen] - np.einsum("pv,pa,vax->px", upward, sideways, smooth) - _peak_at(peak, distance)
    return without_gaps(_FADE[:, None] * left)


def _log(values: np.ndarray) -> np.ndarray:
    return np.log(np.maximum(values, _DARKEST))
