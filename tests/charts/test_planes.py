"""Light on planes is what analytic skies give, what the solver's own flux is, and falls by the cosine of the sun."""

import numpy as np
import pytest

from skychart.charts.aureole import DISTANCE_DEG, arms
from skychart.charts.planes import LEVEL, PLANES, plane_light, plane_normals, surrounding_light
from skychart.charts.survey import BELOW_ELEVATION_DEG, RELATIVE_AZIMUTH_DEG, VIEW_ELEVATION_DEG, SkyView, survey

from .conftest import SUNS_DEG

KEYS = [plane.key for plane in PLANES]
NO_ARMS = np.full((3, len(DISTANCE_DEG), 3), np.nan)


def view_of(sky, ground, sun):
    """A sky view of functions of view elevation and azimuth [deg], without an aureole."""
    shape = len(VIEW_ELEVATION_DEG), len(RELATIVE_AZIMUTH_DEG)
    below = len(BELOW_ELEVATION_DEG), len(RELATIVE_AZIMUTH_DEG)
    grids = (
        np.broadcast_to(sky(VIEW_ELEVATION_DEG[:, None], RELATIVE_AZIMUTH_DEG), shape),
        np.broadcast_to(ground(BELOW_ELEVATION_DEG[:, None], RELATIVE_AZIMUTH_DEG), below),
    )
    above, under = (grid[..., None] * np.array([1.0, 2, 3]) for grid in grids)
    return SkyView(above, NO_ARMS, under, sun)


def normals_of(sun):
    """Normals of all planes for a sun that is seen."""
    tilt = np.radians(sun)
    return np.array([[np.cos(tilt), 0, np.sin(tilt)], [0, 0, 1], [1, 0, 0], [0, 1, 0], [-1, 0, 0], [0, 0, -1]])


@pytest.mark.parametrize("sun", [0.5, 20.0, 75.0, 90.0])
def test_uniform_light_gives_pi_on_every_plane(sun):
    """Sky and ground of 5 cd/m²: 5 π lx on all planes within 0.001 %, each channel by its own; half of it on a wall."""
    view = view_of(lambda e, a: 5 + 0 * e * a, lambda e, a: 5 + 0 * e * a, sun)
    sky, ground, _ = surrounding_light(view, normals_of(sun))
    np.testing.assert_allclose(sky + ground, 5 * np.pi * np.broadcast_to([1, 2, 3], (6, 3)), rtol=1e-5)
    np.testing.assert_allclose(sky[KEYS.index("beside")], ground[KEYS.index("beside")], rtol=1e-5)
    assert np.all(ground[LEVEL] == 0)
    assert np.all(sky[KEYS.index("underside")] == 0)


def test_coefficients_that_symmetry_forbids_are_0():
    """A sky that does not vary with azimuth, under a sun at the zenith: only the three that go by z alone are left."""
    view = view_of(lambda e, a: np.exp(e / 90) + 0 * a, lambda e, a: 0.2 + 0 * e * a, 90.0)
    _, _, coefficients = surrounding_light(view, normals_of(90.0))
    assert np.flatnonzero(coefficients.any(axis=1)).tolist() == [0, 2, 6]


def test_a_sky_that_goes_by_the_sine_of_elevation():
    """L = sin e over a black ground: 2 π/3 on the level plane and 2/3 on walls, by hand."""
    view = view_of(lambda e, a: np.sin(np.radians(np.maximum(e, 1e-9))) + 0 * a, lambda e, a: 1e-12 + 0 * e * a, 20.0)
    sky, ground, _ = surrounding_light(view, normals_of(20.0))
    assert sky[LEVEL, 0] == pytest.approx(2 * np.pi / 3, rel=1e-3)
    assert sky[[2, 3, 4], 0] == pytest.approx([2 / 3] * 3, rel=5e-3)
    assert np.abs(ground).max() < 1e-9


def test_the_plane_that_faces_the_sun_sees_the_ground_it_should():
    """Over a black sky, ground of 1 cd/m² gives a plane tilted by ε above the horizon π (1 − sin ε)/2."""
    for sun in (0.5, 20.0, 60.0):
        view = view_of(lambda e, a: 1e-12 + 0 * e * a, lambda e, a: 1 + 0 * e * a, sun)
        _, ground, _ = surrounding_light(view, normals_of(sun))
        assert ground[0, 0] == pytest.approx(np.pi * (1 - np.sin(np.radians(sun))) / 2, rel=2e-3)


