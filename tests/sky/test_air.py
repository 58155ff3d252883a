"""Scattering by air, and the amount of air, against publications by others than those computed from."""

import math
from collections.abc import Callable

import numpy as np
import pytest
from numpy.typing import ArrayLike

from skychart.errors import InputError
from skychart.library import colour_science
from skychart.sky.air import column_of_layers, depolarisation_ratio, rayleigh_cross_section, standard_air

# Bucholtz A. 1995, Rayleigh-scattering calculations for the terrestrial atmosphere, Appl. Opt. 34, 2765, Table 2,
# 1e-27 cm2 per molecule, four digits; Table 1, depolarisation factor in per cent.
BUCHOLTZ_CROSS_SECTION = {
    350: 29.24, 380: 20.71, 400: 16.73, 420: 13.66, 450: 10.27, 480: 7.871, 500: 6.656, 520: 5.669, 550: 4.509,
    580: 3.630, 600: 3.161, 630: 2.593, 650: 2.284, 680: 1.903, 700: 1.692, 750: 1.280, 800: 0.9854,
}  # fmt: skip
BUCHOLTZ_DEPOLARISATION = {
    400: 2.955, 450: 2.899, 500: 2.842, 550: 2.842, 600: 2.786, 650: 2.786, 700: 2.786, 750: 2.786, 800: 2.730,
}  # fmt: skip
# Bodhaine et al. 1999 by the full method, evaluated by other hands, cm2.
BODHAINE_FULL = {300: 5.6524611694e-26, 400: 1.6738176054e-26, 500: 6.6613141942e-27, 550: 4.5105103964e-27}
# King factor of air with the components of Bates 1984 at 0.036 % carbon dioxide, and the ratio that follows.
BATES = {
    350: (1.05312, 0.03073), 400: (1.05126, 0.02969), 450: (1.05011, 0.02904), 500: (1.04935, 0.02862),
    550: (1.04882, 0.02832), 600: (1.04844, 0.02811), 650: (1.04815, 0.02795), 700: (1.04793, 0.02783),
}  # fmt: skip


def bodhaine_1999_fraction(wavelength_um: np.ndarray) -> np.ndarray:
    """The quotient that equations 29 (cross-section) and 30 (optical depth) of Bodhaine et al. 1999 share."""
    squared = wavelength_um**2
    return (1.0455996 - 341.29061 / squared - 0.90230850 * squared) / (1 + 0.0027059889 / squared - 85.968563 * squared)


def test_cross_section_matches_table_2_of_bucholtz_1995() -> None:
    """An independent choice of refractive index and King factor: within 0.2 %."""
    computed = rayleigh_cross_section(list(BUCHOLTZ_CROSS_SECTION))
    np.testing.assert_allclose(computed * 1e31, list(BUCHOLTZ_CROSS_SECTION.values()), rtol=2e-3)


def test_cross_section_matches_the_fit_of_bodhaine_1999() -> None:
    """Equation 29 fits the full method to 0.01 % over the visible range."""
    wavelength_nm = np.arange(350, 801, 10.0)
    fit = bodhaine_1999_fraction(wavelength_nm / 1000) * 1e-28 * 1e-4
    np.testing.assert_allclose(rayleigh_cross_section(wavelength_nm), fit, rtol=1e-4)


def test_cross_section_takes_the_refractive_index_at_360_ppm() -> None:
    """The full method by other hands, to the 5e-6 by which Avogadro's number and rounding differ."""
    computed = rayleigh_cross_section(list(BODHAINE_FULL))
    np.testing.assert_allclose(computed * 1e4, list(BODHAINE_FULL.values()), rtol=5e-6)


def test_cross_section_is_the_library_one_at_its_own_carbon_dioxide_up_to_the_refractive_index() -> None:
    """colour-science has 4.3466692e-27 cm2 at 555 nm and 300 ppm; 60 ppm more raise (n - 1)² by 6.5e-5."""
    assert rayleigh_cross_section(555) * 1e31 == pytest.approx(4.3466692 * (1 + 2 * 0.54 * 60e-6), rel=1e-5)


def test_four_hundred_nanometres_scatter_about_nine_times_as_much_as_seven_hundred() -> None:
    """(700/400)^4 = 9.38; dispersion and King factor add 5.5 %."""
    blue, red = rayleigh_cross_section([400, 700])
    assert 1.05 < blue / red / (7 / 4) ** 4 < 1.06


def test_depolarisation_matches_the_king_factor_of_bates_1984() -> None:
    """To the printed digits, in both forms."""
    ratio = depolarisation_ratio(list(BATES))
    king_factor = (6 + 3 * ratio) / (6 - 7 * ratio)
    np.testing.assert_allclose(king_factor, [king for king, _ in BATES.values()], atol=6e-6)
    np.testing.assert_allclose(ratio, [published for _, published in BATES.values()], atol=6e-6)


def test_depolarisation_matches_table_1_of_bucholtz_1995() -> None:
    """One unit of the third and last decimal of his King factors is worth 0.056 in the ratio in per cent."""
    ratio = depolarisation_ratio(list(BUCHOLTZ_DEPOLARISATION))
    np.testing.assert_allclose(100 * ratio, list(BUCHOLTZ_DEPOLARISATION.values()), atol=0.056)


