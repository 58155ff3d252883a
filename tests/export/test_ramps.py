"""Test ramps: 16 bits that another reader decodes, marked for what they are, with the sky's colours in them."""

import struct
import zlib

import numpy as np
import png
import pytest

from skychart.charts.dome import sky_at
from skychart.charts.ramps import RAMP_PIXELS, ramps
from skychart.export.png import SRGB_CHUNK, ramp_png
from skychart.export.ramps import pq_signal, ramp_pngs

# IEC 61966-2-1 and ITU-R BT.2020, rows of the matrices to linear RGB from XYZ
TO_SRGB = np.array([[3.2406, -1.5372, -0.4986], [-0.9689, 1.8758, 0.0415], [0.0557, -0.2040, 1.0570]])
TO_BT2020 = np.array([[1.7167, -0.3557, -0.2534], [-0.6667, 1.6165, 0.0158], [0.0176, -0.0428, 0.9421]])


def chunks(data):
    """Names and contents of all chunks, each with a right checksum."""
    assert data[:8] == b"\x89PNG\r\n\x1a\n"
    found, place = [], 8
    while place < len(data):
        (size,) = struct.unpack(">I", data[place : place + 4])
        name, content = data[place + 4 : place + 8], data[place + 8 : place + 8 + size]
        assert struct.unpack(">I", data[place + 8 + size : place + 12 + size]) == (zlib.crc32(name + content),)
        found.append((name, content))
        place += 12 + size
    return found


def decoded(data):
    """Pixels by pypng, (height, width, RGB)."""
    width, height, rows, about = png.Reader(bytes=data).read()
    assert (about["bitdepth"], about["planes"]) == (16, 3)
    return np.array([np.array(row) for row in rows]).reshape(height, width, 3)


def pq_luminance(signal):
    """Luminance [cd/m²] of a PQ signal: SMPTE ST 2084, equation 4.1, written out."""
    m1, m2, c1, c2, c3 = 2610 / 16384, 2523 / 32, 3424 / 4096, 2413 / 128, 2392 / 128
    power = np.asarray(signal, float) ** (1 / m2)
    return 10_000 * (np.maximum(power - c1, 0) / (c2 - c3 * power)) ** (1 / m1)


@pytest.fixture(scope="module")
def day(sheets):
    """The two ramps of the sun at 20°, the luminance of its white card, and their pictures."""
    chart = sheets[20]
    card = chart.ground.card_luminance_cd_m2
    lines = ramps(chart.sky)
    return lines, card, ramp_pngs(lines, card, "skychart 1.2", "molecular, sun 20 deg")


@pytest.mark.parametrize("seed", [1, 2])
@pytest.mark.parametrize("height", [1, 5])
def test_sixteen_bits_survive(seed, height):
    """Noise comes back bit by bit in every row."""
    row = np.random.default_rng(seed).integers(0, 65536, (33, 3), dtype=np.uint16)
    pixels = decoded(ramp_png(row, height, SRGB_CHUNK, {}))
    np.testing.assert_array_equal(pixels, np.broadcast_to(row, (height, 33, 3)))


def test_pictures_are_marked_for_what_they_are(day):
    """sRGB, or BT.2020 with PQ in RGB of full range (ITU-T H.273: 9, 16, 0, 1), before the pixels; no clock."""
    _, _, pictures = day
    assert sorted(pictures) == [f"ramp-{line}-{code}.png" for line in ("beside", "plane") for code in ("pq", "srgb")]
    for name, data in pictures.items():
        found = chunks(data)
        names = [chunk for chunk, _ in found]
        mark = (b"cICP", bytes([9, 16, 0, 1])) if name.endswith("pq.png") else (b"sRGB", b"\0")
        assert found[1] == mark
        assert names == [b"IHDR", mark[0], b"tEXt", b"tEXt", b"tEXt", b"IDAT", b"IEND"]
        assert b"Title\0Sky gradient, molecular, sun 20 deg" in dict(found[2:3]).values()
        assert (b"203 cd/m2" in data) == name.endswith("pq.png")
        pixels = decoded(data)
        assert pixels.shape == (240, RAMP_PIXELS, 3)
        assert (pixels == pixels[0]).all()


def test_the_srgb_ramp_shows_the_sky_with_the_card_as_white(day):
    """Linear light over that of the card, of what neither leaves the gamut nor passes white, within 1e-3."""
    lines, card, pictures = day
    compared = 0
    for line in lines:
        signal = decoded(pictures[f"ramp-{line.key}-srgb.png"])[0] / 65535
        linear = np.where(signal <= 0.04045, signal / 12.92, ((signal + 0.055) / 1.055) ** 2.4)
        wanted = line.XYZ @ TO_SRGB.T / card
        inside = (wanted.min(axis=1) > 0.001) & (wanted.max(axis=1) < 1)
        compared += inside.sum()
        np.testing.assert_allclose(linear[inside], wanted[inside], atol=1e-3)
        assert linear.max() <= 1
    assert compared > 500


def test_the_pq_ramp_shows_the_sky_with_the_card_at_203(day):
    """Luminance by the published curve, within 1e-3 of the light that is wanted."""
    lines, card, pictures = day
    for line in lines:
        shown = pq_luminance(decoded(pictures[f"ramp-{line.key}-pq.png"])[0] / 65535)
        wanted = line.XYZ @ TO_BT2020.T * 203 / card
        assert wanted.min() > 0
        np.testing.assert_allclose(shown, wanted, rtol=1e-3)


def test_pq_has_the_published_codes():
    """Of white at 0.005, 100, 203, 1000, 4000 cd/m² (SMPTE ST 2084, to six decimals); beyond 10 000 the end."""
    white = np.array([0.9505, 1.0, 1.0890])
    signals = pq_signal(np.array([0.005, 100, 203, 1000, 4000, 20_000])[:, None] * white, 203.0)
    published = [0.015076, 0.508078, 0.580689, 0.751827, 0.902572, 1]
    np.testing.assert_allclose(signals[:, 1], published, atol=2e-5)


def test_ramps_lie_along_their_lines(day, sheets):
    """Evenly spaced, from horizon to zenith and on to the horizon opposite; the beside one without jumps of slope."""
    (beside, plane), _, _ = day
    view = sheets[20].sky
    for pixel, up, around in ((0, 90 * 0.5 / 1280, 90.0), (639, 90 * 639.5 / 1280, 90.0), (1279, 89.965, 90.0)):
        np.testing.assert_allclose(beside.XYZ[pixel], sky_at(view, np.array(up), np.array(around)), rtol=3e-3)
    for pixel, up, around in ((0, 180 * 0.5 / 1280, 0.0), (320, 45.07, 0.0), (960, 44.93, 180.0), (1279, 0.07, 180.0)):
        np.testing.assert_allclose(plane.XYZ[pixel], sky_at(view, np.array(up), np.array(around)), rtol=3e-3)
    broken = sky_at(view, 90 * (np.arange(RAMP_PIXELS) + 0.5) / RAMP_PIXELS, np.full(RAMP_PIXELS, 90.0))
    bend, kink = (np.abs(np.diff(np.log(colours), 2, axis=0)).max() for colours in (beside.XYZ, broken))
    assert bend < kink / 3


def test_ramps_are_small(day):
    """All rows are alike, and that is how they are kept."""
    assert sum(map(len, day[2].values())) < 40_000
