"""The tensor form of dipole scattering against the phase function it stands for."""

import numpy as np
import pytest

from skychart.sky import dipole


def directions(count: int = 200) -> dipole.Vector:
    """Random directions of sight, a fixed seed."""
    v = np.random.default_rng(1).normal(size=(3, count))
    return dipole.Vector(*(v / np.linalg.norm(v, axis=0)))


def dot(v: dipole.Vector, w: dipole.Vector) -> np.ndarray:
    """Scalar product."""
    return v.s * w.s + v.rho * w.rho + v.alpha * w.alpha


@pytest.mark.parametrize("depolarisation", [0.0, 0.03, 0.3])
def test_beam_scatters_with_the_rayleigh_phase_function(depolarisation: float) -> None:
    """3 / 16 pi (1 + cos^2) Delta + (1 - Delta) / 4 pi per unit flux, whatever the direction (Chandrasekhar 1950)."""
    a, b = dipole.molecular_coefficients(np.array(depolarisation))
    omega = directions()
    _, e_rho, e_alpha = dipole.projected_axes(omega)
    traces = [dot(axis, axis) for axis in (e_rho, e_alpha)]
    radiance = 0.5 * a * sum(traces) + 2 * b
    anisotropy = (1 - depolarisation) / (1 + depolarisation / 2)
    expected = 3 / (16 * np.pi) * anisotropy * (1 + omega.s**2) + (1 - anisotropy) / (4 * np.pi)
    np.testing.assert_allclose(radiance, expected, rtol=1e-12)


def test_scattering_keeps_all_light() -> None:
    """Over the sphere a unit tensor trace gives back one unit, for any depolarisation."""
    mu, weight = np.polynomial.legendre.leggauss(8)
    phi = (np.arange(16) + 0.5) * np.pi / 8
    sine = np.sqrt(1 - mu**2)[:, None]
    omega = dipole.Vector(np.broadcast_to(mu[:, None], (8, 16)), sine * np.cos(phi), sine * np.sin(phi))
    axes = dipole.projected_axes(omega)
    a, b = dipole.molecular_coefficients(np.array([0.0, 0.03, 0.5]))
    for axis in axes:
        light = a[:, None, None] * dot(axis, axis) + 2 * b[:, None, None]
        np.testing.assert_allclose((light * weight[:, None]).sum(axis=(1, 2)) * np.pi / 8, 1, rtol=1e-12)


def test_axes_turn_as_vectors_in_space_do() -> None:
    """Solar zenith angle and turn of the axes at a point along a ray, against vectors in fixed Cartesian axes."""
    rng = np.random.default_rng(2)
    for _ in range(50):
        chi, phi, turn = rng.uniform(0.1, 3.0), rng.uniform(0, np.pi), rng.uniform(-0.5, 0.5)
        sun, rho = np.array([1.0, 0, 0]), np.array([0, 1.0, 0])
        alpha = np.cross(sun, rho)
        vertical = np.cos(chi) * sun + np.sin(chi) * rho
        toward = np.sin(chi) * sun - np.cos(chi) * rho
        horizontal = np.cos(phi) * toward - np.sin(phi) * alpha
        there = np.cos(turn) * vertical + np.sin(turn) * horizontal
        cosine, c, s = dipole.moved(np.cos(turn), np.sin(turn), np.cos(phi), np.sin(phi), np.cos(chi), np.sin(chi))
        assert cosine == pytest.approx(there @ sun, abs=1e-12)
        outward = there - (there @ sun) * sun
        np.testing.assert_allclose(c * rho + s * alpha, outward / np.linalg.norm(outward), atol=1e-12)


def test_axes_on_the_suns_own_line_are_kept() -> None:
    """Where the vertical points at the sun the axes have no turn."""
    cosine, c, s = dipole.moved(*(np.array(x) for x in (1.0, 0.0, 1.0, 0.0, 1.0, 0.0)))
    assert (float(cosine), float(c), float(s)) == (1, 1, 0)


def test_sight_is_a_unit_vector_with_the_right_angle_to_the_sun() -> None:
    """cos of the scattering angle = sin h sin e + cos h cos e cos(azimuth)."""
    theta, phi, chi = np.meshgrid(np.linspace(0, np.pi, 7), np.linspace(0, np.pi, 5), np.linspace(0, 2, 6))
    omega = dipole.sight(np.cos(theta), np.sin(theta), np.cos(phi), np.sin(phi), np.cos(chi), np.sin(chi))
    np.testing.assert_allclose(dot(omega, omega), 1, rtol=1e-12)
    expected = np.cos(theta) * np.cos(chi) + np.sin(theta) * np.sin(chi) * np.cos(phi)
    np.testing.assert_allclose(omega.s, expected, atol=1e-12)
