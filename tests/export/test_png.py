"""PNG files are read back by another decoder to the same pixels."""

import io

import numpy as np
import pytest
from PIL import Image

from skychart.export.png import srgb_png


@pytest.mark.parametrize("shape", [(1, 1), (7, 3), (40, 61)])
@pytest.mark.parametrize("seed", [1, 2])
def test_pixels_survive(shape, seed):
    """Noise and ramps come back bit by bit, whichever filter won."""
    noise = np.random.default_rng(seed).integers(0, 256, (*shape, 3), dtype=np.uint8)
    ramp = np.broadcast_to(np.arange(shape[1], dtype=np.uint8)[:, None], (*shape, 3))
    for pixels in (noise, ramp):
        with Image.open(io.BytesIO(srgb_png(pixels))) as image:
            image.load()
            assert image.mode == "RGB"
            assert "srgb" in image.info
            np.testing.assert_array_equal(np.asarray(image), pixels)


def test_bytes_repeat_and_hold_no_clock():
    """Only the four chunks that are needed, the same every time."""
    pixels = np.full((4, 4, 3), 119, np.uint8)
    data = srgb_png(pixels)
    assert data == srgb_png(pixels.copy())
    assert b"tIME" not in data
    assert b"tEXt" not in data
