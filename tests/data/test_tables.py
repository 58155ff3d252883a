"""The tables are complete, ordered and add up to what their sources say; the loader reads them as they are."""

from importlib.resources import files

import numpy as np
import pytest

from skychart.data import load_table, table_names
from skychart.errors import InputError

BY_WAVELENGTH = {
    "solar_tsis1_hsrs_v2_1nm": (300, 1100),
    "ozone_cross_section_serdyuchenko_1nm": (300, 830),
    "checks/ozone_cross_section_comparison_1nm": (300, 830),
    "no2_cross_section_1nm": (300, 830),
    "o4_cross_section_1nm": (300, 830),
    "gas_h2o_o2_k4_1nm": (360, 830),
}
# TSIS-1 HSRS through a Gaussian slit of 3 nm, W m-2 nm-1, as kept in the public repository LIME-ESA/lime_tbx.
SOLAR_3_NM = {450: 2.0878, 500: 1.9387, 550: 1.8985, 600: 1.7697, 650: 1.5755}
DOBSON_UNIT = 2.6867e16  # molecules cm-2


def trapezoid(values: np.ndarray, at: np.ndarray) -> float:
    return float(np.sum((values[1:] + values[:-1]) * np.diff(at)) / 2)


def log_linear(values: np.ndarray, at: np.ndarray) -> float:
    """Integral of a positive quantity that is exponential between the points."""
    return float(np.sum(np.diff(values) / np.diff(np.log(values)) * np.diff(at)))


def test_every_table_names_its_quantity_unit_or_conventions_and_origin() -> None:
    """No table without provenance, and no row without a value."""
    assert len(table_names()) >= 8
    for name in table_names():
        table = load_table(name)
        header = "\n".join(table.header)
        assert table.header[0].startswith("Quantity:"), name
        assert any(word in header for word in ("Source", "Obtained from:", "Definition:")), name
        lengths = {column.shape for column in table.columns.values()}
        assert len(lengths) == 1, name
        if not name.startswith("checks/published_"):  # those may mark what a source does not give
            assert all(np.all(np.isfinite(column)) for column in table.columns.values() if column.dtype == float), name


def test_every_table_has_its_paragraph_in_the_readme() -> None:
    """The README of the folder describes each file; published values share one paragraph."""
    readme = files("skychart.data").joinpath("README.md").read_text(encoding="utf-8")
    described = [name for name in table_names() if not name.startswith("checks/published_")]
    assert len(described) >= 8
    for name in described:
        assert f"**{name}.csv**" in readme


@pytest.mark.parametrize(("name", "span"), BY_WAVELENGTH.items())
def test_wavelengths_ascend_by_one_nanometre_without_a_gap(name: str, span: tuple[int, int]) -> None:
    """Spectral tables sit on whole nanometres."""
    wavelength_nm = load_table(name).columns["wavelength_nm"]
    np.testing.assert_array_equal(wavelength_nm, np.arange(span[0], span[1] + 1))


def test_solar_table_agrees_with_an_independent_copy() -> None:
    """Broadened from its 1 nm bins to a Gaussian of 3 nm, the table gives a copy by other hands.

    They agree within the uncertainty that the table states for each bin, 0.3 to 0.5 %: the copy does not say
    whether its wavelengths are those of air. The variance of the bin itself, 1/12 nm2, is taken off the kernel.
    """
    columns = load_table("solar_tsis1_hsrs_v2_1nm").columns
    irradiance = columns["irradiance_w_m2_nm"]
    variance = (3 / (2 * np.sqrt(2 * np.log(2)))) ** 2 - 1 / 12
    for wavelength_nm, published in SOLAR_3_NM.items():
        kernel = np.exp(-((columns["wavelength_nm"] - wavelength_nm) ** 2) / (2 * variance))
        uncertainty = columns["uncertainty_w_m2_nm"][wavelength_nm - 300]
        assert kernel @ irradiance / kernel.sum() == pytest.approx(published, abs=uncertainty), wavelength_nm
    assert np.all(irradiance > 0)
    assert np.all(columns["uncertainty_w_m2_nm"] < 0.015 * irradiance)


