"""A sky that costs nothing, surveyed once for all tests of charts."""

import pytest

from skychart.charts.survey import survey
from skychart.config import AirSettings
from tests.charts.fake_sky import FakeSky

SUNS_DEG = (-8.0, -2.0, 0.0, 10.0, 45.0, 90.0)


@pytest.fixture(scope="session")
def sky():
    """The fake sky under default settings."""
    return FakeSky(AirSettings())


@pytest.fixture(scope="session")
def found(sky):
    """Its survey at six suns."""
    return survey(sky, SUNS_DEG, "cie-1931-2")
