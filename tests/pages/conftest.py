"""A small site of a fake sky, built once."""

import itertools

import pytest

from skychart.config import AirSettings, Settings
from skychart.pages import build
from tests.charts.fake_checks import fake_checks, no_checks
from tests.charts.fake_sky import FakeSky

SMALL = Settings(
    atmospheres=(AirSettings(), AirSettings(name="thin", ozone_du=200.0, ground_albedo=0.1)),
    solar_elevations_deg=(20.0, -8.0),
    observer="cie-1931-2",
)


@pytest.fixture(scope="session")
def fake_physics():
    """Skies and checks that cost nothing, in the place of the real ones."""
    patch = pytest.MonkeyPatch()
    patch.setattr(build, "solve_spectral", FakeSky)
    patch.setattr(build, "sky_checks", no_checks)
    patch.setattr(build, "PIECES", (fake_checks,))
    patch.setattr(build, "by_topic", lambda pieces: tuple(itertools.chain(*pieces)))
    yield
    patch.undo()


@pytest.fixture(scope="session")
def site(tmp_path_factory, fake_physics):
    """Folder of the small site."""
    out = tmp_path_factory.mktemp("built") / "site"
    build.build_site(SMALL, out, 1, lambda line: None)
    return out
