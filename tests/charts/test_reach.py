"""What lies beyond screens: shares of the solid angle, extremes and where they are."""

import dataclasses

import numpy as np
import pytest

from skychart.charts import reach as module
from skychart.charts.aureole import arms
from skychart.charts.dome import light_at
from skychart.charts.reach import AZIMUTH_DEG, ELEVATION_DEG, PEAKS_CD_M2, cell_shares, reach
from skychart.charts.survey import RELATIVE_AZIMUTH_DEG, VIEW_ELEVATION_DEG
from skychart.colour.chromaticity import xyz_of_xy
from skychart.colour.spaces import rgb

from .conftest import SUNS_DEG

TEN = SUNS_DEG.index(10.0)


def test_cells_share_out_the_whole_sky():
    """Their sum is 1; the part above 30° is half, the quarter around the sun's azimuth a quarter, to a grid step."""
    share = cell_shares()
    assert share.sum() == pytest.approx(1, abs=1e-12)
    assert share[ELEVATION_DEG > 30].sum() == pytest.approx(0.5, abs=0.01)
    assert share[:, AZIMUTH_DEG < 45].sum() == pytest.approx(0.25, abs=0.01)


def test_cells_integrate_a_smooth_sky():
    """The mean of sin e · (1 + cos a) over the sky is 1/2: to 1e-4."""
    e, a = np.radians(ELEVATION_DEG)[:, None], np.radians(AZIMUTH_DEG)
    assert (cell_shares() * np.sin(e) * (1 + np.cos(a))).sum() == pytest.approx(0.5, abs=1e-4)


@pytest.fixture
def painted(found):
    """A sky that is deep green below some elevation, grey above, brighter upward; without an aureole."""
    green, grey = xyz_of_xy((0.2, 0.75)), xyz_of_xy((0.3127, 0.3290))
    low = (VIEW_ELEVATION_DEG < 30)[:, None, None]
    level = (100 + 9 * VIEW_ELEVATION_DEG)[:, None, None]
    sky = np.where(low, green, grey) * level * np.ones((1, len(RELATIVE_AZIMUTH_DEG), 1))
    stokes = np.zeros_like(found.stokes_XYZ)
    stokes[:, :, :, 0] = sky
    return dataclasses.replace(
        found, stokes_XYZ=stokes, aureole_XYZ=np.full_like(found.aureole_XYZ, np.nan), beam_XYZ=0 * found.beam_XYZ
    )


def test_a_painted_sky_is_outside_where_it_is_painted(painted):
    """Up to half way between the nodes at 25° and 30°, sin 27.5° of the solid angle: outside sRGB and P3 alone."""
    found = reach(painted, TEN, ("srgb", "display-p3", "bt2020"))
    srgb, p3, bt2020 = found.outside
    assert srgb.share == pytest.approx(np.sin(np.radians(27.5)), abs=0.02)
    assert p3.share == pytest.approx(np.sin(np.radians(27.5)), abs=0.02)
    assert bt2020.share == 0
    assert srgb.beyond_uv > p3.beyond_uv > 0 > bt2020.beyond_uv
    assert srgb.lowest < p3.lowest < 0 < bt2020.lowest
    assert srgb.place.view_elevation_deg < 30


def test_luminances_of_a_painted_sky(painted):
    """From 100 at the horizon to 910 at the zenith: the share above 203 is that above 11.44°, 1 − sin 11.44°."""
    found = reach(painted, TEN, ("srgb",)).luminance
    assert found.darkest_cd_m2 == pytest.approx(100, rel=1e-6)
    assert found.brightest_cd_m2 == pytest.approx(910, rel=1e-6)
    assert found.darkest.view_elevation_deg == 0
    assert found.brightest.view_elevation_deg == 90
    assert found.share_above[1] == pytest.approx(1 - np.sin(np.radians(11.44)), abs=0.02)
    assert found.share_above[2:] == (0, 0, 0)


@pytest.mark.parametrize("sun", range(len(SUNS_DEG)))
def test_shares_and_extremes_are_those_of_a_finer_count(found, sun, monkeypatch):
    """On half the steps shares move by less than 0.01, and no luminance is found outside the range."""
    coarse = reach(found, sun, ("srgb",))
    monkeypatch.setattr(module, "ELEVATION_DEG", np.arange(0, 90.1, 0.5))
    monkeypatch.setattr(module, "AZIMUTH_DEG", np.arange(0, 180.1, 1.0))
    e, a = np.meshgrid(module.ELEVATION_DEG, module.AZIMUTH_DEG, indexing="ij")
    width = np.full(181, 1.0)
    width[[0, -1]] = 0.5
    share = np.diff(np.sin(np.radians(np.clip(np.append(module.ELEVATION_DEG - 0.25, 90), 0, 90))))[:, None] * width
    share /= share.sum()
    XYZ = light_at(found.sky_view(sun), e, a)
    outside = (rgb(XYZ, "srgb").min(axis=-1) < 0) * share
    assert coarse.outside[0].share == pytest.approx(outside.sum(), abs=0.01)
    for peak, above in zip(PEAKS_CD_M2, coarse.luminance.share_above, strict=True):
        assert above == pytest.approx(((XYZ[..., 1] > peak) * share).sum(), abs=0.015)
    assert XYZ[..., 1].max() <= 1.02 * coarse.luminance.brightest_cd_m2
    assert XYZ[..., 1].min() >= 0.98 * coarse.luminance.darkest_cd_m2


def test_the_brightest_place_is_looked_for_at_the_sun_too(found):
    """An aureole much brighter than the sky is found where it is, between the directions of the count."""
    aureole = found.aureole_XYZ.copy()
    aureole[TEN, :, :5] *= 40
    lit = dataclasses.replace(found, aureole_XYZ=aureole)
    view, _ = arms(float(found.apparent_elevation_deg[TEN]))
    brightest = reach(lit, TEN, ("srgb",)).luminance
    assert brightest.brightest_cd_m2 > 20 * reach(found, TEN, ("srgb",)).luminance.brightest_cd_m2
    assert np.abs(view[:, :5] - brightest.brightest.view_elevation_deg).min() < 1e-9
