"""Named kinds of haze against the published mixtures they are made of, and in layers."""

import math

import numpy as np
import pytest

from skychart.data import load_table
from skychart.errors import InputError
from skychart.sky.haze_types import HAZE_TYPES, haze_of

LEVELS_KM = np.arange(101.0)
TABULATED_NM = np.array([400, 450, 500, 550, 600, 700])
PUBLISHED_HUMIDITY = 80
DEPTHS = {"clean": 0.05, "average": 0.15, "hazy": 0.40, "maritime": 0.10, "dusty": 0.40}
PUBLISHED_NAMES = [name for name, kind in HAZE_TYPES.items() if kind.humidity_percent == PUBLISHED_HUMIDITY]


def published(name: str) -> dict[str, float]:
    """Row of Hess et al. 1998 for the particles of a named haze."""
    columns = load_table("checks/published_opac1998").columns
    row = list(columns["type"]).index(HAZE_TYPES[name].aerosol)
    return {label: column[row] for label, column in columns.items()}


def test_the_five_kinds_are_those_agreed() -> None:
    """Optical depth at 550 nm in the whole column; 2 km of scale height, over the sea 1 km."""
    assert list(HAZE_TYPES) == list(DEPTHS)
    for name, depth in DEPTHS.items():
        assert haze_of(name, LEVELS_KM, [550]).depth.sum() == pytest.approx(depth, rel=1e-12)
        assert HAZE_TYPES[name].scale_height_km == (1 if name == "maritime" else 2)


@pytest.mark.parametrize("name", PUBLISHED_NAMES)
def test_albedo_asymmetry_and_angstrom_exponents_are_those_of_opac(name: str) -> None:
    """Hess, Koepke & Schult 1998, Table 4, 80 % humidity: within a unit of the last printed digit.

    The asymmetry is that of the phase function after interpolation, not a tabulated one.
    """
    haze, row = haze_of(name, LEVELS_KM, [350, 500, 550, 800]), published(name)
    assert haze.single_scattering_albedo[2] == pytest.approx(row["ssa"], abs=1e-3)
    assert haze.moments(2)[1, 2] == pytest.approx(row["g"], abs=1e-3)
    depth = haze.depth.sum(axis=0)
    assert math.log(depth[0] / depth[1]) / math.log(500 / 350) == pytest.approx(row["angstrom_350_500"], abs=0.01)
    assert math.log(depth[1] / depth[3]) / math.log(800 / 500) == pytest.approx(row["angstrom_500_800"], abs=0.01)


@pytest.mark.parametrize("name", HAZE_TYPES)
def test_phase_function_has_the_asymmetry_of_the_bulk_table(name: str) -> None:
    """Two tables of one calculation, the second with g to four decimals: humidity and mixture must be the same."""
    kind, columns = HAZE_TYPES[name], load_table("aerosol_bulk_opac_mie").columns
    rows = (columns["type"] == kind.aerosol) & (columns["rh_percent"] == kind.humidity_percent)
    bulk = columns["g"][rows][np.isin(columns["wavelength_nm"][rows], TABULATED_NM)]
    np.testing.assert_allclose(haze_of(name, LEVELS_KM, TABULATED_NM).moments(2)[1], bulk, rtol=0, atol=2e-4)


@pytest.mark.parametrize("name", HAZE_TYPES)
def test_phase_function_has_mean_one_by_a_plain_sum(name: str) -> None:
    """A trapezoid over 20 000 angles, the logarithm linear in between, also between tabulated wavelengths."""
    haze = haze_of(name, LEVELS_KM, [360, 425, 555, 680, 830])
    angle_deg = np.unique(np.concatenate([np.linspace(0, 5, 10001), np.linspace(5, 180, 10001)]))
    for phase in haze.phase_function:
        values = np.exp(np.interp(angle_deg, haze.scattering_angle_deg, np.log(phase))) * np.sin(np.radians(angle_deg))
        total = np.sum((values[1:] + values[:-1]) / 2 * np.diff(np.radians(angle_deg)))
        assert total / 2 == pytest.approx(1, abs=2e-5)


def test_between_tabulated_wavelengths_logarithms_are_linear_in_the_logarithm() -> None:
    """At the geometric mean of two wavelengths extinction and phase function are geometric means."""
    haze = haze_of("clean", [0, 1], [500, math.sqrt(500 * 550), 550])
    low, middle, high = haze.depth[0]
    assert middle == pytest.approx(math.sqrt(low * high), rel=1e-12)
    low, middle, high = haze.phase_function
    ratio = middle / np.sqrt(low * high)  # up to the factor that brings the mean back to 1
    np.testing.assert_allclose(ratio, ratio[0], rtol=1e-10)
    assert ratio[0] == pytest.approx(1, abs=2e-3)
    low, middle, high = haze.single_scattering_albedo
    assert middle == pytest.approx((low + high) / 2, rel=1e-12)


