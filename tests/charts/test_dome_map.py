"""A map of everything around gives every plane the light that the sky, the ground and the sun give it."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from skychart.charts.dome import light_at
from skychart.charts.dome_map import disc_shares, dome_map, level_XYZ, pixel_mean_sine, pixel_solid_angle_sr
from skychart.charts.survey import survey

PLANES = {
    "up": (90.0, 0.0),
    "down": (-90.0, 0.0),
    "toward": (0.0, 0.0),
    "beside": (0.0, 90.0),
    "away": (0.0, 180.0),
    "facing": (10.0, 0.0),
}


def unit(elevation_deg, azimuth_deg):
    """Unit vectors: up, toward the sun's azimuth, to its right."""
    elevation, azimuth = np.radians(np.broadcast_arrays(elevation_deg, azimuth_deg))
    return np.stack(
        [np.sin(elevation), np.cos(elevation) * np.cos(azimuth), np.cos(elevation) * np.sin(azimuth)], axis=-1
    )


def pixel_directions(width, sun_azimuth_deg):
    """Directions of the pixels of a map, the sun's azimuth being 0."""
    elevation = np.degrees(np.arcsin(pixel_mean_sine(width)))[:, None]
    return unit(elevation, 360 * (np.arange(width) + 0.5) / width - 180 - sun_azimuth_deg)


def on_plane(normal, directions, light, solid_angle):
    """Illuminance of a plane by light from all around."""
    weight = np.maximum(directions @ normal, 0) * solid_angle
    return np.einsum("rc,rcx->x", weight, light)


@pytest.fixture(scope="module")
def low_sun(found):
    """Index of the sun at 10° in the survey of the fake sky."""
    return int(np.flatnonzero(found.solar_elevation_deg == 10)[0])


@pytest.mark.parametrize("plane", PLANES)
@pytest.mark.parametrize("azimuth", [0.0, -77.7])
def test_six_planes_get_from_the_pixels_what_they_get_from_the_sky(found, low_sun, plane, azimuth):
    """Within 0.5 % of an integral by Gauss–Legendre points in the sine of elevation, over both hemispheres."""
    normal = unit(*PLANES[plane])
    dome = dome_map(found, low_sun, 512, azimuth)
    mapped = on_plane(normal, pixel_directions(512, azimuth), dome.XYZ, pixel_solid_angle_sr(512)[:, None])
    points, weights = np.polynomial.legendre.leggauss(200)
    sine = np.concatenate([(points - 1) / 2, (points + 1) / 2])
    turn = (np.arange(720) + 0.5) / 2
    elevation = np.degrees(np.arcsin(sine))[:, None]
    light = light_at(found.sky_view(low_sun), elevation, turn)
    area = np.concatenate([weights, weights])[:, None] / 2 * np.radians(0.5)
    np.testing.assert_allclose(mapped, on_plane(normal, unit(elevation, turn), light, area), rtol=5e-3)


def test_level_ground_gets_the_flux_of_the_solver(default_sky):
    """Within 0.5 % for air without haze, from the zenith sun to twilight."""
    suns = (-4.0, 2.0, 30.0, 90.0)
    found = survey(default_sky, suns, "cie-1931-2")
    for sun in range(len(suns)):
        np.testing.assert_allclose(level_XYZ(dome_map(found, sun, 512)), found.sky_XYZ[sun], rtol=5e-3)


def test_pixels_fill_the_sphere():
    """Their solid angles add up to 4π, and those of the upper half times their mean sine to π."""
    area, sine = pixel_solid_angle_sr(64) * 64, pixel_mean_sine(64)
    assert area.sum() == pytest.approx(4 * np.pi)
    assert (area * np.maximum(sine, 0)).sum() == pytest.approx(np.pi)


