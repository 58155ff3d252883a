"""OpenEXR files, opened with the reference library: what the header says, where things are, what the numbers mean."""

import sys

import numpy as np
import OpenEXR
import pytest

from skychart.charts.dome_map import dome_map, level_XYZ, pixel_mean_sine, pixel_solid_angle_sr
from skychart.colour.spaces import SPACES
from skychart.errors import InputError, OutputError
from skychart.export.dome import dome_exr, dome_line
from skychart.export.openexr import exr_bytes, has_openexr
from skychart.export.patches import PATCH_PIXELS, patches_exr

D65_XY = (0.3127, 0.3290)
# IEC 61966-2-1; SMPTE EG 432-1; ITU-R BT.2020-2; Academy S-2014-004: red, green, blue, white
CHROMATICITIES = {
    "srgb": (0.64, 0.33, 0.30, 0.60, 0.15, 0.06, *D65_XY),
    "display-p3": (0.680, 0.320, 0.265, 0.690, 0.150, 0.060, *D65_XY),
    "bt2020": (0.708, 0.292, 0.170, 0.797, 0.131, 0.046, *D65_XY),
    "acescg": (0.713, 0.293, 0.165, 0.830, 0.128, 0.044, 0.32168, 0.33767),
}
# Lam 1985, as in Lindbloom B., Chromatic Adaptation
BRADFORD = np.array([[0.8951, 0.2664, -0.1614], [-0.7502, 1.7135, 0.0367], [0.0389, -0.0685, 1.0296]])


def opened(data, tmp_path):
    """Header and pixels (height, width, RGB) of a file."""
    path = tmp_path / "picture.exr"
    path.write_bytes(data)
    file = OpenEXR.File(str(path))
    return file.header(), file.channels()["RGB"].pixels


def xyz(xy):
    """Tristimulus values of a chromaticity at Y = 1."""
    x, y = xy
    return np.array([x / y, 1, (1 - x - y) / y])


def absolute_XYZ(header, pixels):
    """By the file's own primaries, white and luminance (SMPTE RP 177), the white then brought to D65 (Bradford)."""
    red, green, blue, white = np.reshape(header["chromaticities"], (4, 2))
    primaries = np.stack([xyz(red), xyz(green), xyz(blue)], axis=1)
    to_XYZ = primaries * np.linalg.solve(primaries, xyz(white))
    gain = (BRADFORD @ xyz(D65_XY)) / (BRADFORD @ xyz(white))
    adapted = np.linalg.inv(BRADFORD) @ (gain[:, None] * BRADFORD)
    return pixels.astype(float) @ (adapted @ to_XYZ).T * header["whiteLuminance"]


@pytest.fixture(scope="module")
def dome(two_suns):
    """The map of the sun at 20°, turned a quarter to the right, with its disc."""
    return dome_map(two_suns, 1, 256, 90.0, disc=True)


@pytest.mark.parametrize("half", [False, True])
@pytest.mark.parametrize("space", SPACES)
def test_a_map_says_what_it_is(dome, tmp_path, space, half):
    """Channels, mapping, chromaticities and their name, luminance of white, and where the sun is."""
    header, pixels = opened(dome_exr(dome, space, half, "skychart 1.2"), tmp_path)
    assert sorted(channel.name for channel in header["channels"]) == ["B", "G", "R"]
    assert pixels.dtype == (np.float16 if half else np.float32)
    assert header["envmap"] == OpenEXR.ENVMAP_LATLONG
    assert pixels.shape == (128, 256, 3)
    np.testing.assert_allclose(header["chromaticities"], CHROMATICITIES[space], atol=1e-7)
    assert header["colorInteropID"].startswith("lin_")
    assert header["software"] == "skychart 1.2"
    assert header["atmosphere"].startswith("molecular: no haze")
    assert header["sunElevation"].startswith("20 deg geometric, 20.0")
    assert header["sunAzimuth"] == "90 deg clockwise from the middle of the picture"
    assert header["sunDisc"] == "drawn"
    assert f"1.0 is {header['whiteLuminance']:g} cd/m2" in header["comments"]
    assert ("Bradford" in header["comments"]) == (space == "acescg")


@pytest.mark.skipif(not hasattr(OpenEXR, "colorInteropIDToChromaticities"), reason="told by OpenEXR from 3.5 on")
@pytest.mark.parametrize("space", SPACES)
def test_the_name_of_the_space_is_the_one_the_library_knows(dome, tmp_path, space):
    """Its chromaticities are those of the file, and the library finds no contradiction in the header."""
    header, _ = opened(dome_exr(dome, space, False, ""), tmp_path)
    known = OpenEXR.colorInteropIDToChromaticities(header["colorInteropID"])
    np.testing.assert_allclose(known, header["chromaticities"], atol=1e-6)
    assert OpenEXR.checkColorMetadata(header) == OpenEXR.ColorMetadataWarning.OK


@pytest.mark.parametrize("half", [False, True])
@pytest.mark.parametrize("space", SPACES)
def test_colours_come_back_by_the_chromaticities_of_the_file(dome, tmp_path, space, half):
    """Absolute XYZ within 1e-3 of their luminance: of every pixel, in 32 bits and in 16."""
    header, pixels = opened(dome_exr(dome, space, half, ""), tmp_path)
    difference = np.abs(absolute_XYZ(header, pixels) - dome.XYZ).max(axis=-1) / dome.XYZ.max(axis=-1)
    assert difference.max() < 1e-3


