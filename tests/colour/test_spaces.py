"""RGB spaces against their standards; encoded colours keep hue and never fail."""

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from skychart.colour.chromaticity import xyz_of_xy
from skychart.colour.observers import D65_XY
from skychart.colour.spaces import SPACES, encode_srgb, in_gamut, rgb, srgb_hex
from skychart.errors import InputError
from skychart.library import colour_science

# RGB to XYZ from the primaries and white of each standard, ten digits.
PUBLISHED_MATRICES = {
    "srgb": [
        [0.4123907993, 0.3575843394, 0.1804807884],
        [0.2126390059, 0.7151686788, 0.0721923154],
        [0.0193308187, 0.1191947798, 0.9505321522],
    ],
    "display-p3": [
        [0.4865709486, 0.2656676932, 0.1982172852],
        [0.2289745641, 0.6917385218, 0.0792869141],
        [0, 0.0451133819, 1.0439443689],
    ],
    "bt2020": [
        [0.6369580483, 0.1446169036, 0.1688809752],
        [0.2627002120, 0.6779980715, 0.0593017165],
        [0, 0.0280726930, 1.0609850577],
    ],
}
AP1_TO_XYZ = [
    [0.6624541811, 0.1340042065, 0.1561876870],
    [0.2722287168, 0.6740817658, 0.0536895174],
    [-0.0055746495, 0.0040607335, 1.0103391003],
]
PRIMARIES = {
    "srgb": [(0.640, 0.330), (0.300, 0.600), (0.150, 0.060)],
    "display-p3": [(0.680, 0.320), (0.265, 0.690), (0.150, 0.060)],
    "bt2020": [(0.708, 0.292), (0.170, 0.797), (0.131, 0.046)],
}


@pytest.mark.parametrize("space", SPACES)
def test_d65_becomes_equal_components_of_its_own_luminance(space: str) -> None:
    """White at Y = 1 is (1, 1, 1), in ACEScg by adaptation; the scale carries over."""
    np.testing.assert_allclose(rgb(203 * xyz_of_xy(D65_XY), space), [203, 203, 203], rtol=1e-12)


@pytest.mark.parametrize("space", PUBLISHED_MATRICES)
def test_components_invert_the_matrix_of_the_standard(space: str) -> None:
    """To the ten digits given."""
    components = np.random.default_rng(5).uniform(-0.2, 1, (50, 3))
    np.testing.assert_allclose(rgb(components @ np.transpose(PUBLISHED_MATRICES[space]), space), components, atol=1e-8)


def test_acescg_is_ap1_after_bradford_adaptation_from_d65() -> None:
    """The matrix of S-2014-004, and colour-science's own adaptation between the two whites."""
    XYZ = np.random.default_rng(6).uniform(0, 1, (50, 3))
    adapted = colour_science().chromatic_adaptation(
        XYZ, xyz_of_xy(D65_XY), xyz_of_xy([0.32168, 0.33767]), method="Von Kries", transform="Bradford"
    )
    np.testing.assert_allclose(rgb(XYZ, "acescg") @ np.transpose(AP1_TO_XYZ), adapted, atol=1e-8)


@pytest.mark.parametrize("space", PRIMARIES)
def test_primaries_are_pure_and_just_inside_the_gamut(space: str) -> None:
    """Each primary has one component; 0.001 farther from white it is outside."""
    primaries = np.array(PRIMARIES[space])
    linear = rgb(xyz_of_xy(primaries), space)
    np.testing.assert_allclose(linear / linear.sum(axis=-1, keepdims=True), np.eye(3), atol=1e-9)
    outward = primaries + 0.001 * (primaries - D65_XY)
    inward = primaries - 0.001 * (primaries - D65_XY)
    assert not np.any(in_gamut(rgb(xyz_of_xy(outward), space)))
    assert np.all(in_gamut(rgb(xyz_of_xy(inward), space)))


def test_gamut_is_a_matter_of_chromaticity_alone() -> None:
    """The same flag from starlight to the solar disc; darkness is inside."""
    linear = np.array([[0.5, 0.2, 0.1], [0.5, 0.2, -0.01]])
    for scale in (1e-9, 1, 2e9):
        np.testing.assert_array_equal(in_gamut(linear * scale), [True, False])
    assert in_gamut([0, 0, 0])


@pytest.mark.parametrize(
    ("linear", "encoded"),
    [(0, 0), (0.0031308, 0.040450), (0.18, 0.461356), (0.2140, 0.499956), (0.5, 0.735357), (1, 1)],
)
def test_srgb_curve_has_its_published_values(linear: float, encoded: float) -> None:
    """IEC 61966-2-1, six decimals."""
    assert encode_srgb(linear) == pytest.approx(encoded, abs=6e-7)


def test_hex_of_known_colours() -> None:
    """White, black, middle grey and the primary colours of sRGB, at the stated display white."""
    white = xyz_of_xy(D65_XY)
    matrix = np.transpose(PUBLISHED_MATRICES["srgb"])
    colours = np.vstack([white, 0 * white, 0.2140 * white, np.eye(3) @ matrix]) * 80
    expected = ["#ffffff", "#000000", "#7f7f7f", "#ff0000", "#00ff00", "#0000ff"]
    np.testing.assert_array_equal(srgb_hex(colours, 80), expected)


def test_too_bright_colours_are_scaled_down_whole() -> None:
    """Twenty times too bright shows as the same colour at the greatest strength, with its hue."""
    XYZ = np.array([0.3, 0.5, 0.6])
    linear = rgb(XYZ, "srgb")
    assert srgb_hex(20 * XYZ, 1) == srgb_hex(XYZ / linear.max(), 1)
    np.testing.assert_array_equal(srgb_hex([XYZ, XYZ], [1, 0.01]), [srgb_hex(XYZ, 1), srgb_hex(20 * XYZ, 1)])


def test_components_below_zero_become_zero() -> None:
    """A spectral green has no red and no blue left on an sRGB display."""
    assert str(srgb_hex(xyz_of_xy([0.1, 0.8]), 10)).startswith("#00")


@pytest.mark.parametrize("shape", [(), (4,), (2, 3), (0,)])
def test_leading_shape_is_kept(shape: tuple[int, ...]) -> None:
    """One colour, a row, a table, none."""
    XYZ = np.ones((*shape, 3))
    assert rgb(XYZ, "bt2020").shape == (*shape, 3)
    assert srgb_hex(XYZ, 1).shape == shape
    assert srgb_hex(XYZ, 1).dtype == np.dtype("U7")


@given(
    st.tuples(*[st.floats(min_value=-1e9, max_value=1e12)] * 3),
    st.floats(min_value=1e-9, max_value=1e9),
)
def test_every_colour_has_a_hex_text(XYZ: tuple[float, float, float], white: float) -> None:
    """Seven characters, whatever the colour."""
    text = str(srgb_hex(XYZ, white))
    assert len(text) == 7
    assert text[0] == "#"
    assert 0 <= int(text[1:], 16) <= 0xFFFFFF


@pytest.mark.parametrize("white", [0, -1, math.nan, math.inf])
def test_display_white_must_shine(white: float) -> None:
    """The message gives the value seen and what is accepted."""
    with pytest.raises(InputError, match=r"^display white is .* cd/m², accepted are finite values above 0$"):
        srgb_hex([1, 1, 1], white)


def test_unknown_space_is_refused_with_the_known_ones() -> None:
    """By the names that pages and settings use."""
    with pytest.raises(InputError, match=r"^unknown space 'sRGB'; known: srgb, display-p3, bt2020, acescg$"):
        rgb([1, 1, 1], "sRGB")
