"""One list of columns serves pages and files."""

import numpy as np

from skychart.charts.columns import SPACE_TITLES, Column, number_table
from skychart.charts.reading import read_colours
from skychart.charts.sheet import elevation_sheet
from skychart.colour.spaces import SPACES


def table_of(XYZ):
    """Numbers of unpolarised colours, shape (n, 3)."""
    stokes = np.zeros((len(XYZ), 3, 3))
    stokes[:, 0] = XYZ
    count = np.zeros(len(XYZ))
    values, colours = read_colours("test", count, count, count, stokes, np.full(len(XYZ), 100.0))
    names = [str(i) for i in range(len(XYZ))]
    return number_table((Column("n", "n", "", ""),), names, [(name,) for name in names], values, colours, names)


def cells(table, key):
    """One column."""
    place = [column.key for column in table.columns].index(key)
    return [row.cells[place] for row in table.rows]


def test_every_space_has_a_title():
    """A new working space cannot reach a page without a name."""
    assert set(SPACE_TITLES) == set(SPACES)


def test_smallest_gamut():
    """White fits sRGB; greens just within wider spaces fit those; a spectral colour fits none."""
    white = np.array([95.047, 100, 108.883])
    p3_green, rec2020_green = np.array([26.57, 69.17, 4.511]), np.array([14.46, 67.80, 2.807])
    spectral_500nm = np.array([0.49, 32.3, 27.2])
    colours = np.array([white, 0.95 * p3_green + 0.05 * white, 0.95 * rec2020_green + 0.05 * white, spectral_500nm])
    assert cells(table_of(colours), "smallest_gamut") == ["sRGB", "Display P3", "BT.2020", "none"]


def test_missing_values_are_empty():
    """A colour without CCT, and unpolarised light without an angle, have empty cells."""
    blue = table_of(np.array([[18.0, 7.2, 95.0]]))
    assert cells(blue, "cct_k") == cells(blue, "duv") == cells(blue, "polarisation_angle_deg") == [""]


def test_keys_differ_and_groups_span_all(found):
    """Column names of a file are unique; spanning heads cover every column once."""
    table = elevation_sheet(found, 3).table
    keys = [column.key for column in (*table.label_columns, *table.columns)]
    assert len(keys) == len(set(keys))
    assert sum(span for _, span in table.groups) == len(table.columns)
    assert all(len(row.cells) == len(table.columns) for row in table.rows)