def test_ozone_is_measured_at_eleven_temperatures_and_negative_only_in_noise() -> None:
    """Negative values, which stand for zero, are allowed near the limit of detection below 400 nm alone."""
    columns = load_table("ozone_cross_section_serdyuchenko_1nm").columns
    temperatures = [name for name in columns if name.startswith("sigma_")]
    assert len(temperatures) == 11
    for name in temperatures:
        negative = columns["wavelength_nm"][columns[name] < 0]
        assert np.all((negative > 360) & (negative < 400)), name


def test_us76_density_is_the_ideal_gas_of_its_own_pressure_and_temperature() -> None:
    """n = p / kT to the printed digits, and the column is p0 / (m g) within the change of gravity with height."""
    columns = load_table("us76_density_profile").columns
    boltzmann = 1.380622e-23  # J/K as in the 1976 standard
    ideal = columns["pressure_hPa"] * 100 / (boltzmann * columns["temperature_K"]) * 1e-6
    np.testing.assert_allclose(columns["number_density_cm3"], ideal, rtol=4e-5)
    assert np.all(np.diff(columns["z_km"]) > 0)
    assert columns["number_density_cm3"][0] == 2.54697e19
    column = log_linear(columns["number_density_cm3"], columns["z_km"] * 1e5)
    flat_column = 101325 / (28.9644e-3 / 6.022169e23 * 9.80665) * 1e-4
    assert 1.000 < column / flat_column < 1.004


@pytest.mark.parametrize(
    ("profile", "ozone_du", "water_cm"),
    [("us_standard", 344, 1.42), ("midlatitude_summer", 334, 2.92), ("midlatitude_winter", 378, 0.85)],
)
def test_afgl_columns_are_those_of_the_header(profile: str, ozone_du: float, water_cm: float) -> None:
    """Ozone and water columns by log-linear integration, within one unit of the last digit in the header."""
    columns = load_table("atmosphere_profiles_afgl").columns
    rows = columns["profile"] == profile
    altitude_cm = columns["z_km"][rows] * 1e5
    assert np.all(np.diff(altitude_cm) > 0)
    assert altitude_cm[-1] == 100e5
    assert log_linear(columns["o3_cm3"][rows], altitude_cm) / DOBSON_UNIT == pytest.approx(ozone_du, abs=1)
    water = log_linear(columns["h2o_cm3"][rows], altitude_cm) * 18.01528 / 6.02214076e23
    assert water == pytest.approx(water_cm, abs=0.01)


def test_benchmark_profiles_hold_one_vertical_depth_each() -> None:
    """Densities are linear between levels by definition, so the trapezoid is exact."""
    columns = load_table("checks/benchmark_atmosphere").columns
    for name in ("rayleigh_profile_per_km", "ozone_profile_per_km"):
        assert trapezoid(columns[name], columns["altitude_km"]) == pytest.approx(1, abs=1e-6)


def test_natraj_table_holds_the_rows_of_the_published_grid() -> None:
    """5,410 rows; U vanishes in the principal plane to the last printed digit."""
    columns = load_table("checks/rayleigh_sky_natraj2009").columns
    assert columns["I"].shape == (5410,)
    principal_plane = np.isin(columns["phi_deg"], (0, 180))
    assert principal_plane.sum() > 1000
    np.testing.assert_array_equal(columns["U"][principal_plane], 0)


def test_numbers_become_floats_and_words_stay_words() -> None:
    """A column with one entry that is no number is text."""
    columns = load_table("atmosphere_profiles_afgl").columns
    assert columns["z_km"].dtype == np.float64
    assert columns["profile"].dtype.kind == "U"
    assert set(columns["profile"]) == {"us_standard", "midlatitude_summer", "midlatitude_winter"}


def test_a_table_cannot_be_changed_by_who_reads_it() -> None:
    """Tables are shared, so their arrays are read-only."""
    column = load_table("us76_density_profile").columns["z_km"]
    with pytest.raises(ValueError, match="read-only"):
        column[0] = 1


@pytest.mark.parametrize("name", ["solar", "", "../errors", "checks", "us76_density_profile.csv"])
def test_unknown_table_is_refused_with_the_known_ones(name: str) -> None:
    """The message names what was asked for and what there is."""
    with pytest.raises(InputError, match=r"^unknown table '.*'; known: aerosol_bulk_opac_mie, .*, checks/"):
        load_table(name)
