"""Hazy cases that are solved together, and what is made of them."""

import dataclasses

import numpy as np
import pytest

from skychart.checks import haze
from skychart.checks.haze_cases import (
    AVERAGE_NM,
    BENCHMARK_NM,
    HazeCases,
    average_air,
    benchmark_air,
    carried,
)
from skychart.checks.illuminance import ies1984_illuminance
from skychart.sky.haze import Haze


@pytest.fixture(scope="module")
def cases() -> HazeCases:
    """All of them, solved."""
    return HazeCases()


def haze_of_air(air: object) -> Haze:
    """The haze of an atmosphere that has some."""
    found = air.haze  # type: ignore[attr-defined]
    assert isinstance(found, Haze)
    return found


def test_benchmark_air_is_that_of_the_header_of_its_table() -> None:
    """Optical depth 0.1 (wavelength / 550 nm)^-1.3, albedo 0.95, asymmetry 0.7, scale height 2 km, ground 0.2."""
    air = benchmark_air()
    found = haze_of_air(air)
    np.testing.assert_allclose(found.depth.sum(axis=0), 0.1 * (np.array(BENCHMARK_NM) / 550) ** -1.3)
    np.testing.assert_allclose(found.depth[2] / found.depth[0], np.exp(-1))
    np.testing.assert_allclose(found.single_scattering_albedo, 0.95)
    np.testing.assert_allclose(found.asymmetry, 0.7, atol=1e-4)
    np.testing.assert_allclose(air.ground_albedo, 0.2)
    assert air.refractivity == 0


def test_average_air_has_the_depth_of_its_name() -> None:
    """0.15 at 550 nm."""
    assert haze_of_air(average_air()).depth.sum(axis=0)[AVERAGE_NM.index(550.0)] == pytest.approx(0.15, rel=1e-6)


def test_light_is_carried_exactly_along_powers_and_their_squares() -> None:
    """A power of the wavelength, and one whose exponent changes; every leading shape."""
    wanted = np.array([400.0, 475.0, 550.0, 620.0, 700.0])

    def light(wavelength_nm: np.ndarray) -> np.ndarray:
        x = np.log(wavelength_nm / 550)
        return np.stack([np.exp(-4 * x), 0.1 * np.exp(-1.3 * x + 0.4 * x**2)])

    found = carried(light(np.array(AVERAGE_NM)), AVERAGE_NM, wanted)
    np.testing.assert_allclose(found, light(wanted), rtol=1e-9)


def test_average_air_dims_the_ground_of_its_own_numbers(cases: HazeCases) -> None:
    """Less than airless ground gets, more than half of it with a high sun, and less with every lower one."""
    light = cases.average_ground_irradiance(np.array([60.0, 30.0, 10.0]))
    assert np.all(light < np.sin(np.radians([60.0, 30.0, 10.0]))[:, None])
    assert np.all(light[0] > 0.5)
    assert np.all(np.diff(light, axis=0) < 0)


@pytest.mark.parametrize(
    ("solar_elevation_deg", "lux"), [(30, 41.9e3 + 11.76e3), (60, 86.6e3 + 15.22e3), (90, 103.4e3 + 16.3e3)]
)
def test_clear_sky_formula_of_the_ies_1984(solar_elevation_deg: float, lux: float) -> None:
    """Sun and sky evaluated elsewhere, to their three digits; nothing for a sun that is not up."""
    assert ies1984_illuminance(solar_elevation_deg) == pytest.approx(lux, rel=1.5e-3)
    assert np.isnan(ies1984_illuminance([0.0, -1.0, 90.1])).all()


def test_a_wrong_particle_is_noticed(monkeypatch: pytest.MonkeyPatch) -> None:
    """Sea salt taken for the particles of clean air: its four values fail, and no other."""
    wrong = dataclasses.replace(haze.HAZE_TYPES["maritime"], aerosol="continental_clean")
    kinds = {"clean": haze.HAZE_TYPES["clean"], "average": haze.HAZE_TYPES["average"], "maritime": wrong}
    monkeypatch.setattr(haze, "HAZE_TYPES", kinds)
    failed = [check.key for check in haze.checks() if not check.passed]
    assert len(failed) == 4
    assert all(key.startswith("opac1998-continental-clean-") for key in failed)
