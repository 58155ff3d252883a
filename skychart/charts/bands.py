"""Steps that whole code values make of a smooth gradient.

Between neighbouring samples a signal runs straight, so the places where a code value changes are known exactly, and
with them every triplet of codes along the gradient, in its order, whatever the size of a picture. A step is the
difference ΔE_ITP of the light that two neighbouring triplets stand for (ITU-R BT.2124-0, 2019: 1 is just visible to
the most critical observer); a band is what lies between two steps.
"""

from dataclasses import dataclass

import numpy as np

from skychart.colour.coding import FEWEST_BITS, MOST_BITS, Coding, xyz_of_rgb
from skychart.colour.differences import delta_e_of_itp, itp

DEPTHS = (8, 10, 12)
INVISIBLE_DELTA_E = 1.0

_TOGETHER = 1e-9  # of a gradient's length: channels that change here change at once, as in a grey
_MOST_OF_A_CHANNEL = 200


@dataclass(frozen=True)
class Steps:
    """Where code values change: the triplets between the changes, `codes` (n + 1, 3), and what lies between.

    `channel` (n,) is one that changes there. `band` (n + 1,) are the widths between the changes and the ends, in the
    unit of the positions, without the stretches where a signal passes 1 and is cut off: those are flat anyway.
    """

    codes: np.ndarray
    channel: np.ndarray
    band: np.ndarray


@dataclass(frozen=True)
class Banding:
    """For 8, 10 and 12 bits the largest step [ΔE_ITP] and the widest band; the fewest bits without a visible step.

    `widest` in the unit of the positions. `least_bits` is the fewest with no step above 1, None if 16 do not suffice.
    """

    largest: tuple[float, ...]
    widest: tuple[float, ...]
    least_bits: int | None


def code_steps(position: np.ndarray, signal: np.ndarray, coding: Coding, bits: int) -> Steps:
    """Every change of code along a gradient of `signal` (n, 3) at ascending `position` (n,)."""
    place = coding.scaled(np.clip(signal, 0, 1), bits)
    code = np.floor(place + 0.5).astype(int)
    change = np.diff(code, axis=0)
    count = np.abs(change).ravel()
    cell = np.repeat(np.arange(count.size), count)
    nth = np.arange(count.sum()) - np.repeat(np.cumsum(count) - count, count)
    row, channel = cell // 3, cell % 3
    sign = np.sign(change)[row, channel]
    crossed = code[row, channel] + sign * (nth + 0.5)
    start, end = place[row, channel], place[row + 1, channel]
    at = position[row] + (crossed - start) / (end - start) * (position[row + 1] - position[row])
    order = np.argsort(at, kind="stable")
    at, channel, sign = at[order], channel[order], sign[order]
    turns = np.zeros((len(at), 3), int)
    turns[np.arange(len(at)), channel] = sign
    last = np.flatnonzero(np.diff(at, append=np.inf) > _TOGETHER * (position[-1] - position[0]))
    codes = np.concatenate([code[:1], code[0] + np.cumsum(turns, axis=0)[last]])
    edge = np.concatenate([position[:1], at[last], position[-1:]])
    return Steps(codes, channel[last], np.diff(np.interp(edge, position, _held(position, signal))))


def largest_step(steps: Steps, coding: Coding, bits: int) -> float:
    """The largest ΔE_ITP between neighbouring triplets; nan where nothing changes.

    Of each channel at most 200 changes, evenly chosen, are measured: where there are more, a step hardly differs from
    the next of its channel.
    """
    chosen = np.concatenate([_evenly(np.flatnonzero(steps.channel == channel)) for channel in range(3)])
    if not len(chosen):
        return float("nan")
    before, after = itp(_shown(np.stack([steps.codes[chosen], steps.codes[chosen + 1]]), coding, bits))
    return float(delta_e_of_itp(before, after).max())


def widest_band(steps: Steps) -> float:
    """Width of the widest band, in the unit of the positions; nan if all is brighter than the coding can hold."""
    widest = float(steps.band.max())
    return widest if widest > 0 else float("nan")


def banding(position: np.ndarray, signal: np.ndarray, coding: Coding) -> Banding:
    """What whole code values make of a gradient of `signal` (n, 3) at ascending `position` (n,)."""
    found = {bits: code_steps(position, signal, coding, bits) for bits in DEPTHS}
    largest = {bits: largest_step(steps, coding, bits) for bits, steps in found.items()}

    def suffices(bits: int) -> bool:
        if bits not in largest:
            largest[bits] = largest_step(code_steps(position, signal, coding, bits), coding, bits)
        return not largest[bits] > INVISIBLE_DELTA_E

    least = next((bits for bits in (*DEPTHS, *range(DEPTHS[-1] + 1, MOST_BITS + 1)) if suffices(bits)), None)
    while least is not None and least > FEWEST_BITS and suffices(least - 1):
        least -= 1
    return Banding(
        largest=tuple(largest[bits] for bits in DEPTHS),
        widest=tuple(widest_band(found[bits]) for bits in DEPTHS),
        least_bits=least,
    )


def _held(position: np.ndarray, signal: np.ndarray) -> np.ndarray:
    """Length of the gradient up to each position, counting only what lies between samples that are not cut off."""
    over = signal.max(axis=1) > 1
    length = np.where(over[1:] | over[:-1], 0, np.diff(position))
    return np.concatenate([[0], np.cumsum(length)])


def _evenly(members: np.ndarray) -> np.ndarray:
    """At most so many of the members, the first and the last among them."""
    count = min(len(members), _MOST_OF_A_CHANNEL)
    return members[np.rint(np.linspace(0, len(members) - 1, count)).astype(int)] if count else members


def _shown(codes: np.ndarray, coding: Coding, bits: int) -> np.ndarray:
    """Tristimulus values [cd m⁻²] of triplets of codes."""
    return xyz_of_rgb(coding.light(coding.signal_of(codes, bits)), coding.space)
