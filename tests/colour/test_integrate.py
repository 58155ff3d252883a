"""The matrix from node values to XYZ against the library's own integration and the published sun."""

import numpy as np
import pytest

from skychart.colour.chromaticity import xy
from skychart.colour.integrate import tristimulus_matrix
from skychart.colour.observers import OBSERVERS, library_observer
from skychart.data import load_table
from skychart.errors import InputError
from skychart.library import colour_science
from skychart.sky.air import column_of_layers, rayleigh_cross_section, standard_air
from skychart.sky.gases import ozone_cross_section, ozone_layers
from skychart.sky.sun import solar_irradiance

NODES_NM = np.arange(360, 831, 10.0)
FINE_NM = np.arange(360, 831.0)


def transmission(wavelength_nm: np.ndarray, air_mass: float) -> np.ndarray:
    """Direct light through molecules and 300 Dobson units of ozone."""
    molecules = column_of_layers(*standard_air()).sum()
    ozone = ozone_layers([0, 100], 300).sum()
    depth = molecules * rayleigh_cross_section(wavelength_nm) + ozone * ozone_cross_section(wavelength_nm)
    return np.exp(-air_mass * depth)


def scattered_once(wavelength_nm: np.ndarray, air_mass: float) -> np.ndarray:
    """The colour of thin blue air seen through `air_mass`, up to a factor."""
    return 1e28 * rayleigh_cross_section(wavelength_nm) * transmission(wavelength_nm, air_mass)


def library_integral(quantity: np.ndarray, observer: str = "cie-1931-2") -> np.ndarray:
    """XYZ of quantity times solar irradiance, given at each nanometre, by colour-science, which counts in per cent."""
    colour = colour_science()
    functions = library_observer(observer)
    inside = np.isin(FINE_NM, functions.wavelengths)
    spectrum = colour.SpectralDistribution(100 * (quantity * solar_irradiance(FINE_NM))[inside], FINE_NM[inside])
    neutral = colour.sd_ones(functions.shape)
    return np.asarray(colour.colorimetry.sd_to_XYZ_integration(spectrum, functions, neutral, k=683))


def test_sun_outside_the_atmosphere_is_134_6_kilolux_and_slightly_blue_of_d60() -> None:
    """TSIS-1 HSRS: 134.63 klx and (0.3216, 0.3320) by another copy of the spectrum; X and Z follow."""
    XYZ = np.ones(len(NODES_NM)) @ tristimulus_matrix(NODES_NM)
    np.testing.assert_allclose(XYZ, [130_390, 134_630, 140_400], rtol=1e-3)
    np.testing.assert_allclose(xy(XYZ), [0.32162, 0.33208], atol=1e-4)


@pytest.mark.parametrize("observer", OBSERVERS)
def test_matrix_equals_the_integration_of_the_library(observer: str) -> None:
    """The same 1 nm sum for every observer, from 1 nm nodes: chromaticity within 1e-6, Y within 1e-6."""
    matrix = tristimulus_matrix(FINE_NM, observer)
    for quantity in (np.ones_like(FINE_NM), transmission(FINE_NM, 1), scattered_once(FINE_NM, 1)):
        expected = library_integral(quantity, observer)
        np.testing.assert_allclose(xy(quantity @ matrix), xy(expected), atol=1e-6)
        np.testing.assert_allclose((quantity @ matrix)[1], expected[1], rtol=1e-6)


@pytest.mark.parametrize("quantity", [transmission, scattered_once])
def test_ten_nanometre_nodes_equal_the_integration_of_the_library(quantity: type[transmission]) -> None:
    """Direct sun and blue sky, known every 10 nm: within 1e-4 in xy of the library's integral over 1 nm."""
    matrix = tristimulus_matrix(NODES_NM)
    for air_mass in (0, 1, 2, 3):
        computed = quantity(NODES_NM, air_mass) @ matrix
        expected = library_integral(quantity(FINE_NM, air_mass))
        np.testing.assert_allclose(xy(computed), xy(expected), atol=1e-4)
        np.testing.assert_allclose(computed[1], expected[1], rtol=2e-4)


