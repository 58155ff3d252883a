"""The command `map`: a whole file that holds what was asked for, or one line that says why not."""

import sys
from pathlib import Path

import numpy as np
import OpenEXR
import pytest

import skychart.sky.spectral
from skychart import cli
from skychart.arguments import MAP_SPACES, map_request, parse
from skychart.colour.spaces import SPACES, rgb
from skychart.config import NAMED_AIRS
from tests.charts.fake_sky import FakeSky


@pytest.fixture
def fake_sky(monkeypatch):
    """Let `map` see a sky that costs nothing."""
    monkeypatch.setattr(skychart.sky.spectral, "solve_spectral", FakeSky)


def test_the_command_knows_the_spaces_of_the_colorimetry():
    """Repeated there, for the command imports nothing."""
    assert MAP_SPACES == SPACES


def test_left_out_options_have_their_defaults():
    """The first atmosphere, 1024 pixels, linear sRGB, the sun in the middle, no disc, 32 bits."""
    request = map_request(parse(["map", "--sun", "12", "dome.exr"]))
    assert request == (Path("dome.exr"), NAMED_AIRS["molecular"], 12, 1024, "srgb", 0, False, False)


def test_every_option_is_heeded():
    """In any order, with a negative azimuth."""
    line = "map dome.EXR --half --sun-azimuth -90 --space bt2020 --width 512 --disc --atmosphere hazy --sun -1.5"
    request = map_request(parse(line.split()))
    assert request == (Path("dome.EXR"), NAMED_AIRS["hazy"], -1.5, 512, "bt2020", -90, True, True)


@pytest.mark.usefixtures("fake_sky")
def test_a_map_is_written_and_told_in_one_line(tmp_path, capsys):
    """Progress goes to standard error; a second run replaces the file by equal bytes."""
    out = tmp_path / "dome.exr"
    line = ["map", "--sun", "20", str(out), "--width", "64", "--space", "acescg", "--atmosphere", "clear"]
    found = []
    for _ in range(2):
        assert cli.main(line) == 0
        printed, progress = capsys.readouterr()
        assert printed.startswith(
            f"{out}: 64 × 32 pixels, linear ACEScg, 32-bit float, 1.0 is 1 cd/m²; level ground gets "
        )
        assert printed.count("\n") == 1
        assert progress.splitlines() == ["clear: solving", "drawing the map"]
        found.append(out.read_bytes())
    assert found[0] == found[1]
    assert [path.name for path in tmp_path.iterdir()] == ["dome.exr"]
    file = OpenEXR.File(str(out))
    assert file.header()["atmosphere"].startswith("clear: haze")
    sky = FakeSky(NAMED_AIRS["clear"])
    ground = sum(sky.ground_irradiance(20.0)) * 0.18 / np.pi
    from skychart.colour.integrate import tristimulus_matrix

    wanted = rgb(ground @ tristimulus_matrix(sky.wavelength_nm), "acescg")
    np.testing.assert_allclose(file.channels()["RGB"].pixels[-1, 0], wanted, rtol=1e-5)


def test_without_openexr_it_is_one_line_before_any_work(tmp_path, capsys, monkeypatch):
    """Exit code 2, how to get it, no file."""
    monkeypatch.setitem(sys.modules, "OpenEXR", None)
    monkeypatch.setattr(skychart.sky.spectral, "solve_spectral", lambda air: pytest.fail("solved for nothing"))
    assert cli.main(["map", "--sun", "20", str(tmp_path / "dome.exr")]) == 2
    said = "skychart: OpenEXR is not installed; get it with: pip install 'sky-colour-charts[exr]'\n"
    assert tuple(capsys.readouterr()) == ("", said)
    assert not list(tmp_path.iterdir())
