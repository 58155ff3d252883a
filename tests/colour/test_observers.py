"""Colour-matching functions are the published ones, under the names that settings use."""

import numpy as np
import pytest

from skychart.colour.observers import OBSERVERS, colour_matching_functions
from skychart.errors import InputError


def test_cie_1931_has_its_published_values_and_sums() -> None:
    """CIE 015 table values at 450, 555 and 600 nm; sums of the three columns at 1 nm, 360 to 830 nm."""
    wavelength_nm, functions = colour_matching_functions("cie-1931-2")
    np.testing.assert_array_equal(wavelength_nm, np.arange(360, 831))
    published = [(0.3362, 0.0380, 1.77211), (0.5120501, 1.0, 0.0057500), (1.0622, 0.6310, 0.0008)]
    np.testing.assert_allclose(functions[np.array([450, 555, 600]) - 360], published, atol=5e-8)
    np.testing.assert_allclose(functions.sum(axis=0), [106.86547, 106.85692, 106.89225], atol=5e-6)


@pytest.mark.parametrize("observer", OBSERVERS)
def test_every_observer_sees_equal_energy_as_neutral(observer: str) -> None:
    """All four are normalised to equal sums, which puts the equal-energy white at x = y = 1/3."""
    wavelength_nm, functions = colour_matching_functions(observer)
    assert functions.shape == (len(wavelength_nm), 3)
    np.testing.assert_array_equal(np.diff(wavelength_nm), 1)
    np.testing.assert_allclose(functions.sum(axis=0) / functions.sum(), 1 / 3, atol=2e-4)
    with pytest.raises(ValueError, match="read-only"):
        functions[0, 0] = 1


def test_unknown_observer_is_refused_with_the_known_ones() -> None:
    """The message lists what settings accept."""
    known = "cie-1931-2, cie-1964-10, cie-2015-2, cie-2015-10"
    with pytest.raises(InputError, match=f"^unknown observer 'cie-1931'; known: {known}$"):
        colour_matching_functions("cie-1931")
