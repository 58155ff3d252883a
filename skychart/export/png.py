"""PNG without chance: no clock, no program name, the same bytes from the same pixels.

Source: ISO/IEC 15948, Portable Network Graphics (2nd and 3rd edition): chunks, filter types 1 and 2; of the 3rd
edition (W3C Recommendation, 2025) section 11.3.2.6, cICP, whose four numbers are code points of ITU-T H.273.
"""

import struct
import zlib
from collections.abc import Mapping

import numpy as np

_SIGNATURE = b"\x89PNG\r\n\x1a\n"
_TRUECOLOUR = 2
_PERCEPTUAL = b"\0"
SRGB_CHUNK = b"sRGB", _PERCEPTUAL
BT2100_PQ_CHUNK = b"cICP", bytes((9, 16, 0, 1))
"""Primaries of BT.2020, curve of SMPTE ST 2084, RGB, full range."""

_LEVEL = 7  # 9 takes four times as long for 2 % fewer bytes


def srgb_png(pixels: np.ndarray) -> bytes:
    """An sRGB picture of 8-bit `pixels`, shape (height, width, 3)."""
    height, width, _ = pixels.shape
    head = struct.pack(">IIBBBBB", width, height, 8, _TRUECOLOUR, 0, 0, 0)
    data = min((_packed(pixels, kind) for kind in (1, 2)), key=len)
    chunks = (b"IHDR", head), (b"sRGB", _PERCEPTUAL), (b"IDAT", data), (b"IEND", b"")
    return _SIGNATURE + b"".join(_chunk(*chunk) for chunk in chunks)


def ramp_png(row: np.ndarray, height: int, colour: tuple[bytes, bytes], texts: Mapping[str, str]) -> bytes:
    """A picture of 16 bits a channel whose `height` rows are all `row`, unsigned numbers of shape (width, 3).

    `colour`: `SRGB_CHUNK` or `BT2100_PQ_CHUNK`, what the numbers mean. `texts`: ASCII, by keyword.
    """
    first = np.ascontiguousarray(row, dtype=">u2").view(np.uint8)
    left = np.concatenate([np.zeros_like(first[:1]), first[:-1]])
    data = b"\1" + (first - left).tobytes() + (height - 1) * (b"\2" + bytes(first.size))
    head = struct.pack(">IIBBBBB", len(row), height, 16, _TRUECOLOUR, 0, 0, 0)
    words = [(b"tEXt", f"{keyword}\0{text}".encode("ascii")) for keyword, text in texts.items()]
    chunks = (b"IHDR", head), colour, *words, (b"IDAT", zlib.compress(data, 9)), (b"IEND", b"")
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
