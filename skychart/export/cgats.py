"""Colour tables as CGATS.17 text.

Source: ANSI CGATS.17, Graphic technology: exchange format for colour and process control data using XML or ASCII
text; identifiers and data formats from its tables of keywords, as the readers of that format know them.
"""

import numpy as np

from skychart.charts.numbers import fixed, significant
from skychart.charts.sheet import Sheet

FIXED_DATE = "1980-01-01"
"""Where a format asks for a date: equal builds must give equal bytes, so no clock is read."""

_FIELDS = ("SAMPLE_ID", "SAMPLE_NAME", "XYZ_X", "XYZ_Y", "XYZ_Z", "XYY_X", "XYY_Y", "XYY_CAPY")
_XYZ_DIGITS = 6
_XY_DECIMALS = 6


def table_cgats(chart: Sheet, originator: str, descriptor: str) -> bytes:
    """Absolute XYZ [cd m⁻²] and xyY of every row of a sheet's table, in its order, named by direction.

    `originator` and `descriptor`: who wrote it, and what it holds.
    """
    data = [
        f'{number} "{_name(row.labels)}" {_numbers(XYZ, xy)}'
        for number, (row, XYZ, xy) in enumerate(
            zip(chart.table.rows, chart.readings.XYZ, chart.readings.xy, strict=True), start=1
        )
    ]
    lines = [
        "CGATS.17",
        f'ORIGINATOR "{originator}"',
        f'FILE_DESCRIPTOR "{descriptor}"',
        f'CREATED "{FIXED_DATE}"',
        "# The date is fixed, so that equal builds give equal files.",
        "# XYZ and xyY are absolute: Y in cd/m2. Names give view elevation and azimuth from the sun in degrees.",
        f"NUMBER_OF_FIELDS {len(_FIELDS)}",
        "BEGIN_DATA_FORMAT",
        " ".join(_FIELDS),
        "END_DATA_FORMAT",
        f"NUMBER_OF_SETS {len(data)}",
        "BEGIN_DATA",
        *data,
        "END_DATA",
    ]
    return "".join(f"{line}\n" for line in lines).encode("ascii")


def _name(labels: tuple[str, ...]) -> str:
    elevation, azimuth = labels
    return f"elevation {elevation} azimuth {azimuth}"


def _numbers(XYZ: np.ndarray, xy: np.ndarray) -> str:
    X, Y, Z = (significant(float(value), _XYZ_DIGITS) for value in XYZ)
    x, y = (fixed(float(value), _XY_DECIMALS) for value in xy)
    return f"{X} {Y} {Z} {x} {y} {Y}"
