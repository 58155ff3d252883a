"""The reader's numbers as a script that hands them over: a page opened from disk may load scripts, but no data files.

Each array becomes whole multiples of a step. Along each axis but the last, differences of neighbours are taken, which
are small since skies are smooth, and written as integers of variable length: zigzag sign, seven bits a byte, the lowest
first (as in Protocol Buffers Encoding, "Base 128 Varints"). The arrays follow each other, in base64 (RFC 4648).
"""

import base64
import json

import numpy as np

from skychart.charts.aureole import DISTANCE_DEG
from skychart.charts.reader import PEAK_DEG, SPECTRUM_NM, ReaderSky
from skychart.charts.survey import DIRECTIONS, RELATIVE_AZIMUTH_DEG, VIEW_ELEVATION_DEG

RECEIVER = "readerReceive"
"""The function of the page that takes the data."""

_STEPS = {
    "smooth_log": 5e-4,
    "peak_log": 2e-4,
    "sides_log": 5e-4,
    "polarised": 2e-3,
    "sky_log": 1e-4,
    "spectra_log": 5e-3,
    "beam_log": 1e-4,
}


def reader_script(chart: ReaderSky) -> bytes:
    """A script that calls `RECEIVER` with axes, shapes and the packed arrays of one atmosphere."""
    arrays = {name: np.asarray(getattr(chart, name)) for name in _STEPS}
    packed = b"".join(pack(array, _STEPS[name]) for name, array in arrays.items())
    content = {
        "atmosphere": chart.atmosphere,
        "suns": chart.solar_elevation_deg.tolist(),
        "views": VIEW_ELEVATION_DEG.tolist(),
        "azimuths": RELATIVE_AZIMUTH_DEG.tolist(),
        "peak_distances": PEAK_DEG.tolist(),
        "side_distances": DISTANCE_DEG.tolist(),
        "directions": [[view.view_elevation_deg, view.relative_azimuth_deg] for view in DIRECTIONS],
        "wavelengths": SPECTRUM_NM.tolist(),
        "light_suns": chart.light_deg.tolist(),
        "apparent": [round(angle, 4) for angle in chart.apparent_deg.tolist()],
        "arrays": [{"name": name, "shape": array.shape, "step": _STEPS[name]} for name, array in arrays.items()],
        "packed": base64.b64encode(packed).decode("ascii"),
    }
    text = json.dumps(content, separators=(",", ":"), allow_nan=False)
    return f'"use strict";\n{RECEIVER}({text});\n'.encode("ascii")


def pack(values: np.ndarray, step: float) -> bytes:
    """`values` to the nearest multiple of `step`, as differences along every axis but the last."""
    whole = np.rint(values / step).astype(np.int64)
    for axis in range(whole.ndim - 1):
        whole = np.diff(whole, axis=axis, prepend=0)
    return varints(whole.ravel())


def varints(whole: np.ndarray) -> bytes:
    """Integers of shape (n,) within 34 bits as zigzag base-128 numbers, the lowest seven bits first."""
    zigzag = np.where(whole < 0, -2 * whole - 1, 2 * whole)
    digits = zigzag[:, None] >> (7 * np.arange(5)) & 127
    more = zigzag[:, None] >> (7 * np.arange(1, 6)) > 0
    used = np.insert(more[:, :-1], 0, True, axis=1)
    return (digits | 128 * more).astype(np.uint8)[used].tobytes()
