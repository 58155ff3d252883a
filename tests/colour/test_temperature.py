"""Colour temperature against the library's Ohno 2013, and its absence where it would be nonsense."""

import functools
import warnings

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from skychart.colour.chromaticity import uv_1960, xyz_of_xy
from skychart.colour.observers import OBSERVERS, colour_matching_functions, library_observer
from skychart.colour.temperature import cct_duv
from skychart.library import colour_science


def xyz_of_uv(uv: np.ndarray) -> np.ndarray:
    """Y = 1 at a CIE 1960 chromaticity."""
    u, v = np.moveaxis(uv, -1, 0)
    return xyz_of_xy(np.stack([3 * u, 2 * v], axis=-1) / (2 * u - 8 * v + 4)[..., None])


def from_library(cct_k: np.ndarray, duv: np.ndarray) -> np.ndarray:
    """XYZ at a temperature and distance from the locus, by colour-science.

    Left to itself the library ends the observer at 780 nm, which moves the locus by 0.2 MK⁻¹ at 1000 K.
    """
    pair = np.stack(np.broadcast_arrays(cct_k, duv), axis=-1)
    return xyz_of_uv(np.asarray(colour_science().temperature.CCT_to_uv_Ohno2013(pair, library_observer("cie-1931-2"))))


@functools.cache
def black_bodies() -> np.ndarray:
    """CIE 1960 chromaticities of black bodies from 100 000 down to 1000 K, by colour-science."""
    planck = colour_science().temperature.CCT_to_uv_Planck1900
    return np.asarray(planck(1e6 / np.arange(10, 1000.5, 0.5), library_observer("cie-1931-2")))


@pytest.mark.parametrize("duv", [-0.0499, -0.02, -0.003, 0, 0.003, 0.02, 0.0499])
def test_temperature_and_distance_come_back_over_the_whole_range(duv: float) -> None:
    """From 1001 K to 99 900 K: temperature within 0.01 % and 0.01 MK⁻¹, distance within 1e-6.

    The library steps 0.01 K along the locus to find the normal, which limits the agreement at high temperatures.
    """
    cct_k = np.geomspace(1001, 99_900, 200)
    computed_k, computed_duv = cct_duv(from_library(cct_k, np.full(200, duv)))
    np.testing.assert_allclose(1e6 / computed_k, 1e6 / cct_k, rtol=1e-4, atol=0.01)
    np.testing.assert_allclose(computed_duv, duv, atol=1e-6)


def test_agrees_with_ohno_2013_in_the_library() -> None:
    """Within 1 K up to 20 000 K, the range and accuracy Ohno states, at 60 colours about the locus."""
    rng = np.random.default_rng(3)
    uv = uv_1960(from_library(rng.uniform(1500, 20_000, 60), rng.uniform(-0.04, 0.04, 60)))
    published = np.asarray(colour_science().temperature.uv_to_CCT_Ohno2013(uv, library_observer("cie-1931-2")))
    cct_k, duv = cct_duv(xyz_of_uv(uv))
    np.testing.assert_allclose(cct_k, published[:, 0], atol=1)
    np.testing.assert_allclose(duv, published[:, 1], atol=2e-6)


@pytest.mark.parametrize(
    ("x", "y", "cct_k", "tolerance"),
    [
        (0.3127, 0.3290, 6503, 3),  # D65: 6504 K by name, 6500.7 to 6505.1 by two closed formulas
        (0.44758, 0.40745, 2856, 1),  # illuminant A: 2856 K by definition
        (0.32162, 0.33208, 6022, 1),  # the sun of TSIS-1 HSRS, by Ohno 2013 in another program
        (0.25, 0.25, 28_793, 60),  # far in the blue, by Ohno 2013; closed formulas give 20 922 and 28 882 K
    ],
)
def test_known_lights_have_their_known_temperature(x: float, y: float, cct_k: float, tolerance: float) -> None:
    """Standard illuminants, the sun, and a blue where simple formulas fail."""
    computed, _ = cct_duv(xyz_of_xy([x, y]))
    assert computed == pytest.approx(cct_k, abs=tolerance)


def test_daylight_lies_on_the_green_side_and_the_sun_nearly_on_the_locus() -> None:
    """Duv of D65 is +0.0032; that of the sun +0.0004 (TSIS-1 HSRS, by Ohno 2013 in another program)."""
    _, duv = cct_duv(xyz_of_xy([[0.3127, 0.3290], [0.32162, 0.33208]]))
    np.testing.assert_allclose(duv, [0.0032, 0.0004], atol=5e-5)


