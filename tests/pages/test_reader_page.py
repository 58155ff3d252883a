"""The reader's page offers the atmospheres of its build and finds all its scripts."""

import json

import html5lib

from skychart.charts.exposure import INK_THRESHOLD
from skychart.charts.sheet import DEEP_TWILIGHT_DEG
from skychart.config import OBSERVERS, Settings
from skychart.pages.environment import templates_folder
from skychart.pages.reader_page import reader_files
from skychart.pages.site import make_atlas

from .conftest import SMALL

XHTML = "{http://www.w3.org/1999/xhtml}"


def constants_of(text):
    """The JSON that the page carries."""
    tree = html5lib.HTMLParser(strict=True).parse(text)
    (found,) = [script for script in tree.iter(f"{XHTML}script") if script.get("id") == "reader-constants"]
    return json.loads(found.text)


def test_the_atmospheres_are_those_of_the_build(site):
    """Names, what they are made of, and a data file each that is there and says the same name."""
    text = (site / "reader.html").read_text(encoding="utf-8")
    offered = constants_of(text)["atmospheres"]
    assert [entry["name"] for entry in offered] == [air.name for air in SMALL.atmospheres]
    assert "200 Dobson units" in offered[1]["air"]
    for entry in offered:
        assert f'"atmosphere":"{entry["name"]}"' in (site / entry["data"]).read_text(encoding="ascii")
        assert f"<option>{entry['name']}</option>" in text


def test_all_scripts_of_the_reader_are_loaded_pure_ones_first(site):
    """Each file of the folder once, in an order in which every one finds what it needs."""
    text = (site / "reader.html").read_text(encoding="utf-8")
    names = sorted(path.name for path in (templates_folder() / "static").glob("reader*.js"))
    places = {name: text.index(f'src="static/{name}" defer') for name in names}
    assert len(names) > 5
    assert max(places, key=lambda name: places[name]) == "reader.js"
    assert places["reader-data.js"] < places["reader-sky.js"] < places["reader-reading.js"] < places["reader-words.js"]


def test_the_observer_is_that_of_the_settings():
    """Its locus and functions differ from the usual ones."""
    usual, other = (
        constants_of(reader_files(make_atlas(Settings(observer=observer)))["reader.html"].decode("utf-8"))
        for observer in (OBSERVERS[0], OBSERVERS[1])
    )
    assert other["observer"] == OBSERVERS[1]
    assert other["locus_uv"] != usual["locus_uv"]


def test_limits_that_the_script_repeats_are_those_of_the_pages():
    """The same deep twilight and the same change of ink; scripts cannot import them."""
    folder = templates_folder() / "static"
    script, scope = ((folder / name).read_text(encoding="utf-8") for name in ("reader.js", "reader-scope.js"))
    assert f"DEEP_TWILIGHT_DEG = {DEEP_TWILIGHT_DEG:g};" in script
    assert f"INK_THRESHOLD = {INK_THRESHOLD:g};" in scope
