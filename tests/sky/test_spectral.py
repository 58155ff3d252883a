"""The sky on the colour nodes against the solver at every node."""

from dataclasses import replace

import numpy as np

from skychart.colour.chromaticity import uv_prime
from skychart.colour.integrate import tristimulus_matrix
from skychart.config import AirSettings
from skychart.sky import solve
from skychart.sky.grid import Grid
from skychart.sky.sky import lines_of_sight
from skychart.sky.spectral import NODES_NM, SpectralSky, weakened

SUN = np.array([50.0, 10, 2, 0, -4, -8])[:, None]
VIEW = np.array([90.0, 45, 10, 2])
COARSE = Grid(levels=16, zenith=5, azimuth=5, substeps=3)


def test_spline_over_wavelength_costs_no_visible_colour(default_sky: SpectralSky) -> None:
    """Eleven wavelengths of multiple scattering against every node.

    Luminance within 0.15 % by day, 1.1 % to a sun of -8 degrees; u'v' within 0.0002 to -4, 0.001 at -8, where the bands
    of oxygen pairs are deep and narrow. Both on the same coarse grid, for what lies between wavelengths does not depend
    on it.
    """
    once = default_sky.once
    shape, lines = lines_of_sight(SUN, VIEW, 90)
    left = (part.reshape(*shape, 1, -1) for part in default_sky.paths.left(lines))
    every = weakened(once.single(SUN, VIEW, 90), solve(once.air, COARSE).multiple(SUN, VIEW, 90), *left)
    every = every[..., 0, :] @ tristimulus_matrix(NODES_NM)
    sky = replace(default_sky, every_order=solve(default_sky.every_order.air, COARSE))
    splined = sky.stokes(SUN, VIEW, 90)[..., 0, :] @ tristimulus_matrix(NODES_NM)
    luminance = np.abs(splined[..., 1] / every[..., 1] - 1)
    chromaticity = np.linalg.norm(uv_prime(splined) - uv_prime(every), axis=-1)
    assert luminance[:4].max() < 1.5e-3
    assert luminance.max() < 1.1e-2
    assert chromaticity[:5].max() < 2e-4
    assert chromaticity.max() < 1e-3


def test_shapes_follow_the_interface(default_sky: SpectralSky) -> None:
    """Wavelength last, 48 nodes, Stokes before it."""
    assert default_sky.wavelength_nm.shape == (48,)
    assert default_sky.stokes(SUN, VIEW, 90).shape == (6, 4, 3, 48)
    assert default_sky.beam(10.0).shape == (48,)
    diffuse, direct = default_sky.ground_irradiance(np.array([10.0, -5.0]))
    assert diffuse.shape == direct.shape == (2, 48)
    assert np.all(diffuse > 0)
    assert np.all(direct[1] == 0)


def test_polarised_part_is_never_more_than_the_whole(default_sky: SpectralSky) -> None:
    """At every node, the spline's ends included."""
    i, q, u = np.moveaxis(default_sky.stokes(SUN, VIEW, np.array([[[0.0]], [[60]], [[90]], [[180]]])), -2, 0)
    assert np.all(i > 0)
    assert np.all(np.hypot(q, u) <= i)


def test_observer_on_a_mountain_sees_less_sky_and_more_sun(default_sky: SpectralSky) -> None:
    """Diffuse light falls and direct light grows with the observer's altitude."""
    mountain_sky = replace(default_sky, settings=AirSettings(altitude_km=3.0))
    low, high = (sky.ground_irradiance(40.0) for sky in (default_sky, mountain_sky))
    assert np.all(high[0] < low[0])
    assert np.all(high[1] > low[1])


def test_twilight_has_no_step_where_the_last_sunlit_air_sets(default_sky: SpectralSky) -> None:
    """Across the sky away from a sun of -10 degrees, degree by degree: the slope of the logarithm stays even.

    Lines weaken light scattered once by the long way along the ground, and the rest by the line of sight: where the one
    ends the other takes over.
    """
    view = np.arange(15.0, 86.0)
    for azimuth in (120.0, 144.0, 180.0):
        light = default_sky.stokes(-10.0, view, azimuth)[:, 0] @ tristimulus_matrix(NODES_NM)
        slope = np.diff(np.log(light), axis=0)
        assert np.abs(np.diff(slope, axis=0)).max() < 0.01