def test_a_pixel_is_the_sky_in_its_direction(found, low_sun):
    """Away from the sun and the horizon within 0.5 %, whichever way the map is turned; below is the lit ground."""
    for turned in (0.0, 45.0, -190.0):
        dome = dome_map(found, low_sun, 512, turned)
        across = 360 * (np.arange(512) + 0.5) / 512 - 180 - turned
        far = np.abs((across + 180) % 360 - 180) > 30
        elevation = 90 - 180 * (np.arange(256) + 0.5) / 256
        wanted = light_at(found.sky_view(low_sun), elevation[10:120, None], across)
        np.testing.assert_allclose(dome.XYZ[10:120][:, far], wanted[:, far], rtol=5e-3)
        ground = (found.sky_XYZ + found.sun_XYZ)[low_sun] * 0.18 / np.pi
        np.testing.assert_allclose(dome.XYZ[128:], np.broadcast_to(ground, (128, 512, 3)), rtol=1e-6)


def test_the_sun_stands_where_it_is_asked_to(found, low_sun):
    """Over the middle by default, a quarter of the width to the right at 90°, and the whole picture moves with it."""
    middle = dome_map(found, low_sun, 512, disc=True).XYZ[..., 1]
    right = dome_map(found, low_sun, 512, 90.0, disc=True).XYZ[..., 1]
    np.testing.assert_allclose(np.roll(middle, 128, axis=1), right, rtol=1e-9)
    row, column = np.unravel_index(right.argmax(), right.shape)
    apparent = found.apparent_elevation_deg[low_sun]
    assert abs(row - (90 - apparent) / 180 * 256) <= 1
    assert abs(column - 0.75 * 512) <= 1


@given(
    sun=st.floats(0.6, 90),
    azimuth=st.floats(-360, 360),
    width=st.sampled_from([512, 1024, 2048]),
    plane=st.sampled_from([*PLANES, "sun"]),
)
def test_the_sun_drawn_adds_its_illuminance(sun, azimuth, width, plane):
    """Within 0.5 % of it facing the sun, on whatever plane, wherever the sun falls between the pixels."""
    shares = disc_shares(sun, azimuth, width)
    assert shares.min() >= 0
    assert shares.sum() == pytest.approx(1, abs=1e-9)
    row, column = np.nonzero(shares)
    elevation = np.degrees(np.arcsin(pixel_mean_sine(width)[row]))
    directions = unit(elevation, 360 * (column + 0.5) / width - 180 - azimuth)
    normal = unit(sun, 0.0) if plane == "sun" else unit(*PLANES[plane])
    got = (np.maximum(directions @ normal, 0) * shares[row, column]).sum()
    assert got == pytest.approx(max(float(unit(sun, 0.0) @ normal), 0), abs=5e-3)


@given(sun=st.floats(0.4, 90), azimuth=st.floats(-360, 360), width=st.sampled_from([512, 1024, 2048]))
def test_level_ground_gets_the_share_of_a_low_sun_too(sun, azimuth, width):
    """Within 0.5 % of what the sun gives level ground, though a pixel is wider than the sun is high."""
    rows = disc_shares(sun, azimuth, width).sum(axis=1)
    assert rows[width // 4 :].max() == 0
    assert rows @ pixel_mean_sine(width) == pytest.approx(np.sin(np.radians(sun)), rel=5e-3)


def test_the_disc_changes_nothing_but_the_pixels_of_the_sun(found, low_sun):
    """It adds the beam to a plane facing it; all else stays; a sun below the horizon adds nothing."""
    without, drawn = (dome_map(found, low_sun, 512, 12.3, disc).XYZ for disc in (False, True))
    added = drawn - without
    assert np.count_nonzero(added[..., 1]) <= 16
    light = np.einsum("r,rcx->x", pixel_solid_angle_sr(512), added)
    np.testing.assert_allclose(light, found.beam_XYZ[low_sun], rtol=1e-6)
    night = int(np.flatnonzero(found.solar_elevation_deg == -8)[0])
    np.testing.assert_array_equal(dome_map(found, night, 64, disc=True).XYZ, dome_map(found, night, 64).XYZ)
