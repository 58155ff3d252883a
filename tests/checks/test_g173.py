"""Reference solar spectra of ASTM G173-03: its atmosphere, its direct light, and what is missed of its sky."""

import dataclasses
from functools import cache

import numpy as np
import pytest

from skychart.checks.g173 import DIRECT_LIMIT, SUN_DEG, direct_transmission, g173_air
from skychart.checks.haze_cases import carried
from skychart.checks.natraj import rms
from skychart.data.tables import load_table
from skychart.sky import solve
from skychart.sky.sky import Sky

SOLVED_NM = (400.0, 550.0, 700.0)
TILT_DEG = 37.0
CIRCUMSOLAR_DEG = 2.9
DIFFUSE_LIMIT = 0.1  # agreed before it was measured


@cache
def sky() -> Sky:
    """The reference atmosphere, solved at three wavelengths."""
    return solve(g173_air(SOLVED_NM))


def tilted(tilt_deg: float) -> np.ndarray:
    """Irradiance by sky and ground of a plane tilted toward the sun, per unit outside the air, (wavelength,)."""
    node, weight = np.polynomial.legendre.leggauss(24)
    height, azimuth = 0.5 * (node + 1), (np.arange(32) + 0.5) * np.pi / 32
    radiance = sky().stokes(SUN_DEG, np.degrees(np.arcsin(height))[:, None], np.degrees(azimuth))[..., 0, :]
    tilt = np.radians(tilt_deg)
    level = np.sqrt(1 - height**2)[:, None] * np.cos(azimuth)
    facing = np.maximum(np.sin(tilt) * level + np.cos(tilt) * height[:, None], 0)
    light = np.einsum("zpw,zp,z->w", radiance, facing, weight) * np.pi / 32
    diffuse, direct = sky().ground_irradiance(SUN_DEG)
    return light + sky().air.ground_albedo * (diffuse + direct) * (1 - np.cos(tilt)) / 2


def circumsolar() -> np.ndarray:
    """Irradiance by the sky within 2.9 degrees of the sun of a plane facing it, per unit outside the air."""
    ring_deg = CIRCUMSOLAR_DEG / np.sqrt(2)  # halves the solid angle
    radiance = sky().stokes(SUN_DEG, SUN_DEG + ring_deg * np.array([1, -1]), 0.0)[:, 0]
    return radiance.mean(axis=0) * np.pi * np.sin(np.radians(CIRCUMSOLAR_DEG)) ** 2


def test_reference_air_is_that_of_astm_g173() -> None:
    """Optical depth 0.084 at 500 nm, exponents 0.964 below and 1.095 above, ozone in proportion to 343.8 units."""
    air = g173_air([450.0, 500.0, 600.0])
    assert air.haze is not None
    blue, middle, red = air.haze.depth.sum(axis=0)
    assert middle == pytest.approx(0.084)
    assert np.log(blue / middle) / np.log(500 / 450) == pytest.approx(0.964)
    assert np.log(middle / red) / np.log(600 / 500) == pytest.approx(1.095)
    assert air.absorption_depth[:, 2].sum() == pytest.approx(343.8 * 2.6867e20 * 5.2e-25, rel=0.03)


def test_direct_spectrum() -> None:
    """2 % rms, as set before it was measured; every one of the 61 wavelengths within 2 %."""
    columns = load_table("checks/astm_g173").columns
    ratio = columns["extraterrestrial"] * direct_transmission() / columns["direct_circumsolar"]
    assert len(ratio) == 61
    assert rms(ratio - 1) <= DIRECT_LIMIT
    assert np.abs(ratio - 1).max() <= 0.02


def test_sky_about_the_sun_is_a_thousandth_of_the_direct_light() -> None:
    """So it does not matter that the standard counts it as direct: 0.05 to 0.25 %."""
    share = circumsolar() / np.interp(SOLVED_NM, np.arange(400.0, 701, 5), direct_transmission())
    assert np.all((share > 5e-4) & (share < 2.5e-3))


@pytest.mark.xfail(strict=True, reason="some 40 % above the standard, see the docstring; the limit is not widened")
def test_sky_and_ground_light_on_the_tilted_plane() -> None:
    """10 %, as set before it was measured: missed.

    Ours is 89 W/m² from 400 to 700 nm, the standard's 62. At 450 and 550 nm ours is 18 and 10 % above the standard even
    over black ground, which no soil is, and there a discrete-ordinates library agrees with ours, see below. The
    standard's is not radiance summed over the sky, but a formula for the level plane turned to the tilted one by
    another.
    """
    columns = load_table("checks/astm_g173").columns
    wavelength = columns["wavelength_nm"]
    cosine = np.cos(np.radians(90 - TILT_DEG - SUN_DEG))
    published = columns["global_tilt"] - cosine * columns["direct_circumsolar"]
    ours = carried(tilted(TILT_DEG) - cosine * circumsolar(), SOLVED_NM, wavelength) * columns["extraterrestrial"]
    assert np.trapezoid(ours, wavelength) == pytest.approx(np.trapezoid(published, wavelength), rel=DIFFUSE_LIMIT)


def test_level_plane_gets_what_the_sky_sends_it() -> None:
    """The same sum over the sky for a plane that is not tilted is the solver's own irradiance, 0.1 %."""
    diffuse, _ = sky().ground_irradiance(SUN_DEG)
    np.testing.assert_allclose(tilted(0.0), diffuse, rtol=1e-3)


def test_level_diffuse_light_over_black_ground_is_that_of_a_discrete_ordinates_library() -> None:
    """In the reference air at 450, 550 and 650 nm, 32 streams, scalar and flat: 1 %."""
    pydisort = pytest.importorskip("PythonicDISORT.pydisort").pydisort
    air = dataclasses.replace(g173_air([450.0, 550.0, 650.0]), ground_albedo=np.zeros(3))
    assert air.haze is not None
    diffuse, direct = solve(air).ground_irradiance(SUN_DEG)
    rayleigh = np.zeros(400)
    rayleigh[[0, 2]] = 1, 0.1
    for case in range(3):
        molecules, absorbed, haze = (
            depth[::-1, case] for depth in (air.rayleigh_depth, air.absorption_depth, air.haze.depth)
        )
        by_haze = haze * air.haze.single_scattering_albedo[case]
        scattering, extinction = molecules + by_haze, molecules + absorbed + haze
        phase = air.haze.moments(400)[:, case]
        moments = (by_haze[:, None] * phase + molecules[:, None] * rayleigh) / scattering[:, None]
        _, _, down, *_ = pydisort(
            np.cumsum(extinction), np.minimum(scattering / extinction, 1 - 1e-6), 32, moments,
            np.sin(np.radians(SUN_DEG)), 1.0, 0.0, NLeg=32, f_arr=moments[:, 32], only_flux=True,
        )  # fmt: skip
        expected = down(extinction.sum() * (1 - 1e-12))
        assert (diffuse[case], direct[case]) == pytest.approx(expected, rel=0.01)
