"""All descriptions of a colour belong together, for any colour, with or without SciPy."""

import dataclasses
import math
import subprocess
import sys
import warnings

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from skychart.colour import Colours, describe, tristimulus_matrix
from skychart.colour.chromaticity import uv_prime, xy, xyz_of_xy
from skychart.colour.describe import ev100
from skychart.colour.observers import D65_XY
from skychart.colour.spaces import SPACES
from skychart.errors import InputError
from skychart.sky.air import rayleigh_cross_section

NODES_NM = np.arange(360, 831, 10.0)


def leading_shapes(colours: Colours) -> dict[str, tuple[int, ...]]:
    """Shape of each field without its own last axis."""
    vectors = {"XYZ", "xy", "uv_prime"}
    shapes = {}
    for field in dataclasses.fields(colours):
        value = getattr(colours, field.name)
        parts = {f"{field.name} {space}": part for space, part in value.items()} if isinstance(value, dict) else None
        for name, array in (parts or {field.name: value}).items():
            is_vector = field.name in vectors or field.name == "rgb"
            shapes[name] = np.shape(array)[:-1] if is_vector else np.shape(array)
    return shapes


def test_d65_on_a_display_of_the_same_white() -> None:
    """Every number of the display's own white, 203 cd/m²."""
    white = describe(203 * xyz_of_xy(D65_XY), 203)
    assert white.luminance_cd_m2 == pytest.approx(203)
    np.testing.assert_allclose(white.xy, D65_XY, atol=1e-12)
    np.testing.assert_allclose(white.uv_prime, [0.1978, 0.4683], atol=5e-5)
    assert white.cct_k == pytest.approx(6503, abs=2)
    assert white.duv == pytest.approx(0.0032, abs=5e-5)
    assert np.isnan(white.dominant_wavelength_nm)
    assert white.excitation_purity == pytest.approx(0, abs=1e-9)
    assert set(white.rgb) == set(white.in_gamut) == set(SPACES)
    for space in SPACES:
        np.testing.assert_allclose(white.rgb[space], 203, rtol=1e-12)
        assert white.in_gamut[space]
    assert white.srgb_hex == "#ffffff"


def test_blue_zenith_has_no_temperature_and_is_blue() -> None:
    """Sunlight scattered once by thin air: (0.2328, 0.2316) by another solar spectrum, which differs by 0.002."""
    XYZ = rayleigh_cross_section(NODES_NM) @ tristimulus_matrix(NODES_NM)
    sky = describe(XYZ / XYZ[1] * 3000, 10_000)
    np.testing.assert_allclose(sky.xy, [0.2328, 0.2316], atol=0.002)
    assert np.isnan(sky.cct_k)
    assert np.isnan(sky.duv)
    assert 470 < sky.dominant_wavelength_nm < 480
    assert 0.3 < sky.excitation_purity < 0.5
    assert sky.in_gamut["srgb"]
    red, green, blue = (int(str(sky.srgb_hex)[k : k + 2], 16) for k in (1, 3, 5))
    assert red < green < blue


@pytest.mark.parametrize(("luminance", "stops"), [(0.125, 0), (1, 3), (4096, 15), (0.125 / 1024, -10)])
def test_exposure_value_is_that_of_a_meter_with_k_of_12_5(luminance: float, stops: float) -> None:
    """ISO 2720: EV at ISO 100 is log2(100 L / 12.5)."""
    assert ev100(luminance) == pytest.approx(stops, abs=1e-12)


@pytest.mark.parametrize("luminance", [0, -1])
def test_darkness_has_no_exposure_value(luminance: float) -> None:
    """nan, without a warning."""
    assert np.isnan(ev100(luminance))


@pytest.mark.parametrize("shape", [(), (5,), (2, 3), (2, 3, 4), (0,)])
def test_every_field_has_the_leading_shape_of_the_colours(shape: tuple[int, ...]) -> None:
    """One colour or a whole sheet; none of the fields is left behind."""
    colours = describe(np.random.default_rng(12).uniform(1, 100, (*shape, 3)), 100)
    shapes = leading_shapes(colours)
    assert len(shapes) >= 18
    assert set(shapes.values()) == {shape}


