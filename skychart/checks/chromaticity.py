"""Chromaticity of scattered light and of daylight on the horizontal, and colour temperatures of known whites.

Sources: Judd, MacAdam & Wyszecki 1964 (daylight locus), CIE 015 (daylight illuminants), Chain, Dumortier & Fontoynont
1999 (colour temperature of clear sky), and limits that follow from formulas.
"""

import functools

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skychart.checks.check import Check
from skychart.checks.standard import StandardSky
from skychart.colour.chromaticity import xyz_of_xy
from skychart.colour.differences import uv_prime
from skychart.colour.integrate import tristimulus_matrix
from skychart.colour.observers import colour_matching_functions
from skychart.colour.temperature import cct_duv
from skychart.data.tables import load_table
from skychart.sky.air import rayleigh_cross_section

TOPIC = "Chromaticity"

_NODES_NM = np.arange(360.0, 831.0, 10.0)
_SUNS_DEG = (60, 50, 40, 30, 20, 10)
_TEMPERATURE_SUNS_DEG = (60, 30)
_LOCUS_X = np.arange(0.25, 0.38235, 1e-5)  # of the daylight illuminants, 25 000 to 4000 K
_LOCUS_TOLERANCE = 0.006
_WHITES = (  # key, chromaticity, published temperature, relative tolerance, its reason, source
    ("illuminant-a", (0.44758, 0.40745), 2856.0, 5e-4, "chromaticity of five decimals",
     "CIE illuminant A: 2856 K by definition"),
    ("daylight-5000", (0.34574, 0.35867), 5000.0, 2e-3, "the locus is a fit; chromaticity of five decimals",
     "CIE daylight locus at 5000 K (CIE 015; values confirmed in a second package)"),
    ("daylight-6500", (0.31278, 0.32918), 6500.0, 2e-3, "the locus is a fit; chromaticity of five decimals",
     "CIE daylight locus at 6500 K (CIE 015)"),
    ("daylight-10000", (0.27880, 0.29197), 10000.0, 2e-3, "the locus is a fit; chromaticity of five decimals",
     "CIE daylight locus at 10 000 K (CIE 015; values confirmed in a second package)"),
    ("blue", (0.25, 0.25), 28793.0, 1e-3, "another interpolation of the same locus",
     "Ohno 2013 method (regression value derived here with colour-science 0.4.7)"),
)  # fmt: skip


def checks() -> tuple[Check, ...]:
    """Limits of scattered light, and colour temperatures."""
    return (*_scattered_limits(), *_temperatures())


def clear_checks(clear: StandardSky) -> tuple[Check, ...]:
    """Daylight on the horizontal under air called clear."""
    XYZ = clear.horizontal_XYZ(np.array(_SUNS_DEG, dtype=float))
    cct = dict(zip(_SUNS_DEG, cct_duv(XYZ)[0], strict=True))
    locus = [
        Check(
            key=f"daylight-locus-{sun}",
            topic=TOPIC,
            quantity="Distance in u′v′ of daylight on the horizontal from the daylight locus",
            conditions=f"sun {sun}° up, sun and sky in air called clear",
            source="Judd, MacAdam & Wyszecki 1964, J. Opt. Soc. Am. 54, 1031, daylight locus (abstract read)",
            published=0.0,
            computed=float(distance),
            tolerance=_LOCUS_TOLERANCE,
            tolerance_reason="the source states no spread; 0.006 was set before it was measured",
            unit="1",
            relative=False,
        )
        for sun, distance in zip(_SUNS_DEG, locus_distance(XYZ), strict=True)
    ]
    temperature = [
        Check(
            key=f"daylight-temperature-{sun}",
            topic=TOPIC,
            quantity="Correlated colour temperature of daylight on the horizontal",
            conditions=f"sun {sun}° up, sun and sky in air called clear",
            source="common knowledge: 5500 to 6500 K by day (from memory, no source)",
            published=6000.0,
            computed=float(cct[sun]),
            tolerance=500.0,
            tolerance_reason="the stated range",
            unit="K",
            relative=False,
        )
        for sun in _TEMPERATURE_SUNS_DEG
    ]
    return (*locus, *temperature)


def daylight_locus_y(x: ArrayLike) -> NDArray[np.float64]:
    """Chromaticity y of the daylight locus at x (Judd, MacAdam & Wyszecki 1964)."""
    x = np.asarray(x, dtype=float)
    return 2.870 * x - 3.000 * x**2 - 0.275


def chain1999_temperature(luminance_cd_m2: ArrayLike) -> NDArray[np.float64]:
    """Correlated colour temperature [K] of a piece of clear sky of a luminance [cd/m²]; nan where the fit has none."""
    columns = load_table("checks/published_sky_temperature_chain1999").columns
    reciprocal = columns["offset"][0] + columns["slope"][0] * np.log10(np.asarray(luminance_cd_m2, dtype=float))
    return 1e6 / np.where(reciprocal > 0, reciprocal, np.nan)


def _scattered_limits() -> list[Check]:
    wavelength_nm, functions = colour_matching_functions("cie-1931-2")
    matrix = tristimulus_matrix(_NODES_NM)
    digits = "five printed digits, sums over 1 nm"
    another_sun = "0.0020: the solar spectrum, which moves x of the sun itself by 0.0019 and y by 0.0005"
    air = rayleigh_cross_section(_NODES_NM) @ matrix
    limits = (
        ("equal-energy", "equal-energy light scattered as λ⁻⁴", wavelength_nm**-4.0 @ functions, (0.23988, 0.23404),
         "exact identity: a black body of infinite temperature (derived here)", 5e-5, digits),
        ("sun-air", "sunlight scattered once by thin air", air, (0.23280, 0.23156),
         "ASTM E490 sun, cross-section of Bodhaine et al. 1999 equation 29 (derived here)", 0.0020, another_sun),
    )  # fmt: skip
    return [
        Check(
            key=f"chromaticity-{key}-{axis}",
            topic=TOPIC,
            quantity=f"Chromaticity {axis} of scattered light",
            conditions=conditions,
            source=source,
            published=published[place],
            computed=float(XYZ[place] / XYZ.sum()),
            tolerance=tolerance,
            tolerance_reason=reason,
            unit="1",
            relative=False,
        )
        for key, conditions, XYZ, published, source, tolerance, reason in limits
        for place, axis in enumerate("xy")
    ]


def locus_distance(XYZ: ArrayLike) -> NDArray[np.float64]:
    """Distance in u'v' from the daylight locus between 4000 and 25 000 K, shape (..., 3) to (...)."""
    locus = uv_prime(xyz_of_xy(np.stack([_LOCUS_X, daylight_locus_y(_LOCUS_X)], axis=-1)))
    apart = uv_prime(np.asarray(XYZ, dtype=float))[..., None, :] - locus
    return np.asarray(np.hypot(apart[..., 0], apart[..., 1]).min(axis=-1))


def _temperatures() -> list[Check]:
    entry = functools.partial(
        Check, topic=TOPIC, quantity="Correlated colour temperature", unit="K", relative=True
    )  # fmt: skip
    return [
        entry(
            key=f"temperature-{key}",
            conditions=f"x {xy[0]}, y {xy[1]}",
            source=source,
            published=published,
            computed=float(cct_duv(xyz_of_xy(np.array(xy)))[0]),
            tolerance=tolerance,
            tolerance_reason=reason,
        )
        for key, xy, published, tolerance, reason, source in _WHITES
    ]
