"""PNG without chance: no clock, no program name, the same bytes from the same pixels.

Source: ISO/IEC 15948, Portable Network Graphics (2nd and 3rd edition): chunks, filter types 1 and 2.
"""

import struct
import zlib

import numpy as np

_SIGNATURE = b"\x89PNG\r\n\x1a\n"
_TRUECOLOUR = 2
_PERCEPTUAL = b"\0"
_LEVEL = 7  # 9 takes four times as long for 2 % fewer bytes


def srgb_png(pixels: np.ndarray) -> bytes:
    """An sRGB picture of 8-bit `pixels`, shape (height, width, 3)."""
    height, width, _ = pixels.shape
    head = struct.pack(">IIBBBBB", width, height, 8, _TRUECOLOUR, 0, 0, 0)
    data = min((_packed(pixels, kind) for kind in (1, 2)), key=len)
    chunks = (b"IHDR", head), (b"sRGB", _PERCEPTUAL), (b"IDAT", data), (b"IEND", b"")
    return _SIGNATURE + b"".join(_chunk(*chunk) for chunk in chunks)


def _packed(pixels: np.ndarray, filter_type: int) -> bytes:
    """All rows under one filter, compressed: 1 takes the difference to the left, 2 to the row above."""
    axis = {1: 1, 2: 0}[filter_type]
    start = np.zeros_like(np.take(pixels, [0], axis=axis))
    rows = np.diff(pixels, axis=axis, prepend=start).reshape(len(pixels), -1)
    marked = np.insert(rows, 0, filter_type, axis=1)
    return zlib.compress(marked.tobytes(), _LEVEL)


def _chunk(name: bytes, data: bytes) -> bytes:
    return struct.pack(">I", len(data)) + name + data + struct.pack(">I", zlib.crc32(name + data))