def test_a_colour_is_described_alike_alone_and_in_a_crowd() -> None:
    """Row 7 of a thousand equals the same colour by itself."""
    XYZ = np.random.default_rng(13).uniform(1, 100, (1000, 3))
    crowd, alone = describe(XYZ, 90), describe(XYZ[7], 90)
    np.testing.assert_allclose(crowd.cct_k[7], alone.cct_k, rtol=1e-9)
    np.testing.assert_allclose(crowd.dominant_wavelength_nm[7], alone.dominant_wavelength_nm, rtol=1e-12)
    np.testing.assert_allclose(crowd.rgb["acescg"][7], alone.rgb["acescg"], rtol=1e-12)
    assert crowd.srgb_hex[7] == alone.srgb_hex


def test_display_white_may_differ_from_colour_to_colour() -> None:
    """It moves the hex text and nothing else."""
    XYZ = 100 * xyz_of_xy(D65_XY) * np.ones((3, 1))
    colours = describe(XYZ, [100, 400, 1600])
    np.testing.assert_array_equal(colours.srgb_hex, ["#ffffff", "#898989", "#474747"])
    np.testing.assert_array_equal(colours.luminance_cd_m2, [100, 100, 100])


def test_observer_reaches_the_loci() -> None:
    """The same numbers read as CIE 1964 values have another temperature and dominant wavelength."""
    XYZ = xyz_of_xy((0.40, 0.39))
    two_degrees, ten_degrees = describe(XYZ, 1), describe(XYZ, 1, observer="cie-1964-10")
    assert abs(two_degrees.cct_k - ten_degrees.cct_k) > 10
    assert two_degrees.dominant_wavelength_nm != ten_degrees.dominant_wavelength_nm


component = st.floats(min_value=0, max_value=1e12)


@given(st.tuples(component, component, component), st.floats(min_value=1e-6, max_value=1e10))
def test_no_light_breaks_the_description(XYZ: tuple[float, float, float], white: float) -> None:
    """Nothing raises or warns; what is a number keeps to its range, and the parts agree with each other."""
    with warnings.catch_warnings():
        warnings.simplefilter("error")
        colour = describe(XYZ, white)
    np.testing.assert_array_equal(colour.xy, xy(XYZ))
    np.testing.assert_array_equal(colour.uv_prime, uv_prime(XYZ))
    assert colour.luminance_cd_m2 == XYZ[1]
    assert np.isnan(colour.cct_k) or 1000 <= colour.cct_k <= 100_000
    assert np.isnan(colour.duv) or abs(colour.duv) <= 0.05
    assert np.isnan(colour.dominant_wavelength_nm) or 360 <= abs(colour.dominant_wavelength_nm) <= 830
    assert np.isnan(colour.ev100) == (XYZ[1] == 0)
    for space in SPACES:
        assert np.all(np.isfinite(colour.rgb[space]))
    if colour.in_gamut["srgb"]:
        assert colour.in_gamut["display-p3"]


@pytest.mark.parametrize(
    ("XYZ", "message"),
    [
        ([1, math.nan, 1], "tristimulus values contain nan, accepted are finite numbers"),
        ([[1, 1, 1], [1, 1, math.inf]], "tristimulus values contain inf, accepted are finite numbers"),
        ([1, 1], r"tristimulus values have shape \(2,\), accepted is \(..., 3\)"),
        (1, r"tristimulus values have shape \(\), accepted is \(..., 3\)"),
    ],
)
def test_what_is_no_colour_is_refused(XYZ: list[float], message: str) -> None:
    """The first value that is no number, or the shape."""
    with pytest.raises(InputError, match=f"^{message}$"):
        describe(XYZ, 100)


def test_scipy_is_not_needed() -> None:
    """A fresh interpreter that cannot import SciPy describes a colour, with warnings as errors."""
    program = (
        "import sys; sys.modules['scipy'] = None\n"
        "from skychart.colour import describe\n"
        "print(describe([95.047, 100, 108.883], 100).srgb_hex)"
    )
    run = subprocess.run([sys.executable, "-W", "error", "-c", program], capture_output=True, text=True, check=False)
    assert (run.stdout, run.stderr, run.returncode) == ("#ffffff\n", "", 0)


def test_the_library_is_loaded_late() -> None:
    """Importing the colour and sky packages loads neither colour-science nor matplotlib."""
    program = (
        "import sys, skychart, skychart.colour, skychart.sky\n"
        "print([name for name in ('colour', 'matplotlib', 'scipy') if name in sys.modules])"
    )
    run = subprocess.run([sys.executable, "-c", program], capture_output=True, text=True, check=True)
    assert run.stdout == "[]\n"
