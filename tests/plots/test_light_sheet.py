"""Figures of the light sheet: the same bytes, small, neutral, and a gap where a light has no colour temperature."""

import re
from xml.etree import ElementTree

import pytest

from skychart.charts.light import light_sheet
from skychart.charts.survey import survey
from skychart.config import AirSettings
from skychart.plots.light_sheet import colour_svg, illuminance_svg, ratio_svg
from tests.charts.fake_sky import FakeSky


@pytest.fixture(scope="module")
def sheet():
    """Light of a fake sky at five suns."""
    return light_sheet(survey(FakeSky(AirSettings()), (-8.0, -2.0, 0.0, 10.0, 60.0), "cie-1931-2"))


@pytest.mark.parametrize("draw", [illuminance_svg, colour_svg, ratio_svg])
def test_repeats_is_small_and_neutral(sheet, draw):
    """Drawn twice the same; at most 12 kB of XML without any hue."""
    data = draw(sheet)
    assert data == draw(sheet)
    ElementTree.fromstring(data)
    assert len(data) <= 12_000
    codes = re.findall(r"#([0-9a-f]{6})\b", data.decode("utf-8"))
    assert codes
    assert all(code[:2] == code[2:4] == code[4:] for code in codes)


def test_one_sun_can_be_shown():
    """A single sun, even one in the night, makes figures with scales of positive width."""
    sheet = light_sheet(survey(FakeSky(AirSettings()), (-8.0,), "cie-1931-2"))
    for draw in (illuminance_svg, colour_svg, ratio_svg):
        ElementTree.fromstring(draw(sheet))


def test_every_curve_is_named(sheet):
    """Six planes, and the sun with three lights."""
    text = illuminance_svg(sheet).decode("utf-8")
    names = (
        "Facing the sun",
        "Level, facing up",
        "Wall toward the sun",
        "Wall beside the sun",
        "Underside, facing down",
    )
    assert all(name in text for name in names)
    assert all(name in colour_svg(sheet).decode("utf-8") for name in ("Sun", "Level, sky alone"))
