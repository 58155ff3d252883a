"""Sunlight outside the atmosphere against its table and the published size of the sun."""

import math

import numpy as np
import pytest

from skychart.data import load_table
from skychart.errors import InputError
from skychart.sky.sun import SOLAR_DISC_DIAMETER_DEG, SOLAR_DISC_SOLID_ANGLE_SR, solar_irradiance


def test_whole_nanometres_are_the_rows_of_the_table() -> None:
    """No smoothing, no shift."""
    columns = load_table("solar_tsis1_hsrs_v2_1nm").columns
    np.testing.assert_array_equal(solar_irradiance(columns["wavelength_nm"]), columns["irradiance_w_m2_nm"])


def test_between_two_bins_the_irradiance_is_linear() -> None:
    """A quarter of the way, a quarter of the difference."""
    left, right = solar_irradiance([500, 501])
    assert solar_irradiance(500.25) == pytest.approx(0.75 * left + 0.25 * right, rel=1e-12)


@pytest.mark.parametrize("shape", [(), (1,), (4,), (2, 3)])
def test_shape_of_the_wavelengths_is_kept(shape: tuple[int, ...]) -> None:
    """Scalar, vector and grid."""
    assert solar_irradiance(np.full(shape, 550.0)).shape == shape


def test_disc_has_the_size_of_the_nominal_sun_at_one_astronomical_unit() -> None:
    """IAU 2015 resolution B3 (6.957e8 m) and IAU 2012 resolution B2 (1 au); three digits are given."""
    assert pytest.approx(2 * math.degrees(math.asin(6.957e8 / 1.495978707e11)), abs=5e-4) == SOLAR_DISC_DIAMETER_DEG
    assert pytest.approx(math.pi * math.radians(0.533 / 2) ** 2, rel=1e-5) == SOLAR_DISC_SOLID_ANGLE_SR


@pytest.mark.parametrize("wavelength_nm", [299.9, 1100.1, math.nan, [400, 2000]])
def test_wavelength_outside_the_table_is_refused(wavelength_nm: float) -> None:
    """The message says what was given and what is accepted."""
    with pytest.raises(InputError, match=r"^wavelength is .* nm, accepted is 300 to 1100 nm$"):
        solar_irradiance(wavelength_nm)
