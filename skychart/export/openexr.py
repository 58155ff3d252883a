"""Scene-linear pictures as OpenEXR, through the reference library, which is an extra of this package.

Source: OpenEXR project, Technical Introduction to OpenEXR and Standard Attributes (openexr.com, version 3.4):
`chromaticities` (CIE xy of the primaries and of the white), `whiteLuminance` (luminance of the pixel 1, 1, 1),
`colorInteropID`, `envmap`, `comments`.
"""

from collections.abc import Mapping
from types import ModuleType
from typing import Any

import numpy as np

from skychart.colour.spaces import chromaticities
from skychart.errors import InputError, OutputError
from skychart.export.files import bytes_written

HOW_TO_GET_IT = "pip install 'sky-colour-charts[exr]'"
HALF_MAX = 65504.0
"""Largest number of 16 bits (IEEE 754 binary16)."""

_INTEROP_IDS = {
    "srgb": "lin_rec709_scene",
    "display-p3": "lin_p3d65_scene",
    "bt2020": "lin_rec2020_scene",
    "acescg": "lin_ap1_scene",
}


def openexr() -> ModuleType:
    """The library, imported late; OutputError that says how to get it where it is not installed."""
    try:
        import OpenEXR
    except ImportError:
        raise OutputError(f"OpenEXR is not installed; get it with: {HOW_TO_GET_IT}") from None
    return OpenEXR


def has_openexr() -> bool:
    """Whether OpenEXR files can be written here."""
    try:
        openexr()
    except OutputError:
        return False
    return True


def exr_bytes(
    pixels: np.ndarray, space: str, white_luminance_cd_m2: float, attributes: Mapping[str, Any], half: bool = False
) -> bytes:
    """A file of `pixels`, shape (height, width, RGB), linear in `space`, whose 1, 1, 1 is `white_luminance_cd_m2`.

    `attributes` are those beside the ones that every file gets. `half` keeps 16 bits a channel instead of 32. Raises
    OutputError without the library, InputError for a number that 16 bits cannot hold.
    """
    library = openexr()
    largest = max(float(pixels.max()), -float(pixels.min()))
    if half and largest > HALF_MAX:
        raise InputError(f"largest component is {largest:g}, accepted in 16 bits is up to {HALF_MAX:g}")
    header = {
        "compression": library.ZIP_COMPRESSION,
        "type": library.scanlineimage,
        "chromaticities": tuple(float(value) for value in chromaticities(space).ravel()),
        "whiteLuminance": float(white_luminance_cd_m2),
        "colorInteropID": _INTEROP_IDS[space],
        **attributes,
    }
    channels = {"RGB": np.ascontiguousarray(pixels, dtype=np.float16 if half else np.float32)}
    return bytes_written(library.File(header, channels).write, ".exr")
