"""Atmosphere: what it accepts, what it says when it does not, and the standard air."""

import numpy as np
import pytest

from skychart.errors import InputError
from skychart.sky import Atmosphere

LEVELS = np.array([0.0, 10.0, 80.0])
DEPTH = np.full((2, 1), 0.1)


def make(**changes: object) -> Atmosphere:
    """A valid atmosphere with some arguments changed."""
    arguments = {
        "level_altitude_km": LEVELS,
        "wavelength_nm": [550.0],
        "rayleigh_depth": DEPTH,
        "absorption_depth": 0 * DEPTH,
        "depolarisation": 0.03,
        "ground_albedo": 0.18,
    }
    return Atmosphere(**{**arguments, **changes})  # type: ignore[arg-type]


def test_scalars_become_one_value_a_wavelength() -> None:
    """Depolarisation and albedo hold for every wavelength; arrays are the atmosphere's own copies."""
    air = make(wavelength_nm=[450.0, 550.0], rayleigh_depth=np.tile(DEPTH, 2), absorption_depth=np.tile(DEPTH, 2))
    assert air.depolarisation.tolist() == [0.03, 0.03]
    assert air.ground_albedo.shape == (2,)


@pytest.mark.parametrize(
    ("changes", "message"),
    [
        ({"level_altitude_km": [1.0, 10, 80]}, "level_altitude_km is"),
        ({"level_altitude_km": [0.0, 10, 5]}, "level_altitude_km is"),
        ({"level_altitude_km": [0.0, 10, 300]}, "at most 200 km"),
        ({"wavelength_nm": [-1.0]}, "wavelength_nm is"),
        ({"rayleigh_depth": np.full((3, 1), 0.1)}, "rayleigh_depth has shape (3, 1), accepted: (2, 1)"),
        ({"rayleigh_depth": -DEPTH}, "rayleigh_depth holds -0.1, accepted: 0 to 100"),
        ({"rayleigh_depth": 0 * DEPTH}, "rayleigh_depth sums to 0"),
        ({"absorption_depth": np.nan * DEPTH}, "absorption_depth holds nan, accepted: 0 to 100"),
        ({"depolarisation": 0.7}, "depolarisation holds 0.7, accepted: 0 to 0.5"),
        ({"ground_albedo": 1.2}, "ground_albedo holds 1.2, accepted: 0 to 1"),
        ({"planet_radius_km": 0.0}, "planet_radius_km is 0.0; accepted: 1000 to 1e8 km"),
    ],
)
def test_wrong_arguments_are_named(changes: dict[str, object], message: str) -> None:
    """One line: what, the value seen, what is accepted."""
    with pytest.raises(InputError) as caught:
        make(**changes)
    assert message in str(caught.value)
    assert "\n" not in str(caught.value)


def test_standard_air_has_the_depths_of_its_parts() -> None:
    """Rayleigh depth at 550 nm 0.0971 (Bodhaine et al. 1999 eq. 30: 0.09707); ozone scales with its column."""
    air = Atmosphere.standard([550.0, 600.0])
    assert air.rayleigh_depth.sum(axis=0)[0] == pytest.approx(0.09707, rel=5e-3)
    none, more = (Atmosphere.standard([550.0, 600.0], ozone_du=column).absorption_depth for column in (0, 450))
    np.testing.assert_allclose(more - none, 1.5 * (air.absorption_depth - none))


def test_standard_air_takes_haze_gases_pressure_and_ground_by_name() -> None:
    """Each argument reaches its own array."""
    air = Atmosphere.standard([550.0], haze="average", haze_depth_550=0.2, ground_albedo="grass", pressure_hpa=800)
    assert air.haze is not None
    assert air.haze.depth.sum() == pytest.approx(0.2, rel=1e-3)
    assert 0.02 < air.ground_albedo[0] < 0.2
    plain = Atmosphere.standard([550.0])
    assert air.rayleigh_depth.sum() == pytest.approx(plain.rayleigh_depth.sum() * 800 / 1013.25)
    assert air.refractivity == pytest.approx(plain.refractivity * 800 / 1013.25)
    town = Atmosphere.standard([450.0], no2_du=0.5).absorption_depth - Atmosphere.standard([450.0]).absorption_depth
    assert town.sum() > 0.003


@pytest.mark.parametrize("ozone", [-1.0, 1001.0, float("nan")])
def test_standard_air_refuses_an_ozone_column_out_of_range(ozone: float) -> None:
    """0 to 1000 Dobson units."""
    with pytest.raises(InputError, match="Dobson units, accepted: 0 to 1000"):
        Atmosphere.standard([550.0], ozone_du=ozone)
