"""The light sheet: parts add up, ratios and exposures follow, the shadow side is bluer, the disc has its luminance."""

import numpy as np
import pytest

from skychart.charts.light import AWAY, BOTH, FACING, SHADOW, SUN, UNDERSIDE, light_sheet
from skychart.charts.light_box import light_box
from skychart.charts.planes import LEVEL, PLANES
from skychart.charts.survey import survey
from skychart.colour.spaces import SPACES, rgb
from skychart.config import AirSettings
from skychart.plots.light_sheet import illuminance_svg
from skychart.sky.sun import SOLAR_DISC_SOLID_ANGLE_SR

from .conftest import SUNS_DEG
from .fake_sky import FakeSky

SUNS_SOLVED_DEG = (-6.0, 0.0, 10.0, 30.0, 60.0)
TOWARD = [plane.key for plane in PLANES].index("toward")


@pytest.fixture(scope="module")
def fake(found):
    """Light under the fake sky."""
    return light_sheet(found)


@pytest.fixture(scope="module")
def molecular(default_sky):
    """A survey of the solved molecular sky, and its light sheet."""
    asked = survey(default_sky, SUNS_SOLVED_DEG, "cie-1931-2")
    return asked, light_sheet(asked)


def test_parts_add_up(fake):
    """Sun, and sky and ground, make both, in XYZ and in every space; RGB is that of the illuminance."""
    for light in fake.suns:
        np.testing.assert_allclose(light.XYZ[:, SUN] + light.XYZ[:, SHADOW], light.XYZ[:, BOTH], rtol=1e-12)
        for space in SPACES:
            np.testing.assert_allclose(light.rgb[space], rgb(light.XYZ, space))
            assert light.coefficients[space].shape == (9, 3)


def test_colour_times_strength_is_the_sun(fake):
    """The beam's RGB, in every space, and luminance 1 of the colour itself."""
    for light in fake.suns:
        if light.beam.illuminance_lx > 0:
            for space in SPACES:
                lit = light.beam.colour[space] * light.beam.illuminance_lx
                np.testing.assert_allclose(lit, light.rgb[space][FACING, SUN], rtol=1e-9)
            assert light.beam.colour["srgb"] @ [0.2126, 0.7152, 0.0722] == pytest.approx(1, abs=2e-4)


def test_a_hidden_sun_has_no_numbers(fake):
    """nan for the beam, 0 on the planes, no ratio between lit and shadow."""
    night = fake.suns[SUNS_DEG.index(-8.0)]
    assert np.isnan([night.beam.illuminance_lx, night.beam.disc_luminance_cd_m2, night.beam.cct_k]).all()
    assert np.all(night.illuminance_lx[:, SUN] == 0)
    assert (night.facing_stops, night.level_stops) == (0, 0)


def test_an_underside_over_black_ground_gets_nothing():
    """0 lx, and no error, share or ratio of nothing; the box writes dashes, the figure leaves the curve out."""
    sky = FakeSky(AirSettings(ground_albedo=0.0))
    sky.ground_albedo = np.zeros(48)
    sheet = light_sheet(survey(sky, (20.0, 60.0), "cie-1931-2"))
    for light in sheet.suns:
        assert np.all(light.illuminance_lx[UNDERSIDE] == 0)
        assert np.isnan([light.coefficient_error[UNDERSIDE], light.ground_share[UNDERSIDE]]).all()
        assert np.isfinite(light.coefficient_error[:UNDERSIDE]).all()
    assert light_box(sheet.suns[0]).shadow[UNDERSIDE].cells[3:] == ("—", "—", "—")
    assert illuminance_svg(sheet).startswith(b"<")


def test_ratio_and_exposure(fake):
    """Stops are logarithms to 2 of lit over shadow; EV100 follows from the card's luminance with K = 12.5."""
    light = fake.suns[SUNS_DEG.index(45.0)]
    lux = light.illuminance_lx
    assert 2**light.facing_stops == pytest.approx(lux[FACING, BOTH] / lux[FACING, SHADOW])
    assert 2**light.level_stops == pytest.approx(lux[LEVEL, BOTH] / lux[LEVEL, SHADOW])
    assert 2**light.card_ev100 == pytest.approx(lux[LEVEL, BOTH] / np.pi * 100 / 12.5)
    assert light.card_ev100 - light.grey_ev100 == pytest.approx(np.log2(1 / 0.18))


def test_level_numbers_are_those_of_the_elevation_sheet(found, fake):
    """Sky on level ground and white card are the survey's own."""
    for sun, light in enumerate(fake.suns):
        np.testing.assert_allclose(light.XYZ[LEVEL, SHADOW], found.sky_XYZ[sun], rtol=1e-12)


def test_disc_luminance_outside_and_low(molecular):
    """At 60° within 15 % of 1.6e9 cd/m² (textbook value of the sun high in clear air, from memory), and far less low.

    Refraction keeps luminance: the disc's solid angle shrinks as the beam is thinned, by 0.5 % at 30° at most and
    between 13 and 15 % on the horizon.
    """
    _, sheet = molecular
    high, low = (sheet.suns[SUNS_SOLVED_DEG.index(sun)].beam for sun in (60.0, 0.0))
    assert high.disc_luminance_cd_m2 == pytest.approx(1.6e9, rel=0.15)
    assert low.disc_luminance_cd_m2 < high.disc_luminance_cd_m2 / 10
    shrunk = [light.beam.disc_sr / SOLAR_DISC_SOLID_ANGLE_SR for light in sheet.suns[1:]]
    assert 0.85 < shrunk[0] < 0.87
    assert 0.995 < shrunk[2] < 1


def test_the_wall_away_from_a_low_sun_is_bluer(molecular):
    """At 30° by correlated colour temperature and by chromaticity, and less lit, by more than two stops."""
    _, sheet = molecular
    light = sheet.suns[SUNS_SOLVED_DEG.index(30.0)]
    assert light.cct_k[AWAY, BOTH] > light.cct_k[TOWARD, BOTH] + 2000
    assert np.all(light.xy[AWAY, BOTH] < light.xy[TOWARD, BOTH])
    assert light.illuminance_lx[TOWARD, BOTH] > 4 * light.illuminance_lx[AWAY, BOTH]


def test_coefficients_are_as_good_as_the_page_says(molecular):
    """Within 2 % of all six planes for suns of 10° and more, and the errors stated are the true ones."""
    _, sheet = molecular
    for light in sheet.suns[2:]:
        assert light.solar_elevation_deg >= 10
        assert np.abs(light.coefficient_error).max() < 0.02
        first = light.coefficients["XYZ"][:, 1]
        assert first[[1, 4, 5]] == pytest.approx([0, 0, 0], abs=1e-9 * first[0])
        up = first[0] * np.sqrt(np.pi) / 2 + first[2] * np.sqrt(np.pi / 3) + first[6] * np.sqrt(5 * np.pi) / 8
        stated = light.illuminance_lx[LEVEL, SHADOW] * (1 + light.coefficient_error[LEVEL])
        assert up == pytest.approx(stated, rel=1e-9)
