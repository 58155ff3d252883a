"""Transmission through lines: against a literal sum, against the 1 nm table in colour, and the table of look-ups."""

import math

import numpy as np
import pytest

from skychart.colour.chromaticity import uv_prime
from skychart.colour.integrate import tristimulus_matrix
from skychart.data import load_table
from skychart.errors import InputError
from skychart.sky.air import column_of_layers, rayleigh_cross_section, standard_air
from skychart.sky.interpolation import spline_matrix
from skychart.sky.lines import LONGEST_OXYGEN_AIR_MASS, LONGEST_WATER_CM, LineTable, band_shares, band_transmission

FINE_NM = np.arange(360.0, 831.0)
NODES_NM = np.arange(360.0, 831.0, 10.0)
WEIGHTS = (0.55, 0.27, 0.13, 0.05)
PATHS = [(0.1, 0.5), (1.4, 1), (14, 10), (50, 10), (200, 38), (400, 80)]  # cm of water, air masses


def one_nanometre(gas: str, wavelength_nm: int, path: float) -> float:
    """Transmission of one row of the table, term by term."""
    columns = load_table("gas_h2o_o2_k4_1nm").columns
    row = wavelength_nm - 360
    return sum(g * math.exp(-columns[f"{gas}_k{i}"][row] * path) for i, g in enumerate(WEIGHTS, start=1))


@pytest.mark.parametrize(("water_cm", "air_mass"), PATHS)
@pytest.mark.parametrize(("node_nm", "spacing_nm"), [(590, 10), (690, 10), (720, 10), (760, 5), (765, 5)])
def test_a_node_is_the_mean_over_the_triangle_about_it(
    node_nm: int, spacing_nm: int, water_cm: float, air_mass: float
) -> None:
    """A literal sum with the weights 1 - |distance| / spacing, for each gas, and their product."""
    means = {}
    for gas, path in (("h2o", water_cm), ("o2", air_mass)):
        total = 0.0
        for offset in range(-spacing_nm, spacing_nm + 1):
            total += (1 - abs(offset) / spacing_nm) * one_nanometre(gas, node_nm + offset, path)
        means[gas] = total / spacing_nm
    nodes = np.arange(360.0, 831.0, spacing_nm)
    computed = band_transmission(nodes, water_cm, air_mass)[nodes == node_nm]
    assert computed == pytest.approx(means["h2o"] * means["o2"], rel=1e-12)


def test_nodes_one_nanometre_apart_give_the_table_itself() -> None:
    """Nothing is averaged then."""
    computed = band_transmission(FINE_NM, 14, 10)
    for wavelength_nm in (505, 592, 630, 687, 720, 761, 830):
        expected = one_nanometre("h2o", wavelength_nm, 14) * one_nanometre("o2", wavelength_nm, 10)
        assert computed[wavelength_nm - 360] == pytest.approx(expected, rel=1e-12)


@pytest.mark.parametrize("spacing_nm", [5, 10])
@pytest.mark.parametrize("path", [0.1, 5, 200])
def test_even_nodes_absorb_together_what_the_single_nanometres_do(spacing_nm: int, path: float) -> None:
    """Node times width summed, half a triangle with its tip at both ends, is the sum over 1 nm."""
    nodes = np.arange(360.0, 831.0, spacing_nm)
    width = np.full(nodes.size, float(spacing_nm))
    width[[0, -1]] = (spacing_nm + 1) / 2
    for water_cm, air_mass in ((path, 0), (0, path)):
        fine = 1 - band_transmission(FINE_NM, water_cm, air_mass)
        assert (1 - band_transmission(nodes, water_cm, air_mass)) @ width == pytest.approx(fine.sum(), rel=1e-12)


@pytest.mark.parametrize("nodes", [FINE_NM, NODES_NM, [360.3, 361.3, 500.7, 829.95], [400, 401.5]])
def test_a_band_is_a_mean_about_its_node(nodes: list[float]) -> None:
    """Shares sum to 1, none beyond the outer nodes; midway between its neighbours a node has the mean of a ramp."""
    shares = band_shares(nodes)
    assert shares.shape == (len(nodes), FINE_NM.size)
    assert np.all(shares >= 0)
    assert np.all(shares[:, (nodes[0] > FINE_NM) | (nodes[-1] < FINE_NM)] == 0)
    np.testing.assert_allclose(shares.sum(axis=1), 1, rtol=1e-12)
    np.testing.assert_allclose(band_shares(NODES_NM)[1:-1] @ FINE_NM, NODES_NM[1:-1], rtol=1e-12)


