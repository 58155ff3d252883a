"""A fake sky with the sun low and with the sun down, and its sheets."""

import pytest

from skychart.charts.sheet import elevation_sheet
from skychart.charts.survey import survey
from skychart.config import AirSettings
from tests.charts.fake_sky import FakeSky


@pytest.fixture(scope="session")
def two_suns():
    """A survey of suns at −8° and 20°."""
    return survey(FakeSky(AirSettings()), (-8.0, 20.0), "cie-1931-2")


@pytest.fixture(scope="session")
def sheets(two_suns):
    """The sheet of each of them."""
    return {sun: elevation_sheet(two_suns, i) for i, sun in enumerate((-8, 20))}
