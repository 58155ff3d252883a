"""Everything the charts say about a colour, for one or many colours at once."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from skychart.colour import chromaticity, spaces
from skychart.colour.dominant import dominant_wavelength
from skychart.colour.observers import D65_XY
from skychart.colour.temperature import cct_duv
from skychart.errors import InputError

REFLECTED_LIGHT_CONSTANT = 12.5  # cd s/(m² ISO): K of ISO 2720:1974, as most meters are set


@dataclass(frozen=True, eq=False)
class Colours:
    """Colours in all descriptions, over any leading shape (...); a single colour has the shape ().

    `XYZ` [cd/m²], shape (..., 3); `luminance_cd_m2` is its Y. `xy` and `uv_prime`, shape (..., 2): CIE 1931 and 1976
    chromaticity. `cct_k` [K] and `duv`: nan where the notion has no meaning (see `temperature.cct_duv`).
    `dominant_wavelength_nm` [nm], negative for the complement of a purple, and `excitation_purity`, 0 to 1, against
    D65. `rgb`: space to linear components on the scale of Y, shape (..., 3), not clipped. `in_gamut`: space to whether
    no component is negative. `ev100`: exposure value at ISO 100 that a reflected-light meter reads, nan in the dark.
    `srgb_hex`: text of shape (...), exposed so that the display white is #ffffff.
    """

    XYZ: np.ndarray
    luminance_cd_m2: np.ndarray
    xy: np.ndarray
    uv_prime: np.ndarray
    cct_k: np.ndarray
    duv: np.ndarray
    dominant_wavelength_nm: np.ndarray
    excitation_purity: np.ndarray
    rgb: dict[str, np.ndarray]
    in_gamut: dict[str, np.ndarray]
    ev100: np.ndarray
    srgb_hex: np.ndarray


def describe(XYZ: ArrayLike, display_white_cd_m2: ArrayLike, observer: str = "cie-1931-2") -> Colours:
    """All descriptions of tristimulus values [cd/m²] of shape (..., 3), unadapted.

    `display_white_cd_m2` [cd/m²], above 0, broadcasting to (...): the luminance that `srgb_hex` shows as white.
    `observer`: the one that `XYZ` belongs to; the spectral and the Planckian locus are taken for it, while the RGB
    spaces are defined for CIE 1931 and take the values as they are.
    Raises InputError if a tristimulus value is not finite, for another display white or an unknown observer.
    """
    values = np.asarray(XYZ, dtype=float)
    if values.ndim == 0 or values.shape[-1] != 3:
        raise InputError(f"tristimulus values have shape {values.shape}, accepted is (..., 3)")
    if not np.all(np.isfinite(values)):
        raise InputError(f"tristimulus values contain {values[~np.isfinite(values)][0]}, accepted are finite numbers")
    luminance = values[..., 1]
    xy = chromaticity.xy(values)
    cct_k, duv = cct_duv(values, observer)
    dominant_nm, purity = dominant_wavelength(xy, D65_XY, observer)
    rgb = {space: spaces.rgb(values, space) for space in spaces.SPACES}
    return Colours(
        XYZ=values,
        luminance_cd_m2=luminance,
        xy=xy,
        uv_prime=chromaticity.uv_prime(values),
        cct_k=cct_k,
        duv=duv,
        dominant_wavelength_nm=dominant_nm,
        excitation_purity=purity,
        rgb=rgb,
        in_gamut={space: spaces.in_gamut(linear) for space, linear in rgb.items()},
        ev100=ev100(luminance),
        srgb_hex=spaces.srgb_hex(values, display_white_cd_m2),
    )


def ev100(luminance_cd_m2: ArrayLike) -> np.ndarray:
    """Exposure value at ISO 100 of a luminance [cd/m²], same shape: log2(100 L / 12.5); nan unless L is above 0."""
    luminance = np.asarray(luminance_cd_m2, dtype=float)
    lit = luminance > 0
    stops = np.log2(np.where(lit, luminance, 1)) + np.log2(100 / REFLECTED_LIGHT_CONSTANT)
    return np.where(lit, stops, np.nan)
