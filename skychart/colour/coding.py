"""From light on a screen to signals and whole code values, and back.

sRGB: IEC 61966-2-1:1999. BT.1886: ITU-R BT.1886-0 (2011), with a black of 0 cd/m². PQ: SMPTE ST 2084:2014, ITU-R
BT.2100-2 (2018). HLG: ITU-R BT.2100-2, with the system gamma of 1.2 that belongs to its nominal peak of 1000 cd/m².
Code values of full and of narrow range: ITU-R BT.2100-2, table 9; it gives 10 and 12 bits, BT.709-6 gives 8 and 10,
and the same formulas are used between and beyond.
"""

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from skychart.colour.spaces import rgb
from skychart.errors import InputError
from skychart.library import colour_science

FEWEST_BITS, MOST_BITS = 8, 16  # below 8, narrow range is not a whole number of steps
SDR_WHITE_CD_M2 = 100.0
"""White of a reference display for BT.709 and BT.1886 (ITU-R BT.2035, 2013), taken for sRGB as well."""

HDR_WHITE_CD_M2 = 203.0
"""Where PQ and HLG put a white card (ITU-R BT.2408, HDR reference white)."""

_PQ_PEAK_CD_M2 = 10_000.0
_HLG_PEAK_CD_M2 = 1_000.0
_NARROW_BLACK, _NARROW_STEPS = 16, 219  # of 8 bits


@dataclass(frozen=True)
class Coding:
    """A way of coding: `space` of its primaries, neutral light [cd/m²] at signal 1 and of a white card, code range."""

    key: str
    title: str
    space: str
    peak_cd_m2: float
    white_cd_m2: float
    narrow: bool

    def signal(self, light_RGB: ArrayLike) -> np.ndarray:
        """Signal of linear components [cd/m²] in `space`, shape (..., 3); 1 is the peak, and above it goes on.

        Components below 0 are taken as 0. HLG mixes the three, the others take each for itself.
        """
        light = np.maximum(np.asarray(light_RGB, dtype=float), 0)
        models = colour_science().models
        if self.key == "srgb":
            return np.asarray(models.eotf_inverse_sRGB(light / self.peak_cd_m2))
        if self.key == "bt1886":
            return np.asarray(models.eotf_inverse_BT1886(light / self.peak_cd_m2))
        if self.key == "pq":
            return np.asarray(models.eotf_inverse_ST2084(light))
        dark = ~(light.max(axis=-1, keepdims=True) > 0)
        with np.errstate(invalid="ignore"):  # of the half of the curve that is not taken
            return np.where(dark, 0, models.eotf_inverse_BT2100_HLG(np.where(dark, 1, light), L_W=self.peak_cd_m2))

    def light(self, signal: ArrayLike) -> np.ndarray:
        """Linear components [cd/m²] in `space` that a screen shows for a signal of 0 to 1, shape (..., 3)."""
        models, values = colour_science().models, np.asarray(signal, dtype=float)
        if self.key == "srgb":
            return self.peak_cd_m2 * np.asarray(models.eotf_sRGB(values))
        if self.key == "bt1886":
            return self.peak_cd_m2 * np.asarray(models.eotf_BT1886(values))
        if self.key == "pq":
            return np.asarray(models.eotf_ST2084(values))
        dark = ~(values.max(axis=-1, keepdims=True) > 0)
        return np.where(dark, 0, models.eotf_BT2100_HLG(np.where(dark, 1, values), L_W=self.peak_cd_m2))

    def scaled(self, signal: ArrayLike, bits: int) -> np.ndarray:
        """Place of a signal on the scale of code values of `bits` bits, before rounding; any shape."""
        low, steps = _range(bits, self.narrow)
        return low + steps * np.asarray(signal, dtype=float)

    def codes(self, signal: ArrayLike, bits: int) -> np.ndarray:
        """Code values of a signal, whole numbers of the same shape; beyond 0 to 1 the ends hold."""
        return np.floor(self.scaled(np.clip(signal, 0, 1), bits) + 0.5).astype(int)

    def signal_of(self, codes: ArrayLike, bits: int) -> np.ndarray:
        """Signal that code values of `bits` bits stand for, same shape; not below 0, not above 1."""
        low, steps = _range(bits, self.narrow)
        return np.clip((np.asarray(codes, dtype=float) - low) / steps, 0, 1)


SRGB = Coding("srgb", "sRGB", "srgb", SDR_WHITE_CD_M2, SDR_WHITE_CD_M2, False)
BT1886 = Coding("bt1886", "BT.1886", "srgb", SDR_WHITE_CD_M2, SDR_WHITE_CD_M2, True)
PQ = Coding("pq", "PQ", "bt2020", _PQ_PEAK_CD_M2, HDR_WHITE_CD_M2, True)
HLG = Coding("hlg", "HLG", "bt2020", _HLG_PEAK_CD_M2, HDR_WHITE_CD_M2, True)
CODINGS = (SRGB, BT1886, PQ, HLG)
"""sRGB as computers send it, in full range; the others as video sends them, in narrow range."""


def xyz_of_rgb(linear: ArrayLike, space: str) -> np.ndarray:
    """Tristimulus values of linear components in `space`, both (..., 3): the way back from `spaces.rgb`."""
    return np.asarray(linear, dtype=float) @ np.linalg.inv(rgb(np.eye(3), space))


def _range(bits: int, narrow: bool) -> tuple[float, float]:
    """Code value of signal 0, and how many steps lie between it and that of signal 1."""
    if not FEWEST_BITS <= bits <= MOST_BITS:
        raise InputError(f"a code of {bits} bits, accepted are {FEWEST_BITS} to {MOST_BITS}")
    unit = 2.0 ** (bits - 8)
    return (_NARROW_BLACK * unit, _NARROW_STEPS * unit) if narrow else (0.0, 2.0**bits - 1)
