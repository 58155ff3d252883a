"""A table as JSON: columns by key, numbers as numbers."""

import json

from skychart.charts.columns import Column, NumberTable, Row
from skychart.export.columns import columns_json

TABLE = NumberTable(
    (Column("sun_deg", "Sun", "°", ""),),
    (Column("luminance", "L", "cd/m²", ""), Column("bits", "bits", "", ""), Column("code", "code", "", "")),
    (Row("", ("-6",), ("1.50e-5", "10", "#a0b0c0")), Row("", ("2.5",), ("", "9", "#ffffff"))),
)


def test_columns_are_arrays_over_the_rows():
    """Whole numbers stay whole, an empty cell is null, what is no number is text."""
    data = json.loads(columns_json({"title": "A"}, TABLE))
    assert data["about"] == {"title": "A"}
    assert data["columns"] == {
        "sun_deg": [-6, 2.5],
        "luminance": [1.5e-5, None],
        "bits": [10, 9],
        "code": ["#a0b0c0", "#ffffff"],
    }


def test_bytes_repeat_and_end_with_a_line():
    """The same on every call."""
    assert columns_json({}, TABLE) == columns_json({}, TABLE)
    assert columns_json({}, TABLE).endswith(b"}\n")
