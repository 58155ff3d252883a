"""The reader's pure scripts in Node, with its own test runner; skipped without Node, but never where CI is set."""

import json
import os
import shutil
import subprocess
import warnings
from contextlib import ExitStack
from datetime import UTC, datetime, timedelta
from pathlib import Path

import numpy as np
import pytest

from tests.js.cases import all_cases

HERE = Path(__file__).parent


@pytest.fixture(scope="module")
def node() -> str:
    """The program, or a skip in one line."""
    found = shutil.which("node")
    if found is None and not os.environ.get("CI"):
        pytest.skip("Node is not installed: the reader's scripts are not tested")
    assert found, "Node is not installed, and CI may not skip it"
    return found


@pytest.fixture(scope="module")
def suns() -> list[dict[str, float]]:
    """The sun at 200 random places and times of 2000 to 2050, by astropy: topocentric, without refraction."""
    pytest.importorskip("astropy", reason="astropy, of the test extra, is the witness of the sun's position")
    from astropy import units
    from astropy.coordinates import AltAz, EarthLocation, get_sun
    from astropy.time import Time
    from astropy.utils import iers

    rng = np.random.default_rng(34302)
    days = rng.uniform(0, 51 * 365.25, 200)
    times = [datetime(2000, 1, 1, tzinfo=UTC) + timedelta(days=day) for day in days.tolist()]
    latitude, longitude = np.degrees(np.arcsin(rng.uniform(-1, 1, 200))), rng.uniform(-180, 180, 200)
    offline = {"auto_download": False, "auto_max_age": None, "iers_degraded_accuracy": "ignore"}
    with warnings.catch_warnings(), ExitStack() as stack:
        warnings.simplefilter("ignore")  # leap seconds and the earth's turning beyond the tables: below a second
        for setting, value in offline.items():
            stack.enter_context(iers.conf.set_temp(setting, value))
        when = Time(times, scale="utc")
        place = EarthLocation(lat=latitude * units.deg, lon=longitude * units.deg)
        seen = get_sun(when).transform_to(AltAz(obstime=when, location=place))
    found = zip(times, latitude, longitude, seen.alt.deg, seen.az.deg, strict=True)
    return [
        {"ms": round(time.timestamp() * 1000), "latitude": lat, "longitude": lon, "elevation": alt, "azimuth": az}
        for time, lat, lon, alt, az in found
    ]


def test_the_scripts_pass_their_tests(node, suns, tmp_path):
    """All of `reader.test.js`, with answers of the Python side and of astropy."""
    cases, places = tmp_path / "cases.json", tmp_path / "suns.json"
    cases.write_text(json.dumps(all_cases(), allow_nan=False), encoding="utf-8")
    places.write_text(json.dumps(suns), encoding="utf-8")
    done = subprocess.run(
        [node, "--test", "--test-reporter=tap", str(HERE / "reader.test.js")],
        env=os.environ | {"SKYCHART_CASES": str(cases), "SKYCHART_SUNS": str(places)},
        capture_output=True,
        text=True,
        check=False,
    )
    assert done.returncode == 0, done.stdout[-8000:] + done.stderr
    assert "# skipped 0" in done.stdout
    assert int(done.stdout.partition("# pass ")[2].split()[0]) > 20
