"""Interpolation: exact where it must be, monotone where it promises it."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.interpolate import CubicSpline, PchipInterpolator

from skychart.sky.interpolation import monotone_cubic, spline_matrix

NODES = np.array([0.0, 1.0, 2.5, 3.0, 4.2, 6.0])


def test_spline_matrix_is_the_not_a_knot_spline_of_scipy() -> None:
    """Also beyond the ends, where the end polynomials go on."""
    query = np.linspace(-0.5, 7, 40)
    values = np.sin(NODES)
    np.testing.assert_allclose(spline_matrix(NODES, query) @ values, CubicSpline(NODES, values)(query), atol=1e-12)


def test_spline_matrix_reproduces_every_cubic() -> None:
    """Not-a-knot ends lose nothing of a cubic."""
    query = np.linspace(0, 6, 25)
    cubic = np.poly1d([1, -2, 0.5, 3])
    np.testing.assert_allclose(spline_matrix(NODES, query) @ cubic(NODES), cubic(query), atol=1e-12)


def test_monotone_cubic_is_the_interpolant_of_scipy() -> None:
    """Values and slopes of PCHIP with the same end rule, several columns at once."""
    values = np.stack([np.exp(-NODES), NODES**2, np.array([0, 1, 1, 1, 4, 4.0])], axis=1)
    query = np.linspace(0, 6, 61)[1:-1]
    value, slope = monotone_cubic(NODES, values, query)
    witness = PchipInterpolator(NODES, values)
    np.testing.assert_allclose(value, witness(query), atol=1e-12)
    np.testing.assert_allclose(slope, witness(query, 1), atol=1e-12)


@given(st.lists(st.floats(0, 1e3), min_size=2, max_size=12))
def test_monotone_cubic_never_leaves_its_data(steps: list[float]) -> None:
    """Ascending data give an ascending curve within the data."""
    y = np.cumsum(steps)
    value, _ = monotone_cubic(np.arange(len(y), dtype=float), y, np.linspace(-1, len(y), 200))
    assert np.all(np.diff(value) >= -1e-9 * (1 + y[-1]))
    assert value.min() >= y[0] - 1e-9
    assert value.max() <= y[-1] * (1 + 1e-12) + 1e-9


@pytest.mark.parametrize("query", [-1.0, 7.0])
def test_monotone_cubic_holds_its_ends(query: float) -> None:
    """Outside the data: the end value and no slope."""
    value, slope = monotone_cubic(NODES, NODES**2, np.array([query]))
    assert value[0] == (0.0 if query < 0 else 36.0)
    assert slope[0] == 0
