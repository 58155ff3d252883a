"""Colour differences against the examples their authors published."""

import numpy as np
import pytest

from skychart.colour.chromaticity import xyz_of_xy
from skychart.colour.differences import delta_e_2000, delta_e_itp, delta_uv_prime
from skychart.colour.observers import D65_XY
from skychart.library import colour_science

# Sharma G., Wu W., Dalal E. N. 2005, The CIEDE2000 color-difference formula, Color Res. Appl. 30, 21-30, Table 1.
SHARMA_PAIRS = [
    ((50, 2.6772, -79.7751), (50, 0, -82.7485), 2.0425),
    ((50, 2.5, 0), (73, 25, -18), 27.1492),
    ((22.7233, 20.0904, -46.6940), (23.0331, 14.9730, -42.5619), 2.0373),
    ((2.0776, 0.0795, -1.1350), (0.9033, -0.0636, -0.5514), 0.9082),
]
D65 = xyz_of_xy(D65_XY)
# SMPTE ST 2084: signal for cd/m².
PQ = {0.005: 0.015076, 1: 0.149946, 10: 0.299699, 100: 0.508078, 203: 0.580689, 1000: 0.751827, 10_000: 1.0}


@pytest.mark.parametrize(("first", "second", "published"), SHARMA_PAIRS)
@pytest.mark.parametrize("luminance", [1, 5000])
def test_ciede2000_gives_the_pairs_of_sharma_2005(
    first: tuple[float, ...], second: tuple[float, ...], published: float, luminance: float
) -> None:
    """Table 1, four decimals, by way of XYZ at any luminance of the white."""
    XYZ_1, XYZ_2 = (luminance * colour_science().Lab_to_XYZ(Lab, illuminant=D65_XY) for Lab in (first, second))
    assert delta_e_2000(XYZ_1, XYZ_2, luminance * D65) == pytest.approx(published, abs=6e-5)
    assert delta_e_2000(XYZ_2, XYZ_1, luminance * D65) == pytest.approx(published, abs=6e-5)


def test_delta_e_itp_gives_the_example_of_bt_2124() -> None:
    """Two ICtCp triples with ΔE_ITP 1.42657, taken back to light and compared from there."""
    first = [0.4885468072, -0.04739350675, 0.07475401302]
    second = [0.4899203231, -0.04567508203, 0.07361341775]
    colour = colour_science()
    XYZ_1, XYZ_2 = (
        colour.ICtCp_to_XYZ(np.array(ICtCp), method="ITU-R BT.2100-2 PQ", chromatic_adaptation_transform=None)
        for ICtCp in (first, second)
    )
    # The library rounds neither matrix, so the way back and forth keeps seven digits.
    assert delta_e_itp(XYZ_1, XYZ_2) == pytest.approx(1.42657228, abs=2e-6)


@pytest.mark.parametrize(("luminance", "signal"), PQ.items())
def test_grey_steps_are_720_times_the_difference_of_pq_signals(luminance: float, signal: float) -> None:
    """For neutral light only I differs, and I is the PQ signal: ST 2084 values, six decimals."""
    assert delta_e_itp(luminance * D65, 10_000 * D65) == pytest.approx(720 * (1 - signal), abs=720 * 2e-6)


def test_inputs_are_left_alone() -> None:
    """The same call twice gives the same, and arrays are unchanged."""
    XYZ = np.array([[100.0, 110.0, 130.0], [100.0, 111.0, 131.0]])
    before = XYZ.copy()
    once = delta_e_itp(XYZ[0], XYZ[1])
    assert delta_e_itp(XYZ[0], XYZ[1]) == once
    delta_e_2000(XYZ[0], XYZ[1], 120 * D65)
    np.testing.assert_array_equal(XYZ, before)


def test_chromaticity_distance_is_euclidean_in_uv_prime() -> None:
    """D65 (0.1978, 0.4683) and illuminant A (0.2560, 0.5243), CIE 015, four decimals: 0.0808."""
    distance = delta_uv_prime(D65, 40 * xyz_of_xy((0.44758, 0.40745)))
    assert distance == pytest.approx(np.hypot(0.2560 - 0.1978, 0.5243 - 0.4683), abs=1e-4)


def test_measures_are_zero_at_home_and_broadcast() -> None:
    """Any leading shape; darkness included where it has a meaning."""
    XYZ = np.random.default_rng(11).uniform(0, 1000, (3, 4, 3))
    for measure in (delta_uv_prime, delta_e_itp, lambda a, b: delta_e_2000(a, b, 1000 * D65)):
        np.testing.assert_allclose(measure(XYZ, XYZ), np.zeros((3, 4)), atol=1e-9)
        assert measure(XYZ, XYZ[0, 0]).shape == (3, 4)
    assert delta_e_itp([0, 0, 0], [0, 0, 0]) == 0
