"""Interpolation along one axis as pure functions of arrays.

Monotone cubic: Fritsch F. N., Butland J. 1984, A method for constructing local monotone piecewise cubic
interpolants, SIAM J. Sci. Stat. Comput. 5, 300-304, doi:10.1137/0905021 (with the three-point end slopes usual for it).
Cubic spline with not-a-knot ends: de Boor C. 1978, A Practical Guide to Splines, chapter IV.
"""

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]


def monotone_cubic(x: Array, y: Array, query: Array) -> tuple[Array, Array]:
    """Values and slopes of the monotone cubic through ``y`` at ``query``.

    ``x`` ascends, shape (n,), n >= 2; ``y`` has shape (n, ...); ``query`` has shape (m,). Both results have shape
    (m, ...). Outside ``x`` the end values are held and the slope is zero.
    """
    step = np.diff(x).reshape(-1, *([1] * (y.ndim - 1)))
    secant = np.diff(y, axis=0) / step
    slope = _monotone_slopes(step, secant)
    inside = np.clip(query, x[0], x[-1])
    k = np.clip(np.searchsorted(x, inside, side="right") - 1, 0, len(x) - 2)
    width = step[k]
    t = ((inside - x[k]) / np.diff(x)[k]).reshape(width.shape)
    rise = y[k + 1] - y[k]
    a = width * slope[k] - rise
    b = rise - width * slope[k + 1]
    value = y[k] + t * (rise + (1 - t) * (a * (1 - t) + b * t))
    gradient = (rise + (1 - 2 * t) * (a * (1 - t) + b * t) + t * (1 - t) * (b - a)) / width
    held = ((query < x[0]) | (query > x[-1])).reshape(t.shape)
    return value, np.where(held, 0.0, gradient)


def spline_matrix(x: Array, query: Array) -> Array:
    """The matrix that takes values at ``x`` to their not-a-knot cubic spline at ``query``; shape (m, n), n >= 4.

    Outside ``x`` the end polynomials continue.
    """
    n = len(x)
    step = np.diff(x)
    identity = np.eye(n)
    left, right = np.zeros((n, n)), np.zeros((n, n))
    for k in range(1, n - 1):
        left[k, k - 1 : k + 2] = step[k], 2 * (step[k - 1] + step[k]), step[k - 1]
        secant = np.diff(identity[k - 1 : k + 2], axis=0) / step[k - 1 : k + 1, None]
        right[k] = 3 * (step[k] * secant[0] + step[k - 1] * secant[1])
    for end, first, second in ((0, 0, 1), (n - 1, n - 2, n - 3)):
        near, far = step[first], step[second]
        inner = 1 if end == 0 else n - 2
        outer = 2 if end == 0 else n - 3
        left[end, end], left[end, inner] = far, near + far
        sign = 1.0 if end == 0 else -1.0
        near_secant = sign * (identity[inner] - identity[end]) / near
        far_secant = sign * (identity[outer] - identity[inner]) / far
        right[end] = (far * (3 * near + 2 * far) * near_secant + near**2 * far_secant) / (near + far)
    slope = np.linalg.solve(left, right)
    low = np.clip(np.searchsorted(x, query, side="right") - 1, 0, n - 2)
    t = ((query - x[low]) / step[low])[:, None]
    width = step[low][:, None]
    rise = identity[low + 1] - identity[low]
    a, b = width * slope[low] - rise, rise - width * slope[low + 1]
    return identity[low] + t * (rise + (1 - t) * (a * (1 - t) + b * t))


def _monotone_slopes(step: Array, secant: Array) -> Array:
    slope = np.zeros((len(secant) + 1, *secant.shape[1:]))
    if len(secant) == 1:
        slope[:] = secant[0]
        return slope
    before, after = secant[:-1], secant[1:]
    one, two = 2 * step[1:] + step[:-1], step[1:] + 2 * step[:-1]
    product = before * after
    same_sign = product > 0
    slope[1:-1] = np.where(same_sign, (one + two) * product / np.where(same_sign, one * after + two * before, 1), 0.0)
    for end, near, far in ((0, 0, 1), (-1, -1, -2)):
        raw = ((2 * step[near] + step[far]) * secant[near] - step[near] * secant[far]) / (step[near] + step[far])
        limited = np.where(np.abs(raw) > 3 * np.abs(secant[near]), 3 * secant[near], raw)
        limited = np.where(secant[near] * secant[far] < 0, limited, raw)
        slope[end] = np.where(raw * secant[near] <= 0, 0.0, limited)
    return slope
