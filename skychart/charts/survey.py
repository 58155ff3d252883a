"""All that the pages of one atmosphere show, asked from the sky once.

The grid of view directions serves the pictures, which interpolate on it; the swatch tables and the direction
sheets take some of its nodes, so that a picture and a table never disagree.
"""

from dataclasses import dataclass, replace

import numpy as np

from skychart.charts.aureole import arms
from skychart.charts.reading import Sky
from skychart.colour.integrate import tristimulus_matrix
from skychart.config import AirSettings
from skychart.sky.sky import LOWEST_SUN_DEG
from skychart.sky.sun import SOLAR_DISC_DIAMETER_DEG, SOLAR_DISC_SOLID_ANGLE_SR, solar_irradiance

VIEW_ELEVATION_DEG = np.array(
    [0, 0.5, 1, 2, 3, 4, 5, 6, 8, 10, 12, 15, 20, 25, 30, 35, 40, 45, 50, 55, 60, 65, 70, 75, 80, 85, 90], float
)
RELATIVE_AZIMUTH_DEG = np.union1d(np.arange(0.0, 181.0, 7.5), [1, 3])
"""Even steps, and two azimuths near the sun's own: there a low sun's haze changes with every degree."""

_BY_SUN = (
    *("solar_elevation_deg", "apparent_elevation_deg", "stokes_XYZ", "aureole_XYZ", "below_XYZ"),
    *("sky_XYZ", "sun_XYZ", "beam_XYZ", "radiance", "beam_irradiance", "disc_sr"),
)
BELOW_ELEVATION_DEG = np.array([-90, -60, -40, -25, -15, -10, -7, -5, -4, -3, -2, -1, -0.5])
_ZENITH_COSINE = 1e-6


@dataclass(frozen=True)
class Direction:
    """A view direction that has a sheet of its own, or a spectrum on every sheet."""

    stem: str
    title: str
    view_elevation_deg: float
    relative_azimuth_deg: float


DIRECTIONS = (
    Direction("view-zenith", "Zenith", 90, 0),
    Direction("view-45-toward", "45° up, toward the sun", 45, 0),
    Direction("view-45-beside", "45° up, beside the sun", 45, 90),
    Direction("view-45-away", "45° up, away from the sun", 45, 180),
    Direction("view-02-toward", "2° up, toward the sun", 2, 0),
    Direction("view-02-beside", "2° up, beside the sun", 2, 90),
    Direction("view-02-away", "2° up, away from the sun", 2, 180),
)


@dataclass(frozen=True)
class SkyView:
    """The sky of one sun, as a picture takes it.

    `grid_XYZ` [cd m⁻²] (view elevation, azimuth, XYZ) on the survey's grid; `arms_XYZ` (arm, distance, XYZ) around the
    sun, whose apparent elevation is `sun_elevation_deg`; nan below the horizon. `below_XYZ` (elevation below the
    horizon, azimuth, XYZ): the lit ground and the air before it.
    """

    grid_XYZ: np.ndarray
    arms_XYZ: np.ndarray
    below_XYZ: np.ndarray
    sun_elevation_deg: float


@dataclass(frozen=True)
class Survey:
    """A sky at every sun elevation and view direction, as tristimulus values and a few spectra.

    `stokes_XYZ` [cd m⁻²] (sun, view elevation, azimuth, Stokes I Q U, XYZ); `sky_XYZ` and `sun_XYZ` [lx] of the
    level ground (sun, XYZ); `beam_XYZ` [lx] of a plane facing the sun (sun, XYZ); `aureole_XYZ` as `stokes_XYZ`
    along the arms around the sun (sun, arm, distance, Stokes I Q U, XYZ), nan below the horizon; `below_XYZ` [cd m⁻²]
    (sun, elevation below the horizon, azimuth, XYZ): the lit ground and the air before it; `radiance`
    [W m⁻² sr⁻¹ nm⁻¹] of `DIRECTIONS` (sun, direction, wavelength); `beam_irradiance` [W m⁻² nm⁻¹] of a plane
    facing the sun (sun, wavelength), both on the sky's wavelengths with the solar spectrum averaged about each;
    `disc_sr` [sr] (sun,) the solid angle of the sun's disc as refraction leaves it, nan where it is not seen.
    """

    air: AirSettings
    observer: str
    solar_elevation_deg: np.ndarray
    apparent_elevation_deg: np.ndarray
    wavelength_nm: np.ndarray
    stokes_XYZ: np.ndarray
    aureole_XYZ: np.ndarray
    below_XYZ: np.ndarray
    sky_XYZ: np.ndarray
    sun_XYZ: np.ndarray
    beam_XYZ: np.ndarray
    radiance: np.ndarray
    beam_irradiance: np.ndarray
    disc_sr: np.ndarray

    @property
    def card_XYZ(self) -> np.ndarray:
        """Luminance [cd m⁻²] of a level, perfectly white card, as (sun, XYZ)."""
        return (self.sky_XYZ + self.sun_XYZ) / np.pi

    def sky_view(self, sun: int) -> SkyView:
        """The `sun`-th sky for a picture."""
        apparent = float(self.apparent_elevation_deg[sun])
        return SkyView(self.stokes_XYZ[sun, :, :, 0], self.aureole_XYZ[sun, :, :, 0], self.below_XYZ[sun], apparent)

    def sun_seen(self, sun: int) -> bool:
        """Whether the `sun`-th sun stands above the horizon as it is seen."""
        return bool(self.beam_XYZ[sun, 1] > 0)