@pytest.mark.parametrize(
    ("water_cm", "air_mass", "allowed"), [(1.4, 1, 2e-6), (14, 10, 5e-6), (50, 10, 1e-5), (200, 38, 2e-4)]
)
def test_ten_nanometre_nodes_give_the_colour_of_the_single_nanometres(
    water_cm: float, air_mass: float, allowed: float
) -> None:
    """Direct sun through molecules and lines: u'v' within a fortieth of the lines' own effect, luminance 0.1 %."""
    molecules = np.exp(-air_mass * column_of_layers(*standard_air()).sum() * rayleigh_cross_section(FINE_NM))
    lines = band_transmission(FINE_NM, water_cm, air_mass)
    splined = spline_matrix(NODES_NM, FINE_NM) @ band_transmission(NODES_NM, water_cm, air_mass)
    matrix = tristimulus_matrix(FINE_NM)
    exact, by_nodes, without = (molecules * lines) @ matrix, (molecules * splined) @ matrix, molecules @ matrix
    distance = np.linalg.norm(uv_prime(by_nodes) - uv_prime(exact))
    assert distance < allowed
    assert distance < np.linalg.norm(uv_prime(exact) - uv_prime(without)) / 40
    assert by_nodes[1] / exact[1] == pytest.approx(1, abs=1e-3)


@pytest.mark.parametrize("path", [0.5, 1.4, 5, 14, 50])
def test_means_over_five_nanometres_absorb_what_a_separate_fit_does(path: float) -> None:
    """The lines fitted anew in 5 nm bins: all of the water within 1 %, the red oxygen bands together within 3 %.

    At 760 nm, where the eye sees a ten-thousandth of what it sees at 555 nm, four terms are few for lines so strong
    and the two fits of oxygen differ by a tenth.
    """
    columns = load_table("checks/gas_h2o_o2_k4_5nm").columns
    for gas, paths, last_nm, allowed in (("h2o", (path, 0), 825, 0.01), ("o2", (0, path), 705, 0.03)):
        fitted = sum(g * (1 - np.exp(-columns[f"{gas}_k{i}"] * path)) for i, g in enumerate(WEIGHTS, start=1))
        absorbed = 1 - band_transmission(columns["wavelength_nm"], *paths)
        seen = columns["wavelength_nm"] <= last_nm
        assert absorbed[seen].sum() == pytest.approx(fitted[seen].sum(), rel=allowed)


def test_nothing_absorbs_below_the_first_band_and_the_result_is_exactly_one() -> None:
    """No water lines below 396 nm, no oxygen below 627 nm, in the formula and in its table."""
    table = LineTable.of(NODES_NM)
    for transmission in (band_transmission(NODES_NM, [1, 300], 20), table.at([1, 300], 20)):
        assert np.all(transmission[:, NODES_NM < 390] == 1)
        assert np.all(transmission[:, NODES_NM > 690] < 1)
    for transmission in (band_transmission(NODES_NM, 0, 20), table.at(0, 20)):
        assert np.all(transmission[NODES_NM < 620] == 1)
        assert np.all(transmission[(NODES_NM == 690) | (NODES_NM == 760)] < 0.8)


def test_no_path_absorbs_nothing_and_a_longer_one_more() -> None:
    """Exactly 1 without a path; then each length takes away more at every node that absorbs."""
    paths = np.array([0, 1e-6, 1e-3, 0.1, 1, 10, 100, 400])
    for transmission in (band_transmission(NODES_NM, paths, paths / 5), LineTable.of(NODES_NM).at(paths, paths / 5)):
        assert np.all(transmission[0] == 1)
        assert np.all(np.diff(transmission, axis=0) <= 0)
        assert np.all(np.diff(transmission[2:], axis=0)[:, NODES_NM == 720] < -1e-4)


def test_short_paths_absorb_in_proportion_to_their_length() -> None:
    """To first order one minus transmission is the path times the mean coefficient."""
    columns = load_table("gas_h2o_o2_k4_1nm").columns
    coefficient = sum(g * columns[f"h2o_k{i}"] for i, g in enumerate(WEIGHTS, start=1))
    np.testing.assert_allclose((1 - band_transmission(FINE_NM, 1e-6, 0)) / 1e-6, coefficient, rtol=1e-5, atol=1e-9)


