"""Codings of light on a screen, against published levels.

Sources: SMPTE ST 2084:2014, ITU-R BT.2100-2, ITU-R BT.2408, ITU-R BT.1886-0. The measures ΔE_ITP and CIEDE2000 that
steps and stops are judged by are checked in `checks.colorimetry`.
"""

import numpy as np

from skychart.checks.check import Check
from skychart.colour.coding import CODINGS, Coding
from skychart.data.tables import load_table

TOPIC = "Codings of screens"

_BITS = 10


def checks() -> tuple[Check, ...]:
    """Every level of the table."""
    columns = load_table("checks/published_coding").columns
    codings = {coding.key: coding for coding in CODINGS}
    rows = [dict(zip(columns, row, strict=True)) for row in zip(*columns.values(), strict=True)]
    return tuple(_check(codings[row["coding"]], row) for row in rows)


def _check(coding: Coding, row: dict[str, str]) -> Check:
    given, wanted = row["given"].split("-")
    start = float(row[given])
    quantity, unit, computed = {
        "signal": ("Signal", "1", lambda: coding.signal(np.full(3, start))[1]),
        "light": ("Light of a neutral signal", "cd/m²", lambda: coding.light(np.full(3, start))[1]),
        "code": ("Code value of 10 bits, narrow range", "1", lambda: coding.codes(start, _BITS)),
    }[wanted]
    return Check(
        key=f"coding-{coding.key}-{given}-{start:g}-{wanted}",
        topic=TOPIC,
        quantity=f"{quantity}, {coding.title}",
        conditions=f"{start:g} cd/m²" if given == "light" else f"signal {start:g}",
        source=f"{row['source']} ({row['origin']})",
        published=float(row[wanted]),
        computed=float(computed()),
        tolerance=float(row["tolerance"]),
        tolerance_reason=row["reason"],
        unit=unit,
        relative=False,
    )