def survey(sky: Sky, solar_elevation_deg: tuple[float, ...], observer: str) -> Survey:
    """Ask `sky` for every direction at every sun elevation [deg]."""
    suns = np.array(solar_elevation_deg, float)
    matrix = tristimulus_matrix(sky.wavelength_nm, observer)
    stokes = sky.stokes(suns[:, None, None], VIEW_ELEVATION_DEG[:, None], RELATIVE_AZIMUTH_DEG)
    apparent = np.asarray(sky.apparent_elevation_deg(suns), float)
    diffuse, direct = sky.ground_irradiance(suns)
    beam = sky.beam(suns)
    solar = _solar_about(sky.wavelength_nm)
    rows = [elevation_index(direction.view_elevation_deg) for direction in DIRECTIONS]
    columns = [azimuth_index(direction.relative_azimuth_deg) for direction in DIRECTIONS]
    return Survey(
        air=sky.settings,
        observer=observer,
        solar_elevation_deg=suns,
        apparent_elevation_deg=apparent,
        wavelength_nm=sky.wavelength_nm,
        stokes_XYZ=stokes @ matrix,
        aureole_XYZ=_aureole(sky, suns, apparent, matrix),
        below_XYZ=_below(sky, suns, diffuse + direct, matrix),
        sky_XYZ=diffuse @ matrix,
        sun_XYZ=direct @ matrix,
        beam_XYZ=beam @ matrix,
        radiance=stokes[:, rows, columns, 0] * solar,
        beam_irradiance=beam * solar,
        disc_sr=np.where((beam @ matrix)[:, 1] > 0, _disc(sky, suns, apparent), np.nan),
    )


def at_suns(found: Survey, solar_elevation_deg: tuple[float, ...]) -> Survey:
    """The part of a survey that belongs to these suns [deg], which it must hold."""
    suns = np.searchsorted(found.solar_elevation_deg, solar_elevation_deg)
    return replace(found, **{name: getattr(found, name)[suns] for name in _BY_SUN})


def elevation_index(view_elevation_deg: float) -> int:
    """Index of a view elevation on the survey's grid, which must hold it."""
    return int(np.flatnonzero(view_elevation_deg == VIEW_ELEVATION_DEG)[0])


def azimuth_index(relative_azimuth_deg: float) -> int:
    """Index of a relative azimuth on the survey's grid, which must hold it."""
    return int(np.flatnonzero(relative_azimuth_deg == RELATIVE_AZIMUTH_DEG)[0])


def _aureole(sky: Sky, suns: np.ndarray, apparent_deg: np.ndarray, matrix: np.ndarray) -> np.ndarray:
    """The sky along the arms around each sun, in one question for all that lie above the horizon."""
    places = [arms(float(elevation)) for elevation in apparent_deg]
    view, azimuth = (np.stack(axis) for axis in zip(*places, strict=True))
    seen = np.isfinite(view)
    found = np.full((*view.shape, 3, 3), np.nan)
    found[seen] = sky.stokes(np.broadcast_to(suns[:, None, None], view.shape)[seen], view[seen], azimuth[seen]) @ matrix
    return found


def _disc(sky: Sky, suns: np.ndarray, apparent_deg: np.ndarray) -> np.ndarray:
    """Solid angle of the disc [sr]: refraction lifts its lower limb more than the upper one, and draws it together."""
    limbs = np.clip(suns + SOLAR_DISC_DIAMETER_DEG / 2 * np.array([[-1], [1]]), LOWEST_SUN_DEG, 90)
    lower, upper = (np.asarray(sky.apparent_elevation_deg(limb), float) for limb in limbs)
    height = np.divide(upper - lower, limbs[1] - limbs[0], out=np.ones_like(suns), where=limbs[1] > limbs[0])
    true, seen = np.cos(np.radians(suns)), np.cos(np.radians(apparent_deg))
    width = np.divide(seen, true, out=np.ones_like(suns), where=true > _ZENITH_COSINE)
    return SOLAR_DISC_SOLID_ANGLE_SR * height * width


def _below(sky: Sky, suns: np.ndarray, irradiance: np.ndarray, matrix: np.ndarray) -> np.ndarray:
    """What is seen below the horizon: from the ground, the ground at one's feet; from aloft, a question of its own."""
    shape = len(suns), len(BELOW_ELEVATION_DEG), len(RELATIVE_AZIMUTH_DEG), 3
    if sky.settings.altitude_km == 0:
        lit = irradiance * sky.ground_albedo @ matrix / np.pi
        return np.broadcast_to(lit[:, None, None], shape)
    light = sky.stokes(suns[:, None, None], BELOW_ELEVATION_DEG[:, None], RELATIVE_AZIMUTH_DEG)[..., 0, :]
    return light @ matrix


def _solar_about(wavelength_nm: np.ndarray) -> np.ndarray:
    """Solar irradiance [W m⁻² nm⁻¹] averaged over the spacing of the nodes, so that no line is met by chance."""
    half = float(np.median(np.diff(wavelength_nm))) / 2
    offsets = np.linspace(-half, half, 11)
    weights = np.array([0.5, *[1.0] * 9, 0.5]) / 10
    return solar_irradiance(wavelength_nm[:, None] + offsets) @ weights
