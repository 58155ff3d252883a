"""Ozone against independent measurements, and its layers against the column asked for."""

import math

import numpy as np
import pytest

from skychart.data import load_table
from skychart.errors import InputError
from skychart.sky.gases import DOBSON_UNIT, ozone_cross_section, ozone_layers

OWN_UNCERTAINTY = 0.03  # Serdyuchenko et al. 2014 and Gorshelev et al. 2014 state 2 to 3 %


@pytest.mark.parametrize(
    ("measurement", "stated"),
    [("bogumil_223K", 0.031), ("dbm_295K", 0.015)],
)
def test_chappuis_band_agrees_with_independent_measurements(measurement: str, stated: float) -> None:
    """Within what the authors state of their own uncertainty, and 3 % for the one used, in quadrature.

    Every nanometre of the strong part of the band, and the sum over the whole. Outside of it the sets differ more.
    """
    columns = load_table("checks/ozone_cross_section_comparison_1nm").columns
    allowed = math.hypot(stated, OWN_UNCERTAINTY)
    wavelength_nm = np.arange(500, 681)
    ratio_of_sums = ozone_cross_section(wavelength_nm).sum() / columns[measurement][wavelength_nm - 300].sum() * 1e4
    assert ratio_of_sums == pytest.approx(1, abs=allowed)
    wavelength_nm = np.arange(550, 641)
    published = columns[measurement][wavelength_nm - 300] * 1e-4
    np.testing.assert_allclose(ozone_cross_section(wavelength_nm), published, rtol=allowed)


def test_peaks_of_the_chappuis_band_lie_where_all_measurements_have_them() -> None:
    """574.3-574.6 and 602.1-602.7 nm in seven published sets, on the 1 nm grid 574-575 and 602-603."""
    wavelength_nm = np.arange(560, 590)
    assert wavelength_nm[ozone_cross_section(wavelength_nm).argmax()] in (574, 575)
    wavelength_nm = np.arange(590, 620)
    assert wavelength_nm[ozone_cross_section(wavelength_nm).argmax()] in (602, 603)


def test_300_dobson_units_have_the_usual_optical_depths() -> None:
    """0.0427 at 602 nm and 0.0275 at 550 nm by the mean of older sets, which state 3.1 %."""
    depth = ozone_layers([0, 100], 300).sum() * ozone_cross_section([602, 550])
    np.testing.assert_allclose(depth, [0.0427, 0.0275], rtol=math.hypot(0.031, OWN_UNCERTAINTY))


def test_noise_below_zero_is_taken_as_zero() -> None:
    """The 223 K column dips below zero near the limit of detection; nothing shines."""
    measured = load_table("ozone_cross_section_serdyuchenko_1nm").columns["sigma_223K"]
    wavelength_nm = np.arange(300, 830.5, 0.5)
    cross_section = ozone_cross_section(wavelength_nm)
    assert np.all(cross_section >= 0)
    np.testing.assert_array_equal(cross_section[::2][measured >= 0], measured[measured >= 0] * 1e-4)


@pytest.mark.parametrize("shape", [(), (3,), (2, 2)])
def test_shape_of_the_wavelengths_is_kept(shape: tuple[int, ...]) -> None:
    """Scalar, vector and grid."""
    assert ozone_cross_section(np.full(shape, 550.0)).shape == shape


@pytest.mark.parametrize("wavelength_nm", [299, 831, math.nan])
def test_wavelength_outside_the_table_is_refused(wavelength_nm: float) -> None:
    """The message says what was given and what is accepted."""
    with pytest.raises(InputError, match=r"^wavelength is .* nm, accepted is 300 to 830 nm$"):
        ozone_cross_section(wavelength_nm)


@pytest.mark.parametrize("levels", [np.arange(101.0), [0, 100], [0, 0.3, 7.77, 24.9, 25, 100]])
def test_layers_add_up_to_the_column_on_any_levels(levels: list[float]) -> None:
    """300 Dobson units are 300 x 2.6867e20 molecules on a square metre."""
    assert ozone_layers(levels, 300).sum() == pytest.approx(300 * 2.6867e20, rel=1e-12)


def test_a_layer_holds_what_its_parts_hold() -> None:
    """Splitting layers moves nothing, inside or outside of the levels of the profile."""
    fine = np.linspace(3, 47, 45)
    whole = ozone_layers([3, 14, 47], 300)
    parts = ozone_layers(fine, 300)
    np.testing.assert_allclose(whole, [parts[:11].sum(), parts[11:].sum()], rtol=1e-12)


def test_most_ozone_lies_between_15_and_35_km() -> None:
    """The ozone layer: 71 % of it by the AFGL profile, the densest kilometre near 22 km."""
    layers = ozone_layers(np.arange(101.0), 300) / DOBSON_UNIT
    assert 20 <= layers.argmax() <= 24
    assert 0.65 < layers[15:35].sum() / 300 < 0.80


def test_no_ozone_is_allowed_and_layers_scale_with_the_column() -> None:
    """Linear in the column, through zero."""
    levels = np.arange(0, 81, 5.0)
    np.testing.assert_array_equal(ozone_layers(levels, 0), np.zeros(16))
    np.testing.assert_allclose(ozone_layers(levels, 450), 1.5 * ozone_layers(levels, 300), rtol=1e-12)


@pytest.mark.parametrize(
    ("levels", "ozone_du", "message"),
    [
        ([0, 100], -1, "ozone column is -1 Dobson units, accepted is 0 or more"),
        ([0, 100], math.nan, "ozone column is nan Dobson units"),
        ([0, 100], math.inf, "ozone column is inf Dobson units"),
        ([0, 101], 300, "altitude goes from 0 to 101 km, accepted is 0 to 100 km"),
        ([-1, 80], 300, "altitude goes from -1 to 80 km"),
        ([5, 5], 300, "two or more ascending altitudes"),
        ([5], 300, "two or more ascending altitudes"),
    ],
)
def test_impossible_columns_and_levels_are_refused(levels: list[float], ozone_du: float, message: str) -> None:
    """What was wrong, the value seen, what is accepted."""
    with pytest.raises(InputError, match=message):
        ozone_layers(levels, ozone_du)
