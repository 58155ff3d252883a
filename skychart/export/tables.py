"""A sheet's numbers as CSV and JSON.

CSV: UTF-8, comment lines with `#` before the one line of column names, empty where there is no number. JSON: the
keys of `skychart read --json`, each an array over the directions or suns of the sheet, null where there is none.
"""

import csv
import io
import json
from dataclasses import asdict
from typing import Any

import numpy as np

from skychart.charts.columns import NumberTable
from skychart.charts.curves import Spectra
from skychart.charts.ground import Ground
from skychart.charts.numbers import rounded
from skychart.charts.reading import Reading

_DIGITS = 4


def table_csv(table: NumberTable, remarks: tuple[str, ...]) -> bytes:
    """The table under `remarks`, a comment line each."""
    buffer = io.StringIO()
    buffer.writelines(f"# {remark}\n" for remark in remarks)
    writer = csv.writer(buffer, lineterminator="\n")
    writer.writerow([column.key for column in (*table.label_columns, *table.columns)])
    writer.writerows([*row.labels, *row.cells] for row in table.rows)
    return buffer.getvalue().encode("utf-8")


def readings_json(
    about: dict[str, Any],
    readings: Reading,
    ground: Ground | None = None,
    spectra: Spectra | None = None,
    light: dict[str, Any] | None = None,
) -> bytes:
    """`about` with the readings, and where given the light on level ground, the spectra and the light on planes."""
    content: dict[str, Any] = {"about": about, "readings": plain(asdict(readings))}
    if ground is not None:
        content["level_ground"] = plain(asdict(ground))
    if spectra is not None:
        content["spectra"] = {
            "wavelength_nm": plain(spectra.wavelength_nm),
            "curves": [
                {"key": curve.key, "title": curve.title, "unit": curve.unit, "values": plain(curve.absolute)}
                for curve in spectra.curves
            ],
        }
    if light is not None:
        content["light"] = light
    text = json.dumps(content, ensure_ascii=False, allow_nan=False, separators=(",", ":"), indent=None)
    return (text + "\n").encode("utf-8")


def plain(value: Any) -> Any:
    """Arrays as lists, numbers to four significant digits and whole ones without a point, nan as None."""
    if isinstance(value, dict):
        return {key: plain(entry) for key, entry in value.items()}
    if isinstance(value, np.ndarray):
        return [plain(entry) for entry in value.tolist()] if value.ndim else plain(value.item())
    if isinstance(value, list):
        return [plain(entry) for entry in value]
    if isinstance(value, (float, np.floating)):
        number = rounded(float(value), _DIGITS)
        return int(number) if number is not None and number.is_integer() else number
    return value
