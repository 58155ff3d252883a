"""Air mass and refraction: acceptance over all elevations, limits, and the published formulas themselves."""

import numpy as np
import pytest

from skychart.checks import refraction
from skychart.checks.refraction import (
    BENNETT_LIMIT_ARCMIN,
    ELEVATIONS_DEG,
    FORMULA_LIMIT,
    MountainCase,
    air_mass,
    bennett1982_refraction_arcmin,
    kasten1989_air_mass,
    mountain_refraction,
    refraction_arcmin,
    set_elevation_deg,
)

TO_STANDARD_AIR = (1013.25 / 1010) * (283.15 / 288.15)


def test_air_mass_follows_kasten_and_young_1989_from_the_horizon_to_the_zenith() -> None:
    """Within 0.7 % of the closed formula at every elevation, 0.2 % from 0.5 degrees up."""
    ratio = air_mass(ELEVATIONS_DEG) / kasten1989_air_mass(ELEVATIONS_DEG)
    assert ELEVATIONS_DEG[0] == 0
    assert ELEVATIONS_DEG[-1] == 90
    assert np.abs(ratio - 1).max() <= FORMULA_LIMIT
    assert np.abs(ratio - 1)[ELEVATIONS_DEG >= 0.5].max() <= 0.002


@pytest.mark.parametrize(
    ("elevation_deg", "printed"),
    [(0.5, 31.3490), (2, 19.4332), (3, 15.1477), (15, 3.8129), (20, 2.9031), (30, 1.9943), (60, 1.1540), (90, 0.9997)],
)
def test_formula_of_kasten_and_young_1989(elevation_deg: float, printed: float) -> None:
    """Evaluated elsewhere, all digits."""
    assert kasten1989_air_mass(elevation_deg) == pytest.approx(printed, abs=5.1e-5)


def test_refraction_follows_bennett_1982_brought_to_the_temperature_of_the_model() -> None:
    """Within 1 arc minute at every elevation, 0.1 from 5 degrees up."""
    published = bennett1982_refraction_arcmin(ELEVATIONS_DEG) * TO_STANDARD_AIR
    apart = np.abs(refraction_arcmin(ELEVATIONS_DEG) - published)
    assert apart.max() <= BENNETT_LIMIT_ARCMIN
    assert apart[ELEVATIONS_DEG >= 5].max() <= 0.1


@pytest.mark.parametrize(
    ("elevation_deg", "printed"),
    [(0, 34.478), (0.5, 28.754), (1, 24.329), (2, 18.216), (5, 9.883), (10, 5.392), (20, 2.703), (45, 0.995)],
)
def test_formula_of_bennett_1982(elevation_deg: float, printed: float) -> None:
    """Evaluated elsewhere, all digits."""
    assert bennett1982_refraction_arcmin(elevation_deg) == pytest.approx(printed, abs=5.1e-4)


def test_refraction_of_hohenkerk_and_sinclair_1985_answers_to_its_air() -> None:
    """0.05 % in the air of the source; colder, denser air bends more, thinner air less."""
    case = MountainCase()
    assert mountain_refraction() == pytest.approx(case.refraction, rel=5e-4)
    assert mountain_refraction(MountainCase(temperature_k=270.0)) > 1.03 * case.refraction
    assert mountain_refraction(MountainCase(pressure_hpa=600.0)) < 0.9 * case.refraction


def test_low_rays_bend_most_and_the_zenith_not_at_all() -> None:
    """Air mass and refraction fall steadily with elevation, to 1 and to 0."""
    assert np.all(np.diff(air_mass(ELEVATIONS_DEG)) < 0)
    assert np.all(np.diff(refraction_arcmin(ELEVATIONS_DEG)) < 0)
    assert air_mass(90.0)[0] == pytest.approx(1)
    assert refraction_arcmin(90.0) == pytest.approx(0, abs=1e-9)


@pytest.mark.parametrize("last", [-0.55, -0.5, -0.1])
def test_sunset_is_found_where_the_light_ends(last: float) -> None:
    """To a thousandth of an arc minute."""

    class Sky:
        def sun_shines(self, solar_elevation_deg: float) -> bool:
            return solar_elevation_deg > last

    assert set_elevation_deg(Sky()) == pytest.approx(last, abs=2e-5)  # type: ignore[arg-type]


def test_a_sun_that_is_not_refracted_would_be_noticed() -> None:
    """It sets at 0 degrees: both comparisons with the almanac fail."""

    class Straight:
        def sun_shines(self, solar_elevation_deg: float) -> bool:
            return solar_elevation_deg >= 0

    found = refraction.molecular_checks(Straight())  # type: ignore[arg-type]
    assert [check.passed for check in found] == [False, False]
