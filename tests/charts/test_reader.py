"""What the reader is given is smooth where it must be, and adds up to the sky at every node."""

import numpy as np
import pytest

from skychart.charts.aureole import distance_and_side
from skychart.charts.reader import (
    LIGHT_SUNS_DEG,
    PEAK_DEG,
    READER_SUNS_DEG,
    SPECTRUM_NM,
    reader_constants,
    reader_sky,
)
from skychart.charts.splines import spline
from skychart.charts.survey import RELATIVE_AZIMUTH_DEG, VIEW_ELEVATION_DEG, at_suns, survey
from skychart.colour.integrate import LUMINOUS_EFFICACY
from skychart.colour.observers import colour_matching_functions
from skychart.colour.spaces import SPACES, rgb
from skychart.config import AirSettings
from tests.charts.peaked_sky import PeakedSky

OBSERVER = "cie-1931-2"
MORE_SUNS = tuple(sorted({*READER_SUNS_DEG, 33.0, -2.5}))


@pytest.fixture(scope="module")
def peaked():
    """A sky with a narrow peak."""
    return PeakedSky(AirSettings(name="peaked"))


@pytest.fixture(scope="module")
def surveyed(peaked):
    """Its survey, at two suns more than the reader takes."""
    return survey(peaked, MORE_SUNS, OBSERVER)


@pytest.fixture(scope="module")
def chart(peaked, surveyed):
    """The reader's numbers of it."""
    return reader_sky(peaked, surveyed)


def test_smooth_sky_and_peak_add_up_to_the_survey(chart, surveyed):
    """At every direction of the grid and every sun."""
    own = at_suns(surveyed, READER_SUNS_DEG)
    for i, apparent in enumerate(own.apparent_elevation_deg):
        distance, _ = distance_and_side(float(apparent), VIEW_ELEVATION_DEG[:, None], RELATIVE_AZIMUTH_DEG)
        place = np.sqrt(np.minimum(distance.ravel() / PEAK_DEG[-1], 1))
        peak = spline(np.sqrt(PEAK_DEG / PEAK_DEG[-1]), place, flat_ends=True) @ chart.peak_log[i]
        whole = np.exp(chart.smooth_log[i] + peak.reshape(*distance.shape, 3))
        np.testing.assert_allclose(whole, own.stokes_XYZ[i, :, :, 0], rtol=1e-9)


def test_without_the_peak_neighbours_are_alike(chart, surveyed):
    """Along the row nearest to a sun of 30°, the second difference falls to a quarter at least."""
    own = at_suns(surveyed, READER_SUNS_DEG)
    sun, row = READER_SUNS_DEG.index(30.0), int(np.flatnonzero(VIEW_ELEVATION_DEG == 30)[0])
    even = RELATIVE_AZIMUTH_DEG % 7.5 == 0
    with_peak = np.diff(np.log(own.stokes_XYZ[sun, row, even, 0, 1]), 2)
    without = np.diff(chart.smooth_log[sun, row, even, 1], 2)
    assert np.abs(without).max() < np.abs(with_peak).max() / 4


def test_the_peak_ends_flat_at_nothing(chart):
    """Value and slope at its last distance; below the lowest sun with haze around it there is none."""
    np.testing.assert_allclose(chart.peak_log[:, -1], 0, atol=1e-12)
    np.testing.assert_allclose(chart.peak_log[:, -2], 0, atol=1e-12)
    assert not chart.peak_log[READER_SUNS_DEG.index(-7.0)].any()
    assert not chart.sides_log[READER_SUNS_DEG.index(-7.0)].any()
    assert chart.peak_log[READER_SUNS_DEG.index(5.0), 0, 1] > 0.5


def test_direct_light_is_kept_for_the_suns_that_are_seen(chart, peaked):
    """From −0.5° up, with its colour."""
    lit = np.array(LIGHT_SUNS_DEG)[-len(chart.beam_log) :]
    assert lit[0] == -0.5
    assert chart.beam_log.shape == (len(lit), 3)
    assert np.all(np.diff(chart.beam_log[:, 1]) > 0), "a higher sun is brighter"
    np.testing.assert_allclose(chart.apparent_deg, peaked.apparent_elevation_deg(np.array(LIGHT_SUNS_DEG)))


def test_a_survey_is_cut_to_some_of_its_suns(surveyed):
    """Every field that belongs to suns, and nothing else."""
    some = at_suns(surveyed, (-2.5, 33.0))
    assert some.solar_elevation_deg.tolist() == [-2.5, 33.0]
    which = [MORE_SUNS.index(-2.5), MORE_SUNS.index(33.0)]
    for name, value in vars(surveyed).items():
        cut = getattr(some, name)
        if isinstance(value, np.ndarray) and value.shape[:1] == (len(MORE_SUNS),):
            np.testing.assert_array_equal(cut, value[which], err_msg=name)
        else:
            assert cut is value


def test_constants_are_those_the_tables_are_made_with():
    """Matrices give the same RGB; the functions sum a flat spectrum to the light of the whole table."""
    constants = reader_constants(OBSERVER)
    XYZ = np.array([3.0, 4.0, 5.0])
    for space in SPACES:
        np.testing.assert_allclose(np.array(constants["spaces"][space]["from_xyz"]) @ XYZ, rgb(XYZ, space), atol=1e-9)
    wavelength_nm, functions = colour_matching_functions(OBSERVER)
    inside = (wavelength_nm >= SPECTRUM_NM[0]) & (wavelength_nm <= SPECTRUM_NM[-1])
    summed = np.sum(constants["spectrum_to_XYZ"], axis=0)
    np.testing.assert_allclose(summed, LUMINOUS_EFFICACY * functions[inside].sum(axis=0), rtol=2e-3)


@pytest.mark.parametrize("observer", ["cie-1964-10", "cie-2015-2"])
def test_other_observers_have_their_own_locus_and_functions(observer):
    """CIE 2015 begins at 390 nm; before that its functions are nothing."""
    own, usual = reader_constants(observer), reader_constants(OBSERVER)
    assert own["locus_uv"] != usual["locus_uv"]
    assert np.isfinite(own["spectrum_to_XYZ"]).all()
    assert own["spectrum_to_XYZ"][20] != usual["spectrum_to_XYZ"][20]