def test_the_sun_lies_where_the_format_puts_its_direction(dome, two_suns, tmp_path):
    """Longitude falls from 180° at the left edge to −180° at the right, latitude from 90° at the top to −90°.

    Source: OpenEXR, ImfEnvmap.h, LatLongMap. Azimuth 90°, clockwise from above and from +z, is longitude −90°, −x.
    """
    _, pixels = opened(dome_exr(dome, "srgb", False, ""), tmp_path)
    row, column = np.unravel_index(pixels[..., 1].argmax(), pixels.shape[:2])
    latitude, longitude = np.radians(two_suns.apparent_elevation_deg[1]), np.radians(-90)
    x, y, z = np.cos(latitude) * np.sin(longitude), np.sin(latitude), np.cos(latitude) * np.cos(longitude)
    assert (x, z) == (pytest.approx(-np.cos(latitude)), pytest.approx(0, abs=1e-12))
    wanted_row = (0.5 - np.arcsin(y) / np.pi) * 128
    wanted_column = (0.5 - np.arctan2(x, z) / (2 * np.pi)) * 256
    assert abs(row + 0.5 - wanted_row) <= 1
    assert abs(column + 0.5 - wanted_column) <= 1
    assert np.ptp(pixels[:64], axis=1).min() > 0, "the sky is above"
    assert np.ptp(pixels[64:], axis=1).max() == 0, "level ground of one colour is below"


@pytest.mark.parametrize("width", [512, 1024])
def test_sixteen_bits_keep_sky_and_sun(two_suns, tmp_path, width):
    """Nothing overflows, level ground gets sky and sun within 0.5 %, and white is no larger than it has to be."""
    dome = dome_map(two_suns, 1, width, 12.3, disc=True)
    header, pixels = opened(dome_exr(dome, "srgb", True, ""), tmp_path)
    assert pixels.dtype == np.float16
    assert np.isfinite(pixels).all()
    assert np.log10(header["whiteLuminance"]) % 1 == pytest.approx(0, abs=1e-6)
    assert header["whiteLuminance"] > 1
    assert np.abs(pixels).max() > 6550, "one power of ten less would not do"
    weight = np.maximum(pixel_mean_sine(width), 0) * pixel_solid_angle_sr(width)
    level = np.einsum("r,rcx->x", weight, absolute_XYZ(header, pixels))
    np.testing.assert_allclose(level, level_XYZ(dome), rtol=5e-3)
    assert level[1] > 1.5 * two_suns.sky_XYZ[1, 1]


def test_without_the_sun_sixteen_bits_hold_cd_m2(two_suns, tmp_path):
    """By day and by night 1.0 is 1 cd/m² unless something is too bright for that."""
    for sun in (0, 1):
        header, _ = opened(dome_exr(dome_map(two_suns, sun, 64), "bt2020", True, ""), tmp_path)
        assert header["whiteLuminance"] == 1
        assert header["sunDisc"] == "left out"


def test_the_line_that_is_printed_tells_size_space_and_light(dome):
    """With the illuminance that the pixels give level ground."""
    level = float(level_XYZ(dome)[1])
    line = dome_line(dome, "acescg", half=False)
    assert line.startswith("256 × 128 pixels, linear ACEScg, 32-bit float, 1.0 is 1 cd/m²; level ground gets ")
    assert line.endswith(" lx from it, with the sun's disc")
    assert float(line.split("gets ")[1].split()[0]) == pytest.approx(level, rel=5e-4)


def test_equal_maps_are_equal_bytes(dome):
    """No clock, no host, no chance."""
    assert dome_exr(dome, "srgb", True, "x") == dome_exr(dome, "srgb", True, "x")


def test_a_number_too_large_for_sixteen_bits_is_never_written():
    """Infinity would light a whole scene."""
    with pytest.raises(InputError, match=r"^largest component is 70000, accepted in 16 bits is up to 65504$"):
        exr_bytes(np.full((4, 4, 3), 70_000.0), "srgb", 1.0, {}, half=True)


def test_without_the_library_one_line_says_how_to_get_it(dome, monkeypatch):
    """The name of the package with its extra."""
    monkeypatch.setitem(sys.modules, "OpenEXR", None)
    assert not has_openexr()
    with pytest.raises(
        OutputError, match=r"^OpenEXR is not installed; get it with: pip install 'sky-colour-charts\[exr"
    ):
        dome_exr(dome, "srgb", False, "")


@pytest.mark.parametrize("sun", [-8, 20])
def test_patches_are_the_blocks_of_the_page(sheets, tmp_path, sun):
    """Each block even, in its place in the grid, its XYZ by the file's chromaticities that of the sheet within 1e-3."""
    chart = sheets[sun]
    header, pixels = opened(patches_exr(chart, ""), tmp_path)
    XYZ = absolute_XYZ(header, pixels)
    rows = chart.block_rows + chart.aureole_rows
    assert pixels.shape == (PATCH_PIXELS * len(rows), PATCH_PIXELS * 6, 3)
    readings = iter(chart.readings.XYZ)
    for i, row in enumerate(rows):
        left = 0
        for block in row.blocks:
            patch = XYZ[
                PATCH_PIXELS * i : PATCH_PIXELS * (i + 1), PATCH_PIXELS * left : PATCH_PIXELS * (left + block.span)
            ]
            wanted = next(readings)
            assert np.abs(patch - wanted).max() < 1e-3 * wanted.max()
            left += block.span
        assert not pixels[PATCH_PIXELS * i : PATCH_PIXELS * (i + 1), PATCH_PIXELS * left :].any()
    assert next(readings, None) is None
    assert "view elevation 90, 60, 45, 30, 20, 10, 5, 2, 0 deg" in header["comments"]
    assert ("above and beside the sun" in header["comments"]) == (sun > 0)
