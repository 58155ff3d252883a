"""Which luminance a page shows as display white, and colours as a screen takes them.

Out of a screen's gamut there is no right answer, only a stated one: negative channels go to 0, and a colour
brighter than display white is scaled down whole, which keeps its hue.
"""

from dataclasses import dataclass

import numpy as np

from skychart.colour.adapt import balance
from skychart.colour.spaces import encode_srgb, rgb

FIXED_WHITE_CD_M2 = 10_000.0
SURROUND_FACTOR = 0.1842
"""Luminance factor of CIE L* 50, the grey around every colour (CIE 15:2018, equation 8.3)."""

INK_THRESHOLD = 0.179
"""Relative luminance above which black reads better than white (WCAG 2.2, contrast ratio)."""


@dataclass(frozen=True)
class Swatch:
    """A colour as the page shows it: sRGB code, a CSS colour where sRGB is too small, and the ink that reads on it."""

    hex: str
    css: str
    ink: str


@dataclass(frozen=True)
class Exposure:
    """A way of showing a sky: `white_XYZ` is None where colours stay unadapted against D65."""

    key: str
    title: str
    display_white_cd_m2: float
    white_XYZ: np.ndarray | None = None

    def screen(self, XYZ: np.ndarray, space: str = "srgb") -> np.ndarray:
        """Encoded channels in 0..1 of absolute `XYZ` [cd m⁻²], shape (..., 3), on a `space` screen."""
        linear = np.clip(rgb(self._seen(XYZ), space) / self.display_white_cd_m2, 0.0, None)
        return encode_srgb(linear / np.maximum(linear.max(axis=-1, keepdims=True), 1.0))

    def over_range(self, XYZ: np.ndarray) -> np.ndarray:
        """Whether a colour is brighter than an sRGB screen at this exposure can show, shape (...)."""
        return rgb(self._seen(XYZ), "srgb").max(axis=-1) > self.display_white_cd_m2

    def inside_srgb(self, XYZ: np.ndarray) -> np.ndarray:
        """Whether a colour's chromaticity lies inside sRGB, shape (...)."""
        return rgb(self._seen(XYZ), "srgb").min(axis=-1) >= 0

    def _seen(self, XYZ: np.ndarray) -> np.ndarray:
        return XYZ if self.white_XYZ is None else balance(XYZ, self.white_XYZ)


def exposures(sky_XYZ: np.ndarray, card_XYZ: np.ndarray) -> tuple[Exposure, Exposure, Exposure]:
    """The three renderings of a sky: metered for itself, for a white card in it, and on the fixed scale.

    `sky_XYZ` is the sky's illuminance on the level ground [lx], `card_XYZ` the luminance [cd m⁻²] of a level,
    perfectly white card; both shape (3,). Metered for itself, the mean sky (the sky's share of that card) is
    as bright as the grey surround.
    """
    own_white = float(sky_XYZ[1]) / np.pi / SURROUND_FACTOR
    return (
        Exposure("own", "Metered for the sky", own_white),
        Exposure("card", "Metered and balanced for a white card", float(card_XYZ[1]), card_XYZ),
        Exposure("fixed", "Fixed scale", FIXED_WHITE_CD_M2),
    )


def swatches(XYZ: np.ndarray, exposure: Exposure) -> tuple[Swatch, ...]:
    """Swatches of `XYZ`, shape (n, 3)."""
    bytes_srgb = np.rint(exposure.screen(XYZ) * 255).astype(int)
    wide = exposure.screen(XYZ, "display-p3")
    beyond = ~exposure.inside_srgb(XYZ)
    luminance = _relative_luminance(bytes_srgb / 255)
    return tuple(
        Swatch(
            hex="#{:02x}{:02x}{:02x}".format(*code),
            css="color(display-p3 {:.3f} {:.3f} {:.3f})".format(*channels).replace(" 0.", " .") if more else "",
            ink="dark" if bright > INK_THRESHOLD else "light",
        )
        for code, channels, more, bright in zip(bytes_srgb, wide, beyond, luminance, strict=True)
    )


def _relative_luminance(encoded: np.ndarray) -> np.ndarray:
    """Relative luminance of encoded sRGB as WCAG 2.2 defines it."""
    linear = np.where(encoded <= 0.04045, encoded / 12.92, ((encoded + 0.055) / 1.055) ** 2.4)
    return linear @ np.array([0.2126, 0.7152, 0.0722])
