"""Data files of the reader: exact to half a step, small, and harmless as scripts."""

import base64
import json

import numpy as np
import pytest

from skychart.charts.reader import READER_SUNS_DEG, reader_sky
from skychart.charts.survey import survey
from skychart.config import AirSettings
from skychart.export.reader_data import RECEIVER, pack, reader_script, varints
from tests.charts.peaked_sky import PeakedSky

LARGEST_BYTES = 350_000


def unpacked(data: bytes) -> list[int]:
    """A slow, literal reading of zigzag base-128 integers."""
    found, value, shift = [], 0, 0
    for byte in data:
        value |= (byte & 127) << shift
        shift += 7
        if byte < 128:
            found.append((value >> 1) ^ -(value & 1))
            value, shift = 0, 0
    return found


@pytest.fixture(scope="module")
def script() -> bytes:
    """The file of a sky with a narrow peak."""
    sky = PeakedSky(AirSettings(name="peaked"))
    return reader_script(reader_sky(sky, survey(sky, READER_SUNS_DEG, "cie-1931-2")))


def test_known_integers_have_their_published_bytes():
    """Protocol Buffers Encoding, "Base 128 Varints" and "Signed Integers": 150 is 96 01; −1, 1, −2 are 1, 2, 3."""
    assert varints(np.array([75])).hex() == "9601"
    assert varints(np.array([0, -1, 1, -2])).hex() == "00010203"


def test_integers_come_back():
    """Of one to five bytes, both signs."""
    whole = np.array([sign * (2**bits + more) for bits in range(33) for more in (-1, 0, 1) for sign in (1, -1)])
    assert unpacked(varints(whole)) == whole.tolist()


def test_arrays_come_back_to_half_a_step():
    """Sums along every axis but the last undo the differences."""
    array = np.cumsum(np.random.default_rng(3).normal(size=(3, 4, 5, 2)), axis=2)
    whole = np.array(unpacked(pack(array, 0.01))).reshape(array.shape)
    for axis in range(3):
        whole = np.cumsum(whole, axis=axis)
    assert np.abs(whole * 0.01 - array).max() <= 0.005 + 1e-12


def test_a_file_calls_the_page_with_one_object(script):
    """Everything beside the packed arrays is plain JSON; the arrays are as long as their shapes say."""
    text = script.decode("ascii")
    assert text.startswith(f'"use strict";\n{RECEIVER}({{')
    assert text.endswith("});\n")
    content = json.loads(text[text.index("(") + 1 : text.rindex(")")])
    assert content["atmosphere"] == "peaked"
    assert content["suns"] == list(READER_SUNS_DEG)
    count = sum(int(np.prod(array["shape"])) for array in content["arrays"])
    assert len(unpacked(base64.b64decode(content["packed"]))) == count > 100_000


def test_a_file_is_small_and_always_the_same(script):
    """At most 350 kB, and the same bytes again."""
    assert 100_000 < len(script) <= LARGEST_BYTES
    sky = PeakedSky(AirSettings(name="peaked"))
    assert reader_script(reader_sky(sky, survey(sky, READER_SUNS_DEG, "cie-1931-2"))) == script
