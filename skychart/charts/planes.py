"""What falls on the planes that scenes are made of, from the sun, the sky and the lit ground.

A plane receives the luminance of every direction before it times the cosine of its angle to the normal. Sky and ground
are summed over directions all around, the sun is its beam times the cosine.
"""

from dataclasses import dataclass

import numpy as np

from skychart.charts.around import directions_around, unit_vectors
from skychart.charts.dome import light_at
from skychart.charts.harmonics import basis, fitted
from skychart.charts.survey import SkyView, Survey


@dataclass(frozen=True)
class Plane:
    """A plane by the elevation and azimuth of its normal [deg]; without an elevation of its own it faces the sun."""

    key: str
    title: str
    elevation_deg: float | None
    azimuth_deg: float


PLANES = (
    Plane("facing", "Facing the sun", None, 0),
    Plane("level", "Level, facing up", 90, 0),
    Plane("toward", "Wall toward the sun", 0, 0),
    Plane("beside", "Wall beside the sun", 0, 90),
    Plane("away", "Wall away from the sun", 0, 180),
    Plane("underside", "Underside, facing down", -90, 0),
)
LEVEL = 1
_MIRRORED = np.array([1, -1, 1])
_GRAZING = 1e-9
_NOTHING = 1e-7
"""Coefficients below this share of the first are what rounding leaves of those that symmetry makes 0."""


@dataclass(frozen=True)
class PlaneLight:
    """Light on `PLANES` for all suns of a survey.

    `sun_XYZ`, `sky_XYZ` and `ground_XYZ` [lx] (sun, plane, XYZ): the beam, what comes from above the horizon and from
    below it. `coefficients_XYZ` [cd m⁻²] (sun, 9, XYZ): sky and ground in `HARMONICS`, fitted to the planes.
    `normals` (sun, plane, 3) as `unit_vectors` has them.
    """

    sun_XYZ: np.ndarray
    sky_XYZ: np.ndarray
    ground_XYZ: np.ndarray
    coefficients_XYZ: np.ndarray
    normals: np.ndarray


def plane_light(survey: Survey) -> PlaneLight:
    """Light on all planes under every sun of a survey.

    On the level plane both are the survey's own, the solver's flux and the sun that every page gives; the sums here
    agree with them.
    """
    suns = range(len(survey.solar_elevation_deg))
    normals = np.stack([plane_normals(survey, sun) for sun in suns])
    found = [surrounding_light(survey.sky_view(sun), normals[sun]) for sun in suns]
    sky, ground, coefficients = (np.stack(part) for part in zip(*found, strict=True))
    sky[:, LEVEL] = survey.sky_XYZ
    coefficients = np.stack([fitted(*of_sun) for of_sun in zip(coefficients, normals, sky + ground, strict=True)])
    beams = unit_vectors(survey.apparent_elevation_deg, 0.0)
    cosines = np.einsum("spv,sv->sp", normals, beams)
    sun_XYZ = np.where(cosines > _GRAZING, cosines, 0)[..., None] * survey.beam_XYZ[:, None]
    sun_XYZ[:, LEVEL] = survey.sun_XYZ
    return PlaneLight(sun_XYZ, sky, ground, coefficients, normals)


def plane_normals(survey: Survey, sun: int) -> np.ndarray:
    """Unit normals of `PLANES`, (plane, 3); a sun that is not seen is faced by the wall toward it."""
    facing = float(survey.apparent_elevation_deg[sun]) if survey.sun_seen(sun) else 0.0
    elevation = np.array([facing if plane.elevation_deg is None else plane.elevation_deg for plane in PLANES])
    return unit_vectors(elevation, np.array([plane.azimuth_deg for plane in PLANES]))


def surrounding_light(view: SkyView, normals: np.ndarray) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    """Sky and ground [lx] on planes (plane, 3), each (plane, XYZ), and nine integrals [cd m⁻²] (9, XYZ)."""
    around = directions_around(view.sun_elevation_deg)
    light = light_at(view, around.elevation_deg, around.azimuth_deg) * around.solid_angle_sr[:, None]
    halves = around.vectors, around.vectors * _MIRRORED
    cosines = np.sum([np.maximum(half @ normals.T, 0) for half in halves], axis=0)
    above = around.elevation_deg > 0
    coefficients = np.sum([basis(half) for half in halves], axis=0).T @ light
    coefficients[np.abs(coefficients) < _NOTHING * coefficients[0]] = 0
    return cosines[above].T @ light[above], cosines[~above].T @ light[~above], coefficients
