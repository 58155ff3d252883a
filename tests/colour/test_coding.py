"""Codings give light back, keep to their ranges, and follow the printed formulas."""

import numpy as np
import pytest

from skychart.colour.coding import BT1886, CODINGS, HLG, PQ, SRGB, xyz_of_rgb
from skychart.colour.spaces import SPACES, rgb
from skychart.errors import InputError

COLOURS = np.random.default_rng(5).uniform(0.02, 0.9, (40, 3))
KEYS = [coding.key for coding in CODINGS]


def pq_signal(light):
    """ST 2084, equation 5.2, with its constants as fractions."""
    y = (light / 10_000) ** (2610 / 16384)
    return ((3424 / 4096 + 2413 / 128 * y) / (1 + 2392 / 128 * y)) ** (2523 / 32)


def hlg_signal(light):
    """BT.2100-2, table 5, literally: inverse OOTF of gamma 1.2, then the OETF."""
    a, b = 0.17883277, 0.28466892
    c = 0.5 - a * np.log(4 * a)
    luminance = light @ np.array([0.2627, 0.6780, 0.0593]) / 1000
    scene = light / 1000 * luminance[..., None] ** ((1 - 1.2) / 1.2)
    with np.errstate(invalid="ignore"):
        return np.where(scene <= 1 / 12, np.sqrt(3 * scene), a * np.log(12 * scene - b) + c)


def srgb_signal(light):
    """IEC 61966-2-1, for a white of 100."""
    linear = light / 100
    return np.where(linear <= 0.0031308, 12.92 * linear, 1.055 * linear ** (1 / 2.4) - 0.055)


@pytest.mark.parametrize(
    ("coding", "literal", "tolerance"),
    [(PQ, pq_signal, 1e-12), (HLG, hlg_signal, 2e-5), (SRGB, srgb_signal, 1e-7),
     (BT1886, lambda light: (light / 100) ** (1 / 2.4), 1e-12)],
    ids=["pq", "hlg", "srgb", "bt1886"],
)  # fmt: skip
def test_signals_follow_the_printed_formulas(coding, literal, tolerance):
    """HLG within the four digits that BT.2100 prints of the luminance weights, sRGB within its rounded joint."""
    light = COLOURS**3 * coding.peak_cd_m2
    np.testing.assert_allclose(coding.signal(light), literal(light), rtol=0, atol=tolerance)


@pytest.mark.parametrize("coding", CODINGS, ids=KEYS)
def test_light_comes_back_from_its_signal(coding):
    """Within 2e-5, which the rounded constants of sRGB and HLG leave."""
    np.testing.assert_allclose(coding.signal(coding.light(COLOURS)), COLOURS, rtol=0, atol=2e-5)


@pytest.mark.parametrize("coding", CODINGS, ids=KEYS)
def test_the_peak_is_signal_one_and_black_is_zero(coding):
    """A neutral light of the peak; PQ's signal of no light is 7e-7 by its formula. Negative light counts as none."""
    assert coding.signal(np.full(3, coding.peak_cd_m2)) == pytest.approx(np.ones(3), abs=1e-8)
    assert coding.signal(np.zeros((2, 3))) == pytest.approx(np.zeros((2, 3)), abs=1e-6)
    assert coding.light(np.zeros((2, 3))) == pytest.approx(np.zeros((2, 3)), abs=1e-12)
    np.testing.assert_array_equal(coding.signal([[-1, 2, 3]]), coding.signal([[0, 2, 3]]))


def test_what_is_above_the_peak_can_be_told():
    """The signal goes on above 1, while the codes stop at their top."""
    for coding in CODINGS:
        signal = coding.signal(np.full(3, 2 * coding.peak_cd_m2))
        assert (signal > 1.01).all()
        assert set(coding.codes(signal, 10)) == {940 if coding.narrow else 1023}


@pytest.mark.parametrize(("bits", "low", "high"), [(8, 16, 235), (10, 64, 940), (12, 256, 3760)])
def test_narrow_range_has_the_ends_of_the_standard(bits, low, high):
    """BT.2100-2, table 9, and BT.709-6 for 8 bits: black and peak."""
    np.testing.assert_array_equal(PQ.codes([0, 1], bits), [low, high])
    np.testing.assert_array_equal(SRGB.codes([0, 1], bits), [0, 2**bits - 1])


@pytest.mark.parametrize("coding", CODINGS, ids=KEYS)
@pytest.mark.parametrize("bits", [8, 10, 12, 16])
def test_every_code_is_its_own_signals_code(coding, bits):
    """From the lowest to the highest; and a signal is never farther from its code's than half a step."""
    codes = np.arange(coding.codes(0.0, bits), coding.codes(1.0, bits) + 1)
    np.testing.assert_array_equal(coding.codes(coding.signal_of(codes, bits), bits), codes)
    signal = np.linspace(0, 1, 777)
    apart = np.abs(coding.signal_of(coding.codes(signal, bits), bits) - signal)
    assert apart.max() <= 0.5 / (codes[-1] - codes[0]) + 1e-12


@pytest.mark.parametrize("bits", [7, 17])
def test_other_bits_are_refused(bits):
    """With the range that is accepted."""
    with pytest.raises(InputError, match=f"a code of {bits} bits, accepted are 8 to 16"):
        PQ.codes(0.5, bits)


@pytest.mark.parametrize("space", SPACES)
def test_linear_components_lead_back_to_tristimulus_values(space):
    """To twelve digits, in every space."""
    np.testing.assert_allclose(xyz_of_rgb(rgb(COLOURS, space), space), COLOURS, rtol=1e-12)
