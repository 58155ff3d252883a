"""What the commands print: a reading and the checks, aligned for the eye or as JSON. No number is made here."""

import json
import math
from collections.abc import Callable, Sequence
from dataclasses import asdict
from typing import Any

import numpy as np

from skychart.charts.checks import check_row
from skychart.charts.columns import SPACE_TITLES
from skychart.charts.numbers import fixed, kelvin, significant
from skychart.charts.reading import Reading
from skychart.checks.check import Check
from skychart.export.tables import plain

NONE = "none"


def reading_json(reading: Reading) -> str:
    """A single reading as one JSON object, keys in their fixed order, null where there is no value."""
    return _json(plain(asdict(reading)))


def reading_text(reading: Reading) -> str:
    """A single reading as an aligned list with units."""
    rows = [
        ("atmosphere", reading.atmosphere),
        ("sun", f"{reading.solar_elevation_deg:g}° above the horizon, geometric"),
        ("view", f"{reading.view_elevation_deg:g}° up, {reading.relative_azimuth_deg:g}° from the sun's azimuth"),
        ("luminance", f"{significant(float(reading.luminance_cd_m2), 4)} cd/m²"),
        ("X, Y, Z", f"{_row(reading.XYZ, significant, 4)} cd/m²"),
        ("x, y", _row(reading.xy, fixed, 4)),
        ("u′, v′", _row(reading.uv_prime, fixed, 4)),
        ("colour temperature", _temperature(reading)),
        ("polarisation", _polarisation(reading)),
        *((f"linear {title}", _rgb(reading, space)) for space, title in SPACE_TITLES.items()),
        ("sRGB code", f"{reading.srgb_hex}, where #ffffff is a level white card in this light"),
    ]
    width = max(len(head) for head, _ in rows)
    return "".join(f"{head:<{width}}  {value}\n" for head, value in rows)


def checks_json(checks: Sequence[Check]) -> str:
    """All checks as a JSON list of objects, numbers with all their digits, null where there is no value."""
    return _json(
        [
            {
                **asdict(check),
                "computed": _finite_or_none(check.computed),
                "difference": _finite_or_none(check.difference),
                "passed": bool(check.passed),
            }
            for check in checks
        ]
    )


def checks_text(checks: Sequence[Check]) -> str:
    """All checks, topic by topic in aligned columns, and a last line that counts them."""
    heads = ("", "published", "computed", "difference", "accepted")
    cells = [_check_cells(check) for check in checks]
    widths = [max(map(len, column)) for column in zip(heads, *cells, strict=True)]
    lines = [_aligned(heads, widths)]
    topic = None
    for check, row in zip(checks, cells, strict=True):
        if check.topic != topic:
            topic = check.topic
            lines += ["", topic]
        lines.append(f"{_aligned(row, widths)}  {check.quantity}, {check.conditions} [{check.source}]")
    failed = sum(not check.passed for check in checks)
    lines += ["", f"{len(checks)} published values, {len(checks) - failed} met, {failed} missed"]
    return "".join(f"{line}\n" for line in lines)


def _check_cells(check: Check) -> tuple[str, ...]:
    row = check_row(check, _plain)
    unit = f" {row.unit}" if row.unit else ""
    shift = "" if check.relative else unit
    verdict = "met" if check.passed else "MISSED"
    return verdict, row.published + unit, row.computed + unit, row.difference + shift, f"±{row.tolerance}{shift}"


def _plain(number: str) -> str:
    return number or NONE


def _aligned(cells: Sequence[str], widths: Sequence[int]) -> str:
    first, *rest = (f"{cell:>{width}}" for cell, width in zip(cells, widths, strict=True))
    return "  ".join([f"{first.strip():<{widths[0]}}", *rest])


def _temperature(reading: Reading) -> str:
    if math.isnan(reading.cct_k):
        return f"{NONE} (beyond 100000 K, or more than 0.05 away from the Planckian locus)"
    return f"{kelvin(float(reading.cct_k))} K, Duv {reading.duv:+.4f}"


def _polarisation(reading: Reading) -> str:
    if math.isnan(reading.polarisation_angle_deg):
        return NONE
    degree, angle = float(reading.polarisation_degree), float(reading.polarisation_angle_deg)
    return f"{fixed(100 * degree, 1)} %, electric vector {fixed(angle, 0)}° from level"


def _rgb(reading: Reading, space: str) -> str:
    outside = "" if reading.in_gamut[space] else "  (out of gamut)"
    return f"{_row(reading.rgb[space], significant, 4)} cd/m²{outside}"


def _row(values: np.ndarray, write: Callable[[float, int], str], digits: int) -> str:
    return "  ".join(write(float(value), digits) for value in values)


def _json(value: Any) -> str:
    return json.dumps(value, indent=2, allow_nan=False, default=np.generic.item) + "\n"


def _finite_or_none(value: float) -> float | None:
    return float(value) if math.isfinite(value) else None
