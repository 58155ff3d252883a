"""Settings that hold for every test, and a sky that many of them look at."""

import pytest
from hypothesis import settings

from skychart.charts.reader import READER_SUNS_DEG, ReaderSky, reader_sky
from skychart.charts.survey import survey
from skychart.config import AirSettings, Settings
from skychart.sky.spectral import SpectralSky, solve_spectral

# The first example of a property may pay for an import of a second, and other work may share the machine.
settings.register_profile("no deadline", deadline=None)
settings.load_profile("no deadline")


@pytest.fixture(scope="session")
def default_sky() -> SpectralSky:
    """The sky of the default settings, solved once."""
    return solve_spectral(AirSettings())


@pytest.fixture(scope="session")
def default_reader(default_sky: SpectralSky) -> ReaderSky:
    """What the reader is given of it."""
    return reader_sky(default_sky, survey(default_sky, READER_SUNS_DEG, Settings().observer))
