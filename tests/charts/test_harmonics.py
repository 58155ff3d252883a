"""Nine coefficients: the published harmonics, and planes lit exactly by light that they can express."""

import numpy as np
import pytest

from skychart.charts.around import directions_around
from skychart.charts.harmonics import COSINE, HARMONICS, basis, fitted, illuminance

MIRRORED = np.array([1, -1, 1])
NORMALS = np.array([[0, 0, 1], [1, 0, 0], [0, 1, 0], [-1, 0, 0], [0, 0, -1], [0.6, 0, 0.8]])


def both_halves():
    """Vectors and solid angles over the whole sphere."""
    around = directions_around(20.0)
    return np.concatenate([around.vectors, around.vectors * MIRRORED]), np.tile(around.solid_angle_sr, 2)


def test_factors_are_the_published_ones():
    """Ramamoorthi and Hanrahan 2001, six decimals (from memory; orthonormality below is the proof)."""
    published = {"1": 0.282095, "x": 0.488603, "y": 0.488603, "z": 0.488603, "xz": 1.092548, "yz": 1.092548,
                 "xy": 1.092548, "3z² − 1": 0.315392, "x² − y²": 0.546274}  # fmt: skip
    assert {term.polynomial: round(term.factor, 6) for term in HARMONICS} == published
    assert [(term.degree, term.order) for term in HARMONICS] == [(n, m) for n in range(3) for m in range(-n, n + 1)]
    assert [term.name for term in HARMONICS[:3]] == ["L0+0", "L1-1", "L1+0"]


def test_harmonics_are_orthonormal():
    """Over the sphere, each with itself 1 and with any other 0."""
    vectors, solid_angle = both_halves()
    values = basis(vectors)
    np.testing.assert_allclose(values.T * solid_angle @ values, np.eye(9), atol=1e-5)


def test_cosine_factors_are_integrals():
    """2 π times the integral of cosine times Legendre's polynomial of each degree over the half sphere."""
    mu, weight = np.polynomial.legendre.leggauss(20)
    mu, weight = (mu + 1) / 2, weight / 2
    legendre = np.ones_like(mu), mu, (3 * mu**2 - 1) / 2
    assert pytest.approx([2 * np.pi * (weight * mu * polynomial).sum() for polynomial in legendre]) == COSINE


LIGHTS = {
    "constant": (lambda v: np.ones(len(v)), lambda n: np.full(len(n), np.pi)),
    "linear": (lambda v: 2 + v[:, 2] + 0.5 * v[:, 0], lambda n: 2 * np.pi + 2 * np.pi / 3 * (n[:, 2] + 0.5 * n[:, 0])),
    "quadratic": (
        lambda v: 1 + v[:, 0] * v[:, 2] + (3 * v[:, 2] ** 2 - 1) / 2,
        lambda n: np.pi + np.pi / 4 * (n[:, 0] * n[:, 2] + (3 * n[:, 2] ** 2 - 1) / 2),
    ),
}


@pytest.mark.parametrize("kind", LIGHTS)
def test_light_up_to_degree_two_is_met_on_every_plane(kind):
    """Coefficients by projection give the illuminance that follows from the light by hand, within 0.001 %."""
    light, expected = LIGHTS[kind]
    vectors, solid_angle = both_halves()
    coefficients = (basis(vectors) * solid_angle[:, None]).T @ light(vectors)[:, None]
    np.testing.assert_allclose(illuminance(coefficients, NORMALS)[:, 0], expected(NORMALS), rtol=1e-5)


def test_linear_light_has_only_its_coefficients():
    """2 + z: 2 √(4π) at degree 0 and √(4π/3) at L1+0, nothing elsewhere."""
    vectors, solid_angle = both_halves()
    found = (basis(vectors) * solid_angle[:, None]).T @ (2 + vectors[:, 2])
    expected = np.zeros(9)
    expected[0], expected[2] = 2 * np.sqrt(4 * np.pi), np.sqrt(4 * np.pi / 3)
    np.testing.assert_allclose(found, expected, atol=1e-5)


def test_light_that_nine_coefficients_hold_is_left_alone():
    """All three lights above: planes and normals agree already."""
    vectors, solid_angle = both_halves()
    for light, expected in LIGHTS.values():
        exact = (basis(vectors) * solid_angle[:, None]).T @ light(vectors)[:, None]
        found = fitted(exact, NORMALS, expected(NORMALS)[:, None])
        np.testing.assert_allclose(found, exact, atol=2e-4)


def bright_ring():
    """Light of a ring above the horizon, its integrals, and the illuminance of planes of given normals, summed."""
    vectors, solid_angle = both_halves()
    light = 1 + 8 * np.exp(-(((vectors[:, 2] - 0.1) / 0.1) ** 2)) * (1.5 + vectors[:, 0])
    falling = (light * solid_angle)[:, None]
    return basis(vectors).T @ falling, lambda normals: np.maximum(normals @ vectors.T, 0) @ falling


def test_chosen_planes_come_out_better_and_others_hardly_worse():
    """Light of degree 4 and more: six planes five times better, all normals off by less than 3 % of the mean more."""
    integrals, lit = bright_ring()
    wanted = lit(NORMALS)
    found = fitted(integrals, NORMALS, wanted)
    before, after = (np.abs(illuminance(nine, NORMALS) / wanted - 1).max() for nine in (integrals, found))
    assert before > 0.15
    assert after < before / 5
    vectors, solid_angle = both_halves()
    everywhere = lit(vectors[::7])
    error = [
        np.sqrt(np.average((illuminance(nine, vectors[::7]) - everywhere) ** 2, weights=solid_angle[::7], axis=0))
        / everywhere.mean()
        for nine in (integrals, found)
    ]
    assert error[0] < error[1] < error[0] + 0.03


def test_the_fit_is_a_minimum():
    """No coefficient can be moved either way to a smaller sum of the two mean squares, taken here over many normals."""
    integrals, lit = bright_ring()
    wanted = lit(NORMALS)
    found = fitted(integrals, NORMALS, wanted)
    normals, weight = (part[::5] for part in both_halves())
    everywhere = lit(normals)
    mean = np.average(everywhere, weights=weight, axis=0)

    def cost(nine):
        square = ((illuminance(nine, normals) - everywhere) / mean) ** 2
        return np.average(square[:, 0], weights=weight) + 2 * np.mean((illuminance(nine, NORMALS) / wanted - 1) ** 2)

    least = cost(found)
    for index in (0, 2, 3, 6, 7, 8):
        step = np.zeros_like(found)
        step[index] = 0.02 * found[0]
        assert cost(found + step) > least
        assert cost(found - step) > least
    assert np.all(found[[1, 4, 5]] == 0)


def test_what_symmetry_makes_0_stays_0():
    """Light that does not vary with azimuth keeps the three harmonics that go by z alone."""
    vectors, solid_angle = both_halves()
    integrals = (basis(vectors) * solid_angle[:, None]).T @ np.exp(vectors[:, 2])[:, None]
    integrals[[1, 3, 4, 5, 7, 8]] = 0
    found = fitted(integrals, NORMALS, illuminance(integrals, NORMALS) * 1.05)
    assert np.flatnonzero(found[:, 0]).tolist() == [0, 2, 6]
