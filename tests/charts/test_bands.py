"""Steps of code values: known ramps, and every change found where a walk along the gradient meets it."""

import numpy as np
import pytest

from skychart.charts import bands
from skychart.charts.bands import banding, code_steps, largest_step, widest_band
from skychart.colour.coding import BT1886, CODINGS, HLG, PQ, SRGB, Coding, xyz_of_rgb
from skychart.colour.differences import delta_e_itp

KEYS = [coding.key for coding in CODINGS]


def grey(signal):
    """A neutral gradient of that signal."""
    return np.repeat(np.asarray(signal, float)[:, None], 3, axis=1)


def coloured(count=61):
    """Smooth signals that rise, fall and turn, each channel in its own way."""
    x = np.linspace(0, 90, count)
    t = x / 90
    return x, np.stack([0.2 + 0.5 * t**2, 0.3 + 0.4 * np.sin(2.5 * t), 0.7 - 0.35 * t], axis=-1)


@pytest.mark.parametrize("coding", CODINGS, ids=KEYS)
@pytest.mark.parametrize("bits", [8, 10])
def test_every_triplet_is_the_one_a_walk_meets(coding, bits):
    """A walk in 600 000 paces along the same straight pieces meets each change in its place.

    With 8 bits also the same triplets in the same order; with 10 bits two changes may fall into one pace.
    """
    x, signal = coloured()
    steps = code_steps(x, signal, coding, bits)
    pace = np.linspace(0, 90, 600_001)
    codes = coding.codes(np.stack([np.interp(pace, x, axis) for axis in signal.T], axis=-1), bits)
    changes = np.flatnonzero((np.diff(codes, axis=0) != 0).any(axis=1))
    met = codes[np.append(0, changes + 1)]
    assert len(met) > 100
    if bits == 8:
        np.testing.assert_array_equal(steps.codes, met)
    assert steps.band.sum() == pytest.approx(90)
    at = np.cumsum(steps.band)[:-1]
    for channel in range(3):
        walked = pace[1:][np.diff(codes[:, channel]) != 0]
        np.testing.assert_allclose(at[np.diff(steps.codes[:, channel]) != 0], walked, atol=2e-4)


@pytest.mark.parametrize("coding", CODINGS, ids=KEYS)
def test_the_largest_step_is_that_of_all_neighbours(coding):
    """ΔE_ITP of each triplet with the next, of the light a screen shows for them."""
    x, signal = coloured()
    steps = code_steps(x, signal, coding, 8)
    light = xyz_of_rgb(coding.light(coding.signal_of(steps.codes, 8)), coding.space)
    assert largest_step(steps, coding, 8) == pytest.approx(delta_e_itp(light[:-1], light[1:]).max(), rel=1e-9)


def test_a_choice_of_many_changes_finds_their_largest(monkeypatch):
    """With 12 bits, 200 of each channel's changes give the same as all, within half a per cent."""
    x, signal = coloured()
    for coding in CODINGS:
        steps = code_steps(x, signal, coding, 12)
        chosen = largest_step(steps, coding, 12)
        monkeypatch.setattr(bands, "_MOST_OF_A_CHANNEL", 10**6)
        assert chosen == pytest.approx(largest_step(steps, coding, 12), rel=5e-3)
        monkeypatch.undo()


@pytest.mark.parametrize(("bits", "step"), [(8, 720 / 219), (10, 720 / 876), (12, 720 / 3504)])
def test_a_grey_ramp_in_pq_has_equal_steps_of_known_size(bits, step):
    """ΔE_ITP of greys is 720 times the difference of PQ signals: BT.2124, and narrow range's 219 · 2^(bits − 8)."""
    steps = code_steps(np.array([0.0, 1]), grey([0.0, 1]), PQ, bits)
    assert len(steps.codes) == round(720 / step) + 1, "all three channels change at once"
    assert largest_step(steps, PQ, bits) == pytest.approx(step, rel=1e-6)
    assert widest_band(steps) == pytest.approx(step / 720, rel=1e-6)


def test_a_synthetic_ramp_reproduces_its_bit_depth():
    """PQ in narrow range needs 219 · 2^(bits − 8) ≥ 720 for greys: 10 bits (876), for 9 have 438."""
    found = banding(np.array([0.0, 1]), grey([0.1, 0.9]), PQ)
    assert found.least_bits == 10
    assert found.largest == pytest.approx((720 / 219, 720 / 876, 720 / 3504), rel=1e-6)


@pytest.mark.parametrize(("span", "depth"), [(0.02, 8), (0.3, 8), (0.6, 9), (0.9, 10)])
def test_the_fewer_visible_steps_a_ramp_spans_the_fewer_bits_it_needs(span, depth):
    """A screen of full range that shows a part of PQ's signal: 720 times that part in 2^bits − 1 steps.

    216 steps take 8 bits (255), 432 take 9 (511), 648 take 10 (1023); one bit less would not do. 8 is the least tried.
    """

    class Window(Coding):
        def light(self, signal):
            return PQ.light(0.05 + span * np.asarray(signal))

    window = Window("pq", "a part of PQ", "bt2020", 10_000.0, 203.0, narrow=False)
    assert 720 * span <= 2**depth - 1
    assert depth == 8 or 720 * span > 2 ** (depth - 1) - 1
    found = banding(np.array([0.0, 1]), grey([0.0, 1]), window)
    assert found.least_bits == depth
    assert found.largest == pytest.approx([720 * span / (2**bits - 1) for bits in (8, 10, 12)], rel=1e-6)


@pytest.mark.parametrize("coding", [SRGB, BT1886, HLG], ids=["srgb", "bt1886", "hlg"])
def test_least_bits_are_enough_and_one_less_is_not(coding):
    """For a coloured gradient, taken again depth by depth."""
    x, signal = coloured()
    found = banding(x, signal, coding)
    largest = [largest_step(code_steps(x, signal, coding, bits), coding, bits) for bits in range(8, 17)]
    assert found.least_bits == 8 + next(i for i, step in enumerate(largest) if step <= 1)
    assert found.largest == tuple(largest[bits - 8] for bits in (8, 10, 12))


def test_what_is_cut_off_makes_no_band():
    """A grey that passes the peak half way: the flat part above is left out; where all is above there is none."""
    x = np.array([0.0, 1, 2])
    steps = code_steps(x, grey([0.9, 1.0, 1.5]), PQ, 10)
    assert steps.codes[-1, 0] == 940
    assert widest_band(steps) == pytest.approx(1 / 87.6, rel=0.01), "0.1 of the signal in 876 steps to 1"
    over = code_steps(x, grey([1.1, 1.2, 1.3]), PQ, 10)
    assert np.isnan(widest_band(over))
    assert np.isnan(largest_step(over, PQ, 10))


def test_a_gradient_without_a_step_needs_the_fewest_bits():
    """A single colour: no change, no band edge, the least that is tried."""
    found = banding(np.array([0.0, 30, 90]), np.full((3, 3), 0.4), SRGB)
    assert found.least_bits == 8
    assert np.isnan(found.largest).all()
    assert found.widest == (90.0, 90.0, 90.0)
