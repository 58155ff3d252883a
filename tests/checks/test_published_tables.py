"""The typed tables: provenance complete, digits as the formulas behind them demand."""

import itertools

import numpy as np
import pytest

from skychart.data.tables import load_table, table_names

PUBLISHED = [name for name in table_names() if name.startswith("checks/published_")]


def columns(name: str) -> dict[str, np.ndarray]:
    """Columns of a published table."""
    return load_table(f"checks/published_{name}").columns


def test_there_are_published_tables() -> None:
    """Twelve tables at the time of writing."""
    assert len(PUBLISHED) >= 12


@pytest.mark.parametrize("name", PUBLISHED)
def test_header_says_where_the_numbers_come_from(name: str) -> None:
    """Quantity, unit, source, way of finding, confidence, terms, processing: none is missing."""
    header = load_table(name).header
    for word in ("Quantity", "Unit", "Source", "Obtained from", "Confidence", "Licence/terms", "Processing"):
        assert any(line.startswith(word) for line in header), word


def test_bodhaine_1999_columns_follow_equations_29_and_30() -> None:
    """Every typed digit of the cross-sections and optical depths."""
    table = columns("rayleigh_depth")
    square = (table["wavelength_nm"] / 1000) ** 2
    fraction = (1.0455996 - 341.29061 / square - 0.90230850 * square) / (1 + 0.0027059889 / square - 85.968563 * square)
    np.testing.assert_allclose(table["bodhaine1999_cross_section_1e28_cm2"], fraction, rtol=0, atol=5.1e-5)
    np.testing.assert_allclose(table["bodhaine1999_optical_depth"], 0.0021520 * fraction, rtol=0, atol=5.1e-6)


def test_hansen_and_travis_1974_column_follows_their_formula() -> None:
    """Every typed digit of the optical depths."""
    table = columns("rayleigh_depth")
    inverse = (table["wavelength_nm"] / 1000) ** -2.0
    depth = 0.008569 * inverse**2 * (1 + 0.0113 * inverse + 0.00013 * inverse**2)
    np.testing.assert_allclose(table["hansen1974_optical_depth"], depth, rtol=0, atol=5.1e-6)


def test_king_factors_follow_the_components_of_bates_1984() -> None:
    """Weighted by volume, carbon dioxide of 360 ppm included; depolarisation follows from the factor."""
    table = columns("king_factor_bates1984")
    inverse = (table["wavelength_nm"] / 1000) ** -2.0
    nitrogen, oxygen = 1.034 + 3.17e-4 * inverse, 1.096 + 1.385e-3 * inverse + 1.448e-4 * inverse**2
    factor = (78.084 * nitrogen + 20.946 * oxygen + 0.934 + 0.036 * 1.15) / (78.084 + 20.946 + 0.934 + 0.036)
    np.testing.assert_allclose(table["king_factor"], factor, rtol=0, atol=6e-6)
    np.testing.assert_allclose(table["depolarisation"], 6 * (factor - 1) / (3 + 7 * factor), rtol=0, atol=6e-6)


def test_bucholtz_1995_cross_sections_follow_their_own_fit() -> None:
    """The paper's fit runs within 0.2 % of its table: a digit typed wrong would stand out."""
    table = columns("rayleigh_bucholtz1995")
    micrometres = table["wavelength_nm"] / 1000
    a, b, c, d = np.where(
        micrometres[:, None] <= 0.5,
        [3.01577e-28, 3.55212, 1.35579, 0.11563],
        [4.01061e-28, 3.99668, 1.10298e-3, 2.71393e-2],
    ).T
    fit = a * micrometres ** -(b + c * micrometres + d / micrometres)
    np.testing.assert_allclose(table["cross_section_cm2"], fit, rtol=0.002)


def test_bucholtz_1995_depolarisation_columns_agree_with_each_other() -> None:
    """gamma = rho / (2 - rho), and the King factor to its three decimals."""
    table = columns("depolarisation_bucholtz1995")
    ratio = table["depolarisation_percent"] / 100
    np.testing.assert_allclose(table["gamma_percent"] / 100, ratio / (2 - ratio), rtol=0, atol=1e-5)
    np.testing.assert_allclose(table["king_factor"], (6 + 3 * ratio) / (6 - 7 * ratio), rtol=0, atol=5.1e-4)


def test_ozone_sets_agree_within_four_per_cent_where_the_band_is_strong() -> None:
    """Seven sets from 500 to 640 nm: a slipped digit would stand out."""
    table = dict(columns("ozone"))
    wavelength = table.pop("wavelength_nm")
    strong = (wavelength >= 500) & (wavelength <= 620)
    assert strong.sum() > 10
    values = np.stack(list(table.values()))[:, strong]
    np.testing.assert_allclose(values, np.broadcast_to(np.median(values, axis=0), values.shape), rtol=0.04)


def test_solar_chromaticities_follow_from_the_tristimulus_values() -> None:
    """x and y of the eight spectra from their X, Y, Z."""
    table = columns("solar_spectra")
    XYZ = np.stack([table["X_klx"], table["illuminance_klx"], table["Z_klx"]])
    np.testing.assert_allclose(np.stack([table["x"], table["y"]]), XYZ[:2] / XYZ.sum(axis=0), rtol=0, atol=2e-5)


def test_direct_fluxes_of_the_flat_sky_follow_beers_law() -> None:
    """pi mu0 exp(-tau / mu0) to five decimals; and no flux is made on the way."""
    table = columns("natraj2009_fluxes")
    direct = np.pi * table["mu0"] * np.exp(-table["tau"] / table["mu0"])
    np.testing.assert_allclose(table["flux_down_direct"], direct, rtol=0, atol=5.1e-6)
    total = table["flux_up_top"] + table["flux_down_diffuse"] + table["flux_down_direct"]
    np.testing.assert_allclose(total, np.pi * table["mu0"], rtol=1e-4)


def test_maximum_polarisation_is_what_the_table_of_natraj_li_and_yung_2009_gives() -> None:
    """Wherever all 112 published directions of a case are kept: 24 cases, to four decimals."""
    rows = load_table("checks/rayleigh_sky_natraj2009").columns
    degree = np.hypot(rows["Q"], rows["U"]) / rows["I"]
    compared = 0
    for tau, albedo, mu0, published in zip(*columns("natraj2009_maximum_polarisation").values(), strict=True):
        case = (rows["tau"] == tau) & (rows["albedo"] == albedo) & (rows["mu0"] == mu0)
        if case.sum() >= 106:
            assert degree[case].max() == pytest.approx(published, abs=5.1e-5)
            compared += 1
    assert compared == 24


def test_coefficients_of_circular_171_join_where_their_ranges_meet() -> None:
    """The published pieces meet within 2 % from 90 to -12 degrees: a slipped digit would tear them apart."""
    pieces = list(zip(*columns("illuminance_usno171").values(), strict=True))
    for (low, _, *upper), (_, high, *lower) in itertools.pairwise(pieces):
        assert low == high
        above, below = (np.polynomial.polynomial.polyval(low / 90, piece) for piece in (upper, lower))
        assert 10 ** (above - below) == pytest.approx(1, abs=0.02)
