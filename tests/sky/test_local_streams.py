"""Azimuth modes, Legendre moments and streams of the local solver against sums over directions in space."""

import numpy as np
import pytest

from skychart.sky.haze import Haze
from skychart.sky.local import Streams, through_peak
from skychart.sky.local.streams import legendre, scattering_kernel

ANGLE_DEG = np.linspace(0, 180, 361)


def henyey_greenstein(asymmetry: float, cosine: np.ndarray) -> np.ndarray:
    """Henyey & Greenstein 1941, mean 1 over the sphere."""
    return (1 - asymmetry**2) / (1 + asymmetry**2 - 2 * asymmetry * cosine) ** 1.5


def haze_of(phase: np.ndarray, angle_deg: np.ndarray = ANGLE_DEG) -> Haze:
    """Haze of one layer and wavelength."""
    return Haze(np.ones((1, 1)), np.ones(1), angle_deg, phase[None])


def scatter_modes(moments: np.ndarray, radiance: np.ndarray, streams: Streams, view_cosine: np.ndarray) -> np.ndarray:
    """Haze's source in light given on (..., stream, mode, wavelength), by the kernel: (..., view, mode, wavelength)."""
    kernel = scattering_kernel(moments, streams, view_cosine, radiance.shape[-2])
    return np.einsum("mwvs,...smw->...vmw", kernel, radiance)


def test_functions_are_the_normalised_associated_legendre_functions() -> None:
    """Y_lm of low degree written out (Abramowitz & Stegun 1964, chapter 8), times sqrt((l - m)! / (l + m)!)."""
    mu = np.linspace(-1, 1, 11)
    s = np.sqrt(1 - mu**2)
    y = legendre(4, 4, mu)
    written = {
        (0, 0): 1, (1, 0): mu, (2, 0): (3 * mu**2 - 1) / 2, (3, 0): (5 * mu**3 - 3 * mu) / 2,
        (1, 1): s / np.sqrt(2), (2, 1): 3 * mu * s / np.sqrt(6), (2, 2): 3 * s**2 / np.sqrt(24),
        (3, 2): 15 * mu * s**2 / np.sqrt(120), (3, 3): 15 * s**3 / np.sqrt(720),
    }  # fmt: skip
    for (degree, order), expected in written.items():
        np.testing.assert_allclose(y[order, :, degree], expected * np.ones_like(mu), atol=1e-14)
    assert not y[2, :, :2].any()


def test_addition_theorem_gives_back_the_phase_function() -> None:
    """Sum over modes and degrees at two directions is the Legendre series at the angle between them."""
    rng = np.random.default_rng(3)
    mu, other = rng.uniform(-1, 1, (2, 20))
    phi = rng.uniform(0, np.pi, 20)
    count = 24
    between = mu * other + np.sqrt((1 - mu**2) * (1 - other**2)) * np.cos(phi)
    moments = (2 * np.arange(count) + 1) * 0.7 ** np.arange(count)
    twice = np.where(np.arange(count) > 0, 2, 1)[:, None]
    modes = np.cos(np.arange(count)[:, None] * phi) * twice
    products = legendre(count, count, mu) * legendre(count, count, other)
    series = np.polynomial.legendre.legval(between, moments)
    np.testing.assert_allclose(np.einsum("mvl,l,mv->v", products, moments, modes), series, rtol=1e-11)


def test_streams_integrate_each_hemisphere() -> None:
    """Powers of the cosine up to 23 with 12 streams on each side."""
    streams = Streams.double_gauss(12)
    up = streams.cosine > 0
    for power in (0, 1, 2, 11, 23):
        assert streams.weight[up] @ streams.cosine[up] ** power == pytest.approx(1 / (power + 1), rel=1e-12)
        assert streams.weight @ streams.cosine**power == pytest.approx((1 + (-1) ** power) / (power + 1), abs=1e-12)


@pytest.mark.parametrize("asymmetry", [0.0, 0.4, -0.3])
def test_source_is_the_light_of_all_directions_under_the_phase_function(asymmetry: float) -> None:
    """Against a literal sum over 40 x 80 directions in space, for light with three azimuth modes."""
    haze = haze_of(henyey_greenstein(asymmetry, np.cos(np.radians(ANGLE_DEG))))
    streams = Streams.double_gauss()

    def light(mu: np.ndarray) -> np.ndarray:
        return np.stack([2 + mu, np.sqrt(1 - mu**2) * (1 + mu**2), (1 - mu**2) * 0.5], axis=-1)

    view = np.array([-0.95, -0.2, 0.0, 0.6, 1.0])
    source = scatter_modes(haze.moments(24), light(streams.cosine)[..., None], streams, view)[..., 0]
    node, weight = np.polynomial.legendre.leggauss(40)
    azimuth = (np.arange(80) + 0.5) * np.pi / 40
    radiance = light(node) @ np.cos(np.arange(3)[:, None] * azimuth)
    for mu, modes in zip(view, source, strict=True):
        for phi in (0.0, 1.0, np.pi):
            sine = np.sqrt((1 - mu**2) * (1 - node**2))
            angle = mu * node[:, None] + sine[:, None] * np.cos(phi - azimuth)
            expected = (weight[:, None] * radiance * haze.phase_at(angle)[..., 0]).sum() / (4 * np.pi) * np.pi / 40
            assert modes @ np.cos(np.arange(3) * phi) == pytest.approx(expected, rel=2e-4)


def test_scattering_keeps_all_light_and_leading_axes() -> None:
    """What the source sends in all directions is what came from all; axes before the stream's go through."""
    streams = Streams.double_gauss()
    rng = np.random.default_rng(4)
    radiance = rng.uniform(0, 1, (2, 3, len(streams.cosine), 5, 2))
    moments = np.array([0.7, 0.2]) ** np.arange(24)[:, None]
    source = scatter_modes(moments, radiance, streams, streams.cosine)
    assert source.shape == radiance.shape
    total, came = (np.einsum("s,...sw->...w", streams.weight, x[..., 0, :]) for x in (source, radiance))
    np.testing.assert_allclose(total, came, rtol=1e-12)
    np.testing.assert_allclose(source[1, 2], scatter_modes(moments, radiance[1, 2], streams, streams.cosine))


def test_light_through_the_peak_has_the_product_of_both_moments() -> None:
    """Henyey-Greenstein haze by its closure's peak: moments 1, g, g^2, g^4, ... are a closed form in g^2."""
    asymmetry, cosine = 0.7, np.cos(np.radians(ANGLE_DEG))
    haze = haze_of(henyey_greenstein(asymmetry, cosine))
    twice = henyey_greenstein(asymmetry**2, cosine) / asymmetry**2
    expected = twice + 1 - 1 / asymmetry**2 + 3 * (asymmetry - 1) * cosine
    given = through_peak(haze, 2, haze.moments(2)[1] ** 2).phase_function[0]
    np.testing.assert_allclose(given, expected, rtol=2e-3)


def test_haze_without_a_peak_scatters_its_remainder_as_it_is() -> None:
    """Even haze leaves nothing unscattered; the phase function stays 1."""
    haze = haze_of(np.ones_like(ANGLE_DEG))
    np.testing.assert_allclose(through_peak(haze, 2, np.zeros(1)).phase_function, 1, rtol=1e-9)
