"""A table of numbers as JSON: each column an array over the rows, null where there is no number."""

import json
from typing import Any

from skychart.charts.columns import NumberTable


def columns_json(about: dict[str, Any], table: NumberTable) -> bytes:
    """`about`, and every column of `table` by its key; digits as printed."""
    labels = {head.key: [_value(row.labels[i]) for row in table.rows] for i, head in enumerate(table.label_columns)}
    cells = {head.key: [_value(row.cells[i]) for row in table.rows] for i, head in enumerate(table.columns)}
    content = {"about": about, "columns": labels | cells}
    text = json.dumps(content, ensure_ascii=False, allow_nan=False, separators=(",", ":"))
    return (text + "\n").encode("utf-8")


def _value(text: str) -> float | int | str | None:
    """A cell as a number where it is one."""
    if not text:
        return None
    try:
        return int(text) if text.lstrip("-").isdigit() else float(text)
    except ValueError:
        return text
