"""The solved sky: conservation, symmetry, limits, interface and its errors."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from skychart.errors import InputError
from skychart.sky import Atmosphere, solve
from skychart.sky.grid import Grid, solar_zenith_nodes_deg
from skychart.sky.sky import HIGHEST_OBSERVER_KM, Sky

from .test_shells import exponential

COARSE = Grid(levels=16, zenith=5, azimuth=5, substeps=3)
FLAT_RADIUS_KM = 6371e3


def flat(tau: list[float], albedo: float = 0.0, absorbing: float = 0.0) -> Atmosphere:
    """Flat air of scattering optical depths ``tau``, one a pseudo-wavelength; observers reach its top."""
    air = exponential(FLAT_RADIUS_KM, HIGHEST_OBSERVER_KM)
    depth = air.rayleigh_depth * np.array(tau)
    return Atmosphere(
        air.level_altitude_km, 500.0 + np.arange(len(tau)), depth, absorbing * depth, 0.0, albedo, FLAT_RADIUS_KM
    )


@pytest.fixture(scope="module")
def real() -> Sky:
    """Standard air at three wavelengths on a coarse grid."""
    return solve(Atmosphere.standard([420.0, 500.0, 620.0]), COARSE)


@pytest.fixture(scope="module")
def conservative() -> Sky:
    """Flat, conservative, over black ground."""
    return solve(flat([0.1, 0.5, 1.0]))


@pytest.mark.parametrize("elevation", [90.0, 40.0, 15.0])
def test_flat_conservative_air_loses_no_light(conservative: Sky, elevation: float) -> None:
    """Up + down + direct = incident within 0.1 %, by quadrature of the radiance seen from top and ground."""
    mu, weight = np.polynomial.legendre.leggauss(24)
    t, weight = 0.5 * (mu + 1), 0.5 * weight
    mu, weight = t**2, 2 * t * weight
    phi = (np.arange(8) + 0.5) * 22.5
    view = np.degrees(np.arcsin(mu))[:, None]
    share = 2 * np.pi * (mu * weight)[:, None, None] / len(phi)
    down = (share * conservative.stokes(elevation, view, phi)[..., 0, :]).sum(axis=(0, 1))
    up = (share * conservative.stokes(elevation, -view, phi, HIGHEST_OBSERVER_KM)[..., 0, :]).sum(axis=(0, 1))
    diffuse, direct = conservative.ground_irradiance(elevation)
    sine = np.sin(np.radians(elevation))
    np.testing.assert_allclose(down, diffuse, rtol=1e-3)
    np.testing.assert_allclose(up + down + direct, sine, rtol=1e-3)


def test_thin_air_scatters_once() -> None:
    """Limit tau -> 0: radiance = tau P / (mu0 4 pi) seen at the zenith, exact to first order."""
    tau = 1e-4
    sky = solve(flat([tau]), COARSE)
    sun = np.array([90.0, 60, 30, 15])
    expected = tau * 3 / (16 * np.pi) * (1 + np.sin(np.radians(sun)) ** 2)
    np.testing.assert_allclose(sky.stokes(sun, 90, 0)[:, 0, 0], expected, rtol=1e-3)


def test_azimuth_sign_changes_only_the_sign_of_u(real: Sky) -> None:
    """The sky is symmetric about the sun's vertical plane."""
    azimuth = np.array([10.0, 77, 130, 180])
    left, right = (real.stokes(8, 35, sign * azimuth) for sign in (1, -1))
    np.testing.assert_allclose(left[:, :2], right[:, :2], rtol=1e-5)
    np.testing.assert_allclose(left[:, 2], -right[:, 2], atol=1e-6 * left[:, 0].max())
    assert np.all(np.abs(left[0, 2]) > 1e-2 * left[0, 0])


def test_azimuth_is_idle_at_the_zenith_and_under_an_overhead_sun(real: Sky) -> None:
    """I does not depend on azimuth where azimuth has no meaning."""
    azimuth = np.linspace(0, 180, 7)
    for sun, view in ((25.0, 90.0), (90.0, 30.0)):
        radiance = real.stokes(sun, view, azimuth)[:, 0]
        np.testing.assert_allclose(radiance, np.broadcast_to(radiance[:1], radiance.shape), rtol=2e-4)


def test_reciprocity_of_flat_air() -> None:
    """mu I(mu; mu0) = mu0 I(mu0; mu) over black ground (Chandrasekhar 1950, section 52), for light from below.

    Seen here as diffuse transmission, downward, which obeys the same law.
    """
    sky = solve(flat([0.25]))
    one, other = 30.0, 60.0
    for azimuth in (0.0, 60.0, 180.0):
        there = sky.stokes(one, other, azimuth)[0, 0] * np.sin(np.radians(other))
        back = sky.stokes(other, one, azimuth)[0, 0] * np.sin(np.radians(one))
        assert there == pytest.approx(back, rel=2e-3)


