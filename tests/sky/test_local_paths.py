"""Straight paths through flat layers against closed forms and fine quadrature."""

import numpy as np
import pytest

from skychart.sky.local.paths import PARTS, beam_averages, from_ground, path_weights, top_boundary

MU = np.array([1.0, 0.5, 0.05, -0.05, -1.0])
EXTINCTION = np.array([[0.02, 0.1], [0.05, 0.3], [0.1, 0.2], [0.03, 0.1], [0.001, 0.01]])
DEPTH = np.concatenate([np.zeros((1, 2)), np.cumsum(EXTINCTION, axis=0)])


def to_edge(mu: float) -> np.ndarray:
    """Slant optical depth from every boundary to the end of sight, (boundary, wavelength)."""
    return ((DEPTH[-1] - DEPTH) if mu > 0 else DEPTH) / abs(mu)


def test_constant_source_fills_the_path() -> None:
    """One minus the transmission to the end of the path, at every boundary."""
    weights = path_weights(EXTINCTION[None], EXTINCTION, MU)[0]
    for place, mu in enumerate(MU):
        np.testing.assert_allclose(weights[:, place].sum(axis=-1).T, -np.expm1(-to_edge(mu)), atol=1e-12)


@pytest.mark.parametrize("power", [1, 2, 3])
def test_sources_are_followed_as_a_cubic_of_optical_depth(power: int) -> None:
    """Powers of the optical depth, exact but for the parts of a layer: a chord leaves h^2 f'' / 8 at most."""
    thickest = EXTINCTION.max(axis=0) / PARTS
    curvature = power * (power - 1) * DEPTH[-1] ** max(power - 2, 0)
    weights = path_weights(EXTINCTION[None], EXTINCTION, MU)[0]
    node, share = np.polynomial.legendre.leggauss(200)
    for wavelength in range(2):
        top = DEPTH[-1, wavelength]
        for place, mu in enumerate(MU):
            for boundary, here in enumerate(DEPTH[:, wavelength]):
                end = top if mu > 0 else 0.0
                depth = here + (end - here) * 0.5 * (node + 1)
                kernel = np.exp(-np.abs(depth - here) / abs(mu)) / abs(mu) * abs(end - here) / 2
                expected = (share * kernel * depth**power).sum()
                given = weights[wavelength, place, boundary] @ DEPTH[:, wavelength] ** power
                bound = (thickest**2 * curvature / 8)[wavelength]
                assert given == pytest.approx(expected, abs=bound + 1e-9)


def test_species_share_the_path_by_their_depth() -> None:
    """Two species of a quarter and three quarters everywhere; one of a lower part only reaches no farther."""
    low = EXTINCTION * np.array([1, 1, 1, 0, 0])[:, None]
    weights = path_weights(np.stack([0.25 * EXTINCTION, 0.75 * EXTINCTION, low]), EXTINCTION, MU)
    np.testing.assert_allclose(3 * weights[0], weights[1], rtol=1e-12)
    assert top_boundary(low) == 3
    assert not weights[2, ..., 4:].any()
    np.testing.assert_allclose(weights[2][:, MU < 0, 3].sum(-1), weights[:2, :, MU < 0, 3].sum((0, -1)), rtol=1e-12)


def test_no_light_comes_from_behind() -> None:
    """A line of sight above the horizon passes only what is higher, one below only what is lower."""
    molecules = np.ones((2, 2))
    weights = path_weights(molecules[None], molecules, np.array([0.4, -0.4]))[0, 0]
    assert not np.tril(weights[0], -1).any()
    assert not np.triu(weights[1], 1).any()
    assert not weights[0, -1].any()
    assert not weights[1, 0].any()


def test_flat_beam_is_exact() -> None:
    """A beam attenuated by the layers themselves, whatever their thickness: the closed form for the whole path."""
    mu0 = np.array([0.9, 0.3, 0.1])
    beam = np.exp(-(DEPTH[-1] - DEPTH)[:, None] / mu0[:, None])
    averages = beam_averages(EXTINCTION[None], EXTINCTION, MU, beam)[0]
    for place, mu in enumerate(MU):
        for sun, low in enumerate(mu0):
            above = DEPTH[-1] - DEPTH
            if mu > 0:
                rate = 1 / mu - 1 / low
                straight = np.exp(-above / low) * np.where(abs(rate) > 1e-9, -np.expm1(-above * rate), 0) / (mu * rate)
            else:
                rate = 1 / low - 1 / mu
                straight = np.exp(-above / low) * -np.expm1(-DEPTH * rate) / (-mu * rate)
            np.testing.assert_allclose(averages[:, place, :, sun].T, straight, rtol=1e-9, atol=1e-14)


def test_shadow_sends_nothing_and_its_edge_little() -> None:
    """Below the shadow's edge no light; the layer at the edge counts less than one lit throughout."""
    beam = np.array([0.0, 0.0, 0.5, 0.5])[:, None, None]
    layers = np.full((3, 1), 0.01)
    below, edge, lit = (
        beam_averages(np.where(np.arange(3)[:, None] == layer, layers, 0)[None], layers, np.array([1.0]), beam)[
            0, 0, 0, 0, 0
        ]
        for layer in range(3)
    )
    assert below == 0
    assert 0.1 * lit < edge < 0.5 * lit


def test_ground_is_seen_through_what_lies_above_it() -> None:
    """exp(-depth / mu) below the horizon, nothing above it."""
    seen = from_ground(EXTINCTION, MU)
    assert not seen[:, MU > 0].any()
    np.testing.assert_allclose(seen[:, MU < 0], np.exp(-DEPTH.T[:, None] / -MU[MU < 0][:, None]), rtol=1e-12)
