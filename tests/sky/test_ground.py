"""Grounds by name and as a grey, and what is refused."""

import math

import numpy as np
import pytest

from skychart.data import load_table
from skychart.errors import InputError
from skychart.sky.ground import ground_albedo, ground_names

NAMES = (
    *("grass", "lawn", "loam", "sand", "stubble", "concrete-dry", "concrete-wet"),
    *("snow-2cm", "snow-dry-fresh", "snow-model", "water"),
)


def test_every_ground_of_the_table_has_a_name_without_underscores() -> None:
    """Eleven grounds, in the order of the table."""
    assert ground_names() == NAMES


@pytest.mark.parametrize("name", NAMES)
def test_albedo_is_the_tabulated_one_and_linear_between(name: str) -> None:
    """On the tens of nanometres the table itself, in the middle the mean."""
    columns = load_table("ground_albedo").columns
    tabulated = columns[name.replace("-", "_")]
    np.testing.assert_array_equal(ground_albedo(name, columns["wavelength_nm"]), tabulated)
    middle_nm = columns["wavelength_nm"][:-1] + 5
    np.testing.assert_allclose(ground_albedo(name, middle_nm), (tabulated[1:] + tabulated[:-1]) / 2, rtol=1e-12)


def test_plants_are_bright_beyond_the_red_edge() -> None:
    """Chlorophyll absorbs at 680 nm and no longer at 780 nm; bare soil rises slowly."""
    for name in ("grass", "lawn"):
        red, beyond = ground_albedo(name, [680, 780])
        assert beyond > 2 * red
    red, beyond = ground_albedo("loam", [680, 780])
    assert red < beyond < 1.5 * red


def test_fresh_snow_is_white_and_water_dark() -> None:
    """Above 85 % and below 7 % all over the visible range."""
    wavelength_nm = np.arange(400, 701, 10)
    assert ground_albedo("snow-dry-fresh", wavelength_nm).min() > 0.85
    assert ground_albedo("water", wavelength_nm).max() < 0.07


def test_wet_concrete_is_darker_than_dry() -> None:
    """At every wavelength."""
    wavelength_nm = np.arange(300, 831, 10)
    assert np.all(ground_albedo("concrete-wet", wavelength_nm) < ground_albedo("concrete-dry", wavelength_nm))


@pytest.mark.parametrize("share", [0, 0.18, 1, np.float64(0.5)])
def test_a_number_is_a_grey(share: float) -> None:
    """The same share at all wavelengths, both ends included."""
    np.testing.assert_array_equal(ground_albedo(share, [300, 550, 830]), np.full(3, share))


@pytest.mark.parametrize("ground", ["loam", 0.18])
@pytest.mark.parametrize("shape", [(), (3,), (2, 2)])
def test_shape_of_the_wavelengths_is_kept(ground: str | float, shape: tuple[int, ...]) -> None:
    """Scalar, vector and grid."""
    assert ground_albedo(ground, np.full(shape, 550.0)).shape == shape


@pytest.mark.parametrize(
    ("ground", "wavelength_nm", "message"),
    [
        ("snoww", 550, f"unknown ground 'snoww'; known: {', '.join(NAMES)}"),
        ("wavelength-nm", 550, "unknown ground 'wavelength-nm'; known: grass, "),
        ("concrete_dry", 550, "unknown ground 'concrete_dry'; known: grass, "),
        (1.2, 550, "ground albedo is 1.2, accepted is 0 to 1"),
        (-0.1, 550, "ground albedo is -0.1, accepted is 0 to 1"),
        (math.nan, 550, "ground albedo is nan, accepted is 0 to 1"),
        ("grass", 299, "wavelength is 299 nm, accepted is 300 to 830 nm"),
        (0.5, 831, "wavelength is 831 nm, accepted is 300 to 830 nm"),
    ],
)
def test_unknown_grounds_shares_and_wavelengths_are_refused(
    ground: str | float, wavelength_nm: float, message: str
) -> None:
    """What was wrong, the value seen, what is accepted."""
    with pytest.raises(InputError, match=f"^{message}"):
        ground_albedo(ground, wavelength_nm)
