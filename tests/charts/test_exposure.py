"""Exposures show what they say they show."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from skychart.charts.exposure import FIXED_WHITE_CD_M2, Exposure, exposures, swatches

D65_XYZ = np.array([0.95047, 1.0, 1.08883])


def contrast(first: str, second: str) -> float:
    """Contrast ratio of two sRGB codes (WCAG 2.2)."""
    luminances = []
    for code in (first, second):
        encoded = np.array([int(code[i : i + 2], 16) for i in (1, 3, 5)]) / 255
        linear = np.where(encoded <= 0.04045, encoded / 12.92, ((encoded + 0.055) / 1.055) ** 2.4)
        luminances.append(float(linear @ [0.2126, 0.7152, 0.0722]))
    return (max(luminances) + 0.05) / (min(luminances) + 0.05)


def test_a_grey_mean_sky_equals_the_surround():
    """Metered for the sky, a mean sky of D65 chromaticity has the very code of the panels in the style sheet."""
    sky = 3000 * np.pi * D65_XYZ
    own, _, _ = exposures(sky, sky / np.pi)
    assert swatches(sky[None] / np.pi, own)[0].hex == "#777777"


def test_the_white_card_is_display_white():
    """Balanced for a card, the card is #ffffff whatever the colour of its light."""
    card = np.array([900.0, 1000.0, 1500.0])
    _, balanced, _ = exposures(card, card)
    assert swatches(card[None], balanced)[0].hex == "#ffffff"


def test_the_fixed_scale_does_not_move():
    """Its display white is the same whatever the sky."""
    whites = {exposures(light * D65_XYZ, D65_XYZ)[2].display_white_cd_m2 for light in (0.01, 1e5)}
    assert whites == {FIXED_WHITE_CD_M2}


def test_over_range_keeps_hue():
    """Ten times too bright, a colour keeps the ratio of its linear channels."""
    exposure = Exposure("own", "", 100.0)
    inside, above = exposure.screen(np.array([20.0, 22, 40])), exposure.screen(np.array([2000.0, 2200, 4000]))
    linear = [((channels + 0.055) / 1.055) ** 2.4 for channels in (inside, above)]
    assert above.max() == pytest.approx(1)
    np.testing.assert_allclose(linear[0] / linear[0].max(), linear[1] / linear[1].max(), rtol=1e-3)


def test_a_wide_colour_is_given_to_wide_screens_only_where_needed():
    """BT.2020 green gets a CSS colour beyond sRGB; a grey does not."""
    exposure = Exposure("own", "", 1.0)
    green, grey = swatches(np.array([[0.1446, 0.678, 0.0281], 0.4 * D65_XYZ]), exposure)
    assert green.css.startswith("color(display-p3 ")
    assert grey.css == ""


@given(st.tuples(*[st.floats(0.0, 1e6)] * 3))
def test_ink_reads_on_every_colour(XYZ):
    """Black or white print has a contrast of at least 4.5 on any block."""
    swatch = swatches(np.array([XYZ]), Exposure("own", "", 1000.0))[0]
    assert contrast(swatch.hex, "#000000" if swatch.ink == "dark" else "#ffffff") >= 4.5
