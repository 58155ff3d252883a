"""Dominant wavelength and purity against the library, against geometry, and over all chromaticities.

The library's own version needs SciPy, which comes with the test extra.
"""

import warnings

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from skychart.colour.chromaticity import xy as xy_of
from skychart.colour.dominant import dominant_wavelength
from skychart.colour.observers import D65_XY, OBSERVERS, colour_matching_functions, library_observer
from skychart.library import colour_science


def inside_srgb(count: int, seed: int) -> np.ndarray:
    """Chromaticities spread over the sRGB triangle, none of them nearly neutral."""
    primaries = np.array([(0.640, 0.330), (0.300, 0.600), (0.150, 0.060)])
    points = np.random.default_rng(seed).dirichlet([1, 1, 1], count) @ primaries
    return points[np.hypot(*(points - D65_XY).T) > 0.01]


def test_agrees_with_the_library_within_its_own_step() -> None:
    """The library returns the nearest whole nanometre; purity is the same up to 0.1 % of it."""
    library = colour_science().colorimetry
    points = inside_srgb(300, 7)
    observer = library_observer("cie-1931-2")
    published_nm, *_ = library.dominant_wavelength(points, D65_XY, observer)
    published_purity = library.excitation_purity(points, D65_XY, observer)
    computed_nm, purity = dominant_wavelength(points, D65_XY)
    assert len(points) > 250
    assert np.any(published_nm < 0)
    steep = (np.abs(published_nm) > 430) & (np.abs(published_nm) < 650)  # elsewhere 1 nm is no distance in xy
    assert steep.sum() > 200
    np.testing.assert_allclose(computed_nm[steep], published_nm[steep], atol=0.51)
    np.testing.assert_array_equal(np.sign(computed_nm), np.sign(published_nm))
    np.testing.assert_allclose(purity, published_purity, rtol=1e-3)


@pytest.mark.parametrize(
    ("xy", "wavelength_nm", "purity"),
    [((0.54369557, 0.32107944), 616, 0.6228856), ((0.37605506, 0.24452225), -509, None)],
)
def test_documented_examples_of_the_library(
    xy: tuple[float, float], wavelength_nm: float, purity: float | None
) -> None:
    """One red and one purple, with their values in the documentation of colour-science 0.4."""
    computed_nm, computed_purity = dominant_wavelength(xy, D65_XY)
    assert computed_nm == pytest.approx(wavelength_nm, abs=0.51)
    if purity is not None:
        assert computed_purity == pytest.approx(purity, abs=1e-4)


@pytest.mark.parametrize("observer", OBSERVERS)
@pytest.mark.parametrize("purity", [0.02, 0.5, 1.0])
def test_a_mixture_of_white_and_one_wavelength_is_told_apart_again(observer: str, purity: float) -> None:
    """Every nanometre from 420 to 680, at three purities, for every observer: within 0.02 nm and 1e-6."""
    wavelength_nm, functions = colour_matching_functions(observer)
    chosen = (wavelength_nm >= 420) & (wavelength_nm <= 680)
    mixture = D65_XY + purity * (xy_of(functions[chosen]) - D65_XY)
    computed_nm, computed_purity = dominant_wavelength(mixture, D65_XY, observer)
    np.testing.assert_allclose(computed_nm, wavelength_nm[chosen], atol=0.02)
    np.testing.assert_allclose(computed_purity, purity, atol=1e-6)


def test_between_two_nanometres_the_wavelength_is_between() -> None:
    """Half-way along the chord of 500 and 501 nm."""
    _, functions = colour_matching_functions("cie-1931-2")
    ends = xy_of(functions[[140, 141]])
    computed_nm, purity = dominant_wavelength(ends.mean(axis=0), D65_XY)
    assert computed_nm == pytest.approx(500.5, abs=1e-6)
    assert purity == pytest.approx(1, abs=1e-9)


def test_purples_have_the_wavelength_opposite_and_the_line_of_purples_as_border() -> None:
    """Mirror a green through the white: same wavelength with a minus sign. Half-way to the line: purity one half."""
    green = D65_XY + 0.1 * (xy_of(colour_matching_functions("cie-1931-2")[1][520 - 360]) - D65_XY)
    assert dominant_wavelength(2 * D65_XY - green, D65_XY)[0] == pytest.approx(-520, abs=1e-6)
    _, functions = colour_matching_functions("cie-1931-2")
    violet, red = xy_of(functions[[380 - 360, 700 - 360]])
    on_line = 0.5 * (violet + red)
    _, purity = dominant_wavelength(D65_XY + 0.5 * (on_line - D65_XY), D65_XY)
    assert purity == pytest.approx(0.5, abs=2e-3)  # the ends used are 360 and 699 nm or thereabouts


def test_neutral_has_no_wavelength_and_no_purity() -> None:
    """nan and 0, whatever the shape."""
    computed_nm, purity = dominant_wavelength(np.stack([D65_XY, [0.3, 0.3]]), D65_XY)
    np.testing.assert_array_equal(np.isnan(computed_nm), [True, False])
    assert purity[0] == 0


def test_darkness_has_neither() -> None:
    """A chromaticity of nan stays nan in both."""
    assert np.all(np.isnan(dominant_wavelength([np.nan, np.nan], D65_XY)))


@given(
    st.floats(min_value=0, max_value=1),
    st.floats(min_value=0, max_value=1),
    st.sampled_from([(0.3127, 0.3290), (1 / 3, 1 / 3), (0.24, 0.24), (0.55, 0.40)]),
)
def test_every_chromaticity_has_a_wavelength_in_the_visible_range(
    x: float, y: float, white: tuple[float, float]
) -> None:
    """Imaginary colours included; nothing warns. Within 1e-9 of the white there is none."""
    with warnings.catch_warnings():
        warnings.simplefilter("error")
        computed_nm, purity = dominant_wavelength([x, y], white)
    if np.hypot(x - white[0], y - white[1]) > 1e-9:
        assert 360 <= abs(computed_nm) <= 830
        assert 0 < purity < 30