@pytest.mark.parametrize("air_mass", [5, 10, 20, 38])
def test_a_smooth_spectrum_needs_no_more_than_ten_nanometre_nodes_at_the_horizon(air_mass: float) -> None:
    """Without the fine structure of ozone, of which 10 nm miss a part, the spline is good to 2e-5
    up to 38 air masses.
    """
    matrix = tristimulus_matrix(NODES_NM)
    molecules = column_of_layers(*standard_air()).sum()
    coarse, fine = (
        np.exp(-air_mass * molecules * rayleigh_cross_section(wavelength)) for wavelength in (NODES_NM, FINE_NM)
    )
    np.testing.assert_allclose(xy(coarse @ matrix), xy(library_integral(fine)), atol=2e-5)


@pytest.mark.parametrize(
    "nodes_nm",
    [NODES_NM, [380, 420, 440, 500, 505, 610, 700, 790, 830], [400, 500, 600, 700]],
)
def test_cubic_quantities_are_integrated_exactly_on_any_grid(nodes_nm: np.ndarray | list[float]) -> None:
    """A not-a-knot spline reproduces cubics inside its nodes; outside the end values go on."""
    nodes = np.asarray(nodes_nm, dtype=float)

    def cubic(wavelength_nm: np.ndarray) -> np.ndarray:
        t = (wavelength_nm - 600) / 200
        return 2 + t - 0.5 * t**2 + 0.3 * t**3

    expected = cubic(np.clip(FINE_NM, nodes[0], nodes[-1])) @ tristimulus_matrix(FINE_NM)
    np.testing.assert_allclose(cubic(nodes) @ tristimulus_matrix(nodes), expected, rtol=1e-9)


def test_values_of_any_leading_shape_become_xyz() -> None:
    """Wavelength is the last axis; a grid of spectra is one product."""
    values = np.random.default_rng(1).uniform(0, 1, (2, 5, len(NODES_NM)))
    matrix = tristimulus_matrix(NODES_NM)
    assert matrix.shape == (len(NODES_NM), 3)
    np.testing.assert_allclose((values @ matrix)[1, 3], values[1, 3] @ matrix, rtol=1e-12)


def test_solar_spectrum_of_the_table_is_used_once() -> None:
    """Row sums of the 1 nm matrix are 683 E(λ) times the functions, nothing else."""
    irradiance = load_table("solar_tsis1_hsrs_v2_1nm").columns["irradiance_w_m2_nm"][555 - 300]
    assert tristimulus_matrix(FINE_NM)[555 - 360, 1] == pytest.approx(683 * irradiance, rel=1e-9)


@pytest.mark.parametrize(
    ("nodes_nm", "message"),
    [
        ([400, 500, 700], r"wavelengths have shape \(3,\), accepted are four or more in ascending order"),
        ([400, 500, 500, 700], "ascending order"),
        ([700, 600, 500, 400], "ascending order"),
        ([401, 500, 600, 700], "wavelengths go from 401 to 700 nm, accepted are 400 to 700 nm or more"),
        ([400, 500, 600, 690], "wavelengths go from 400 to 690 nm"),
        ([[400, 500, 600, 700]], r"shape \(1, 4\)"),
    ],
)
def test_wavelengths_that_cannot_carry_a_colour_are_refused(nodes_nm: list[float], message: str) -> None:
    """Too few, unordered, or blind at an end of the visible range."""
    with pytest.raises(InputError, match=message):
        tristimulus_matrix(nodes_nm)


def test_unknown_observer_is_refused() -> None:
    """By the name that was given."""
    with pytest.raises(InputError, match="unknown observer 'nobody'"):
        tristimulus_matrix(NODES_NM, "nobody")
