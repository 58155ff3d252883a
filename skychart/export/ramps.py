"""Gradients of the sky as test pictures: 16-bit PNG, coded for sRGB and for PQ with the primaries of BT.2020.

Source: ITU-R BT.2408 (diffuse white at 203 cd m⁻²); the codes as `skychart.colour.coding` has them.
"""

from collections.abc import Sequence

import numpy as np

from skychart.charts.exposure import Exposure
from skychart.charts.ramps import Ramp
from skychart.colour.coding import HDR_WHITE_CD_M2, PQ
from skychart.colour.spaces import rgb
from skychart.export.png import BT2100_PQ_CHUNK, SRGB_CHUNK, ramp_png

_HEIGHT = 240
_SRGB_RULE = "sRGB code; code white is a level white card in this light; brighter colours are scaled down, hue kept."
_PQ_RULE = "PQ code, BT.2020 primaries; a level white card in this light is at 203 cd/m2 (ITU-R BT.2408)."


def ramp_pngs(ramps: Sequence[Ramp], card_luminance_cd_m2: float, software: str, source: str) -> dict[str, bytes]:
    """Two pictures of each ramp by name; the level white card has `card_luminance_cd_m2` in the scene.

    `source` says which sky it is.
    """
    exposure = Exposure("ramp", "Level white card", card_luminance_cd_m2)
    pictures = {}
    for ramp in ramps:
        texts = {"Title": f"Sky gradient, {source}", "Software": software}
        for name, signal, chunk, rule in (
            ("srgb", exposure.screen(ramp.XYZ), SRGB_CHUNK, _SRGB_RULE),
            ("pq", pq_signal(ramp.XYZ, card_luminance_cd_m2), BT2100_PQ_CHUNK, _PQ_RULE),
        ):
            row = np.rint(signal * 65535).astype(np.uint16)
            words = texts | {"Description": f"{ramp.title}. {rule} All rows are alike."}
            pictures[f"ramp-{ramp.key}-{name}.png"] = ramp_png(row, _HEIGHT, chunk, words)
    return pictures


def pq_signal(XYZ: np.ndarray, card_luminance_cd_m2: float) -> np.ndarray:
    """PQ signal 0..1, (..., RGB of BT.2020), of `XYZ` [cd m⁻²] shown so that the card has 203 cd m⁻².

    Negative components become 0; what passes 10 000 cd m⁻² is scaled down whole.
    """
    shown = np.maximum(rgb(XYZ, PQ.space) * (HDR_WHITE_CD_M2 / card_luminance_cd_m2), 0)
    return PQ.signal(shown * np.minimum(1, PQ.peak_cd_m2 / np.maximum(shown.max(axis=-1, keepdims=True), 1)))
