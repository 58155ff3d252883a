"""Balance to a white card: the card turns neutral, nothing else is lost, and the library agrees."""

import numpy as np
import pytest

from skychart.colour.adapt import balance
from skychart.colour.chromaticity import xy, xyz_of_xy
from skychart.colour.observers import D65_XY
from skychart.errors import InputError
from skychart.library import colour_science

# Chromaticities of a card under light from deep blue twilight to a red sun.
CARDS = [(0.2328, 0.2316), (0.25, 0.25), (0.3127, 0.3290), (0.34, 0.35), (0.45, 0.41), (0.58, 0.39), (0.65, 0.34)]


@pytest.mark.parametrize("card", CARDS)
def test_card_becomes_d65_of_its_own_luminance(card: tuple[float, float]) -> None:
    """For lights that a white card meets in a day, and beyond."""
    white = 5000 * xyz_of_xy(card)
    np.testing.assert_allclose(balance(white, white), 5000 * xyz_of_xy(D65_XY), rtol=1e-10)


def test_agrees_with_the_library() -> None:
    """Von Kries adaptation with CAT16 in colour-science."""
    XYZ = np.random.default_rng(8).uniform(0, 1, (40, 3))
    white = xyz_of_xy((0.45, 0.41))
    expected = colour_science().chromatic_adaptation(
        XYZ, white, xyz_of_xy(D65_XY), method="Von Kries", transform="CAT16"
    )
    np.testing.assert_allclose(balance(XYZ, white), expected, atol=1e-12)


def test_a_card_under_d65_changes_nothing() -> None:
    """The identity, at any luminance of the card."""
    XYZ = np.random.default_rng(9).uniform(0, 1e4, (5, 3))
    np.testing.assert_allclose(balance(XYZ, 77 * xyz_of_xy(D65_XY)), XYZ, rtol=1e-10)


def test_balance_is_linear_and_keeps_the_ratio_to_the_card() -> None:
    """A grey under the same light stays a grey of the same reflectance."""
    white = 800 * xyz_of_xy((0.27, 0.28))
    balanced = balance(np.array([0.18, 0.5, 2.0])[:, None] * white, white)
    np.testing.assert_allclose(balanced[:, 1] / 800, [0.18, 0.5, 2.0], rtol=1e-10)
    np.testing.assert_allclose(xy(balanced), np.tile(D65_XY, (3, 1)), atol=1e-10)


def test_cards_broadcast_with_colours() -> None:
    """One card for each row of a table."""
    XYZ = np.random.default_rng(10).uniform(0, 1, (len(CARDS), 6, 3))
    whites = xyz_of_xy(CARDS)[:, None, :]
    together = balance(XYZ, whites)
    assert together.shape == XYZ.shape
    np.testing.assert_allclose(together[4], balance(XYZ[4], whites[4, 0]), rtol=1e-12)


@pytest.mark.parametrize("white", [[0, 0, 0], [1, np.nan, 1], [1, -1, 1], [0.01, 0.001, 5], [np.inf, 1, 1]])
def test_light_without_a_neutral_is_refused(white: list[float]) -> None:
    """Darkness, and stimuli outside what an eye could take for white."""
    with pytest.raises(InputError, match=r"^white card has XYZ .*, accepted is light with three positive CAT16"):
        balance([1, 1, 1], white)