def test_vertical_optical_depth_of_standard_air_matches_bodhaine_1999() -> None:
    """Equation 30 (sea level, 45° latitude, 360 ppm) within 0.05 %: gravity enters there as a constant."""
    wavelength_nm = np.arange(400, 751, 50.0)
    published = 0.0021520 * bodhaine_1999_fraction(wavelength_nm / 1000)
    computed = column_of_layers(*standard_air()).sum() * rayleigh_cross_section(wavelength_nm)
    np.testing.assert_allclose(computed, published, rtol=5e-4)


def test_standard_air_starts_at_sea_level_density_and_falls_without_a_step() -> None:
    """2.54697e25 m-3 at the ground (US Standard Atmosphere 1976); scale heights of 5 to 11 km all the way up."""
    altitude_km, density = standard_air()
    np.testing.assert_array_equal(altitude_km, np.arange(101))
    assert density[0] == pytest.approx(2.54697e25, rel=1e-9)
    scale_height_km = -1 / np.diff(np.log(density))
    assert 5 < scale_height_km.min() < scale_height_km.max() < 11
    np.testing.assert_allclose(scale_height_km[79], scale_height_km[80], rtol=0.05)


def test_air_above_80_km_is_a_hundred_thousandth_of_the_column() -> None:
    """What the table says of itself."""
    layers = column_of_layers(*standard_air())
    assert layers[80:].sum() / layers.sum() == pytest.approx(1e-5, rel=0.05)


def test_density_goes_with_the_pressure_at_the_ground() -> None:
    """90 % of 1013.25 hPa leave 90 % of the air at every altitude; the altitudes stay."""
    altitude_km, density = standard_air()
    thin_altitude_km, thin = standard_air(0.9 * 1013.25)
    np.testing.assert_array_equal(thin_altitude_km, altitude_km)
    np.testing.assert_allclose(thin, 0.9 * density, rtol=1e-14)
    np.testing.assert_array_equal(standard_air(1013.25)[1], density)


@pytest.mark.parametrize("pressure_hpa", [299, 1101, -1013.25, math.nan, math.inf])
def test_pressure_out_of_range_is_refused(pressure_hpa: float) -> None:
    """In hPa, so a value in kPa or Pa is caught as well."""
    with pytest.raises(InputError, match=rf"^air pressure is {pressure_hpa} hPa, accepted is 300 to 1100 hPa$"):
        standard_air(pressure_hpa)


def test_column_of_exponential_air_is_exact_on_any_levels() -> None:
    """Scale height 8 km: the column between two levels is n0 H times the difference of the exponentials."""
    altitude_km = np.array([0, 0.2, 1, 3.7, 20, 64, 100])
    at_levels = np.exp(-altitude_km / 8)
    expected = 2.5e25 * 8000 * -np.diff(at_levels)
    np.testing.assert_allclose(column_of_layers(altitude_km, 2.5e25 * at_levels), expected, rtol=1e-12)


@pytest.mark.parametrize("growth", [0, 1e-15, 1e-9, 1e-7, 2e-6, 1e-3])
def test_column_of_nearly_uniform_air_loses_no_digits(growth: float) -> None:
    """Up to second order of the growth the mean of a nearly level exponential is 1 + growth/2 + growth²/6."""
    column = column_of_layers([0, 1], [1e25, 1e25 * math.exp(growth)])
    assert column[0] == pytest.approx(1e28 * (1 + growth / 2 + growth**2 / 6), rel=1e-9 if growth == 1e-3 else 1e-12)


@pytest.mark.parametrize("function", [rayleigh_cross_section, depolarisation_ratio])
@pytest.mark.parametrize("shape", [(), (3,), (2, 2)])
def test_shape_of_the_wavelengths_is_kept(function: Callable[[ArrayLike], np.ndarray], shape: tuple[int, ...]) -> None:
    """Scalar, vector and grid."""
    assert function(np.full(shape, 550.0)).shape == shape


@pytest.mark.parametrize("function", [rayleigh_cross_section, depolarisation_ratio])
@pytest.mark.parametrize("wavelength_nm", [249, 1101, math.nan, [500, -500]])
def test_wavelength_out_of_range_is_refused(
    function: Callable[[ArrayLike], np.ndarray], wavelength_nm: float | list[float]
) -> None:
    """The dispersion formula is fitted between 230 and 1690 nm; the message says what is accepted here."""
    with pytest.raises(InputError, match=r"^wavelength is .* nm, accepted is 250 to 1100 nm$"):
        function(wavelength_nm)


@pytest.mark.parametrize(
    ("altitude_km", "density", "message"),
    [
        ([0, 1, 1], [3, 2, 1], "ascending"),
        ([0, 1], [3, 2, 1], r"shape \(2,\) and number density \(3,\)"),
        ([0], [1], "two or more"),
        ([0, 1], [1, 0], "smallest number density is 0 m"),
        ([0, 1], [1, math.nan], "smallest number density is nan m"),
    ],
)
def test_levels_that_make_no_layers_are_refused(altitude_km: list[float], density: list[float], message: str) -> None:
    """Wrong order, wrong shape, nothing to take a logarithm of."""
    with pytest.raises(InputError, match=message):
        column_of_layers(altitude_km, density)


def test_library_keeps_quiet_about_what_is_not_used() -> None:
    """Reached through its one door colour-science raises no warning, with or without SciPy (warnings are errors)."""
    assert colour_science().phenomena.rayleigh.F_air_Young1981(0.555) == 1.048
