"""Standard colour formulas as this package uses them, against published examples.

Sources: IEC 61966-2-1, SMPTE EG 432-1, ITU-R BT.2020, SMPTE ST 2084, ITU-R BT.2124, Sharma, Wu & Dalal 2005, CIE 1931.
"""

from collections.abc import Iterable

import numpy as np

from skychart.checks.check import Check
from skychart.colour.chromaticity import xyz_of_xy
from skychart.colour.differences import delta_e_2000, delta_e_itp
from skychart.colour.observers import D65_XY, colour_matching_functions
from skychart.colour.spaces import encode_srgb, rgb
from skychart.library import colour_science

TOPIC = "Colour formulas"

_READ = "(example read as a regression value of colour-science 0.4.7)"
_SRGB = {0.0031308: 0.040450, 0.18: 0.461356, 0.5: 0.735357}
_RED_LUMINANCE = {
    "srgb": ("sRGB", 0.2126390059, "IEC 61966-2-1"),
    "display-p3": ("Display P3", 0.2289745641, "SMPTE EG 432-1"),
    "bt2020": ("BT.2020", 0.2627002120, "ITU-R BT.2020"),
}
_PQ = {1: 0.149946, 100: 0.508078, 1000: 0.751827, 4000: 0.902572}
_CIEDE2000 = (
    ((50.0, 2.6772, -79.7751), (50.0, 0.0, -82.7485), 2.0425),
    ((50.0, 2.5, 0.0), (73.0, 25.0, -18.0), 27.1492),
    ((22.7233, 20.0904, -46.6940), (23.0331, 14.9730, -42.5619), 2.0373),
    ((2.0776, 0.0795, -1.1350), (0.9033, -0.0636, -0.5514), 0.9082),
)
_ITP = ((0.4885468072, -0.04739350675, 0.07475401302), (0.4899203231, -0.04567508203, 0.07361341775), 1.42657228)
_CMF = {("z", 450): 1.77211, ("y", 450): 0.0380, ("x", 555): 0.5120501, ("y", 600): 0.6310}


def checks() -> tuple[Check, ...]:
    """Observer, colour spaces, transfer functions, colour differences."""
    return tuple(_check(*row) for row in (*_observer(), *_spaces(), *_transfer(), *_differences()))


Row = tuple[str, str, str, str, float, float, float, str]


def _check(
    key: str,
    quantity: str,
    conditions: str,
    source: str,
    published: float,
    computed: float,
    tolerance: float,
    reason: str,
) -> Check:
    return Check(
        key, TOPIC, quantity, conditions, source, float(published), float(computed), tolerance, reason, "1", False
    )


def _observer() -> Iterable[Row]:
    wavelength_nm, functions = colour_matching_functions("cie-1931-2")
    for (axis, nm), published in _CMF.items():
        yield (
            f"cie1931-{axis}-{nm}", f"Colour-matching function {axis}̄", f"CIE 1931, {nm} nm",
            "CIE 015 (machine-readable copy, cross-checked)",
            published, float(functions[wavelength_nm == nm, "xyz".index(axis)][0]), 5e-7, "printed digits",
        )  # fmt: skip


def _spaces() -> Iterable[Row]:
    for space, (title, published, source) in _RED_LUMINANCE.items():
        to_xyz = np.linalg.inv(rgb(np.eye(3), space).T)
        yield (
            f"red-luminance-{space}", "Luminance of full red over that of white", title, f"{source} {_READ}",
            published, to_xyz[1, 0], 5e-6, "whites of four decimals fix five digits",
        )  # fmt: skip


def _transfer() -> Iterable[Row]:
    for linear, published in _SRGB.items():
        yield (
            f"srgb-{linear:g}", "sRGB signal", f"linear {linear:g}", f"IEC 61966-2-1 {_READ}",
            published, float(encode_srgb(linear)), 5e-7, "six printed decimals",
        )  # fmt: skip
    for luminance, published in _PQ.items():
        yield (
            f"pq-{luminance}", "PQ signal", f"{luminance} cd/m²", f"SMPTE ST 2084 {_READ}",
            published, float(colour_science().models.eotf_inverse_ST2084(luminance)), 5e-7, "six printed decimals",
        )  # fmt: skip


def _differences() -> Iterable[Row]:
    colour = colour_science()
    white = xyz_of_xy(D65_XY)
    for number, (*pair, published) in enumerate(_CIEDE2000, 1):
        first, second = (colour.Lab_to_XYZ(Lab, illuminant=D65_XY) for Lab in pair)
        yield (
            f"ciede2000-{number}", "Colour difference CIEDE2000", f"L*a*b* {pair[0]} and {pair[1]}",
            "Sharma, Wu & Dalal 2005, Color Res. Appl. 30, 21 (machine-readable copy)",
            published, float(delta_e_2000(first, second, white)), 5e-5, "four printed decimals",
        )  # fmt: skip
    *pair, published = _ITP
    to_xyz = np.linalg.inv(rgb(np.eye(3), "bt2020").T)
    first, second = (to_xyz @ colour.ICtCp_to_RGB(ICtCp, method="ITU-R BT.2100-2 PQ") for ICtCp in pair)
    yield (
        "delta-e-itp", "Colour difference ΔE_ITP", f"ICtCp {pair[0]} and {pair[1]}",
        "ITU-R BT.2124 (example of colour-science 0.4.7, checked by hand)",
        published, float(delta_e_itp(first, second)), 5e-8, "eight printed decimals",
    )  # fmt: skip