@pytest.mark.parametrize("sun", [6.0, 40.0, 80.0])
def test_a_narrow_aureole_is_counted_in_full(sun):
    """A glow of 3 degrees about the sun on the plane that faces it, against a sum over rings about the sun."""

    def glow(elevation, azimuth):
        e, a, s = np.radians(elevation), np.radians(azimuth), np.radians(sun)
        cosine = np.sin(e) * np.sin(s) + np.cos(e) * np.cos(s) * np.cos(a)
        return np.exp(1.5 * np.exp(-np.degrees(np.arccos(np.clip(cosine, -1, 1))) / 3))

    view = view_of(glow, lambda e, a: 1e-9 + 0 * e * a, sun)
    light = glow(*arms(sun))[..., None] * np.array([1.0, 2, 3])
    found, _, _ = surrounding_light(SkyView(view.grid_XYZ, light, view.below_XYZ, sun), normals_of(sun))
    flat = view_of(lambda e, a: 1 + 0 * e * a, lambda e, a: 1e-9 + 0 * e * a, sun)
    even, _, _ = surrounding_light(flat, normals_of(sun))
    distance = np.radians(np.arange(0.005, 60, 0.01))
    extra = np.exp(1.5 * np.exp(-np.degrees(distance) / 3)) - 1
    half = np.arccos(np.clip(-np.tan(np.radians(sun)) / np.tan(distance), -1, 1))
    rings = 2 * half * extra * np.cos(distance) * np.sin(distance) * np.radians(0.01)
    assert found[0, 0] - even[0, 0] == pytest.approx(rings.sum(), rel=0.02)


def test_the_sun_falls_by_its_cosine(found):
    """Beam times the cosine to the sun as it is seen, and nothing on planes that turn away."""
    light = plane_light(found)
    seen = found.beam_XYZ[:, 1] > 0
    assert seen.sum() >= 3
    tilt = np.radians(found.apparent_elevation_deg)[:, None]
    beam = found.beam_XYZ
    np.testing.assert_allclose(light.sun_XYZ[seen, 0], beam[seen], rtol=1e-12)
    np.testing.assert_allclose(light.sun_XYZ[:, LEVEL], found.sun_XYZ, rtol=1e-12)
    toward = KEYS.index("toward")
    np.testing.assert_allclose(light.sun_XYZ[seen, toward], (np.cos(tilt) * beam)[seen], atol=1e-9 * beam.max())
    assert np.all(light.sun_XYZ[:, [KEYS.index(key) for key in ("beside", "away", "underside")]] == 0)


def test_a_hidden_sun_is_faced_by_the_wall_toward_it(found):
    """No plane leans below the horizon for a sun that is not seen."""
    night = SUNS_DEG.index(-8.0)
    np.testing.assert_allclose(plane_normals(found, night)[0], [1, 0, 0], atol=1e-12)
    light = plane_light(found)
    np.testing.assert_allclose(light.sky_XYZ[night, 0], light.sky_XYZ[night, KEYS.index("toward")], rtol=1e-12)


SUNS_SOLVED_DEG = (-6.0, 0.0, 5.0, 30.0, 75.0)


@pytest.fixture(scope="module")
def molecular(default_sky):
    """A survey of the solved molecular sky."""
    return survey(default_sky, SUNS_SOLVED_DEG, "cie-1931-2")


def test_level_illuminance_is_the_solvers_flux(molecular):
    """Summed over directions from the survey's nodes, X, Y and Z of the level plane are the sky's own within 0.1 %."""
    for sun in range(len(SUNS_SOLVED_DEG)):
        sky, _, _ = surrounding_light(molecular.sky_view(sun), plane_normals(molecular, sun))
        np.testing.assert_allclose(sky[LEVEL], molecular.sky_XYZ[sun], rtol=1e-3)
    height = np.maximum(np.sin(np.radians(molecular.apparent_elevation_deg)), 0)
    np.testing.assert_allclose(molecular.sun_XYZ, height[:, None] * molecular.beam_XYZ, rtol=1e-9)


def test_ground_below_is_half_of_what_a_wall_sees(molecular):
    """Even ground gives a wall half of what it gives the underside, which gets albedo times all that falls on it."""
    light = plane_light(molecular)
    underside = light.ground_XYZ[:, KEYS.index("underside")]
    np.testing.assert_allclose(underside, 0.18 * (molecular.sky_XYZ + molecular.sun_XYZ), rtol=1e-6)
    for key in ("toward", "beside", "away"):
        np.testing.assert_allclose(light.ground_XYZ[:, KEYS.index(key)], underside / 2, rtol=1e-3)
