"""The closed azimuth sums of molecules in flat air against sums over directions of 3 x 3 tensors."""

import numpy as np
import pytest

from skychart.sky.dipole import molecular_coefficients
from skychart.sky.local import tensor

MU = np.array([-0.9, -0.3, 0.1, 0.5, 1.0])
AZIMUTH = (np.arange(32) + 0.5) * np.pi / 16
A, B = molecular_coefficients(np.array([0.0, 0.03, 0.3]))


def matrix(entries: np.ndarray) -> np.ndarray:
    """The 3 x 3 tensor of zz, (xx + yy)/2, xz, (xx - yy)/2."""
    zz, mean, xz, half = entries
    return np.array([[mean + half, 0, xz], [0, mean - half, 0], [xz, 0, zz]])


def entries(full: np.ndarray) -> np.ndarray:
    """The four entries of a 3 x 3 tensor."""
    return np.array([full[2, 2], (full[0, 0] + full[1, 1]) / 2, full[0, 2], (full[0, 0] - full[1, 1]) / 2])


def direction(mu: float, phi: float) -> np.ndarray:
    """Direction of sight: x toward the sun's azimuth, z up."""
    sine = np.sqrt(1 - mu**2)
    return np.array([sine * np.cos(phi), sine * np.sin(phi), mu])


def scattered(full: np.ndarray, omega: np.ndarray, a: float, b: float) -> np.ndarray:
    """Coherency tensor a Pi P Pi + b tr(P) Pi."""
    projector = np.eye(3) - np.outer(omega, omega)
    return a * projector @ full @ projector + b * np.trace(full) * projector


@pytest.mark.parametrize("entry", range(4))
@pytest.mark.parametrize("wavelength", range(3))
def test_light_of_a_tensor_summed_over_azimuth(entry: int, wavelength: int) -> None:
    """`gathered` and `emitted` of each entry, and no other entry comes of it."""
    unit = np.eye(4)[entry]
    a, b = A[wavelength], B[wavelength]
    mode = next(m for m in range(3) if unit[tensor.entries_of(m)].any())
    part = unit[tensor.entries_of(mode)]
    gathered = tensor.gathered(mode, MU, A, B)[wavelength] @ part
    emitted = tensor.emitted(mode, MU, A, B)[wavelength] @ part
    for place, mu in enumerate(MU):
        light = np.array([scattered(matrix(unit), direction(mu, phi), a, b) for phi in AZIMUTH])
        expected = np.zeros(4)
        expected[tensor.entries_of(mode)] = gathered[place]
        np.testing.assert_allclose(entries(light.sum(axis=0) * np.pi / 16), expected, atol=1e-13)
        radiance = np.trace(light, axis1=1, axis2=2)
        np.testing.assert_allclose(radiance, emitted[place] * np.cos(mode * AZIMUTH), atol=1e-13)


@pytest.mark.parametrize("mode", range(3))
def test_unpolarised_light_makes_half_its_projector(mode: int) -> None:
    """Modes 0 to 2 of the radiance reach the tensor, each its own entries."""
    given = tensor.unpolarised(mode, MU)
    for place, mu in enumerate(MU):
        total = sum(
            0.5 * np.cos(mode * phi) * (np.eye(3) - np.outer(direction(mu, phi), direction(mu, phi))) for phi in AZIMUTH
        )
        expected = np.zeros(4)
        expected[tensor.entries_of(mode)] = given[place]
        np.testing.assert_allclose(entries(total * np.pi / 16), expected, atol=1e-13)


def test_higher_modes_hold_no_part_of_the_tensor() -> None:
    """Modes 0, 1, 2 take all four entries, mode 3 and up none."""
    parts = [range(4)[tensor.entries_of(mode)] for mode in range(6)]
    assert [place for part in parts for place in part] == [0, 1, 2, 3]
    assert not any(len(part) for part in parts[3:])


def test_beam_is_half_its_projector() -> None:
    """P = (I - s s^T) / 2 for unit flux, the sun above and below the horizon."""
    cos_sun = np.array([1.0, 0.5, 0.0, -0.2])
    for given, mu in zip(tensor.of_beam(cos_sun).T, cos_sun, strict=True):
        sun = direction(mu, 0.0)
        np.testing.assert_allclose(given, entries(0.5 * (np.eye(3) - np.outer(sun, sun))), atol=1e-15)


def test_stokes_parameters_follow_the_axes_across_the_line_of_sight() -> None:
    """Q from the horizontal axis less the upright one, U from the two at 45 degrees; any azimuth."""
    given = np.array([0.4, 0.7, -0.2, 0.1])
    for mu in MU:
        for phi in (0.0, 0.6, 2.0, np.pi):
            omega, sine = direction(mu, phi), np.sqrt(1 - mu**2)
            across = np.array([-np.sin(phi), np.cos(phi), 0.0])
            upright = np.array([mu * np.cos(phi), mu * np.sin(phi), -sine])
            light = scattered(matrix(given), omega, A[1], B[1])
            hh, vv, hv = across @ light @ across, upright @ light @ upright, across @ light @ upright
            stokes = tensor.stokes(given[:, None], np.array(mu), np.array(phi), A[1:2], B[1:2])[:, 0]
            np.testing.assert_allclose(stokes, [hh + vv, hh - vv, -2 * hv], atol=1e-13)