@pytest.mark.parametrize(
    ("x", "y"),
    [
        (0.23280, 0.23156),  # sunlight scattered once by molecules: what blue sky tends to
        (0.23988, 0.23404),  # the Planckian locus at infinite temperature
        (0.2, 0.2),
        (0.15, 0.06),
        (0.3, 0.6),  # green, far above the locus
        (0.45, 0.2),  # purple, far below
        (0.7347, 0.2653),  # the red end of the spectrum
    ],
)
def test_colours_beyond_the_locus_have_no_temperature(x: float, y: float) -> None:
    """Blue sky, saturated colours: neither temperature nor Duv."""
    cct_k, duv = cct_duv(xyz_of_xy([x, y]))
    assert np.isnan(cct_k)
    assert np.isnan(duv)


def test_limits_are_where_the_rule_says() -> None:
    """1000 K, 100 000 K and |Duv| of 0.05 are the last that have a temperature."""
    inside = from_library(np.array([1001, 99_900, 5000, 5000]), np.array([0, 0, 0.0499, -0.0499]))
    outside = from_library(np.array([999, 100_200, 5000, 5000]), np.array([0, 0, 0.0501, -0.0501]))
    assert np.all(np.isfinite(cct_duv(inside)))
    assert np.all(np.isnan(cct_duv(outside)))


@pytest.mark.parametrize("observer", OBSERVERS)
def test_a_black_body_lies_on_the_locus_of_every_observer(observer: str) -> None:
    """Planck's law at 4000 K, integrated here, comes back within 1 K: the locus belongs to the observer."""
    wavelength_nm, functions = colour_matching_functions(observer)
    radiance = wavelength_nm**-5 / np.expm1(0.014388 / (wavelength_nm * 1e-9 * 4000))
    cct_k, duv = cct_duv(radiance @ functions, observer)
    assert cct_k == pytest.approx(4000, abs=1)
    assert duv == pytest.approx(0, abs=2e-5)


def test_long_arrays_are_the_same_as_their_parts() -> None:
    """Blocks of work do not show, whatever the shape."""
    XYZ = np.random.default_rng(4).uniform(0.5, 1.5, (3, 7000, 3))
    cct_k, duv = cct_duv(XYZ)
    assert cct_k.shape == duv.shape == (3, 7000)
    picked = XYZ[::2, ::1000]
    np.testing.assert_array_equal(cct_duv(picked)[0], cct_k[::2, ::1000])
    np.testing.assert_array_equal(cct_duv(XYZ[1, 4])[1], duv[1, 4])


tristimulus = st.floats(min_value=0, max_value=1e12)


@given(st.tuples(tristimulus, tristimulus, tristimulus))
def test_no_positive_colour_gets_a_nonsense_temperature(XYZ: tuple[float, float, float]) -> None:
    """Nothing raises or warns; a temperature comes with its Duv, both within the rule, and leads back to the colour."""
    with warnings.catch_warnings():
        warnings.simplefilter("error")
        cct_k, duv = cct_duv(XYZ)
    assert np.isnan(cct_k) == np.isnan(duv)
    if np.isfinite(cct_k):
        assert 1000 <= cct_k <= 100_000
        assert abs(duv) <= 0.05
        np.testing.assert_allclose(uv_1960(from_library(cct_k, duv)), uv_1960(XYZ), atol=2e-6)


def distance_to_polyline(points: np.ndarray, point: np.ndarray) -> np.ndarray:
    """Distance of ``point`` (2,) from each piece of the line through ``points`` (n, 2)."""
    start, along = points[:-1], np.diff(points, axis=0)
    part = np.clip(((point - start) * along).sum(axis=1) / (along**2).sum(axis=1), 0, 1)
    return np.hypot(*(start + part[:, None] * along - point).T)


@given(st.floats(min_value=0.16, max_value=0.5), st.floats(min_value=0.2, max_value=0.4))
def test_the_point_found_is_the_nearest_of_the_locus(u: float, v: float) -> None:
    """No black body between 1000 and 100 000 K lies nearer than |Duv|, and none within 0.05 is missed."""
    distance = distance_to_polyline(black_bodies(), np.array([u, v]))
    _, duv = cct_duv(xyz_of_uv(np.array([u, v])))
    if np.isfinite(duv):
        assert abs(duv) == pytest.approx(distance.min(), abs=2e-6, rel=1e-4)
    else:
        assert distance.min() > 0.0499 or distance.argmin() in (0, len(distance) - 1)
