"""Nine coefficients: the published harmonics, and planes lit exactly by light that they can express."""

import numpy as np
import pytest

from skychart.charts.around import directions_around
from skychart.charts.harmonics import COSINE, HARMONICS, basis, illuminance

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