def test_two_paths_in_line_pass_more_than_their_transmissions_multiplied() -> None:
    """What the first has taken the second cannot take again; so paths are added before they are looked up."""
    one, both = band_transmission(NODES_NM, 5, 0), band_transmission(NODES_NM, 10, 0)
    assert np.all(both >= one**2)
    assert both[NODES_NM == 720] > 1.03 * one[NODES_NM == 720] ** 2


@pytest.mark.parametrize("spacing_nm", [1, 5, 10])
def test_look_ups_are_within_their_stated_accuracy(spacing_nm: int) -> None:
    """3e-5, single precision included, at paths spread evenly over the logarithm and beyond its ends."""
    nodes = np.arange(360.0, 831.0, spacing_nm)
    random = np.random.default_rng(3)
    water_cm = np.append(10 ** random.uniform(-6, math.log10(LONGEST_WATER_CM), 2000), [0, LONGEST_WATER_CM])
    air_mass = np.append(10 ** random.uniform(-6, math.log10(LONGEST_OXYGEN_AIR_MASS), 2000), [0, 0])
    table = LineTable.of(nodes)
    np.testing.assert_allclose(
        table.at(water_cm, air_mass), band_transmission(nodes, water_cm, air_mass), rtol=0, atol=3e-5
    )


def test_longer_paths_than_the_table_holds_count_as_its_longest() -> None:
    """2000 cm of water and 400 air masses are more than the air can hold."""
    table = LineTable.of(NODES_NM)
    np.testing.assert_array_equal(table.at(1e9, 1e9), table.at(LONGEST_WATER_CM, LONGEST_OXYGEN_AIR_MASS))


@pytest.mark.parametrize(
    ("water_shape", "air_shape", "shape"), [((), (), ()), ((3,), (), (3,)), ((2, 1), (3,), (2, 3)), ((0,), (), (0,))]
)
def test_paths_broadcast_and_wavelength_comes_last(
    water_shape: tuple[int, ...], air_shape: tuple[int, ...], shape: tuple[int, ...]
) -> None:
    """Scalar, vector, grid and nothing at all, in the formula and in its table."""
    water_cm, air_mass = np.full(water_shape, 2.0), np.full(air_shape, 3.0)
    expected = np.broadcast_to(band_transmission(NODES_NM, 2, 3), (*shape, NODES_NM.size))
    np.testing.assert_allclose(band_transmission(NODES_NM, water_cm, air_mass), expected, rtol=1e-14)
    looked_up = LineTable.of(NODES_NM).at(water_cm, air_mass)
    assert looked_up.dtype == np.float32
    np.testing.assert_allclose(looked_up, expected, atol=3e-5)


@pytest.mark.parametrize(
    ("wavelength_nm", "water_cm", "air_mass", "message"),
    [
        ([359, 400], 1, 1, "wavelength is 359 nm, accepted is 360 to 830 nm"),
        ([400, 831], 1, 1, "wavelength is 831 nm, accepted is 360 to 830 nm"),
        ([500], 1, 1, r"wavelengths have shape \(1,\), accepted are two or more, ascending by 1 nm or more"),
        (500, 1, 1, r"wavelengths have shape \(\), accepted are two or more"),
        ([500, 500.5], 1, 1, r"wavelengths have shape \(2,\), accepted are two or more, ascending by 1 nm"),
        ([500, 490], 1, 1, "ascending by 1 nm or more"),
        ([400, 500], -1, 1, "water path is -1 cm, accepted is 0 or more"),
        ([400, 500], [1, math.nan], 1, "water path is nan cm"),
        ([400, 500], 1, [[2], [-3]], "oxygen path is -3 air masses, accepted is 0 or more"),
        ([400, 500], 1, math.inf, "oxygen path is inf air masses"),
    ],
)
def test_impossible_nodes_and_paths_are_refused(
    wavelength_nm: list[float], water_cm: float, air_mass: float, message: str
) -> None:
    """What was wrong, the value seen, what is accepted."""
    with pytest.raises(InputError, match=f"^{message}" if message[0] != "a" else message):
        band_transmission(wavelength_nm, water_cm, air_mass)