def test_phase_function_is_held_beyond_the_table_but_extinction_goes_on() -> None:
    """Tabulated from 400 to 700 nm and from 300 to 1000 nm."""
    haze = haze_of("average", [0, 1], [360, 400, 700, 830])
    np.testing.assert_array_equal(haze.phase_function[0], haze.phase_function[1])
    np.testing.assert_array_equal(haze.phase_function[2], haze.phase_function[3])
    assert np.all(np.diff(haze.depth[0]) < 0)


def test_the_aureole_narrows_with_the_size_of_the_particles() -> None:
    """Sea salt and dust send far more light within a degree of the sun than continental haze."""
    ahead = {name: haze_of(name, [0, 1], [550]).phase_function[0, 0] for name in HAZE_TYPES}
    assert ahead["dusty"] > ahead["maritime"] > 3 * ahead["average"]


def test_dust_absorbs_blue_and_sea_salt_nothing() -> None:
    """Desert dust is reddish, sea air loses less than 1 %."""
    blue, red = haze_of("dusty", [0, 1], [400, 650]).single_scattering_albedo
    assert blue < red - 0.1
    assert haze_of("maritime", [0, 1], [450, 550, 650]).single_scattering_albedo.min() > 0.99


def test_density_falls_by_the_scale_height_and_parts_add_up() -> None:
    """A kilometre holds exp(-1/H) of what the one below it holds, whatever the other borders are."""
    depth = haze_of("average", LEVELS_KM, [450, 550]).depth
    np.testing.assert_allclose(depth[1:20] / depth[:19], math.exp(-1 / 2), rtol=1e-12)
    whole = haze_of("average", [0, 3, 10], [450, 550]).depth
    np.testing.assert_allclose(whole, [depth[:3].sum(axis=0), depth[3:10].sum(axis=0)], rtol=1e-12)
    above = haze_of("average", [3, 10], [450, 550]).depth
    np.testing.assert_allclose(above, whole[1:], rtol=1e-12)


def test_depth_and_scale_height_can_be_set_and_change_nothing_else() -> None:
    """Depth scales all layers; the scale height moves the haze and keeps its sum."""
    plain = haze_of("hazy", LEVELS_KM, [450, 550])
    thin = haze_of("hazy", LEVELS_KM, [450, 550], depth_550=0.1)
    np.testing.assert_allclose(thin.depth, plain.depth / 4, rtol=1e-12)
    low = haze_of("hazy", LEVELS_KM, [450, 550], scale_height_km=1.2)
    np.testing.assert_allclose(low.depth.sum(axis=0), plain.depth.sum(axis=0), rtol=1e-12)
    np.testing.assert_allclose(low.depth[1] / low.depth[0], math.exp(-1 / 1.2), rtol=1e-12)
    for other in (thin, low):
        np.testing.assert_array_equal(other.phase_function, plain.phase_function)
        np.testing.assert_array_equal(other.single_scattering_albedo, plain.single_scattering_albedo)
    assert np.all(haze_of("hazy", LEVELS_KM, [550], depth_550=0).depth == 0)


@pytest.mark.parametrize(
    ("arguments", "message"),
    [
        (("foggy", [0, 1], [550]), "unknown haze 'foggy'; known: clean, average, hazy, maritime, dusty"),
        (("clean", [0, 1], [299]), "wavelength is 299 nm, accepted is 300 to 1000 nm"),
        (("clean", [0, 1], [1001]), "wavelength is 1001 nm, accepted is 300 to 1000 nm"),
        (("clean", [0, 1], 550), r"wavelengths have shape \(\), accepted is one axis"),
        (("clean", [0, 1], [550], -0.1), "haze optical depth at 550 nm is -0.1, accepted is 0 or more"),
        (("clean", [0, 1], [550], math.nan), "haze optical depth at 550 nm is nan"),
        (("clean", [0, 1], [550], 0.1, 0), "haze scale height is 0 km, accepted is more than 0"),
        (("clean", [0, 1], [550], 0.1, math.inf), "haze scale height is inf km"),
        (("clean", [1, 1], [550]), "altitude has shape .2,., accepted are two or more, ascending from 0 or more"),
        (("clean", [-1, 1], [550]), "altitude has shape .2,., accepted are two or more, ascending from 0 or more"),
        (("clean", [1], [550]), "altitude has shape .1,., accepted are two or more"),
    ],
)
def test_impossible_haze_is_refused(arguments: tuple, message: str) -> None:
    """What was wrong, the value seen, what is accepted."""
    with pytest.raises(InputError, match=f"^{message}"):
        haze_of(*arguments)
