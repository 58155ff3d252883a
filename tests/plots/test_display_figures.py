"""Figures of the display page: repeatable, small, neutral, and with the lines they promise."""

import dataclasses
import re
from xml.etree import ElementTree

import numpy as np
import pytest

from skychart.charts.display import display_sheet
from skychart.charts.survey import survey
from skychart.config import AirSettings
from skychart.plots.display import bits_svg, gamut_svg, luminance_svg, steps_svg
from tests.charts.fake_sky import FakeSky

DRAWINGS = {"gamut": gamut_svg, "luminance": luminance_svg, "bits": bits_svg, "steps": steps_svg}


@pytest.fixture(scope="module")
def chart():
    """A fake sky at three suns."""
    return display_sheet(survey(FakeSky(AirSettings()), (-6.0, 5.0, 60.0), "cie-1931-2"))


@pytest.mark.parametrize("kind", DRAWINGS)
def test_bytes_repeat_and_are_small_neutral_xml(chart, kind):
    """Twice the same, at most 15 kB, well formed, R = G = B."""
    data = DRAWINGS[kind](chart)
    assert data == DRAWINGS[kind](chart)
    assert len(data) <= 15_000
    text = data.decode("utf-8")
    ElementTree.fromstring(text)
    codes = re.findall(r"#([0-9a-f]{6})\b", text)
    assert codes
    assert all(code[:2] == code[2:4] == code[4:] for code in codes)


def test_peaks_and_codings_are_named(chart):
    """Each line that is drawn has its name or number in the figure."""
    assert all(f">{peak}<" in luminance_svg(chart).decode() for peak in ("100", "203", "1000", "4000", "10\u2009000"))
    for draw in (bits_svg, steps_svg):
        assert all(f">{title}<" in draw(chart).decode() for title in ("sRGB", "BT.1886", "PQ", "HLG"))
    assert all(f">{title}<" in gamut_svg(chart).decode() for title in ("sRGB", "Display P3", "BT.2020"))


def test_depths_that_do_not_suffice_leave_a_gap(chart):
    """Where 16 bits are not enough the figure is drawn without that place."""
    bandings = tuple(dataclasses.replace(found, least_bits=None) for found in chart.coded[0].bandings)
    missing = dataclasses.replace(
        chart, coded=(dataclasses.replace(chart.coded[0], bandings=bandings), *chart.coded[1:])
    )
    assert np.isnan(missing.least_bits(chart.coded[0].coding)).all()
    ElementTree.fromstring(bits_svg(missing))


def test_a_single_sun_can_be_shown():
    """Scales of positive width."""
    one = display_sheet(survey(FakeSky(AirSettings()), (20.0,), "cie-1931-2"))
    for draw in DRAWINGS.values():
        ElementTree.fromstring(draw(one))
