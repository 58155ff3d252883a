"""Numbers are written with the digits asked for, and never as nonsense."""

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from skychart.charts.numbers import degrees, fixed, kelvin, rounded, signed_stem, significant, spaced


@pytest.mark.parametrize(
    ("value", "digits", "text"),
    [
        (108412.0, 3, "108000"),
        (9.996, 3, "10.0"),
        (0.00512345, 3, "0.00512"),
        (0.00001234, 3, "1.23e-05"),
        (-0.0, 3, "0"),
        (1.0, 4, "1.000"),
        (math.nan, 3, ""),
    ],
)
def test_significant_digits(value, digits, text):
    """Trailing zeros that are significant stay, rounding may carry, nothing is written for nan."""
    assert significant(value, digits) == text


@given(st.floats(1e-300, 1e300), st.integers(1, 8))
def test_significant_text_is_within_half_a_digit(value, digits):
    """The text read back differs from the value by at most half a unit of its last digit."""
    assert float(significant(value, digits)) == pytest.approx(value, rel=0.5001 * 10.0 ** (1 - digits))


@given(st.floats(-1e-3, 1e-3))
def test_fixed_never_shows_a_negative_zero(value):
    """What rounds to nothing has no sign."""
    assert fixed(value, 2) == "0.00"


def test_spaced_is_for_reading():
    """True minus, thin spaces from five digits on, a dash for none."""
    assert spaced("-108400.5") == "−108\u2009400.5"
    assert spaced("9999") == "9999"
    assert spaced("12345678") == "12\u2009345\u2009678"
    assert spaced("-1.673e-26") == "−1.673\u202f×\u202f10⁻²⁶"
    assert spaced("") == "—"


def test_angles_as_labels_and_stems():
    """Labels carry the sign that is read, stems the one that sorts."""
    assert degrees(-12.0) == "−12°"
    assert [signed_stem("sun", sun) for sun in (-12, 0, 2, 12.5, 90)] == [
        "sun-12", "sun+00", "sun+02", "sun+12.5", "sun+90",
    ]  # fmt: skip


def test_rounded_for_json_has_no_nan():
    """JSON has no nan; None becomes null."""
    assert rounded(math.nan, 4) is None
    assert rounded(123456.0, 4) == 123500.0


@pytest.mark.parametrize(
    ("value", "text"), [(6504.4, "6504"), (12345.0, "12300"), (94321.0, "94000"), (99999.0, "100000"), (math.nan, "")]
)
def test_colour_temperatures_have_as_many_digits_as_are_true(value, text):
    """Four below 10 000 K, three below 30 000 K, two above; nothing for nan."""
    assert kelvin(value) == text
