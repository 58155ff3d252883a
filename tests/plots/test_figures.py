"""Figures say the same on every run, are small, and carry no colour of their own."""

import re
from xml.etree import ElementTree

import numpy as np
import pytest

from skychart.charts.curves import Chromaticities
from skychart.charts.direction import direction_sheet
from skychart.charts.sheet import elevation_sheet
from skychart.charts.survey import DIRECTIONS, survey
from skychart.config import AirSettings
from skychart.plots.chromaticity import chromaticity_svg
from skychart.plots.course import course_svg
from skychart.plots.frame import Box, Panel, Scale, figure_svg, log_scale
from skychart.plots.polarisation import fisheye, polarisation_svg
from skychart.plots.principal_plane import principal_plane_svg
from skychart.plots.spectra import spectra_svg
from tests.charts.fake_sky import FakeSky


@pytest.fixture(scope="module")
def found():
    """A fake sky at three suns."""
    return survey(FakeSky(AirSettings()), (-6.0, 5.0, 60.0), "cie-1931-2")


@pytest.fixture(scope="module")
def drawings(found):
    """Every kind of figure as a function that draws it anew."""
    sheet, course = elevation_sheet(found, 1), direction_sheet(found, DIRECTIONS[1])
    return {
        "spectra": lambda: spectra_svg(sheet.spectra),
        "chromaticity": lambda: chromaticity_svg(sheet.chromaticities),
        "plane": lambda: principal_plane_svg(sheet.principal_plane),
        "polarisation": lambda: polarisation_svg(sheet.polarisation),
        "course": lambda: course_svg(course.course),
        "track": lambda: chromaticity_svg(course.chromaticities),
    }


KINDS = ("spectra", "chromaticity", "plane", "polarisation", "course", "track")


@pytest.mark.parametrize("kind", KINDS)
def test_bytes_repeat(drawings, kind):
    """Drawn twice, a figure has the same bytes."""
    assert drawings[kind]() == drawings[kind]()


@pytest.mark.parametrize("kind", KINDS)
def test_is_small_well_formed_and_undated(drawings, kind):
    """At most 15 kB of XML, whose references all resolve, without a date or a maker."""
    data = drawings[kind]()
    text = data.decode("utf-8")
    ElementTree.fromstring(text)
    assert len(data) <= 15_000
    assert "metadata" not in text
    assert not re.search(r"\b20\d\d-\d\d-\d\d\b", text)
    ids = re.findall(r' id="([^"]+)"', text)
    assert len(ids) == len(set(ids))
    assert set(re.findall(r"#(i\d+)", text)) <= set(ids)


@pytest.mark.parametrize("kind", ["spectra", "plane", "polarisation", "course"])
def test_frame_has_no_hue(drawings, kind):
    """Every colour of a figure without swatches is a neutral grey."""
    codes = re.findall(r"#([0-9a-f]{6})\b", drawings[kind]().decode("utf-8"))
    assert codes
    assert all(code[:2] == code[2:4] == code[4:] for code in codes)


def test_written_numbers_keep_their_digits(drawings):
    """Rounding shortens coordinates, never the labels of a scale."""
    text = drawings["spectra"]().decode("utf-8")
    assert ">0.03<" in text


def test_dots_have_the_colours_of_the_blocks(found):
    """The diagram shows each block in its own colour."""
    chart = elevation_sheet(found, 2).chromaticities
    text = chromaticity_svg(chart).decode("utf-8")
    assert all(code in text for code in chart.sky_hex)


def test_marks_on_the_edge_are_whole_and_those_beyond_are_left_out():
    """Of five marks the middle three lie within the scales, two of them on an edge, and none is cut by the box."""
    scale = Scale(-10.0, 10.0, (), (), "")

    def draw(figure):
        places = np.array([-10.5, -10, 0, 10, 10.5])
        Panel(figure, Box(0.5, 0.5, 2, 2), scale, scale).marks(places, places, "o", markersize=3)

    text = figure_svg((3, 3), draw).decode("utf-8")
    assert text.count("<use ") == 3
    assert not re.search(r"<use [^>]*clip-path|<g clip-path", text)


def test_one_colour_alone_can_be_shown():
    """A diagram of a single point has scales of positive width."""
    point = Chromaticities(np.array([[0.2, 0.45]]), ("#808080",), None)
    ElementTree.fromstring(chromaticity_svg(point))


def test_electric_vectors_stand_across_the_scattering_plane(found):
    """Singly scattered, E is perpendicular to sun and view; the ticks' angles say so in the observer's own frame."""
    chart = elevation_sheet(found, 1).polarisation
    sun = np.radians(5.0)
    for elevation, azimuth, degree, angle in chart.ticks:
        if degree < 0.05:
            continue
        e, a, tilt = np.radians([elevation, azimuth, angle])
        right = np.array([-np.sin(a), np.cos(a), 0])
        up = np.array([-np.sin(e) * np.cos(a), -np.sin(e) * np.sin(a), np.cos(e)])
        vector = np.cos(tilt) * right + np.sin(tilt) * up
        toward_sun = np.array([np.cos(sun), 0, np.sin(sun)])
        assert abs(vector @ toward_sun) < 1e-6


def test_fisheye_places():
    """Zenith in the middle, the sun's azimuth at the bottom, the side beyond 90° on top."""
    np.testing.assert_allclose(fisheye(90.0, 33.0), (0, 0), atol=1e-12)
    np.testing.assert_allclose(fisheye(0.0, 0.0), (0, -1), atol=1e-12)
    np.testing.assert_allclose(fisheye(45.0, 180.0), (0, 0.5), atol=1e-12)
    np.testing.assert_allclose(fisheye(0.0, 90.0), (1, 0), atol=1e-12)


def test_log_scale_holds_its_values():
    """Whole decades, labelled at most so often, spelled without powers near one."""
    scale = log_scale(np.array([0.004, 30000.0]), "", most=4)
    assert (scale.low, scale.high) == pytest.approx((0.001, 100000))
    assert len(scale.ticks) <= 4
    assert scale.labels[0] == "0.001"
    flat = log_scale(np.array([100.0]), "")
    assert flat.high > flat.low