def test_ground_brightens_the_sky_and_absorption_darkens_it() -> None:
    """Order of three skies at one direction."""
    dark, plain, lit = (
        solve(flat([0.3], albedo, absorbing), COARSE).stokes(40, 60, 90)[0, 0]
        for albedo, absorbing in ((0.0, 0.2), (0.0, 0.0), (0.8, 0.0))
    )
    assert dark < plain < lit


def test_lit_ground_is_seen_below_the_horizon(real: Sky) -> None:
    """From the ground looking down: albedo / pi times the irradiance, unpolarised."""
    diffuse, direct = real.ground_irradiance(30)
    seen = real.stokes(30, -40, 20)
    np.testing.assert_allclose(seen[0], 0.18 / np.pi * (diffuse + direct), rtol=2e-3)
    np.testing.assert_allclose(seen[1:], 0, atol=1e-12)


def test_light_falls_steadily_through_twilight(real: Sky) -> None:
    """Ever darker from the zenith sun to -12 degrees, by a factor 3 to 30 every two degrees below -3."""
    sun = np.arange(-12.0, 1.0)
    radiance = real.stokes(sun, 90, 0)[:, 0, 1]
    assert np.all(np.diff(radiance) > 0)
    ratio = radiance[2:] / radiance[:-2]
    assert np.all((ratio[:8] > 3) & (ratio[:8] < 30))


def test_high_observer_sees_a_darker_zenith(real: Sky) -> None:
    """Zenith radiance falls with altitude; between levels it lies between its neighbours."""
    radiance = [real.stokes(30, 90, 0, altitude_km=z)[0, 1] for z in (0.0, 2.0, 5.0, 20.0)]
    assert np.all(np.diff(radiance) < 0)


def test_direct_light_never_grows_toward_the_horizon(real: Sky) -> None:
    """Transmission falls with the sun, 0 below the horizon, more at altitude."""
    beam = real.beam(np.linspace(-12, 90, 52))
    assert np.all(np.diff(beam, axis=0) >= 0)
    assert np.all(beam[np.linspace(-12, 90, 52) < 0] == 0)
    assert np.all(real.beam(5.0, altitude_km=3.0) > real.beam(5.0))


@given(
    sun=st.floats(-12, 90), view=st.floats(0, 90), azimuth=st.floats(-360, 360), altitude=st.sampled_from([0.0, 3.1])
)
@settings(max_examples=25)
def test_every_direction_is_finite_and_physical(
    real: Sky, sun: float, view: float, azimuth: float, altitude: float
) -> None:
    """I > 0 and the polarised part no more than the whole."""
    i, q, u = real.stokes(sun, view, azimuth, altitude)
    assert np.all(np.isfinite(i))
    assert np.all(i > 0)
    assert np.all(np.hypot(q, u) <= i * 1.001)


def test_angles_broadcast_with_wavelength_last(real: Sky) -> None:
    """(sun, 1, 1), (view, 1), (azimuth,) give (sun, view, azimuth, stokes, wavelength), each as if asked alone."""
    sun, view, azimuth = np.array([5.0, 40]), np.array([2.0, 20, 70]), np.array([0.0, 45, 90, 180])
    whole = real.stokes(sun[:, None, None], view[:, None], azimuth)
    assert whole.shape == (2, 3, 4, 3, 3)
    np.testing.assert_allclose(whole[1, 2, 3], real.stokes(40, 70, 180), rtol=1e-5)
    assert real.beam(sun).shape == (2, 3)
    assert real.ground_irradiance(sun)[0].shape == (2, 3)


@pytest.mark.parametrize(
    ("arguments", "message"),
    [
        ((95, 45, 0), "solar elevation is 95°, accepted: -12° to 90°"),
        ((float("nan"), 45, 0), "solar elevation is nan°, accepted: -12° to 90°"),
        ((10, 91, 0), "view elevation is 91°, accepted: -90° to 90°"),
        ((10, 45, 400), "relative azimuth is 400°, accepted: -360° to 360°"),
        ((10, 45, 0, -1), "altitude is -1km, accepted: 0km to 50km"),
    ],
)
def test_angles_out_of_range_are_named(real: Sky, arguments: tuple[float, ...], message: str) -> None:
    """One line with the value seen and what is accepted."""
    with pytest.raises(InputError) as caught:
        real.stokes(*arguments)
    assert str(caught.value) == message


def test_grid_covers_the_sphere_and_all_suns() -> None:
    """Direction weights sum to 2 in cosine for every dip; sun nodes are whole degrees from 0 to 114."""
    for dip in (0.0, 0.03, 0.15):
        cosine, weight = Grid().cosines(dip)
        assert weight.sum() == pytest.approx(2, rel=1e-12)
        assert np.all(np.abs(cosine) <= 1)
    nodes = solar_zenith_nodes_deg()
    assert (nodes[0], nodes[-1]) == (0, 114)
    assert np.all(nodes == np.round(nodes))
    assert np.all(np.diff(nodes) > 0)
