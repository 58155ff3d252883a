"""Tables of gases, grounds and haze: physical, complete, and as published where something is."""

import numpy as np
import pytest

from skychart.data import load_table

PHASE_TYPES = ("continental_clean", "continental_average", "urban", "maritime_clean", "desert")
PHASE_NM = (400, 450, 500, 550, 600, 700)
BULK_NM = (300, 350, 400, 450, 500, 550, 600, 650, 700, 750, 800, 900, 1000)


def bulk(aerosol: str, humidity_percent: int) -> dict[str, np.ndarray]:
    """Rows of one mixture at one humidity."""
    columns = load_table("aerosol_bulk_opac_mie").columns
    rows = (columns["type"] == aerosol) & (columns["rh_percent"] == humidity_percent)
    return {name: column[rows] for name, column in columns.items()}


@pytest.mark.parametrize("name", ["gas_h2o_o2_k4_1nm", "checks/gas_h2o_o2_k4_5nm"])
def test_line_coefficients_ascend_and_vanish_together(name: str) -> None:
    """Four terms from weak to strong, none negative, so the strongest is there wherever anything absorbs."""
    columns = load_table(name).columns
    for gas in ("h2o", "o2"):
        terms = np.stack([columns[f"{gas}_k{number}"] for number in range(1, 5)])
        assert np.all(terms >= 0)
        assert np.all(np.diff(terms, axis=0) >= 0)
        assert 8 <= (terms[3] > 0).sum() < terms.shape[1]


def test_oxygen_lines_lie_in_the_gamma_b_and_a_bands() -> None:
    """Band heads at 628, 687 and 759.4 nm."""
    columns = load_table("gas_h2o_o2_k4_1nm").columns
    absorbing = columns["wavelength_nm"][columns["o2_k4"] > 0]
    starts = absorbing[np.diff(absorbing, prepend=0) > 1]
    np.testing.assert_allclose(starts, [628, 687, 759.4], atol=1)


def test_the_lines_of_both_widths_end_alike() -> None:
    """5 nm bins centred on the multiples of five."""
    columns = load_table("checks/gas_h2o_o2_k4_5nm").columns
    np.testing.assert_array_equal(columns["wavelength_nm"], np.arange(360, 831, 5))


def test_nitrogen_dioxide_has_gaps_only_at_the_long_end() -> None:
    """-1 marks missing values: beyond 666 nm in one source, beyond 759 nm in the other; nothing else is negative."""
    columns = load_table("no2_cross_section_1nm").columns
    for name, last_nm in (("vandaele_220K", 666), ("vandaele_294K", 666), ("bogumil_293K", 759)):
        known = columns["wavelength_nm"] <= last_nm
        assert np.all(columns[name][known] >= 0)
        np.testing.assert_array_equal(columns[name][~known], -1)


def test_nitrogen_dioxide_profile_has_the_levels_of_its_atmosphere() -> None:
    """So that the mixing ratio multiplies the air row by row."""
    profiles = load_table("atmosphere_profiles_afgl").columns
    levels_km = profiles["z_km"][profiles["profile"] == "us_standard"]
    columns = load_table("no2_mixing_ratio_afgl").columns
    np.testing.assert_array_equal(columns["z_km"], levels_km)
    assert np.all(columns["no2_ppmv"] > 0)
    assert columns["z_km"][columns["no2_ppmv"].argmax()] == 35


def test_grounds_return_a_share_of_the_light() -> None:
    """Every 10 nm from 300 to 830, each value between 0 and 1."""
    columns = dict(load_table("ground_albedo").columns)
    np.testing.assert_array_equal(columns.pop("wavelength_nm"), np.arange(300, 831, 10))
    assert len(columns) == 11
    for name, albedo in columns.items():
        assert np.all((albedo > 0) & (albedo < 1)), name


def test_bulk_optics_are_complete_and_relative_to_550_nm() -> None:
    """Seven mixtures at two humidities and thirteen wavelengths; the ratio is that of the extinctions."""
    columns = load_table("aerosol_bulk_opac_mie").columns
    mixtures = set(columns["type"])
    assert len(mixtures) == 7
    assert len(columns["type"]) == 7 * 2 * len(BULK_NM)
    for mixture in mixtures:
        for humidity in (50, 80):
            rows = bulk(mixture, humidity)
            np.testing.assert_array_equal(rows["wavelength_nm"], BULK_NM)
            extinction = rows["ext_per_km"]
            np.testing.assert_allclose(rows["ext_ratio_550"], extinction / extinction[5], rtol=1e-4)
            assert np.all((rows["ssa"] > 0.6) & (rows["ssa"] <= 1))
            assert np.all((rows["g"] > 0.5) & (rows["g"] < 0.9))


def test_bulk_optics_are_those_published_by_hess_koepke_and_schult_1998() -> None:
    """Table 4, 550 nm and 80 %: half a unit of the last printed digit, and as much for the rounding of our own.

    For the asymmetry a unit and a half: the independent calculation differs by up to 0.0011.
    """
    published = load_table("checks/published_opac1998").columns
    assert len(published["type"]) == 7
    for row, aerosol in enumerate(published["type"]):
        at = {int(wavelength): index for index, wavelength in enumerate(BULK_NM)}
        rows = bulk(aerosol, 80)
        for ours, theirs, allowed in (("ext_per_km", "ext_per_km", 6e-4), ("ssa", "ssa", 6e-4), ("g", "g", 1.5e-3)):
            assert rows[ours][at[550]] == pytest.approx(published[theirs][row], abs=allowed), (aerosol, ours)
        for low, high in ((350, 500), (500, 800)):
            exponent = np.log(rows["ext_per_km"][at[low]] / rows["ext_per_km"][at[high]]) / np.log(high / low)
            assert exponent == pytest.approx(published[f"angstrom_{low}_{high}"][row], abs=0.01), aerosol


def test_published_continental_exponents_order_as_their_soot() -> None:
    """Soot absorbs and is fine: from clean to urban air the albedo falls and the blue exponent rises."""
    published = load_table("checks/published_opac1998").columns
    order = [list(published["type"]).index(f"continental_{name}") for name in ("clean", "average", "polluted")]
    order.append(list(published["type"]).index("urban"))
    assert np.all(np.diff(published["ssa"][order]) < 0)
    assert np.all(np.diff(published["angstrom_350_500"][order]) > 0)


def test_phase_functions_have_mean_one_within_what_the_header_states() -> None:
    """Trapezoids in the cosine over the tabulated angles, 0.3 %; five mixtures at six wavelengths."""
    columns = dict(load_table("aerosol_phase_functions_mie").columns)
    angle_deg = columns.pop("angle_deg")
    assert angle_deg[0] == 0
    assert angle_deg[-1] == 180
    assert np.all(np.diff(angle_deg) > 0)
    assert set(columns) == {f"{aerosol}_{wavelength}" for aerosol in PHASE_TYPES for wavelength in PHASE_NM}
    cosine = np.cos(np.radians(angle_deg))
    for name, phase in columns.items():
        assert np.all(phase > 0), name
        mean = -np.sum((phase[1:] + phase[:-1]) / 2 * np.diff(cosine)) / 2
        assert mean == pytest.approx(1, abs=3e-3), name
