"""The numbers every sheet gives of a colour: one list of columns for pages, CSV and the block in focus."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np

from skychart.charts.numbers import fixed, kelvin, significant
from skychart.charts.reading import Reading
from skychart.colour.describe import Colours
from skychart.colour.spaces import SPACES

SPACE_TITLES = {"srgb": "sRGB", "display-p3": "Display P3", "bt2020": "BT.2020", "acescg": "ACEScg"}
GAMUTS = ("srgb", "display-p3", "bt2020")


@dataclass(frozen=True)
class Column:
    """A column: `key` names it in files, `head`, `group` and `unit` on pages."""

    key: str
    head: str
    unit: str
    group: str


_Writer = Callable[[float, int], str]
_Cells = tuple[Column, list[str]]


@dataclass(frozen=True)
class Row:
    """A row: where it is linked to, what it is of, and its cells as plain text, empty where there is none."""

    anchor: str
    labels: tuple[str, ...]
    cells: tuple[str, ...]


@dataclass(frozen=True)
class NumberTable:
    """Columns and rows of finished numbers; `label_columns` head the labels of a row."""

    label_columns: tuple[Column, ...]
    columns: tuple[Column, ...]
    rows: tuple[Row, ...]

    @property
    def groups(self) -> tuple[tuple[str, int], ...]:
        """Neighbouring columns of one group with their count, for a spanning head."""
        spans: list[tuple[str, int]] = []
        for column in self.columns:
            if spans and spans[-1][0] == column.group:
                spans[-1] = (column.group, spans[-1][1] + 1)
            else:
                spans.append((column.group, 1))
        return tuple(spans)


def number_table(
    label_columns: tuple[Column, ...],
    anchors: Sequence[str],
    labels: Sequence[tuple[str, ...]],
    values: Reading,
    colours: Colours,
    shown_hex: list[str],
) -> NumberTable:
    """The table of `values` and `colours`, both of shape (n,), a row for each anchor."""
    columns, texts = zip(*_columns(values, colours, shown_hex), strict=True)
    rows = zip(anchors, labels, zip(*texts, strict=True), strict=True)
    return NumberTable(label_columns, columns, tuple(Row(*row) for row in rows))


def _columns(values: Reading, colours: Colours, shown_hex: list[str]) -> list[_Cells]:
    """Every column with its cells, in the order of reading."""

    def of(key: str, head: str, unit: str, group: str, numbers: np.ndarray, write: _Writer, digits: int) -> _Cells:
        return Column(key, head, unit, group), [write(float(number), digits) for number in numbers]

    def text(key: str, head: str, group: str, cells: list[str]) -> _Cells:
        return Column(key, head, "", group), cells

    balance, light = "Colour of light", "Light"
    found = [
        of("luminance_cd_m2", "Luminance", "cd/m²", light, values.luminance_cd_m2, significant, 4),
        of("ev100", "EV100", "", light, colours.ev100, fixed, 2),
        *(of(axis, axis, "cd/m²", "CIE XYZ", values.XYZ[:, i], significant, 4) for i, axis in enumerate("XYZ")),
        of("x", "x", "", "CIE xy", values.xy[:, 0], fixed, 4),
        of("y", "y", "", "CIE xy", values.xy[:, 1], fixed, 4),
        of("u_prime", "u′", "", "CIE u′v′", values.uv_prime[:, 0], fixed, 4),
        of("v_prime", "v′", "", "CIE u′v′", values.uv_prime[:, 1], fixed, 4),
        (Column("cct_k", "CCT", "K", balance), [kelvin(float(number)) for number in values.cct_k]),
        of("duv", "Duv", "", balance, values.duv, fixed, 4),
        of("dominant_wavelength_nm", "Dominant", "nm", balance, colours.dominant_wavelength_nm, fixed, 1),
        of("excitation_purity", "Purity", "", balance, colours.excitation_purity, fixed, 3),
    ]
    for space in SPACES:
        for i, channel in enumerate("RGB"):
            key = f"{space}_{channel.lower()}"
            numbers = values.rgb[space][:, i]
            found.append(of(key, channel, "", f"{SPACE_TITLES[space]} linear", numbers, significant, 4))
    found.append(text("smallest_gamut", "gamut", "Smallest", _smallest_gamuts(values.in_gamut)))
    degree, angle = values.polarisation_degree, values.polarisation_angle_deg
    return [
        *found,
        of("polarisation_degree", "degree", "", "Polarisation", degree, fixed, 3),
        of("polarisation_angle_deg", "angle", "°", "Polarisation", angle, fixed, 1),
        text("shown_hex", "as shown", "sRGB code", shown_hex),
        text("srgb_hex", "card white", "sRGB code", [str(code) for code in values.srgb_hex]),
    ]


def _smallest_gamuts(in_gamut: dict[str, np.ndarray]) -> list[str]:
    """For each colour the first of sRGB, Display P3 and BT.2020 that holds it, or none."""
    flags = zip(*(in_gamut[space] for space in GAMUTS), strict=True)
    titles = [SPACE_TITLES[space] for space in GAMUTS]
    return [next((title for title, inside in zip(titles, row, strict=True) if inside), "none") for row in flags]
